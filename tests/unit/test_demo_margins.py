"""The margins of the demo, worked anew without the engine: by hand, or with the standard library alone.

Sources: plane and solid geometry, moments about the axle lines (statics), the definition of dynamic pressure. The state
of the air at 240 m, 24 degC and 55 % humidity is worked from ISO 2533 and the Magnus formula, coefficients from memory.
"""

from __future__ import annotations

import csv
import math
from collections.abc import Iterator
from datetime import date
from fractions import Fraction
from itertools import pairwise
from pathlib import Path

import pytest

from rulecheck.api import check
from rulecheck.outcome.results import Finding, Report

ROOT = Path(__file__).resolve().parents[2]
DESIGNS = ROOT / "designs_demo"
DAY = date(2027, 3, 1)
WHEELBASE = Fraction(2870)
DATUMS = {"": Fraction(0), "front_axle": Fraction(0), "rear_axle": WHEELBASE, "gearbox_face": WHEELBASE - 310}
Vector = tuple[float, float, float]


def checked(name: str) -> Report:
    return check(DESIGNS / f"{name}.design.yaml", on=DAY)


@pytest.fixture(scope="module")
def base() -> Report:
    return checked("marram-p2")


@pytest.fixture(scope="module")
def front_recovery() -> Report:
    return checked("marram-p2-front-recovery")


def found(report: Report, name: str) -> Finding:
    return next(finding for finding in report.rules if finding.name == name)


def exact(report: Report, name: str) -> tuple[Fraction, str]:
    """The margin of a rule as a rational with its unit."""
    margin = found(report, name).margin
    assert margin is not None
    return Fraction(margin.exact), margin.unit


def near(report: Report, name: str) -> float:
    """The margin of a rule as a double."""
    margin = found(report, name).margin
    assert margin is not None
    assert margin.value is not None
    return margin.value


# --- the ledger, read with the standard library ----------------------------------------------------------------------


def rows() -> Iterator[dict[str, str]]:
    text = (DESIGNS / "marram-parts.csv").read_text(encoding="utf-8")
    yield from csv.DictReader(line for line in text.splitlines() if not line.startswith("#"))


Piece = tuple[Fraction, Fraction, Fraction, Fraction]  # kg, and mm from the front axle and the reference plane


def pieces(moved: dict[str, Piece] | None = None) -> list[Piece]:
    """Mass, x, y and z of each row with all its pieces; `moved` rows take the place of those of the same name."""
    made: list[Piece] = []
    for row in rows():
        if moved and row["item"] in moved:
            made.append(moved[row["item"]])
            continue
        mirrored = row["mirror"] == "yes"
        mass = Fraction(row["mass [kg]"]) * int(row["quantity"] or 1) * (2 if mirrored else 1)
        y = Fraction(0) if mirrored else Fraction(row["y [mm]"])
        made.append((mass, Fraction(row["x [mm]"]) + DATUMS[row["datum"]], y, Fraction(row["z [mm]"])))
    return made


def driver(mass: int) -> Piece:
    return Fraction(mass), Fraction(1130), Fraction(0), Fraction(335)


def fuel(mass: int) -> Piece:
    return Fraction(mass), Fraction(1640), Fraction(0), Fraction(270)


def centre(parts: list[Piece]) -> tuple[Fraction, Fraction, Fraction, Fraction]:
    total = sum(part[0] for part in parts)
    x, y, z = (sum(part[0] * part[axis] for part in parts) / total for axis in (1, 2, 3))
    return Fraction(total), Fraction(x), Fraction(y), Fraction(z)


def test_the_ledger_has_more_than_a_hundred_parts_each_named_once() -> None:
    names = [row["item"] for row in rows()]
    assert len(names) == len(set(names)) > 100


def test_least_mass_is_that_of_the_second_row_of_its_table(base: Report) -> None:
    total = sum(part[0] for part in pieces())
    assert exact(base, "mass_at_any_time") == (total - 918, "kg")


def test_front_share_is_least_with_full_tank_and_no_driver(base: Report) -> None:
    shares = {(f, d): 1 - centre([*pieces(), fuel(f), driver(d)])[1] / WHEELBASE for f in (0, 52) for d in (0, 62, 90)}
    least = min(shares, key=lambda key: min(shares[key] - Fraction(425, 1000), Fraction(1, 2) - shares[key]))
    assert least == (52, 0)
    assert exact(base, "front_mass_share") == ((shares[least] - Fraction(425, 1000)) * 100, "%")
    binding = found(base, "front_mass_share").binding
    assert binding is not None
    assert (binding.state["fuel"], binding.state["driver"]) == ("full", "absent")


