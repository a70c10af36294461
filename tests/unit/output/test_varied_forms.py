"""`workings --vary` in its forms: nothing hides, nothing runs in a spreadsheet, nothing breaks the drawing."""

from __future__ import annotations

import csv
import re
import xml.etree.ElementTree as ElementTree
from io import StringIO

from hypothesis import given, settings
from hypothesis import strategies as st

from rulecheck.outcome.results import Amount
from rulecheck.outcome.varied import Axis, Varied, VariedFigure, VariedPoint
from rulecheck.output.csv_table import guarded, varied_csv
from rulecheck.output.screen import Screen
from rulecheck.output.strip import Scale, strip
from rulecheck.output.svg_varied import varied_svg
from rulecheck.output.terminal_varied import varied_text

SVG = "{http://www.w3.org/2000/svg}"


def mm(value: float) -> Amount:
    return Amount(f"{value:g}", "mm", value, f"{value:g}")


def speeds(*values: float) -> Axis:
    return Axis(
        "vehicle.speed", tuple(Amount(f"{value:g}", "km/h", value, f"{value:g}") for value in values), "10 km/h"
    )


def of(*figures: VariedFigure, along: Axis | None = None, curves: Axis | None = None, title: str = "Grebe") -> Varied:
    axis = along or speeds(60, 70, 80)
    return Varied(title, "g.design.yaml", "2027-03-01", axis, curves, figures, (), ("be careful",), "1")


def rule(*margins: float | None) -> VariedFigure:
    points = [
        VariedPoint(None, "open", "missing: gap") if margin is None
        else VariedPoint(mm(margin), "complies" if margin >= 0 else "breach")
        for margin in margins
    ]  # fmt: skip
    return VariedFigure("tunnel", "5.1", "Tunnel", "mm", True, (tuple(points),))


def figure(*points: VariedPoint, unit: str = "mm") -> VariedFigure:
    return VariedFigure("room", "", "Room", unit, False, (points,))


def test_rows_have_number_verdict_and_strip() -> None:
    text = varied_text(of(rule(10, 0, -10)))
    rows = [line for line in text.splitlines() if "km/h  " in line]
    assert [row.split()[:4] for row in rows] == [
        ["60", "km/h", "10", "complies"], ["70", "km/h", "0", "complies"], ["80", "km/h", "-10", "breach"],
    ]  # fmt: skip
    assert [row.index("●") < row.index("┃") for row in (rows[2],)] == [True]
    assert rows[0].index("┃") < rows[0].index("●")
    assert "┃" not in rows[1]
    assert "complies from 60 km/h to 70 km/h; breach at 80 km/h" in text


def test_gaps_say_why() -> None:
    text = varied_text(of(rule(10, None, -10)))
    assert "not known (missing: gap)" in text
    assert re.search(r"70 km/h +open +open", text)
    assert "complies at 60 km/h; open at 70 km/h; breach at 80 km/h" in text


def test_what_is_outside_its_validity_is_marked() -> None:
    varied = of(figure(VariedPoint(mm(1)), VariedPoint(mm(2), outside=True), VariedPoint(mm(3))))
    text = varied_text(varied)
    assert "2!" in text
    assert "! outside the range of validity" in text
    assert "outside its range of validity" in varied_csv(varied)
    rings = ElementTree.fromstring(varied_svg(varied)).findall(f"{SVG}circle")
    assert [ring.get("fill") for ring in rings] == ["#fff"]


def test_what_does_not_move_is_one_line() -> None:
    still = VariedPoint(mm(4))
    assert "  4 mm all along\n" in varied_text(of(figure(still, still, still)))
    assert "  complies, margin 4 mm all along\n" in varied_text(of(rule(4, 4, 4)))


def test_an_encoding_without_boxes_gets_plain_characters() -> None:
    text = varied_text(of(rule(10, 0, -10)), Screen(unicode=False, encoding="ascii"))
    assert text.isascii()
    assert "|" in text
    assert "o" in text


