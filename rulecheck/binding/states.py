"""States: overlays in which rules must hold, substituted at binding."""

from __future__ import annotations

from dataclasses import dataclass
from itertools import chain, product

from rulecheck.binding.scope import Shared, View
from rulecheck.diagnostics import Related, Span
from rulecheck.model.design import Design, Overlay, State, holders
from rulecheck.model.ruleset import Rule, Ruleset
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located

MOST_COMBINATIONS = 4096


@dataclass(frozen=True, slots=True)
class Stance:
    """One combination of states: the design in it, or what is missing for it."""

    states: tuple[tuple[str, str], ...]
    view: View | None
    missing: str = ""


def stances(shared: Shared, ruleset: Ruleset, rule: Rule) -> tuple[Stance, ...]:
    """The combinations in which a rule must hold. Raises nothing; faults are noted."""
    if rule.states is None:
        return (Stance((), shared.base),)
    wanted = rule.states or tuple((axis, ()) for axis in ruleset.needed)
    axes = [_axis(shared, ruleset, rule, axis, names) for axis, names in wanted]
    if not axes:
        shared.faults.add(
            "unknown-state",
            "this rule asks for states, and its ruleset needs none",
            rule.span,
            expected="states_needed: {axis: [names]}",
        )
        return ()
    count = 1
    for states in axes:
        count *= len(states)
    if count > MOST_COMBINATIONS:
        shared.faults.add(
            "too-large",
            f"this rule asks for {count} combinations of states",
            rule.span,
            expected=f"at most {MOST_COMBINATIONS}",
        )
        return ()
    return tuple(_stance(shared, ruleset, combination) for combination in product(*axes))


def _axis(shared: Shared, ruleset: Ruleset, rule: Rule, axis: str, names: tuple[Located, ...]) -> list[tuple[str, str]]:
    needed = ruleset.needed.get(axis, {})
    defined = shared.base.design.states.get(axis, {})
    if not names and not needed:
        known = tuple(ruleset.needed)
        shared.faults.add(
            "unknown-state",
            f"the ruleset needs no states on an axis '{axis}'",
            rule.span,
            expected=" or ".join(known),
            advice=nearest(axis, known),
        )
        return []
    if not names:
        return [(axis, name) for name in needed]
    for name in names:
        if name.text not in needed and name.text not in defined:
            known = tuple(dict.fromkeys((*needed, *defined)))
            if nearest(name.text, known) or not known:
                shared.faults.add(
                    "unknown-state",
                    f"axis '{axis}' has no state '{name.text}'",
                    name.span,
                    expected=" or ".join(known),
                    advice=nearest(name.text, known),
                )
    return [(axis, name.text) for name in names]


def _stance(shared: Shared, ruleset: Ruleset, combination: tuple[tuple[str, str], ...]) -> Stance:
    key = ("stance", ruleset.file, combination)
    if key not in shared.memo:
        shared.memo[key] = _combined(shared, ruleset, combination)
    stance: Stance = shared.memo[key]
    return stance


def _combined(shared: Shared, ruleset: Ruleset, combination: tuple[tuple[str, str], ...]) -> Stance:
    chosen: list[State] = []
    for axis, name in combination:
        state = shared.base.design.states.get(axis, {}).get(name)
        if state is None:
            return Stance(combination, None, f"state {axis}: {name}")
        lacking = _unset(shared, ruleset, state)
        if lacking:
            return Stance(combination, None, f"state {axis}: {name} sets no {lacking}")
        chosen.append(state)
    return Stance(combination, combined_view(shared, chosen))


def combined_view(shared: Shared, chosen: list[State]) -> View:
    """The design with all chosen states laid over it; two that set one path are a fault.

    A state that is laid over the design for the whole run makes way for one of the same axis.
    """
    under, freed = _under(shared.base.design, {state.axis for state in chosen})
    owners: dict[str, State] = {}
    overlay = Overlay()
    for state in chosen:
        for path in state.overlay.paths:
            other = _owner(owners, path)
            if other is not None:
                _clash(shared, path, state.span, other)
        owners.update((path, state) for path in state.overlay.paths)
        overlay = overlay.then(state.overlay)
    states = tuple((state.axis, state.name) for state in chosen)
    if not overlay and not freed:
        return View(shared.base.design, states, frozenset())
    return View(under.with_overlay(overlay), states, frozenset((*overlay.paths, *freed)), shared.base.design)


def _under(design: Design, axes: set[str]) -> tuple[Design, tuple[str, ...]]:
    """What states of some axes are laid over, and the paths on which that differs from the design of the run."""
    freed = [path for axis in axes & set(design.chosen) for path in design.chosen[axis].overlay.paths]
    if not freed or design.plain is None:
        return design, ()
    kept = [state for axis, state in design.chosen.items() if axis not in axes]
    return design.plain.in_states(kept), tuple(freed)


def _owner(owners: dict[str, State], path: str) -> State | None:
    """The state that sets a path already, or what holds it, or what it holds."""
    held = (owners[holder] for holder in holders(path) if holder in owners)
    inside = (state for known, state in owners.items() if known.startswith(f"{path}."))
    return next(chain(held, inside), None)


def _clash(shared: Shared, path: str, span: Span, other: State) -> None:
    shared.faults.add(
        "state-clash",
        f"two states set '{path}'",
        span,
        advice="let each path be set on one axis only",
        related=(Related(f"state {other.axis}: {other.name} sets it too", other.span),),
    )


def _unset(shared: Shared, ruleset: Ruleset, state: State) -> str:
    """The first path that the state must set and does not."""
    for pattern in ruleset.needed.get(state.axis, {}).get(state.name, ()):
        for path in _spelled_out(shared, pattern.text):
            if not any(holder in state.overlay.paths for holder in holders(path)):
                return path
    return ""


def _spelled_out(shared: Shared, pattern: str) -> list[str]:
    before, star, after = pattern.partition(".*")
    if not star:
        return [pattern]
    names = shared.base.design.names(before)
    if not names:
        return [pattern]  # no item is there yet: nothing that a state sets can meet it
    return [path for name in names for path in _spelled_out(shared, f"{before}.{name}{after}")]