def test_height_of_the_centre_of_gravity_counts_from_the_ground(base: Report) -> None:
    heights = []
    for f in (0, 52):
        _, x, _, z = centre([*pieces(), fuel(f), driver(90)])
        heights.append(z + 42 + (58 - 42) * x / WHEELBASE)
    assert exact(base, "mass_height") == (385 - max(heights), "mm")


def test_offset_from_the_centre_plane_is_greatest_in_the_lightest_state(base: Report) -> None:
    offsets = [abs(centre([*pieces(), fuel(f), driver(d)])[2]) for f in (0, 52) for d in (0, 62, 90)]
    assert exact(base, "mass_centred") == (14 - max(offsets), "mm")


def test_front_recovery_moves_the_share_towards_its_upper_limit(front_recovery: Report) -> None:
    tyre = next(row for row in rows() if row["item"] == "rear_tyre")
    moved = {
        "recovery_machine": (Fraction("31.5"), Fraction(40), Fraction(0), Fraction(262)),
        "recovery_gear": (Fraction("4.6"), Fraction(20), Fraction(0), Fraction(280)),
        "rear_tyre": (2 * Fraction("11.1"), WHEELBASE, Fraction(0), Fraction(tyre["z [mm]"])),
    }
    share = 1 - centre([*pieces(moved), fuel(0), driver(90)])[1] / WHEELBASE
    assert exact(front_recovery, "front_mass_share") == ((Fraction(1, 2) - share) * 100, "%")


# --- lengths, tables and ratios, by hand -----------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("rule", "margin", "unit"),
    [
        ("wheelbase", "60", "mm"),  # 2930 - 2870 = 60 is nearer than 2870 - 2740 = 130
        ("overall_width", "16", "mm"),  # 1920 - 1904
        ("front_overhang", "23.2", "mm"),  # 0.36 * 2870 - 1010 = 1033.2 - 1010
        ("track_ratio", "81.3", "mm"),  # 1560 - 0.93 * 1590 = 1560 - 1478.7
        ("tyre_width", "14", "mm"),  # 344 - 330, at the rear
        ("tyre_width_sum", "10", "mm"),  # 640 - (300 + 330)
        ("rim_width", "6", "mm"),  # front: 300 + 14 - 308; rear: 330 + 14 - 336 = 8
        ("diffuser_width", "6", "mm"),  # 1560 - 330 - 2 * 22 - 1180
        ("ballast_sum", "10.5", "kg"),  # 24 - (9 + 4.5)
        ("recovery_power", "7", "kW"),  # 115 - 108: the row of the rear axle
        ("insulation", "44", "kohm"),  # 520 - 0.7 * 680 = 520 - 476
        ("lap_energy", "0.1", "MJ"),  # 0.8 * 3 - 2.3
        ("fuel_flow", "0.7996", "kg/h"),  # (15 + 0.009 * 7600) * (1 - 0.02 * 240 / 800) - 82.1 = 83.4 * 0.994 - 82.1
        ("wing_box", "7", "mm"),  # 905 - 898, both; flap to the rear: 890 - 862 = 28
        ("dive_planes_clear", "18", "mm"),  # 372 - (684 / 2 + 12)
        ("mirror_area", "-4", "cm^2"),  # 101 - 105, dispensed
        ("width_in_hand", "-4", "mm"),  # 16 - 20, advice
        ("roll_hoop", "1766", "day"),  # 2027-03-01 to 2031-12-31
        ("steering_wheel", "-15", "mm"),  # 285 - 300, exempt
    ],
)
def test_margins_worked_by_hand(base: Report, rule: str, margin: str, unit: str) -> None:
    assert exact(base, rule) == (Fraction(margin), unit)


def test_ground_clearance_is_least_at_full_load(base: Report) -> None:
    assert exact(base, "ground_clearance") == (36 + Fraction(44 - 36) * 900 / WHEELBASE - 36, "mm")


def test_helmet_room_below_the_line_between_the_hoops(base: Report) -> None:
    line = 700 + Fraction(990 - 700) * (1300 - 820) / (1480 - 820)
    assert exact(base, "helmet_room") == (line - 852 - 56, "mm")


def test_the_narrower_rear_tyre_gives_its_width_to_the_diffuser(front_recovery: Report) -> None:
    assert exact(front_recovery, "diffuser_width") == (Fraction(1560 - 310 - 44 - 1204), "mm")
    assert exact(front_recovery, "front_release_speed") == (Fraction(5), "km/h")
    assert exact(front_recovery, "recovery_power") == (Fraction(2), "kW")


# --- geometry and air, in double precision ---------------------------------------------------------------------------


def less(a: Vector, b: Vector) -> Vector:
    return a[0] - b[0], a[1] - b[1], a[2] - b[2]


