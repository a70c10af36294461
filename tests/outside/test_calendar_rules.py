"""Rules on dates and evidence against the calendar of the standard library, on both sides of each border.

Source: the Gregorian calendar as Python's `datetime` and `calendar` have it; how long a last day lasts, and that a month
is clamped at its end, are the language's own promises. `later` below counts month by month and shares no code with ours.
"""

from __future__ import annotations

import calendar
from datetime import date, timedelta
from fractions import Fraction

import pytest
from writing import as_fraction, checked, findings, write_design, write_ruleset

DAY = timedelta(days=1)
STARTS = [
    date(2024, 1, 31),
    date(2024, 2, 29),
    date(2023, 2, 28),
    date(2024, 3, 31),
    date(2025, 8, 31),
    date(2025, 12, 31),
    date(2026, 1, 1),
    date(2026, 5, 30),
    date(2000, 2, 29),
    date(1899, 12, 31),
]
PERIODS = ["1 day", "45 days", "1 month", "2 months", "13 months", "1 year", "4 years", "5 years", "100 years"]
ON = date(2027, 3, 1)


def later(start: date, period: str, sign: int = 1) -> date:
    """A date some days, months or years on (or back), a month at a time, clamped at the end of the month reached."""
    count, unit = int(period.split()[0]), period.split()[1].rstrip("s")
    if unit == "day":
        return start + sign * count * DAY
    year, month = start.year, start.month
    for _ in range(count * (12 if unit == "year" else 1)):
        month += sign
        if month in (0, 13):
            year, month = year + sign, 12 if month == 0 else 1
    return date(year, month, min(start.day, calendar.monthrange(year, month)[1]))


def write_dates(folder, rules: dict[str, str], **starts: date) -> None:
    inputs = {f"made.{name}": {"kind": "date", "meaning": "Day on a label"} for name in starts}
    write_ruleset(folder, inputs=inputs, rules={name: {"require": text} for name, text in rules.items()})
    write_design(folder, made={name: start.isoformat() for name, start in starts.items()})


def every_border() -> dict[str, tuple[str, date, int]]:
    """Rule texts with the day that limits them, and the sign of the period."""
    made = {}
    for index in range(len(STARTS)):
        for number, period in enumerate(PERIODS):
            for word, sign in (("plus", 1), ("minus", -1)):
                text = f"made.d{index} {'+' if sign > 0 else '-'} {period}"
                made[f"{word}_{index}_{number}"] = (text, later(STARTS[index], period, sign), sign)
    return made


def test_dates_with_periods(tmp_path):
    """Ninety dates on and ninety back: margins in whole days, exactly."""
    borders = every_border()
    starts = {f"d{index}": start for index, start in enumerate(STARTS)}
    write_dates(tmp_path, {name: f"on <= {text}" for name, (text, _, _) in borders.items()}, **starts)
    found = findings(tmp_path, on=ON)
    assert len(found) == 180
    for name, (text, border, _) in borders.items():
        assert as_fraction(found[name].margin) == (border - ON).days, text
        assert found[name].verdict == ("complies" if border >= ON else "breach"), text


def test_limits_and_values_are_shown_as_days(tmp_path):
    """The reader of a report sees calendar days, not the number of a day; the limit is the side without inputs."""
    write_dates(tmp_path, {"plus": "on <= made.label + 1 month"}, label=date(2024, 1, 31))
    found = findings(tmp_path, on=ON)["plus"]
    assert (str(found.value), str(found.limit)) == ("2024-02-29", "2027-03-01")
    write_evidence(tmp_path, {"kind": "certificate"}, {"kind": "certificate", "reference": "A", "until": "2028-02-29"})
    found = findings(tmp_path, on=ON)["paper"]
    assert (str(found.value), str(found.limit)) == ("2027-03-01", "2028-02-29")


@pytest.mark.parametrize("start", STARTS[:7])
@pytest.mark.parametrize("period", ["1 month", "13 months", "1 year", "5 years"])
def test_the_last_day_is_included(tmp_path, start, period):
    border = later(start, period)
    rules = {"last": f"on <= made.label + {period}", "before": f"on < made.label + {period}"}
    rules |= {"first": f"on >= made.label + {period}", "after": f"on > made.label + {period}"}
    write_dates(tmp_path, rules, label=start)
    verdicts = {
        step: {
            name: finding.verdict == "complies" for name, finding in findings(tmp_path, on=border + step * DAY).items()
        }
        for step in (-1, 0, 1)
    }
    assert verdicts[-1] == {"last": True, "before": True, "first": False, "after": False}
    assert verdicts[0] == {"last": True, "before": False, "first": True, "after": False}
    assert verdicts[1] == {"last": False, "before": False, "first": True, "after": True}


