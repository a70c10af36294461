"""Evidence, judgements, branches and dispensations, on the days on which they turn."""

from __future__ import annotations

from datetime import date

import pytest
from small_files import check_texts, margin, only, refused

LAST = date(2027, 6, 30)
HOOP = "rules:\n  it:\n    evidence: {kind: certificate, name: hoop}\n"


def paper(**fields: str) -> str:
    inner = ", ".join(f"{key}: {value}" for key, value in fields.items())
    return f"evidence:\n  hoop: {{{inner}}}\n"


GOOD = paper(kind="certificate", reference="RH-4", issued="2026-01-10", until="2027-06-30")


@pytest.mark.parametrize(
    ("day", "said", "days"),
    [
        (date(2027, 6, 29), "complies", 1),
        (date(2027, 6, 30), "complies", 0),
        (date(2027, 7, 1), "breach", -1),
        (date(2027, 3, 1), "complies", 121),  # 30 days of March, then 30, 31 and 30
        (date(2026, 1, 10), "complies", 536),  # the day of issue: 365 + 171 days
    ],
)
def test_the_last_day_is_included(day: date, said: str, days: int) -> None:
    found = only(GOOD, HOOP, on=day)
    assert (found.verdict, margin(found)) == (said, days)
    assert found.margin is not None
    assert found.margin.unit in ("day", "days")


def test_a_document_of_a_later_day_does_not_count_yet() -> None:
    assert only(GOOD, HOOP, on=date(2026, 1, 9)).verdict == "open"


@pytest.mark.parametrize(
    ("design", "said"),
    [
        ("", "open"),
        ("evidence: {}\n", "open"),
        ("evidence: {hoop: none}\n", "open"),
        (paper(kind="drawing", reference="RH-4", until="2027-06-30"), "open"),
        (paper(reference="RH-4", until="2027-06-30"), "open"),
        (paper(kind="certificate", reference="RH-4"), "open"),
        (paper(kind="certificate", reference="RH-4", issued="2026-01-10"), "open"),
        (paper(kind="certificate", until="2027-06-30"), "complies"),
        (GOOD.replace("hoop:", "other:"), "open"),
    ],
    ids=["none", "empty", "absent", "kind", "no kind", "bare", "no last day", "enough", "other name"],
)
def test_what_is_missing_of_a_document_is_open(design: str, said: str) -> None:
    found = only(design, HOOP)
    assert found.verdict == said
    assert bool(found.reason) == (said == "open")


@pytest.mark.parametrize(("issued", "said"), [("2026-01-10", False), (None, True)])
def test_a_day_of_issue_that_is_not_stated_is_said(issued: str | None, said: bool) -> None:
    dates = {"until": "2027-06-30", **({"issued": issued} if issued else {})}
    found = only(paper(kind="certificate", **dates), HOOP)
    assert found.verdict == "complies"
    assert [part.text.endswith("day of issue not stated") for part in found.parts] == [said]


@pytest.mark.parametrize(
    ("expires", "design", "said"),
    [
        ("", paper(kind="drawing", reference="D"), "complies"),
        (", expires: yes", paper(kind="drawing", reference="D"), "open"),
        (", expires: yes", paper(kind="drawing", reference="D", until="2027-06-30"), "complies"),
        ("", paper(kind="drawing", reference="D", until="2026-06-30"), "breach"),
    ],
)
def test_kinds_that_need_no_last_day(expires: str, design: str, said: str) -> None:
    rule = f"rules:\n  it:\n    evidence: {{kind: drawing, name: hoop{expires}}}\n"
    assert only(design, rule).verdict == said


@pytest.mark.parametrize(("day", "absent"), [(date(2027, 6, 29), "open"), (LAST, "open"), (date(2027, 7, 1), "breach")])
def test_a_document_that_is_due(day: date, absent: str) -> None:
    rule = "rules:\n  it:\n    evidence: {kind: drawing, name: hoop, due: 2027-06-30}\n"
    assert only("", rule, on=day).verdict == absent
    assert only(paper(kind="drawing", reference="D"), rule, on=day).verdict == "complies"


def test_documents_of_elements() -> None:
    rule = (
        "inputs: {lamps: {kind: collection, meaning: Lamps, element: {proof: {kind: text, meaning: Its paper}}}}\n"
        "rules:\n  it:\n    each: l in lamps\n    evidence: {kind: inspection, name: l.proof}\n"
    )
    papers = "evidence:\n  p1: {kind: inspection, reference: A}\n  p2: {kind: inspection, reference: B}\n"
    assert only("lamps:\n  a: {proof: p1}\n  b: {proof: p2}\n" + papers, rule).verdict == "complies"
    assert only("lamps:\n  a: {proof: p1}\n  b: {proof: p3}\n" + papers, rule).verdict == "open"
    assert only("lamps:\n  a: {proof: p1}\n  b: {}\n" + papers, rule).verdict == "open"