def cross(a: Vector, b: Vector) -> Vector:
    return a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]


def above_plane(p: Vector, a: Vector, b: Vector, c: Vector) -> float:
    normal = cross(less(b, a), less(c, a))
    return sum(n * d for n, d in zip(normal, less(p, a), strict=True)) / math.hypot(*normal)


def test_store_stands_off_the_plane_of_the_sill(base: Report) -> None:
    room = above_plane((1180, -480, 180), (1900, -700, 60), (900, -720, 60), (1400, -690, 320))
    assert near(base, "store_side_room") == pytest.approx(room - 210, rel=1e-9)


def test_knee_stands_off_the_dash(base: Report) -> None:
    room = above_plane((652, 95, 504), (760, 260, 520), (760, -260, 520), (740, 0, 640))
    assert near(base, "knee_room") == pytest.approx(room - 104, rel=1e-9)


def test_exhaust_stands_off_the_tank(base: Report) -> None:
    front, rear, tank = (2870 - 520.0, 240.0, 430.0), (2870 - 100.0, 280.0, 450.0), (1800.0, 100.0, 300.0)
    along = less(rear, front)
    room = math.hypot(*cross(along, less(tank, front))) / math.hypot(*along)
    assert near(base, "exhaust_to_tank") == pytest.approx(room - 120, rel=1e-9)


def test_tank_stands_in_its_bay(base: Report) -> None:
    # 320 - 300 across; in side view 30 below, 40 ahead and behind, 40 above
    slope = math.hypot(160, 140)
    roof = (160 * (470 - 430) - 140 * (1690 - 1700)) / slope
    rear = (160 * (470 - 300) - 140 * (1820 - 1700)) / slope
    assert near(base, "tank_place") == pytest.approx(min(20, 30, 40, roof, rear), rel=1e-9)


def test_bodywork_stays_under_its_profile(base: Report) -> None:
    # 1010 - 995 over the cockpit; the outline goes across all three parts of the zone.
    assert near(base, "profile") == pytest.approx(15, rel=1e-9)


def test_angles_in_side_view(base: Report) -> None:
    assert near(base, "main_hoop_lean") == pytest.approx(12 - math.degrees(math.atan2(75, 870)), rel=1e-9)
    assert near(base, "lap_belt_angle") == pytest.approx(72 - math.degrees(math.atan2(100, 55)), rel=1e-9)
    assert near(base, "shoulder_belt_angle") == pytest.approx(18 - math.degrees(math.atan2(30, 230)), rel=1e-9)


def test_area_of_a_ring_and_height_of_the_outlet(base: Report) -> None:
    ring = math.pi / 4 * (35**2 - 31**2)
    assert near(base, "brace_section") == pytest.approx(ring - 205, rel=1e-9)
    assert near(base, "diffuser_outlet") == pytest.approx(215 - 58 - 640 * math.tan(math.radians(13)), rel=1e-9)


def moist_air() -> float:
    """Density in kg/m^3 at 240 m, 24 degC and 55 % humidity."""
    standard = 288.15 - 0.0065 * 240
    pressure = 101325 * (standard / 288.15) ** (9.80665 / (0.0065 * 287.05287))
    vapour = 0.55 * 610.94 * math.exp(17.625 * 24 / (24 + 243.04))
    return (pressure - vapour) / (287.05287 * 297.15) + vapour / (461.495 * 297.15)


def test_wing_load_in_moist_air(base: Report) -> None:
    load = 0.5 * moist_air() * (300 / 3.6) ** 2 * 0.62 / 1000
    assert near(base, "wing_pylons") == pytest.approx(5.4 - 1.8 * load, rel=1e-6)


DOWNFORCE = [
    (0.92, -420), (0.035, -360), (0.035, -360), (0.11, 60), (1.06, 1240), (0.70, 2870 + 190), (-0.34, 1380),
    (0.10, 2870 + 300), (0.62, 2870 + 590), (0.16, 2870 + 760),
]  # fmt: skip


def test_balance_of_downforce_and_mass(base: Report) -> None:
    place = sum(area * x for area, x in DOWNFORCE) / sum(area for area, _ in DOWNFORCE)
    shares = [float(1 - centre([*pieces(), fuel(f), driver(d)])[1] / WHEELBASE) for f in (0, 52) for d in (62, 90)]
    gap = max(abs(1 - place / 2870 - share) for share in shares)
    assert near(base, "balance_advice") == pytest.approx(5 - 100 * gap, rel=1e-9)


