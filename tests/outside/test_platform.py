"""Heights above ground against a rigid rotation, widths and lengths over parts, and typed values that parts contradict.

Derived throughout: plane geometry by numpy, and sums worked by hand. No published figure is used.
"""

from __future__ import annotations

from fractions import Fraction

import numpy as np
import pytest
from writing import as_float, as_fraction, checked, findings, values, write_design, write_figures, write_ruleset

WHEELBASE = 2860.0
POINTS = {"nose": (-820.0, 0.0, 35.0), "floor": (1400.0, 610.0, 0.0), "wing": (3440.0, -850.0, 905.0)}
POINTS |= {"front_foot": (0.0, 0.0, 0.0), "rear_foot": (2860.0, 0.0, 0.0), "centre": (1330.0, 0.0, 310.0)}
RIDES = [(40.0, 60.0), (30.0, 110.0), (75.0, 52.0), (50.0, 50.0)]
WIDTHS = {"front_track": "1600 mm", "rear_track": "1560 mm"}
TYRES = {"front": {"width": "305 mm"}, "rear": {"width": "325 mm"}}


def rotated(point: tuple[float, float, float], front: float, rear: float) -> np.ndarray:
    """A point of the rigid car, turned until its reference plane stands `front` and `rear` above ground.

    The feet of the axle lines on the plane are WHEELBASE apart in the car, so the sine of the turn is the rise over it.
    """
    sine = (rear - front) / WHEELBASE
    cosine = np.sqrt(1 - sine**2)
    turn = np.array([[cosine, 0, -sine], [0, 1, 0], [sine, 0, cosine]])
    return turn @ np.array(point) + np.array([0, 0, front])


def heights(folder, front: float, rear: float) -> dict[str, float]:
    dimensions = {"wheelbase": "2860 mm", "front_ride_height": f"{front} mm", "rear_ride_height": f"{rear} mm"}
    points = {name: " ".join(map(str, place)) + " mm" for name, place in POINTS.items()}
    write_design(folder, dimensions=dimensions, points=points)
    write_ruleset(folder, rules={name: {"require": f"above_ground(points.{name}) >= 0 mm"} for name in POINTS})
    return {name: as_float(finding.value) for name, finding in findings(folder).items()}


@pytest.mark.parametrize(("front", "rear"), RIDES)
def test_heights_against_a_rigid_rotation(tmp_path, front, rear):
    """The shear is the rotation but for z (1 - cos): some thousandths of a mm at usual rake."""
    cosine = np.sqrt(1 - ((rear - front) / WHEELBASE) ** 2)
    for name, height in heights(tmp_path, front, rear).items():
        turned = rotated(POINTS[name], front, rear)
        assert height == pytest.approx(turned[2] + POINTS[name][2] * (1 - cosine), abs=1e-9), name
        assert height == pytest.approx(turned[2], abs=0.4), name


@pytest.mark.parametrize(("front", "rear"), RIDES)
def test_the_shear_at_the_turned_place(tmp_path, front, rear):
    """The rotation also moves x by -z sin: seen from the place to which a point has gone, the height differs by that."""
    sine = (rear - front) / WHEELBASE
    for name, height in heights(tmp_path, front, rear).items():
        x, _, z = POINTS[name]
        turned = rotated(POINTS[name], front, rear)
        assert turned[0] - x == pytest.approx(-z * sine, abs=1.5), name
        over_ground_line = front + sine * turned[0] + z
        assert height - over_ground_line == pytest.approx(z * sine**2, abs=0.05), name


def test_the_sine_term_in_numbers(tmp_path):
    """2 mm at z = 310 mm for 20 mm of rake over 2860 mm, and less than a hundredth of a mm in height."""
    turned = rotated(POINTS["centre"], 40, 60)
    assert POINTS["centre"][0] - turned[0] == pytest.approx(2.2, abs=0.05)
    assert abs(heights(tmp_path, 40, 60)["centre"] - turned[2]) < 0.01


def test_feet_of_the_axle_lines_are_the_ride_heights(tmp_path):
    found = heights(tmp_path, 41.5, 63.25)
    assert (found["front_foot"], found["rear_foot"]) == (41.5, 63.25)


@pytest.mark.parametrize("place", ["-700", "0", "1234.5", "3300"])
def test_a_height_given_from_ground_comes_back(tmp_path, place):
    """Exactly, at any place along the car and for any rake."""
    write_design(
        tmp_path,
        dimensions={"wheelbase": "2860 mm", "front_ride_height": "37 mm", "rear_ride_height": "58 mm"},
        points={"low": {"datum": "ground", "at": f"{place} 0 61.7 mm"}},
    )
    write_ruleset(
        tmp_path,
        rules={
            "ground": {"require": "above_ground(points.low) >= 60 mm"},
            "plane": {"require": "points.low.z >= 0 mm"},
        },
    )
    found = findings(tmp_path)
    assert as_fraction(found["ground"].margin) == Fraction("1.7")
    rise = Fraction(58 - 37) * Fraction(place) / 2860
    assert as_fraction(found["plane"].value) == Fraction("61.7") - 37 - rise


