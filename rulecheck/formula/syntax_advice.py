"""What to say where a token stands in the wrong place, and what to write instead."""

from __future__ import annotations

from typing import Final, NamedTuple

from rulecheck.formula.tokens import AGGREGATES, RESERVED, WITHOUT_EXPRESSION, Token
from rulecheck.quantity.numbers import quoted


class Fault(NamedTuple):
    """One fault in words, before it has a place."""

    message: str
    expected: str = ""
    advice: str = ""
    code: str = "formula-syntax"


NOT_BEHIND_OPERATOR: Final = Fault("'not' stands behind an operator", advice="put parentheses round it: (not ...)")
NO_ELSE: Final = Fault("a conditional has no 'else'", "'else'", "write 'a if condition else b'")
BESIDE_CONDITIONAL: Final = Fault(
    "a comparison stands beside 'if ... else' without parentheses",
    advice="write 'x <= (a if c else b)', or '(x <= a) if c else (x <= b)'",
)
NO_CHAIN: Final = Fault(
    "'==', '!=' and 'in' do not chain", advice="join two comparisons by 'and', or put parentheses round one"
)
NO_COLLECTION: Final = Fault(
    "a loop names no collection", "'in'", "write 'x in collection' or 'a, b in pairs(collection)'"
)
NO_VARIABLE: Final = Fault("a loop variable is a plain name", "a name without dots", "write 'x in collection'")
_UNCHAINED: Final = frozenset(("==", "!=", "in"))


def too_deep(levels: int) -> Fault:
    """The formula has more levels than it may."""
    advice = "split it into derived figures, or take an aggregate for a long sum"
    return Fault(f"the formula has more than {levels} levels", "", advice, "too-large")


def not_closed(opened: Token) -> Fault:
    """The formula ends before this bracket is closed."""
    closing = _closes(opened)
    return Fault(f"the bracket '{opened.kind}' is not closed", f"'{closing}'", f"close it with '{closing}'")


def chain_fault(operators: list[str]) -> Fault | None:
    """Comparisons chain in one direction only; equality and membership never do."""
    if len(operators) < 2:
        return None
    if not _UNCHAINED.isdisjoint(operators):
        return NO_CHAIN
    if len({operator[0] for operator in operators}) > 1:
        shown = " ... ".join(operators)
        return Fault(
            f"a chain of comparisons goes in one direction, not '{shown}'", "", "join two comparisons by 'and'"
        )
    return None


def within_fault(operators: list[str]) -> Fault | None:
    """`within` says how close equality is; it says nothing of an order."""
    if operators[0] in _UNCHAINED:
        return None
    advice = "add an allowance to the limit itself"
    return Fault(f"'within' follows '{operators[-1]}'", "'within' behind '==', '!=' or 'in'", advice)


def aggregate_fault(function: str, has_expression: bool) -> Fault | None:
    """Only aggregates take `for`, and each has its own form."""
    if function not in AGGREGATES:
        return Fault(f"'{function}' does not go over a collection", "one of " + ", ".join(sorted(AGGREGATES)))
    if function in WITHOUT_EXPRESSION and has_expression:
        return Fault(f"'{function}' takes no expression", "", f"write {function}(for x in collection where condition)")
    if function not in WITHOUT_EXPRESSION and not has_expression:
        return Fault(f"'{function}' lacks an expression", "", f"write {function}(x.field for x in collection)")
    return None


def operand_due(tokens: list[Token], index: int) -> Fault:
    """The token at `index` stands where a value is due."""
    token = tokens[index]
    before = tokens[index - 1] if index else None
    expected = "a number, a name, a function or '('"
    if token.kind == "end":
        if before is None:
            return Fault("the formula is empty", expected, "write one, such as dimensions.wheelbase >= 1525 mm")
        return Fault(
            f"the formula ends behind {_shown(before)}",
            expected,
            f"write what follows {_shown(before)}, or leave it out",
        )
    if token.kind == "+":
        return Fault("a plus sign stands before a value", expected, "leave the plus out")
    if before is None:
        return Fault(f"the formula begins with {_shown(token)}", expected, _before_operand(token))
    return Fault(
        f"{_shown(token)} stands behind {_shown(before)}, where a value is due",
        expected,
        _before_operand(token, before),
    )