def test_belts_until_the_end_of_a_year() -> None:
    rule = 'rules:\n  it: {require: "on <= end_of_year(evidence.hoop.made + 5 years)"}\n'
    made = paper(kind="certificate", made="2022-02-28")
    last, late = only(made, rule, on=date(2027, 12, 31)), only(made, rule, on=date(2028, 1, 1))
    assert (last.verdict, margin(last)) == ("complies", 0)
    assert (late.verdict, margin(late)) == ("breach", -1)
    assert only("", rule).verdict == "open"


# --- judgements ------------------------------------------------------------------------------------------------------

FINISH = "rules:\n  it:\n    judgement: Are all edges smooth?\n"
SLOT = {"verdict": "complies", "role": "scrutineer of the entrant", "date": "2027-02-11", "reason": "felt by hand"}


def judged(rule: str = "it", **changes: str | None) -> str:
    fields = {key: value for key, value in {**SLOT, **changes}.items() if value is not None}
    return f"judgements:\n  {rule}: {{{', '.join(f'{key}: {value}' for key, value in fields.items())}}}\n"


@pytest.mark.parametrize(
    ("design", "said"),
    [
        (judged(), "complies"),
        (judged(verdict="breach"), "breach"),
        ("", "open"),
        *((judged(**{key: None}), "open") for key in SLOT),
        (judged(date="2027-03-01"), "complies"),
        (judged(date="2027-03-02"), "open"),
    ],
)
def test_a_judgement_needs_all_its_fields(design: str, said: str) -> None:
    found = only(design, FINISH)
    assert (found.verdict, found.margin) == (said, None)


def test_a_breach_without_its_fields_is_open() -> None:
    assert only(judged(verdict="breach", reason=None), FINISH).verdict == "open"


def test_a_judgement_for_each_element() -> None:
    rule = "rules:\n  it:\n    each: e in edges\n    judgement: Is it smooth?\n"
    edges = "edges: {sill: {radius: 1 mm}, lip: {radius: 1 mm}}\n"
    slot = ", ".join(f"{key}: {value}" for key, value in SLOT.items())
    both = f"judgements:\n  it:\n    sill: {{{slot}}}\n    lip: {{{slot}}}\n"
    one = f"judgements:\n  it:\n    sill: {{{slot}}}\n"
    assert only(edges + both, rule).verdict == "complies"
    assert only(edges + both.replace("verdict: complies", "verdict: breach", 1), rule).verdict == "breach"
    assert only(edges + one, rule).verdict == "open"
    assert only(edges, rule).verdict == "open"


def test_a_judgement_of_an_element_that_is_not_whole_is_not_made_up_by_that_of_the_rule() -> None:
    rule = "rules:\n  it:\n    each: e in edges\n    judgement: Is it smooth?\n"
    whole = ", ".join(f"{key}: {value}" for key, value in SLOT.items())
    breach = whole.replace("complies", "breach")
    design = "edges: {sill: {radius: 1 mm}}\njudgements:\n  it:\n    "
    general = "\n    ".join(f"{key}: {value}" for key, value in SLOT.items())
    assert only(f"{design}{general}\n    sill: {{{breach}}}\n", rule).verdict == "breach"
    short = breach.replace("verdict: breach, ", "")
    assert only(f"{design}{general}\n    sill: {{{short}}}\n", rule).verdict == "open"


EACH_EDGE = "rules:\n  it:\n    each: e in edges\n    judgement: Is it smooth?\n"


@pytest.mark.parametrize("verdict", ["complies", "breach"])
def test_a_judgement_of_the_whole_rule_answers_for_no_element(verdict: str) -> None:
    found = only("edges: {sill: {radius: 1 mm}, lip: {radius: 1 mm}}\n" + judged(verdict=verdict), EACH_EDGE)
    assert found.verdict == "open"
    for name in ("sill", "lip"):
        assert (
            f"judgements.it.{name}, a judgement of '{name}'; one of the whole rule speaks of no element" in found.reason
        )


def test_the_reason_says_where_a_judgement_would_stand() -> None:
    whole = ", ".join(f"{key}: {value}" for key, value in SLOT.items())
    design = (
        "edges: {sill: {radius: 1 mm}, lip: {radius: 1 mm}}\njudgements: {it: {sill: {"
        + whole
        + "}, lip: {role: me}}}\n"
    )
    assert only(design, EACH_EDGE).reason == "missing: judgements.it.lip, a judgement of 'lip' (verdict, reason, date)"