def test_rake_and_its_angle(tmp_path):
    figures = {"platform.rake": "1", "platform.rake_angle": "deg"}
    write_design(
        tmp_path, dimensions={"wheelbase": "2860 mm", "front_ride_height": "30 mm", "rear_ride_height": "110 mm"}
    )
    write_figures(tmp_path, figures)
    found = values(tmp_path, figures)
    assert found["platform.rake"] == pytest.approx(80 / 2860, rel=1e-15)
    assert found["platform.rake_angle"] == pytest.approx(np.degrees(np.arctan2(80, 2860)), rel=1e-14)
    steep = findings(tmp_path, {"dimensions.rear_ride_height": "281 mm"})["platform_rake"]
    assert steep.outside_validity == ("platform.rake",)
    assert findings(tmp_path, {"dimensions.rear_ride_height": "280 mm"})["platform_rake"].outside_validity == ()


@pytest.mark.parametrize(
    ("front_track", "rear_track", "front_width", "rear_width", "over"),
    [(1600, 1560, 305, 325, 1905), (1600, 1600, 305, 325, 1925), (1550, 1580.5, 340, 320, 1900.5)],
)
def test_width_over_tyres(tmp_path, front_track, rear_track, front_width, rear_width, over):
    """Half a tyre stands out beyond the contact centre on each side; the wider axle counts."""
    write_design(
        tmp_path,
        dimensions={"front_track": f"{front_track} mm", "rear_track": f"{rear_track} mm"},
        tyres={"front": {"width": f"{front_width} mm"}, "rear": {"width": f"{rear_width} mm"}},
    )
    write_ruleset(tmp_path, rules={"width": {"require": "platform.width_over_tyres <= 1900 mm"}})
    assert as_fraction(findings(tmp_path)["width"].margin) == 1900 - Fraction(str(over))


def leaning_wheel(camber: float, loaded_radius: float, tread: float, section: float, bulge: float) -> float:
    """How far a right-hand wheel stands out beyond its contact centre: the outermost of the points of a rigid wheel.

    The wheel leans about the line along its contact centre, by numpy's rotation of points, not by a formula of ours.
    Positive camber leans the top outwards, to +y.
    """
    lean = np.radians(camber)
    turn = np.array([[np.cos(lean), np.sin(lean)], [-np.sin(lean), np.cos(lean)]])
    slant = loaded_radius / np.cos(lean)  # the wheel centre stands `loaded_radius` above ground, leaning or not
    side_of_section = turn @ np.array([section / 2, slant])
    return max(side_of_section[0], tread / 2, tread / 2 + bulge)


@pytest.mark.parametrize("camber", [-4.0, -2.5, 0.0, 1.5, 3.0])
@pytest.mark.parametrize(("section", "bulge"), [(318.0, 0.0), (300.0, 0.0), (318.0, 9.5), (345.0, 4.0)])
def test_width_over_sections_with_camber_and_bulge(tmp_path, camber, section, bulge):
    front = {"width": "300 mm", "section_width": f"{section} mm", "bulge": f"{bulge} mm", "loaded_radius": "331 mm"}
    rear = {"width": "330 mm", "section_width": f"{section + 30} mm", "bulge": f"{bulge} mm", "loaded_radius": "343 mm"}
    tyres = {"front": {**front, "camber": f"{camber} deg"}, "rear": {**rear, "camber": f"{camber / 2} deg"}}
    write_design(tmp_path, dimensions=WIDTHS, tyres=tyres, platform={"tyre_width": "section"})
    names = ("width_over_front_tyres", "width_over_rear_tyres", "width_over_tyres")
    figures = {f"platform.{name}": "mm" for name in names}
    write_figures(tmp_path, figures)
    over_front = 1600 + 2 * leaning_wheel(camber, 331, 300, section, bulge)
    over_rear = 1560 + 2 * leaning_wheel(camber / 2, 343, 330, section + 30, bulge)
    found = values(tmp_path, figures)
    assert [found[name] for name in figures] == pytest.approx(
        [over_front, over_rear, max(over_front, over_rear)], rel=1e-13
    )