def _before_operand(token: Token, before: Token | None = None) -> str:
    if token.kind == "if":
        return "a conditional is written 'a if condition else b'"
    if before is not None and before.kind in ("<", ">", "==", "!=") and token.kind in ("<", ">"):
        return "the comparisons are <, <=, >, >=, == and !="
    if token.kind in (")", "]") and before is not None and before.kind == ",":
        return "leave the last comma out"
    if token.kind == "]" and before is not None and before.kind == "[":
        return "name at least one item"
    if token.kind == "for":
        return "an aggregate is written f(expression for x in collection)"
    if token.kind == "in" and before is not None and before.kind == "not":
        return "write 'not x in list'"
    if token.kind in RESERVED:
        return f"'{token.kind}' is a word of the language and cannot be a name"
    return ""


def operator_due(tokens: list[Token], index: int, opened: Token | None) -> Fault:
    """The token at `index` stands behind a value, where an operator or the end is due."""
    token, before = tokens[index], tokens[index - 1]
    expected = "an operator" if opened is None else f"an operator, ',' or '{_closes(opened)}'"
    message = f"{_shown(token)} stands behind {_shown(before)} without an operator between"
    if token.kind in (")", "]"):
        return _closing(token, opened)
    if token.kind == ",":
        return Fault(
            "',' stands outside the brackets of a function or list", "an operator", _behind_comma(tokens, index, opened)
        )
    if token.kind == "else":
        return Fault("'else' stands without 'if'", expected, "a conditional is written 'a if condition else b'")
    if token.kind in ("for", "where"):
        return Fault(
            f"'{token.kind}' stands outside an aggregate",
            expected,
            "an aggregate is written f(expression for x in collection where condition)",
        )
    if token.kind == "if":
        return Fault(
            message, expected, "a condition in a loop begins with 'where'; a conditional here needs parentheses"
        )
    if token.kind == "within":
        return Fault("'within' follows no comparison", expected, "write 'a == b within 1 mm'")
    if token.kind == "member":
        return Fault(message, expected, "a field stands directly behind a name or a closing ')'")
    return Fault(message, expected, _behind_operand(token, before, tokens[index - 2] if index > 1 else None))


def _closing(token: Token, opened: Token | None) -> Fault:
    if opened is None:
        return Fault(f"'{token.kind}' closes no bracket", "an operator or the end", "leave it out, or open the bracket")
    closing = _closes(opened)
    return Fault(f"'{token.kind}' cannot close '{opened.kind}'", f"'{closing}'", f"close with '{closing}'")


def _closes(opened: Token) -> str:
    return ")" if opened.kind == "(" else "]"


def _behind_comma(tokens: list[Token], index: int, opened: Token | None) -> str:
    if opened is not None:
        return "a list is written in square brackets: [a, b]"
    after = tokens[index + 1]
    if tokens[index - 1].kind == "number" and after.kind == "number" and after.start == tokens[index].end:
        return "write the decimal mark as a point and thousands without a mark"
    return "leave it out"


def _behind_operand(token: Token, before: Token, further: Token | None) -> str:
    if before.kind == "number" and before.unit == "in":
        return f"'in' right behind a number is the inch; membership of a bare number is written ({before.text}) in ..."
    if token.kind == "name":
        advice = _name_behind(token, before)
        if advice:
            return advice
    if token.kind == "not":
        return "write 'not x in list', with 'not' in front"
    if token.kind == "(" or (token.kind in ("name", "number") and before.kind in (")", "number")):
        return "a product is written with '*'"
    if token.kind == "text" and before.kind == "text":
        return "write '==' to compare"
    return "write an operator between them, or leave one out"


def _name_behind(token: Token, before: Token) -> str:
    lower = token.text.lower()
    if lower in RESERVED:
        return f"write '{lower}' in small letters"
    if lower in _OTHER_WORDS:
        return f"write {_OTHER_WORDS[lower]}"
    if before.kind == "name" and before.text.lower() in RESERVED:
        return f"write '{before.text.lower()}' in small letters"
    if before.kind == "number" and before.unit is not None:
        return f"a product is written '{before.text} {before.unit} * {token.text}'"
    return ""


_OTHER_WORDS = {
    "is": "'==' to compare",
    "equals": "'==' to compare",
    "then": "'a if condition else b'",
    "unless": "'and not'",
    "xor": "'!=' between two conditions in parentheses",
    "mod": "x - floor(x / y) * y",
    "div": "'/', or floor(a / b)",
    "times": "'*'",
    "over": "'/'",
}


def _shown(token: Token) -> str:
    if token.kind == "end":
        return "the end"
    if token.kind == "text":
        return f"the text {quoted(token.text[1:-1])}"
    text = token.text if token.unit is None else f"{token.text} {token.unit}"
    return quoted(text)
