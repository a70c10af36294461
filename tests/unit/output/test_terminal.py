import pytest
from output_samples import finding, part, report

from rulecheck.outcome.results import (
    VERDICTS,
    Amount,
    BindingPart,
    ClosedFormResult,
    Place,
    RulesetInfo,
    Step,
    Working,
    Workings,
)
from rulecheck.output.screen import STYLES, Screen
from rulecheck.output.terminal import report_text
from rulecheck.output.terminal_details import SHOWN
from rulecheck.output.terminal_workings import workings_text

LATIN = Screen(unicode=False, encoding="ascii")


@pytest.mark.parametrize("verdict", VERDICTS)
def test_every_verdict_has_its_word_and_colour(verdict: str) -> None:
    text = report_text(report(finding(verdict=verdict)))
    assert text.count(verdict) >= 2
    coloured = report_text(report(finding(verdict=verdict)), Screen(colours="truecolor"))
    assert "\x1b[" in coloured
    assert verdict in coloured
    assert verdict in STYLES


def test_only_what_needs_work_is_shown_at_length() -> None:
    for verdict in VERDICTS:
        text = report_text(report(finding(verdict=verdict)))
        assert ("what needs work" in text) == (verdict in SHOWN)


def test_ascii_screens_get_ascii() -> None:
    text = report_text(report(finding(title="Höhe über ┃", verdict="breach")), LATIN)
    assert text.isascii()
    assert "H\\xf6he" in text


@pytest.mark.parametrize("width", [40, 60, 80, 100, 120])
def test_no_line_is_wider_than_the_screen(width: int) -> None:
    rules = [
        finding(f"rule_{n}", title="A title of many words " * 4, verdict=verdict) for n, verdict in enumerate(VERDICTS)
    ]
    text = report_text(report(*rules, notes=("a note " * 40,), cautions=("be careful " * 30,)), Screen(width))
    assert max(map(len, text.splitlines())) <= width


def test_names_have_a_column_on_a_wide_screen() -> None:
    assert "overall_width" not in report_text(report(finding())).split("rail:")[0]
    assert "overall_width" in report_text(report(finding()), Screen(120)).split("rail:")[0]


def test_text_from_files_cannot_style_or_move() -> None:
    text = report_text(report(finding(title="[bold]x[/bold] \x1b[31m :smile: \u202e"), design="\x1b[2J"))
    assert "[bold]x[/bold]" in text.replace("\n", "")
    assert "\x1b" not in text
    assert ":smile:" in text
    assert "\u202e" not in text


def test_a_breach_names_part_element_state_numbers_and_places() -> None:
    broken = finding(
        verdict="breach",
        margin=Amount("-4", "mm"),
        value=Amount("1904", "mm"),
        relative_margin=-4 / 1900,
        binding=BindingPart("t.width <= 1900 mm", "rear", {"driver": "heavy"}, "steel tube"),
        parts=(
            part(
                text="t.width <= 1900 mm",
                element="rear",
                state={"driver": "heavy"},
                branch="steel tube",
                verdict="breach",
            ),
            part(text="t.width <= 1900 mm", element="front", verdict="breach", margin=Amount("-1", "mm")),
        ),
    )
    text = report_text(report(broken))
    for told in (
        "breach 3.1 Overall width (overall_width)",
        "t.width <= 1900 mm",
        "for rear",
        "in state driver heavy",
        "branch steel tube",
        "value 1904 mm, at most 1900 mm; margin -4 mm",
        "also front: margin -1 mm",
        "rule at cup.ruleset.yaml:7:14",
        "value at car.design.yaml:9:18",
    ):
        assert told in text


def test_notes_tell_what_rests_on_what() -> None:
    noted = finding(
        estimates=tuple(f"masses.part_{n}.mass" for n in range(9)),
        outside_validity=("aero.front_share",),
        notes=("its condition 'a > 3 mm' is within 1 % of turning",),
        history=("replaced: old.ruleset.yaml:3:3",),
    )
    book = RulesetInfo("Cup", "7", "cup.ruleset.yaml", ("mirror: bulletin 3",), "not in force on 2027-03-01")
    text = report_text(report(noted, rulesets=(book,), notes=("two values contradict each other",)))
    for told in (
        "two values contradict each other",
        "Cup: not in force on 2027-03-01",
        "aero.front_share is used outside its range of validity, in 3.1 overall_width",
        "within 1 % of turning",
        "1 rule on estimates: 3.1 overall_width",
        "and 3 more",
        "replaced: old.ruleset.yaml:3:3",
        "withdrawn by Cup: mirror: bulletin 3",
    ):
        assert told in " ".join(text.split())


def test_head_and_total() -> None:
    text = report_text(
        report(finding(), tightest="overall_width", changes=("tyres.rear.width = 250mm",), reserve="5 % of every limit")
    )
    assert "Plover T4, revision B (car.design.yaml)" in text
    assert "Cup, edition 7 (cup.ruleset.yaml)" in text
    assert "with     tyres.rear.width = 250mm" in text
    assert "total: complies (1 complies)" in text
    assert "tightest: 3.1 Overall width, margin 10 mm (0.52 %)" in text


def test_a_strict_limit_that_is_touched_is_a_breach() -> None:
    touched = finding(verdict="breach", strict=True, margin=Amount("0", "mm"), relative_margin=0.0)
    assert "◆" in report_text(report(touched)).split("rail:")[0]


def test_workings_show_every_step_and_condition() -> None:
    steps = (
        Step("tyres.rear.width", "input", "", "", "300 mm", "300", "measured", Place("car.design.yaml", 3, 4)),
        Step("room", "Room left", "a - b", "9 mm - 3 mm", "6 mm", "6", "own", Place("cup.ruleset.yaml", 5, 6), True),
    )
    conditions = (part(element="front"), part(element="rear", verdict="open", margin=None, reason="missing: a"))
    closed = ClosedFormResult("a - b", {"a": "1"}, {"a": ("b",)}, ("a > 0",))
    binding = BindingPart("a <= b", "rear", {"fuel": "full"}, "steel tube")
    working = Working("rule", "Title", "3.1", "open", "", binding, conditions, steps, closed, "ask the officials")
    text = workings_text(Workings("Plover", "car.design.yaml", "2027-03-01", (working,), "0"))
    for told in (
        "3.1 rule: Title",
        "1. tyres.rear.width = 300 mm",
        "measured; car.design.yaml:3:4",
        "= a - b",
        "= 9 mm - 3 mm",
        "= 6 mm",
        "outside its range of validity",
        "front: complies; value 1890 mm, at most 1900 mm; margin 10 mm",
        "rear: open; value 1890 mm, at most 1900 mm; missing: a",
        "verdict: open, decided for rear, in state fuel full, on branch steel tube",
        "change with a: 1",
        "on the limit: a = b",
        "where a > 0",
        "caution: ask the officials",
    ):
        assert told in text


def test_many_conditions_are_cut_with_a_count() -> None:
    conditions = tuple(part(element=f"part_{n}") for n in range(20))
    text = workings_text(
        Workings("D", "f", "2027-03-01", (Working("r", "", "", "complies", "", None, conditions, ()),), "0")
    )
    assert "part_11:" in text
    assert "part_12:" not in text
    assert "and 8 more" in text
