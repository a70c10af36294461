"""Totals, and which of several judged parts decides: all in memory, every case of the tables."""

from __future__ import annotations

from datetime import date, timedelta
from fractions import Fraction

import pytest

from rulecheck.graph.conditions import Part
from rulecheck.graph.terms import Bank
from rulecheck.model.ruleset import Window
from rulecheck.operations.values import Reason, ReasonKind, Unknown
from rulecheck.outcome.results import Finding, Place, Verdict
from rulecheck.studies.judging import Judged, Truth, all_of, any_of, verdict_of
from rulecheck.studies.totals import binds, total

HOLDS = Bank().flag(True)


def reason(text: str, kind: ReasonKind = "missing") -> Reason:
    return Reason(kind, text)


def judged(name: str, truth: Truth, room: Fraction | int | None = None, *, strict: bool = False) -> Judged:
    return Judged(truth, Part("flag", name, HOLDS, strict=strict), room=None if room is None else Fraction(room))


def unknown(*names: str) -> Unknown:
    return Unknown(tuple(reason(name) for name in names))


def chosen(found: Judged) -> str:
    assert found.part is not None
    return found.part.text


WIDE, NARROW = judged("wide", True, 3), judged("narrow", True, 1)
SHORT, SHORTER = judged("short", False, -1), judged("shorter", False, -3)
YES, NO = judged("yes", True), judged("no", False)
LATER = judged("later", unknown("x"))


@pytest.mark.parametrize(
    ("items", "name", "truth"),
    [
        ([WIDE, NARROW], "narrow", True),
        ([NARROW, WIDE], "narrow", True),
        ([SHORT, SHORTER], "shorter", False),
        ([WIDE, SHORT, NARROW], "short", False),
        ([YES, WIDE], "wide", True),
        ([YES], "yes", True),
        ([NO, SHORTER], "no", False),
        ([SHORTER, NO], "no", False),
        ([SHORTER, LATER], "shorter", False),
        ([NO, YES], "no", False),
    ],
)
def test_what_decides_and(items: list[Judged], name: str, truth: bool) -> None:
    found = all_of(items)
    assert (chosen(found), found.truth) == (name, truth)


@pytest.mark.parametrize(
    ("items", "name", "truth"),
    [
        ([WIDE, NARROW], "wide", True),
        ([NARROW, WIDE], "wide", True),
        ([SHORT, SHORTER], "short", False),
        ([SHORTER, SHORT], "short", False),
        ([SHORT, NARROW], "narrow", True),
        ([YES, WIDE], "yes", True),
        ([WIDE, YES], "yes", True),
        ([NO], "no", False),
        ([NO, SHORTER], "shorter", False),
        ([LATER, NARROW], "narrow", True),
    ],
)
def test_what_decides_or(items: list[Judged], name: str, truth: bool) -> None:
    found = any_of(items)
    assert (chosen(found), found.truth) == (name, truth)


@pytest.mark.parametrize("join", [all_of, any_of])
def test_unknown_parts_are_merged_and_the_first_is_named(join: object) -> None:
    settled = YES if join is all_of else NO
    items = [settled, judged("one", unknown("x", "y"), 5), judged("two", unknown("y", "z"), 1)]
    found = join(items)  # type: ignore[operator]
    assert (chosen(found), found.truth, found.room) == ("one", unknown("x", "y", "z"), None)


@pytest.mark.parametrize("order", [1, -1])
def test_of_equal_margins_the_strict_one_is_worse(order: int) -> None:
    loose, strict = judged("loose", True, 0), judged("strict", True, 0, strict=True)
    assert chosen(all_of([loose, strict][::order])) == "strict"
    assert chosen(any_of([loose, strict][::order])) == "loose"


def test_a_judged_case_without_a_part_is_ordered_as_one_that_is_not_strict() -> None:
    bare = Judged(True, None, room=Fraction(0))
    assert all_of([bare, judged("strict", True, 0, strict=True)]).part is not None
    assert all_of([judged("loose", True, 0), bare]).part is not None


@pytest.mark.parametrize(
    ("truth", "said"),
    [
        (True, "complies"),
        (False, "breach"),
        (Unknown((reason("x"),)), "open"),
        (Unknown((reason("x", "contradiction"),)), "open"),
        (Unknown((reason("x", "undefined"),)), "unproven"),
        (Unknown((reason("x", "tie"),)), "unproven"),
        (Unknown((reason("x", "budget"),)), "unproven"),
        (Unknown((reason("x", "undefined"), reason("y"))), "open"),
        (Unknown((reason("x", "contradiction"), reason("y", "tie"))), "open"),
    ],
)
def test_the_verdict_of_a_truth(truth: Truth, said: str) -> None:
    assert verdict_of(truth) == said


# --- totals ----------------------------------------------------------------------------------------------------------


def finding(verdict: Verdict, standing: str = "shall") -> Finding:
    place = Place("a.ruleset.yaml", 1, 1)
    return Finding(
        "it", "a", "1", "It", standing, verdict, "", None, False, None, None, None, "", None, (), place, None
    )  # fmt: skip


@pytest.mark.parametrize(
    ("verdicts", "said"),
    [
        ("", "not applicable"),
        ("complies", "complies"),
        ("breach", "breach"),
        ("open", "open"),
        ("unproven", "unproven"),
        ("tight", "tight"),
        ("dispensed", "complies"),
        ("not applicable", "not applicable"),
        ("complies, tight", "tight"),
        ("tight, unproven", "unproven"),
        ("unproven, open", "open"),
        ("open, breach", "breach"),
        ("complies, tight, unproven, open, breach", "breach"),
        ("complies, tight, unproven, open", "open"),
        ("complies, tight, unproven", "unproven"),
        ("complies, not applicable", "complies"),
        ("dispensed, not applicable", "complies"),
        ("dispensed, breach", "breach"),
        ("dispensed, tight", "tight"),
    ],
)
@pytest.mark.parametrize("order", [1, -1])
def test_what_the_verdicts_come_to(verdicts: str, said: str, order: int) -> None:
    words = [word for word in verdicts.split(", ") if word][::order]
    assert total(finding(word) for word in words) == said  # type: ignore[arg-type]


@pytest.mark.parametrize("standing", ["should", "may", "note"])
def test_what_is_no_requirement_binds_nothing(standing: str) -> None:
    assert not binds(finding("open", standing))
    assert binds(finding("open"))
    assert total([finding("open", standing), finding("complies")]) == "complies"
    assert total([finding("breach", standing)]) == "not applicable"


# --- windows of time -------------------------------------------------------------------------------------------------

DAY, NEXT = date(2027, 3, 1), timedelta(days=1)


@pytest.mark.parametrize(
    ("first", "last", "holds"),
    [
        (None, None, True),
        (DAY, None, True),
        (DAY + NEXT, None, False),
        (DAY - NEXT, None, True),
        (None, DAY, True),
        (None, DAY + NEXT, True),
        (None, DAY - NEXT, False),
        (DAY, DAY, True),
        (DAY - NEXT, DAY - NEXT, False),
        (DAY + NEXT, DAY + NEXT, False),
        (DAY + NEXT, DAY - NEXT, False),
    ],
)
def test_both_days_of_a_window_are_within_it(first: date | None, last: date | None, holds: bool) -> None:
    assert Window(first, last).holds(DAY) is holds