@pytest.mark.parametrize("left_out", ["section_width", "bulge", "camber", "loaded_radius", "width"])
def test_sections_count_only_where_all_is_given(tmp_path, left_out):
    """Who asks for sections states all of them; nothing is taken for zero."""
    whole = {
        "width": "300 mm",
        "section_width": "318 mm",
        "bulge": "0 mm",
        "loaded_radius": "331 mm",
        "camber": "0 deg",
    }
    tyres = {"front": {key: value for key, value in whole.items() if key != left_out}, "rear": whole}
    rules = {"width": {"require": "platform.width_over_tyres <= 2000 mm"}}
    write_design(tmp_path, dimensions=WIDTHS, tyres=tyres, platform={"tyre_width": "section"})
    write_ruleset(tmp_path, rules=rules)
    assert findings(tmp_path)["width"].verdict == "open"
    assert findings(tmp_path, {"platform.tyre_width": "tread"})["width"].verdict == (
        "open" if left_out == "width" else "complies"
    )


# --- typed values that the car's own parts contradict ----------------------------------------------------------------


def declared(folder, require: str, **parts: object):
    """The one finding and the notes of the report."""
    write_design(folder, **parts)
    write_ruleset(folder, rules={"limit": {"require": require}})
    report = checked(folder)
    return report.rules[0], report.notes, report.verdict


@pytest.mark.parametrize(
    ("typed", "verdict"),
    [("1905 mm", "complies"), ("1906 mm", "complies"), ("1903 mm", "open"), ("1904 mm", "open"), ("1700 mm", "open")],
)
def test_typed_width_below_the_width_over_tyres(tmp_path, typed, verdict):
    """The tyres alone measure 1905 mm: a car typed narrower is not judged, and the report says why."""
    dimensions = {**WIDTHS, "overall_width": typed}
    finding, notes, total = declared(
        tmp_path, "dimensions.overall_width <= 1910 mm", dimensions=dimensions, tyres=TYRES
    )
    assert (finding.verdict, total) == (verdict, verdict)
    said = [note for note in notes if "dimensions.overall_width" in note]
    assert len(said) == (verdict == "open")
    assert all("1905" in note and typed.split()[0] in note for note in said)


def test_a_width_is_judged_while_the_tyres_are_unknown(tmp_path):
    """Nothing known contradicts."""
    finding, notes, _ = declared(
        tmp_path, "dimensions.overall_width <= 1910 mm", dimensions={**WIDTHS, "overall_width": "1700 mm"}
    )
    assert (finding.verdict, as_fraction(finding.margin), notes) == ("complies", 210, ())


def test_wider_tyres_contradict_a_typed_width_in_a_what_if(tmp_path):
    write_design(tmp_path, dimensions={**WIDTHS, "overall_width": "1908 mm"}, tyres=TYRES)
    write_ruleset(tmp_path, rules={"limit": {"require": "dimensions.overall_width <= 1910 mm"}})
    assert findings(tmp_path)["limit"].verdict == "complies"
    assert findings(tmp_path, {"tyres.front.width": "309 mm"})["limit"].verdict == "open"
    assert findings(tmp_path, {"tyres.front.width": "308 mm"})["limit"].verdict == "complies"


LEDGER = {"tub": {"mass": "96.4 kg", "at": "1250 0 310 mm"}, "rest": {"mass": "804 kg", "at": "1500 0 300 mm"}}


@pytest.mark.parametrize(
    ("typed", "verdict"),
    [
        ("900 kg", "complies"),  # 900.4 kg to the kilogram
        ("900.4 kg", "complies"),
        ("900.3 kg", "open"),
        ("900.40 kg", "complies"),
        ("901 kg", "open"),
        ("899 kg", "open"),
        ("899 kg ± 2 kg", "complies"),
        ("899 kg ± 1 kg", "open"),
    ],
)
def test_declared_mass_beside_the_ledger(tmp_path, typed, verdict):
    """The ledger adds up to 900.4 kg; a declared total must say the same, as closely as it is written."""
    finding, notes, _ = declared(tmp_path, "mass.total >= 880 kg", masses=LEDGER, mass={"total": typed})
    assert finding.verdict == verdict
    if verdict == "complies":
        # What is computed from the parts is what counts.
        assert (as_fraction(finding.margin), notes) == (Fraction("20.4"), ())
    else:
        assert len(notes) == 1
        assert "mass.total" in notes[0]
        assert "900.4" in notes[0]


@pytest.mark.parametrize(("typed", "verdict"), [("4660 mm", "complies"), ("4661 mm", "open"), ("4659 mm", "open")])
def test_typed_length_beside_its_parts(tmp_path, typed, verdict):
    dimensions = {"wheelbase": "2860 mm", "front_overhang": "1010 mm", "rear_overhang": "790 mm"}
    finding, notes, _ = declared(
        tmp_path, "dimensions.overall_length <= 4700 mm", dimensions={**dimensions, "overall_length": typed}
    )
    assert (finding.verdict, len(notes)) == (verdict, int(verdict == "open"))