def test_front_load_at_every_speed_against_many_speeds(base: Report) -> None:
    area = sum(area for area, _ in DOWNFORCE)
    front = 1 - sum(area * x for area, x in DOWNFORCE) / area / 2870
    rooms = {}
    for f in (0, 52):
        for d in (62, 90):
            mass, x, _, _ = centre([*pieces(), fuel(f), driver(d)])
            weight = float(mass) * 9.80665
            for speed in range(60, 321):
                pressed = 0.5 * moist_air() * (speed / 3.6) ** 2 * area
                share = (float(1 - x / WHEELBASE) * weight + front * pressed) / (weight + pressed)
                rooms[f, d, speed] = 100 * min(share - 0.42, 0.50 - share)
    worst = min(rooms, key=lambda key: rooms[key])
    assert near(base, "balance_through_speed") == pytest.approx(rooms[worst], rel=1e-6)
    binding = found(base, "balance_through_speed").binding
    assert binding is not None
    assert (binding.at["vehicle.speed"].exact, binding.state["driver"]) == (
        str(worst[2]),
        {62: "light", 90: "heavy"}[worst[1]],
    )


# --- verdicts --------------------------------------------------------------------------------------------------------


def test_the_demo_complies_with_one_dispensation_and_one_advice_left(base: Report) -> None:
    assert base.verdict == "complies"
    assert [finding.name for finding in base.rules if finding.verdict == "dispensed"] == ["mirror_area"]
    assert [finding.name for finding in base.rules if finding.verdict == "not followed"] == ["width_in_hand"]
    assert not [finding.name for finding in base.rules if finding.verdict in ("breach", "open", "unproven")]
    assert {finding.name for finding in base.rules if finding.verdict == "not applicable"} == {
        "words_used", "spare_nose", "front_release_speed", "main_switches", "steering_wheel",
    }  # fmt: skip


def test_the_addendum_replaces_two_rules_and_withdraws_one(base: Report) -> None:
    names = [finding.name for finding in base.rules]
    assert len(names) >= 90
    assert "escape_time" not in names
    assert {found(base, name).clause for name in ("ground_clearance", "fuel_flow")} == {"A.1", "A.2"}
    assert all(len(finding.title) <= 25 for finding in base.rules)


def test_faults_on_purpose_are_found_and_no_others() -> None:
    report = checked("marram-p2-breach")
    assert report.verdict == "breach"
    assert {finding.name for finding in report.rules if finding.verdict == "breach"} == {
        "diffuser_width", "fuel_flow", "main_hoop_steel", "anchor_count", "belt_dates", "roll_hoop",
    }  # fmt: skip
    assert exact(report, "diffuser_width") == (Fraction(1560 - 340 - 44 - 1180), "mm")
    assert exact(report, "anchor_count")[0] == 5 - 6


def test_wet_setting_lifts_the_centre_of_gravity() -> None:
    report = check(DESIGNS / "marram-p2.design.yaml", changes=[DESIGNS / "wet-setup.change.yaml"], on=DAY)
    assert report.verdict == "complies"
    heights = []
    for f in (0, 52):
        _, x, _, z = centre([*pieces(), fuel(f), driver(90)])
        heights.append(z + 47 + (66 - 47) * x / WHEELBASE)
    assert exact(report, "mass_height") == (385 - max(heights), "mm")


def test_homologation_sheet() -> None:
    """20 - 18.6 gn; 61.2 - 60 kN; 3.95 - 98 % of 4 kN; 2870 - (2871 - 2) mm; whole kilograms of the ledger; no change."""
    sheet = checked("marram-p2-homologation")
    due = {
        "nose_impact": (Fraction(14, 10), "gn"),
        "hoop_pull": (Fraction(12, 10), "kN"),
        "rivet_sample": (Fraction(3, 100), "kN"),
        "wheelbase_sheet": (Fraction(1), "mm"),
        "weighed_mass": (Fraction(3), "kg"),
        "hoop_frozen": (Fraction(1, 10), "mm"),
    }
    assert {name: exact(sheet, name) for name in due} == due
    assert {found(sheet, name).verdict for name in due} == {"complies"}


def test_the_pedal_sensors_of_the_addendum() -> None:
    """The longest run of rows that are more than 12 % apart, each held up to the next."""
    with (DESIGNS / "marram-p2-pedal.csv").open(encoding="utf-8") as file:
        rows = [[Fraction(cell) for cell in row] for row in list(csv.reader(file))[2:]]
    longest = run = Fraction(0)
    for (time, left, right), (later, _, _) in pairwise(rows):
        run = run + later - time if abs(left - right) > 12 else Fraction(0)
        longest = max(longest, run)
    report = check(DESIGNS / "marram-p2.design.yaml", rules=[ROOT / "rulesets_demo" / "saltmere.ruleset.yaml"], on=DAY)
    assert longest > 0
    assert exact(report, "pedal_sensors") == (160 - longest * 1000, "ms")