@pytest.mark.parametrize("made", [date(2022, 1, 1), date(2022, 12, 31), date(2020, 2, 29), date(2022, 6, 15)])
def test_good_until_the_end_of_the_year(tmp_path, made):
    """On 31 December the belt is good, on 1 January it is not, whatever the day of making in the year."""
    write_dates(tmp_path, {"belt": "on <= end_of_year(made.label + 5 years)"}, label=made)
    last = date(made.year + 5, 12, 31)
    for step, verdict, margin in ((-1, "complies", 1), (0, "complies", 0), (1, "breach", -1)):
        found = findings(tmp_path, on=last + step * DAY)["belt"]
        assert (found.verdict, as_fraction(found.margin)) == (verdict, margin)


@pytest.mark.parametrize(
    ("start", "turns"),
    [
        (date(2020, 2, 29), [date(2021, 2, 28), date(2024, 2, 29), date(2025, 2, 28)]),
        (date(2021, 3, 1), [date(2022, 3, 1), date(2027, 3, 1)]),
        (date(2021, 12, 31), [date(2022, 12, 31), date(2026, 12, 31)]),
    ],
)
def test_whole_years(tmp_path, start, turns):
    """A year is over on the day that a date plus one year gives, not a day before."""
    write_dates(tmp_path, {"age": "years_between(made.label, on) >= 0"}, label=start)
    for turn in turns:
        whole = turn.year - start.year
        assert later(start, f"{whole} years") == turn
        for step, years in ((-1, whole - 1), (0, whole), (1, whole)):
            assert as_fraction(findings(tmp_path, on=turn + step * DAY)["age"].value) == Fraction(years)


def test_a_limit_by_the_day_of_approval(tmp_path):
    """The steps of a table over a date: the day itself belongs to the new limit."""
    write_ruleset(
        tmp_path,
        inputs={
            "tub.approved": {"kind": "date", "meaning": "Day of approval"},
            "tub.load": {"unit": "kN", "meaning": "Load"},
        },
        tables={
            "load_due": {
                "over": "tub.approved",
                "unit": "kN",
                "steps": [
                    {"below": "2020-03-01", "value": "20 kN"},
                    {"up_to": "2024-02-29", "value": "25 kN"},
                    {"otherwise": "30 kN"},
                ],
            }
        },
        rules={"load": {"require": "tub.load >= load_due"}},
    )
    write_design(tmp_path, tub={"approved": "2020-01-01", "load": "25 kN"})
    margins = {
        day: as_fraction(findings(tmp_path, {"tub.approved": day})["load"].margin)
        for day in ("2020-02-29", "2020-03-01", "2024-02-29", "2024-03-01")
    }
    assert list(margins.values()) == [5, 0, 0, -5]


@pytest.mark.parametrize(
    ("first", "last"), [(date(2027, 1, 1), date(2027, 12, 31)), (date(2028, 2, 29), date(2028, 2, 29))]
)
def test_the_window_of_a_rule(tmp_path, first, last):
    """A rule with its own window applies from its first to its last day, both included."""
    write_ruleset(
        tmp_path,
        inputs={"part.width": {"unit": "mm", "meaning": "Width"}},
        rules={
            "width": {"valid": {"from": first.isoformat(), "until": last.isoformat()}, "require": "part.width <= 9 mm"}
        },
    )
    write_design(tmp_path, part={"width": "10 mm"})
    for day, verdict in (
        (first - DAY, "not applicable"),
        (first, "breach"),
        (last, "breach"),
        (last + DAY, "not applicable"),
    ):
        assert findings(tmp_path, on=day)["width"].verdict == verdict, day


def test_the_window_of_a_ruleset(tmp_path):
    """Outside its window the report says that the ruleset is not in force."""
    write_ruleset(
        tmp_path,
        valid={"from": "2027-01-01", "until": "2027-12-31"},
        inputs={"part.width": {"unit": "mm", "meaning": "Width"}},
        rules={"width": {"require": "part.width <= 9 mm"}},
    )
    write_design(tmp_path, part={"width": "8 mm"})
    notes = {
        day: checked(tmp_path, on=date.fromisoformat(day)).rulesets[0].note
        for day in ("2026-12-31", "2027-01-01", "2027-12-31", "2028-01-01")
    }
    assert [bool(note) for note in notes.values()] == [True, False, False, True]
    assert "2026-12-31" in notes["2026-12-31"]