def test_judgements_of_pairs() -> None:
    rule = "rules:\n  it:\n    each: a, b in pairs(edges)\n    judgement: Do they match?\n".replace(
        "a, b in pairs(edges)", '"a, b in pairs(edges)"'
    )
    edges = "edges: {sill: {radius: 1 mm}, lip: {radius: 1 mm}}\n"
    whole = ", ".join(f"{key}: {value}" for key, value in SLOT.items())
    assert only(f"{edges}judgements: {{it: {{sill_lip: {{{whole}}}}}}}\n", rule).verdict == "complies"
    assert only(f"{edges}judgements: {{it: {{sill: {{{whole}}}}}}}\n", rule).verdict == "open"


# --- branches --------------------------------------------------------------------------------------------------------

TUBE = """\
rules:
  it:
    branches:
      steel tube: {require: members.hoop.wall >= 2.5 mm}
      approved equal: {evidence: {kind: certificate, name: hoop}}
"""
THIN, THICK = "members: {hoop: {wall: 2 mm}}\n", "members: {hoop: {wall: 3 mm}}\n"


@pytest.mark.parametrize(
    ("design", "said"),
    [
        (THICK, "complies"),
        (THIN, "breach"),
        ("", "open"),
        (THIN + GOOD, "breach"),
        (THIN + GOOD + "claims: {it: approved equal}\n", "complies"),
        (THICK + "claims: {it: approved equal}\n", "open"),
        (THICK + GOOD + "claims: {it: steel tube}\n", "complies"),
        (THIN + GOOD + "claims: {it: steel tube}\n", "breach"),
    ],
)
def test_a_branch_that_rests_on_evidence_counts_only_when_claimed(design: str, said: str) -> None:
    assert only(design, TUBE).verdict == said


def test_the_branch_that_holds_is_named() -> None:
    rule = (
        "rules:\n  it:\n    branches:\n      thick: {require: members.hoop.wall >= 2.5 mm}\n"
        "      wide: {require: members.hoop.outer_diameter >= 40 mm}\n"
    )
    # 2 mm / 2.5 mm - 1 = -20 %; 44 mm / 40 mm - 1 = 10 %: the greater relative margin binds.
    found = only("members: {hoop: {wall: 2 mm, outer_diameter: 44 mm}}\n", rule)
    assert (found.verdict, margin(found)) == ("complies", 4)
    assert found.binding is not None
    assert found.binding.branch == "wide"
    both_short = only("members: {hoop: {wall: 2 mm, outer_diameter: 39 mm}}\n", rule)
    assert (both_short.verdict, margin(both_short)) == ("breach", -1)


def test_a_claim_of_a_branch_that_is_not_there_is_refused() -> None:
    assert [item.code for item in refused("claims: {it: steal tube}\n", TUBE)] == ["unknown-choice"]


def test_conditions_of_one_rule_are_joined_by_and() -> None:
    rule = "rules:\n  it:\n    require: members.hoop.wall >= 2.5 mm\n    evidence: {kind: drawing, name: hoop}\n"
    drawing = paper(kind="drawing", reference="D")
    assert only(THICK + drawing, rule).verdict == "complies"
    assert only(THICK, rule).verdict == "open"
    assert only(THIN, rule).verdict == "breach"
    assert only(drawing, rule).verdict == "open"


# --- dispensations ---------------------------------------------------------------------------------------------------

WIDE = "rules:\n  it: {require: dimensions.overall_width <= 1900 mm}\n  other: {require: dimensions.wheelbase >= 1 m}\n"
LETTER = "dispensations: {d1: {rule: it, reference: L-7, until: 2027-06-30}}\n"


@pytest.mark.parametrize(
    ("day", "said", "total"),
    [(date(2027, 6, 30), "dispensed", "complies"), (date(2027, 7, 1), "breach", "breach")],
)
def test_a_dispensation_is_good_until_its_last_day(day: date, said: str, total: str) -> None:
    wide = "dimensions: {overall_width: 1910 mm, wheelbase: 2 m}\n"
    report = check_texts(wide + LETTER, WIDE, on=day)
    assert (report.rules[0].verdict, report.verdict) == (said, total)
    assert margin(report.rules[0]) == -10


@pytest.mark.parametrize("left_out", ["rule: it, ", ", reference: L-7", ", until: 2027-06-30"])
def test_a_dispensation_without_its_fields_is_none(left_out: str) -> None:
    short = LETTER.replace(left_out.strip(", "), "").replace("{, ", "{").replace(", ,", ",").replace(", }", "}")
    assert only("dimensions: {overall_width: 1910 mm}\n" + short, WIDE).verdict == "breach"


def test_a_rule_that_complies_needs_no_dispensation() -> None:
    assert only("dimensions: {overall_width: 1890 mm}\n" + LETTER, WIDE).verdict == "complies"
