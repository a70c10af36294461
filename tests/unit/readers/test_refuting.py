from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from rulecheck.graph.terms import Bank, Term
from rulecheck.operations.arithmetic import absolute, add, multiply, subtract
from rulecheck.operations.comparison import at_most, below, equal, same_text
from rulecheck.operations.logic import both, either, negation
from rulecheck.operations.values import Reason
from rulecheck.quantity.dimension import PURE
from rulecheck.readers.refuting import Refuter

BANK = Bank()
X, Y = (BANK.input(name, "number", PURE) for name in "xy")
WORD = BANK.input("word", "text", PURE)
FLAG = BANK.input("flag", "flag", PURE)


def number(value: int | Fraction) -> Term:
    return BANK.number(value)


def do(operation: object, *parts: Term) -> Term:
    return BANK.apply(operation, parts, PURE)  # type: ignore[arg-type]


def is_word(text: str) -> Term:
    return do(same_text, WORD, BANK.text(text))


def refuted(*claims: tuple[Term, bool]) -> bool:
    return Refuter(BANK, lambda path: ("red", "blue") if path == "word" else ()).refuted(claims)


@pytest.mark.parametrize(
    ("claims", "expected"),
    [
        ([(do(at_most, X, number(3)), True), (do(at_most, number(4), X), True)], True),
        ([(do(at_most, X, number(3)), True), (do(at_most, number(3), X), True)], False),
        ([(do(below, X, number(3)), True), (do(at_most, number(3), X), True)], True),
        ([(do(at_most, X, number(3)), True), (do(below, X, number(3)), False)], False),
        ([(do(at_most, X, Y), True), (do(below, Y, X), True)], True),
        ([(do(at_most, do(subtract, X, Y), number(1)), True), (do(at_most, do(add, Y, number(2)), X), True)], True),
        ([(do(at_most, do(multiply, number(-2), X), number(-6)), True), (do(below, X, number(3)), True)], True),
        ([(do(equal, X, number(3)), True), (do(below, X, number(3)), True)], True),
        ([(do(equal, X, number(3)), False), (do(at_most, X, number(3)), True)], False),
        ([(do(at_most, do(absolute, X), number(-1)), True)], True),
        ([(do(at_most, do(absolute, X), number(0)), True)], False),
        ([(is_word("red"), True), (is_word("blue"), True)], True),
        ([(is_word("red"), False), (is_word("blue"), False)], True),
        ([(is_word("red"), False)], False),
        ([(FLAG, True), (do(negation, FLAG), True)], True),
        ([(do(either, FLAG, is_word("red")), True), (FLAG, False), (is_word("blue"), True)], True),
        ([(do(both, FLAG, is_word("red")), False), (FLAG, True), (is_word("red"), True)], True),
        (
            [(do(either, do(at_most, X, number(1)), do(at_most, X, number(2))), True), (do(below, number(2), X), True)],
            True,
        ),
        ([(BANK.flag(False), True)], True),
    ],
)
def test_claims(claims: list[tuple[Term, bool]], expected: bool) -> None:
    assert refuted(*claims) is expected


def test_a_limit_by_a_conditional_is_taken_arm_by_arm() -> None:
    limit = BANK.branch(FLAG, number(3), number(5))
    assert refuted((do(at_most, X, limit), True), (do(below, number(5), X), True))
    assert not refuted((do(at_most, X, limit), True), (do(below, number(4), X), True))
    assert refuted((do(at_most, X, limit), True), (do(below, number(4), X), True), (FLAG, True))


def test_what_is_not_known_refutes_nothing() -> None:
    unknown = BANK.unknown(Reason("missing", "tyres"), "number")
    flag = BANK.unknown(Reason("missing", "whether"), "flag")
    assert not refuted((flag, True), (flag, False))
    assert not refuted((do(at_most, unknown, number(1)), True), (do(below, number(2), unknown), True))
    assert not refuted(
        (do(at_most, do(add, X, unknown), number(1)), True), (do(below, number(2), do(add, X, unknown)), True)
    )


def test_a_question_too_large_stays_undecided() -> None:
    pairs = [do(either, BANK.input(f"a{n}", "flag", PURE), BANK.input(f"b{n}", "flag", PURE)) for n in range(40)]
    assert not refuted(*((pair, True) for pair in pairs))


_TERMS = st.deferred(
    lambda: st.one_of(
        st.builds(lambda n: do(at_most, X, number(n)), st.integers(0, 3)),
        st.builds(lambda n: do(below, do(add, X, Y), number(n)), st.integers(0, 3)),
        st.builds(lambda n: do(equal, Y, number(n)), st.integers(0, 3)),
        st.sampled_from([FLAG, is_word("red"), is_word("blue")]),
        st.builds(lambda part: do(negation, part), _TERMS),
        st.builds(lambda one, other: do(both, one, other), _TERMS, _TERMS),
        st.builds(lambda one, other: do(either, one, other), _TERMS, _TERMS),
        st.builds(BANK.branch, _TERMS, _TERMS, _TERMS),
    )
)


def value(term: Term, x: Fraction, y: Fraction, flag: bool, word: str) -> object:
    """A term computed by the definition of each operation."""
    if term.kind == "input":
        return {"x": x, "y": y, "flag": flag, "word": word}[term.path]
    if term.kind == "constant":
        return getattr(term.value, "rational", term.value)
    parts = [value(part, x, y, flag, word) for part in term.arguments]
    if term.kind == "branch":
        return parts[1] if parts[0] else parts[2]
    assert term.operation is not None
    return {
        "at_most": lambda: parts[0] <= parts[1],  # type: ignore[operator]
        "below": lambda: parts[0] < parts[1],  # type: ignore[operator]
        "equal": lambda: parts[0] == parts[1],
        "same_text": lambda: parts[0] == parts[1],
        "add": lambda: parts[0] + parts[1],  # type: ignore[operator]
        "negation": lambda: not parts[0],
        "both": lambda: all(parts),
        "either": lambda: any(parts),
    }[term.operation.name]()


@given(
    st.lists(st.tuples(_TERMS, st.booleans()), min_size=1, max_size=3),
    st.fractions(-1, 4, max_denominator=2),
    st.fractions(-1, 4, max_denominator=2),
    st.booleans(),
    st.sampled_from(["red", "blue"]),
)
def test_what_a_car_meets_is_never_refuted(
    claims: list[tuple[Term, bool]], x: Fraction, y: Fraction, flag: bool, word: str
) -> None:
    if all(value(term, x, y, flag, word) is wanted for term, wanted in claims):
        assert not refuted(*claims)