# --- evidence --------------------------------------------------------------------------------------------------------


def write_evidence(folder, wanted: dict[str, str], stated: dict[str, str] | None) -> None:
    write_ruleset(folder, rules={"paper": {"evidence": {"name": "hoop", **wanted}}})
    write_design(folder, **({"evidence": {"hoop": stated}} if stated else {}))


@pytest.mark.parametrize("until", [date(2027, 2, 28), date(2028, 2, 29), date(2027, 12, 31)])
def test_evidence_is_good_on_its_last_day(tmp_path, until):
    """The margin is in days: one the day before, none on the day, a breach by one after it."""
    stated = {"kind": "certificate", "reference": "RH-1", "until": until.isoformat()}
    write_evidence(tmp_path, {"kind": "certificate"}, stated)
    for step, verdict in ((-400, "complies"), (-1, "complies"), (0, "complies"), (1, "breach"), (366, "breach")):
        found = findings(tmp_path, on=until + step * DAY)["paper"]
        assert (found.verdict, as_fraction(found.margin)) == (verdict, -step)


@pytest.mark.parametrize("kind", ["certificate", "homologation", "licence"])
def test_evidence_that_expires_needs_its_last_day(tmp_path, kind):
    write_evidence(tmp_path, {"kind": kind}, {"kind": kind, "reference": "RH-1"})
    assert findings(tmp_path)["paper"].verdict == "open"


def test_a_drawing_needs_no_last_day(tmp_path):
    write_evidence(tmp_path, {"kind": "drawing"}, {"kind": "drawing", "reference": "sheet 4"})
    found = findings(tmp_path)["paper"]
    assert (found.verdict, found.margin) == ("complies", None)


def test_evidence_of_another_kind_does_not_count(tmp_path):
    write_evidence(
        tmp_path, {"kind": "certificate"}, {"kind": "drawing", "reference": "sheet 4", "until": "2030-01-01"}
    )
    assert findings(tmp_path)["paper"].verdict == "open"


def test_evidence_issued_later_does_not_count_yet(tmp_path):
    stated = {"kind": "certificate", "reference": "RH-1", "issued": "2027-03-01", "until": "2029-03-01"}
    write_evidence(tmp_path, {"kind": "certificate"}, stated)
    days = [date(2027, 2, 28), date(2027, 3, 1)]
    assert [findings(tmp_path, on=day)["paper"].verdict for day in days] == ["open", "complies"]


def test_absent_evidence_is_open_until_it_is_due(tmp_path):
    """Absent on the day on which it is due: still open; the day after: a breach."""
    write_evidence(tmp_path, {"kind": "drawing", "due": "2027-03-01"}, None)
    days = [date(2027, 2, 28), date(2027, 3, 1), date(2027, 3, 2)]
    assert [findings(tmp_path, on=day)["paper"].verdict for day in days] == ["open", "open", "breach"]


def test_evidence_that_came_counts_before_and_after_its_due_day(tmp_path):
    write_evidence(tmp_path, {"kind": "drawing", "due": "2027-03-01"}, {"kind": "drawing", "reference": "sheet 4"})
    days = [date(2027, 2, 28), date(2027, 3, 2)]
    assert [findings(tmp_path, on=day)["paper"].verdict for day in days] == ["complies", "complies"]


def test_a_dispensation_is_good_on_its_last_day(tmp_path):
    """The breach is dispensed up to and with the last day, and its margin stays visible."""
    write_ruleset(
        tmp_path,
        inputs={"part.width": {"unit": "mm", "meaning": "Width"}},
        rules={"width": {"require": "part.width <= 9 mm"}},
    )
    permit = {"rule": "width", "reference": "letter 7", "until": "2028-02-29"}
    write_design(tmp_path, part={"width": "10 mm"}, dispensations={"old_part": permit})
    for day, verdict in (
        (date(2028, 2, 28), "dispensed"),
        (date(2028, 2, 29), "dispensed"),
        (date(2028, 3, 1), "breach"),
    ):
        found = findings(tmp_path, on=day)["width"]
        assert (found.verdict, as_fraction(found.margin)) == (verdict, -1)