def test_words_are_told_by_their_stretches() -> None:
    words = [VariedPoint(Amount(word, "")) for word in ("grip", "grip", "rule")]
    text = varied_text(of(figure(*words, unit="")))
    assert "grip from 60 km/h to 70 km/h; rule at 80 km/h" in text
    assert "grip from 60 km/h to 70 km/h" in varied_svg(of(figure(*words, unit="")))


def test_csv_has_numbers_and_guards_words() -> None:
    words = figure(VariedPoint(Amount("=1+1", "")), VariedPoint(None, reason="@x"), VariedPoint(Amount("grip", "")))
    rows = list(csv.reader(StringIO(varied_csv(of(rule(10, None, -10), words)))))
    assert rows[0] == [
        "vehicle.speed [km/h]", "tunnel margin [mm]", "tunnel verdict", "tunnel note", "room [mm]", "room note",
    ]  # fmt: skip
    assert rows[1:] == [
        ["60", "10", "complies", "", "'=1+1", ""],
        ["70", "", "open", "missing: gap", "", "'@x"],
        ["80", "-10", "breach", "", "grip", ""],
    ]


@settings(deadline=None)
@given(st.text())
def test_no_text_is_a_formula(text: str) -> None:
    shown = guarded(text)
    assert not shown.lstrip().startswith(("=", "+", "-", "@"))
    assert not set(shown) & set("\t\r\n")


def test_the_drawing_is_told_and_labelled() -> None:
    curves = Axis("gap", (mm(1), mm(2)))
    two = VariedFigure("room", "", "Room", "mm", False, ((VariedPoint(mm(1)),) * 3, (VariedPoint(mm(5)),) * 3))
    root = ElementTree.fromstring(varied_svg(of(two, curves=curves)))
    assert root.get("role") == "img"
    named = root.get("aria-labelledby", "").split()
    assert [root.find(f"*[@id='{name}']") is not None for name in named] == [True, True]
    texts = [text.text for text in root.iter(f"{SVG}text")]
    assert {"vehicle.speed [km/h]", "[mm]", "gap = 1 mm", "gap = 2 mm"} <= set(texts)
    lines = list(root.iter(f"{SVG}polyline"))
    assert len({(line.get("stroke"), line.get("stroke-dasharray")) for line in lines}) == 2
    assert len({line.get("stroke-dasharray") for line in lines}) == 2


def test_a_limit_stands_between_posts() -> None:
    root = ElementTree.fromstring(varied_svg(of(rule(10, 0, -10))))
    posts = [line for line in root.iter(f"{SVG}line") if line.get("stroke-width") == "4"]
    assert len(posts) == 2
    assert any("limit" in (text.text or "") for text in root.iter(f"{SVG}text"))


def test_a_curve_is_broken_where_nothing_is_known() -> None:
    root = ElementTree.fromstring(varied_svg(of(rule(10, 5, None, 0, -10), along=speeds(60, 70, 80, 90, 100))))
    assert len(list(root.iter(f"{SVG}polyline"))) == 2


@settings(deadline=None)
@given(st.text(min_size=1), st.floats(allow_nan=False, allow_infinity=False))
def test_every_drawing_is_well_formed(text: str, value: float) -> None:
    point = VariedPoint(Amount("x", text, value))
    drawn = varied_svg(of(VariedFigure(text, text, text, text, True, ((point,) * 3,)), title=text))
    ElementTree.fromstring(drawn)
    assert "nan" not in drawn
    assert "inf" not in re.sub(r">[^<]*<", "", drawn)


@settings(deadline=None)
@given(st.lists(st.floats(-1e300, 1e300), min_size=1), st.integers(8, 60), st.booleans())
def test_a_marker_stands_on_its_side_of_the_post(values: list[float], length: int, unicode: bool) -> None:
    scale = Scale.over(values, length, limit=0.0)
    assert scale.post is not None
    for value in values:
        drawn = strip(scale, [value], unicode=unicode)
        assert len(drawn) == length
        place = drawn.index("●" if unicode else "o")
        if 0 < scale.post < length - 1:
            assert (place > scale.post) == (value > 0)
            assert (place < scale.post) == (value < 0)
