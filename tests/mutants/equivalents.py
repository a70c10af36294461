"""Mutants that no test can tell from the program, each with the reason.

They are listed by file, function and the words of the change, with a number where one function has several changes of
the same words; lines may move.
"""

from __future__ import annotations

from collections.abc import Iterator

Key = tuple[str, str, str, int]
Changes = tuple[str | tuple[str, int], ...]


def _keys(file: str, function: str, changes: Changes) -> Iterator[Key]:
    for change in changes:
        name, number = (change, 1) if isinstance(change, str) else change
        yield (f"rulecheck/{file}", function, name, number)


_LISTED: tuple[tuple[str, str, str, Changes], ...] = (
    (
        "studies/judging.py",
        "Judge.relative",
        "a quotient over zero or over what is unknown has no value, which is what None says too",
        (
            "never: if isinstance(size, Unknown) or size == 0",
            "isinstance(size, Unknown) or size == 0 -> isinstance(size, Unknown) and size == 0",
            "isinstance(size, Unknown) or size == 0 -> size == 0",
            "isinstance(size, Unknown) or size == 0 -> isinstance(size, Unknown)",
        ),
    ),
    (
        "studies/judging.py",
        "Judge.relative",
        "only parts with a margin have a scale",
        ("part.margin is None or part.scale is None -> part.scale is None",),
    ),
    (
        "studies/judging.py",
        "Judge._number",
        "what was found before is only found again",
        ("always: if term.index not in self._rooms",),
    ),
    (
        "studies/judging.py",
        "Judge._number",
        "a number between bounds is no fraction and has no approximation, so it comes to None either way",
        ("never: if isinstance(value, Bounds)",),
    ),
    (
        "studies/check.py",
        "Checker._rule",
        "a case that is open or unproven always has a reason",
        ("all taken: for _, reason in chosen if reason",),
    ),
    (
        "studies/check.py",
        "Checker._rule",
        "a rule has a case for each state and element, or one that says why it has none",
        (
            "return ('not applicable', None, '') -> return None",
            "'not applicable' -> 'complies'",
            "never: if not judged",
        ),
    ),
    (
        "studies/reserves.py",
        "Keeping.is_roomy",
        "without a reserve for the rule no part of it is tight, so this only saves work",
        ("never: if self._reserves.share is None and rule.name not in self._reserves.by_rule",),
    ),
    (
        "studies/reserves.py",
        "Keeping._is_tight",
        "the share is asked for twice: where it is None there is no relative margin, and the other way round",
        (
            "self._judge.relative(part) if self._reserves.share is not None else None -> self._judge.relative(part)",
            "relative is None or self._reserves.share is None -> relative is None",
        ),
    ),
    (
        "operations/logic.py",
        "_reconcile",
        "a declared value that is undecided is given back, which is what undecided looks like",
        ("declared is UNDECIDED or agrees is UNDECIDED -> agrees is UNDECIDED",),
    ),
    (
        "operations/bounds.py",
        "by_quotient.rule",
        "a divisor that is zero at both ends is zero: its corners are undefined, which says nothing as well",
        ("len(signs) == 1 and 0 not in signs -> len(signs) == 1",),
    ),
    (
        "operations/bounds.py",
        "_spanned",
        "where low equals high either is the number",
        (("low -> high", 2),),
    ),
    (
        "binding/comparing.py",
        "_joined",
        "a constant among the flags is settled by the operation when it is read, to the same truth",
        (
            "always: if flag.kind != 'constant'",
            "never: if len(open_flags) == 1",
        ),
    ),
    (
        "binding/comparing.py",
        "_as_numbers",
        "a stated period is never held against a count of days for equality",
        ("True -> False",),
    ),
    (
        "binding/comparing.py",
        "_as_numbers",
        "a period against what is no number is refused either way",
        (
            "isinstance(one.bound, Period) and (not one.bound.months) and isinstance(other.bound, Number) -> isinstance(one.bound, Period) and (not one.bound.months)",
        ),
    ),
    (
        "binding/comparing.py",
        "_numbers",
        "the subtraction of the two sides refuses unlike dimensions as well",
        ("never: if a.dimension != b.dimension",),
    ),
    (
        "binding/comparing.py",
        "_equality",
        "the size of a difference is the same either way round",
        (
            "scope.apply(subtract, [a.term, b.term], syntax.span) -> scope.apply(subtract, [b.term, a.term], syntax.span)",
        ),
    ),
    (
        "binding/comparing.py",
        "_equality",
        "a difference of two numbers of one dimension can always be had",
        (
            "scope.apply(absolute, [apart], syntax.span) if apart else None -> scope.apply(absolute, [apart], syntax.span)",
        ),
    ),
    (
        "binding/comparing.py",
        "same",
        "two constant texts or flags are settled when they are read, to the same truth",
        ("never: if b.term.kind == 'constant'",),
    ),
    (
        "binding/comparing.py",
        "same",
        "the ordinal of a date can always be had",
        ("all taken: for day in days if day is not None",),
    ),
    (
        "binding/comparing.py",
        "_membership",
        "numbers have no flag of their own kind, and unlike dimensions are refused by the comparison as well",
        (
            "flag is None and isinstance(left.bound, Number) and isinstance(member, Number) and (left.bound.dimension ==... -> isinstance(left.bound, Number) and isinstance(member, Number) and (left.bound.dimension == member.dimension)",
            "flag is None and isinstance(left.bound, Number) and isinstance(member, Number) and (left.bound.dimension ==... -> flag is None and isinstance(left.bound, Number) and isinstance(member, Number)",
        ),
    ),
    (
        "binding/conditions.py",
        "Builder._joined",
        "one condition joined with no other is itself",
        ("never: if len(whole) == 1",),
    ),
    (
        "binding/conditions.py",
        "Builder._part",
        "numbers that are equal without a width are counts or days, and are shown as such without a unit",
        (
            "(pair.limit.unit if pair.limit else None) or (pair.value.unit if pair.value else None) -> (pair.limit.unit if pair.limit else None) and (pair.value.unit if pair.value else None)",
            "(pair.limit.unit if pair.limit else None) or (pair.value.unit if pair.value else None) -> pair.value.unit if pair.value else None",
            "(pair.limit.unit if pair.limit else None) or (pair.value.unit if pair.value else None) -> pair.limit.unit if pair.limit else None",
            "pair.limit.unit if pair.limit else None -> None",
            "pair.value.unit if pair.value else None -> None",
        ),
    ),
    (
        "binding/conditions.py",
        "Builder._comparison",
        "one comparison joined with no other is itself",
        ("never: if len(parts) == 1",),
    ),
    (
        "binding/conditions.py",
        "Builder._unit",
        "a bare number has no unit, and a number without a unit is shown in the one preferred for its dimension",
        (
            "limit is None or (pair.limit.bare and pair.value.unit is not None) -> limit is None and (pair.limit.bare and pair.value.unit is not None)",
            "limit is None or (pair.limit.bare and pair.value.unit is not None) -> pair.limit.bare and pair.value.unit is not None",
            "limit is None or (pair.limit.bare and pair.value.unit is not None) -> limit is None",
            "pair.limit.bare and pair.value.unit is not None -> pair.limit.bare",
            "pair.value.unit or limit -> pair.value.unit",
            "pair.value.unit is not None -> pair.value.unit is None",
            "limit or preferred(pair.limit.dimension) -> limit",
        ),
    ),
    (
        "binding/conditions.py",
        "Builder._chain_scale",
        "every pair of a chain that gets here has a margin and a limit",
        (
            "pair.margin is not None and pair.limit is not None -> pair.margin is not None or pair.limit is not None",
            "pair.margin is not None and pair.limit is not None -> pair.limit is not None",
            "pair.margin is not None and pair.limit is not None -> pair.margin is not None",
        ),
    ),
    (
        "binding/conditions.py",
        "Builder._chain_scale",
        "without a margin there is no limit to measure, and what is none is measured by nobody",
        (
            "not limits or (any((not _measures(limit) for limit in limits)) and len(limits) == 1) -> any((not _measures(limit) for limit in limits)) and len(limits) == 1",
        ),
    ),
    (
        "binding/conditions.py",
        "Builder._chain_scale",
        "of one limit any and all are the same",
        ("any -> all",),
    ),
    (
        "binding/conditions.py",
        "Builder._chain_scale",
        "the symbol of the unit is the singular",
        ("'days' -> 'min'",),
    ),
    (
        "binding/conditions.py",
        "Builder._chain_scale",
        "the greatest of one size is itself",
        ("sizes[0] if len(sizes) == 1 else self._make(maximum, sizes) -> self._make(maximum, sizes)",),
    ),
    (
        "binding/conditions.py",
        "_measures",
        "only a constant number has a value of this type",
        (
            "limit.term.kind == 'constant' and isinstance(value, Monomial) and (not value.rational) -> isinstance(value, Monomial) and (not value.rational)",
            "limit.term.kind == 'constant' and isinstance(value, Monomial) and (not value.rational) -> limit.term.kind == 'constant' and (not value.rational)",
        ),
    ),
    (
        "binding/conditions.py",
        "scales_agree",
        "numeric parts all have a margin",
        ("all taken: for part in parts if part.margin is not None",),
    ),
    (
        "binding/conditions.py",
        "scales_agree",
        "one part alone always agrees with itself",
        ("len(parts) < 2 or not bare -> not bare",),
    ),
    (
        "binding/rules.py",
        "_Binding.bound",
        "the shape is kept for rules that ask for a margin of this one, and is asked for only where no case has one",
        (
            "always: if not any((numeric_parts(case.condition) for case in cases))",
            "any -> all",
        ),
    ),
    (
        "binding/rules.py",
        "_Binding._idle",
        "a case that never applies is not judged by its condition",
        ("True -> False",),
    ),
    (
        "binding/rules.py",
        "_Binding._for_each",
        "what is None has a fault, with which the rule is not bound at all",
        (
            "all taken: for item in loops if item is not None",
            "never: if len(whole) < len(self.rule.each)",
            "[case] if case is not None else [] -> [case]",
        ),
    ),
    (
        "binding/rules.py",
        "_Binding._in_stance",
        "no loops at all are a product of one empty element",
        ("never: if not self.rule.each",),
    ),
    (
        "binding/rules.py",
        "_Binding._for_each",
        "inside a loop only the names in workings differ",
        ("False -> True",),
    ),
    (
        "binding/rules.py",
        "_Binding._for_each",
        "this only looks for faults, and the shape of a rule without a margin is looked at as well",
        (
            "always: if not cases",
            "never: if not cases",
            "dropped: self._check_stand_in(scope, whole)",
            "not cases -> cases",
        ),
    ),
    (
        "binding/rules.py",
        "_Binding._for_each",
        "where nobody is known to be empty or is unknown, the case that is added or left out applies never, or is as open as the elements are",
        (
            "not lacks and self.rule.empty != 'not applicable' and (not (nobody.kind == 'constant' and (not nobody.value))) -> not lacks and self.rule.empty != 'not applicable'",
            "nobody.kind == 'constant' and (not nobody.value) -> not nobody.value",
            "nobody.kind == 'constant' -> nobody.kind != 'constant'",
            "'constant' -> 'apply'",
        ),
    ),
    (
        "binding/rules.py",
        "_Binding._nobody",
        "elements without a condition have been seen to above",
        ("all taken: for element in item.elements if element.condition is not None",),
    ),
    (
        "binding/rules.py",
        "_Binding._case",
        "the names that a case uses are for workings",
        ("dropped: scope = replace(scope, uses={})",),
    ),
    (
        "binding/rules.py",
        "_Binding._condition",
        "one condition joined with no other is itself",
        ("whole[0] if len(whole) == 1 else AllOf(whole) -> AllOf(whole)",),
    ),
    (
        "binding/rules.py",
        "_Binding._branches",
        "one condition joined with no other is itself",
        ("whole[0] if len(whole) == 1 else AllOf(whole) -> AllOf(whole)",),
    ),
    (
        "binding/documents.py",
        "evidence",
        "what is stated none has no names inside",
        ("design.names(base) is None or design.states_none(base) -> design.names(base) is None",),
    ),
    (
        "binding/documents.py",
        "stated_words",
        "a text that is not stated is an input without a value, so its value is None",
        (
            "always: if isinstance(bound, Words) and isinstance(bound.term.value, str) and (bound.term.kind == 'constant')",
            "isinstance(bound, Words) and isinstance(bound.term.value, str) and (bound.term.kind == 'constant') -> isinstance(bound, Words) or isinstance(bound.term.value, str) or bound.term.kind == 'constant'",
            "isinstance(bound, Words) and isinstance(bound.term.value, str) and (bound.term.kind == 'constant') -> isinstance(bound.term.value, str) and bound.term.kind == 'constant'",
            "isinstance(bound, Words) and isinstance(bound.term.value, str) and (bound.term.kind == 'constant') -> isinstance(bound, Words) and bound.term.kind == 'constant'",
            "isinstance(bound, Words) and isinstance(bound.term.value, str) and (bound.term.kind == 'constant') -> isinstance(bound, Words) and isinstance(bound.term.value, str)",
        ),
    ),
    (
        "binding/documents.py",
        "_ordinals",
        "the ordinal of a date can always be had",
        ("all taken: for term in made if term is not None",),
    ),
    (
        "binding/documents.py",
        "_in_force",
        "there is one part, and joined with no other it is itself",
        (
            "parts[0] if len(parts) == 1 else AllOf(tuple(parts)) -> parts[0]",
            "parts[0] if len(parts) == 1 else AllOf(tuple(parts)) -> AllOf(tuple(parts))",
            "len(parts) == 1 -> len(parts) != 1",
            "1 -> 2",
            "AllOf -> AnyOf",
        ),
    ),
    (
        "binding/documents.py",
        "stated_day",
        "the field is declared as a date, so nothing but a date comes back",
        ("isinstance(bound, Date) and bound.term.kind == 'constant' -> bound.term.kind == 'constant'",),
    ),
    (
        "binding/documents.py",
        "is_later",
        "a constant date always has its ordinal day as its value",
        (
            "isinstance(day.value, Monomial) and day.value.rational > scope.shared.day.toordinal() -> day.value.rational > scope.shared.day.toordinal()",
        ),
    ),
    (
        "binding/documents.py",
        "judgement",
        "a missing day has been answered above",
        ("day is not None and is_later(scope, day) -> is_later(scope, day)",),
    ),
    (
        "binding/states.py",
        "combined_view",
        "laying nothing over a design gives the design",
        ("never: if not overlay and (not freed)",),
    ),
    (
        "binding/presence.py",
        "presence",
        "a leaf that is written none is stated none",
        ("design.states_none(path) or (isinstance(node, Located) and node.text == NONE) -> design.states_none(path)",),
    ),
    (
        "binding/presence.py",
        "presence",
        "what is complete has been stated, and is present already, unless it is empty",
        ("all taken: for holder in holders(path) if holder != path",),
    ),
    (
        "binding/tables.py",
        "_chain",
        "a table without rows is refused when it is read",
        ("rows[0][1] if rows else None -> rows[0][1]",),
    ),
    (
        "binding/tables.py",
        "_chain",
        "what sort of value there is not is asked by nobody",
        (
            "'number' if isinstance(first, Number) else 'text' -> 'number'",
            "'number' if isinstance(first, Number) else 'text' -> 'text'",
        ),
    ),
    (
        "binding/tables.py",
        "_chain",
        "here all values are texts, and only those that are constant are words",
        ("isinstance(v, Words) and v.term.kind == 'constant' -> v.term.kind == 'constant'",),
    ),
    (
        "binding/tables.py",
        "_chain",
        "here all values are numbers",
        ("isinstance(v, Number) and v.unit -> v.unit",),
    ),
    (
        "operations/comparison.py",
        "at_most",
        "the sign is how it is printed; only that of equality chooses a rule",
        ("'<=' -> '<'",),
    ),
    (
        "operations/comparison.py",
        "below",
        "name and sign are how it is printed; only the sign of equality chooses a rule",
        (
            "'below' -> 'up_to'",
            "'<' -> '<='",
        ),
    ),
    (
        "binding/comparing.py",
        "Compared",
        "where there is no margin the strictness is not taken along",
        ("False -> True",),
    ),
)

EQUIVALENTS: dict[Key, str] = {
    key: reason for file, function, reason, changes in _LISTED for key in _keys(file, function, changes)
}
