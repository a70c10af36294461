"""Worked examples of textbooks and standards as derived figures, in the units in which they are printed.

Each names its source and its status. They hold the units, the functions and the order of calculation together; the
physics modules have checks of their own. Figures on brakes here are arithmetic of published lines and no approval.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from fractions import Fraction

import pytest
from writing import as_float, as_fraction, findings, write_design, write_ruleset


@dataclass(frozen=True)
class Example:
    """Inputs as written, formulas with their units, and printed figures with the room of their last digit."""

    name: str
    source: str
    inputs: dict[str, str]
    figures: dict[str, tuple[str, str]]
    printed: dict[str, tuple[float, float]]


EXAMPLES = (
    Example(
        "road load",
        "Mannering, Washburn, Kilareski, Principles of Highway Engineering and Traffic Analysis, 4th edition (Wiley 2008), "
        "problem 2.31 with its solution (read)",
        {
            "density": "0.002045 lbf*s^2/ft^4",
            "area": "20 ft^2",
            "speed": "70 mph",
            "weight": "2000 lbf",
            "grade": "5 %",
        },
        {
            "air": ("case.density / 2 * 0.35 * case.area * case.speed^2", "lbf"),
            "rolling": ("0.01 * (1 + case.speed / (147 ft/s)) * case.weight", "lbf"),
            "climbing": ("case.weight * case.grade", "lbf"),
            "total": ("air + rolling + climbing", "lbf"),
        },
        {"air": (75.44, 0.005), "rolling": (33.97, 0.005), "climbing": (100, 0), "total": (209.41, 0.005)},
    ),
    Example(
        "stop of a light truck",
        "T. D. Gillespie, Fundamentals of Vehicle Dynamics (SAE 1992), chapter 3, example 1 (from memory)",
        {"weight": "3635 lbf", "force": "2000 lbf", "speed": "60 mph", "gravity": "32.2 ft/s^2"},
        {
            "deceleration": ("case.force * case.gravity / case.weight", "ft/s^2"),
            "distance": ("case.speed^2 / (2 * deceleration)", "ft"),
            "time": ("case.speed / deceleration", "s"),
            "energy": ("case.weight * case.speed^2 / (2 * case.gravity)", "ft*lbf"),
            "first_power": ("case.force * case.speed", "hp"),
            "mean_power": ("energy / time", "hp"),
        },
        {
            "deceleration": (17.7, 0.05),
            "distance": (218, 0.6),
            "time": (4.97, 0.005),
            "energy": (437_000, 500),
            "first_power": (320, 0.5),
            "mean_power": (160, 0.5),
        },
    ),
    Example(
        "steer angles",
        "Gillespie 1992, chapter 6, example 1 (a): wheelbase over radius (from memory)",
        {"wheelbase": "100.6 in"},
        {f"at_{radius}": (f"case.wheelbase / {radius} ft", "deg") for radius in (500, 200, 100, 50)},
        {"at_500": (0.96, 0.005), "at_200": (2.4, 0.05), "at_100": (4.8, 0.05), "at_50": (9.6, 0.05)},
    ),
    Example(
        "understeer coefficient",
        "J. Y. Wong, Theory of Ground Vehicles, 3rd edition (2001), example 5.1 (a) (from memory)",
        {"weight": "20105 N", "wheelbase": "2.8 m", "front": "38920 N", "rear": "38250 N", "gravity": "9.81 m/s^2"},
        {
            "coefficient": ("53.5 % * case.weight / (2 * case.front) - 46.5 % * case.weight / (2 * case.rear)", "rad"),
            "in_degrees": ("coefficient", "deg"),
            "characteristic_speed": ("sqrt(case.gravity * case.wheelbase / coefficient)", "km/h"),
        },
        {"coefficient": (0.016, 5e-4), "in_degrees": (0.92, 0.005), "characteristic_speed": (149, 0.5)},
    ),
    Example(
        "speed after 50 m",
        "a dynamics problem with its answers, read at a public forum; attributed to Beer and Johnston from memory",
        {"run": "50 m", "gravity": "9.81 m/s^2"},
        {
            "front_drive": ("sqrt(2 * 0.8 * case.gravity * 60 % * case.run)", "km/h"),
            "rear_drive": ("sqrt(2 * 0.8 * case.gravity * 40 % * case.run)", "km/h"),
        },
        {"front_drive": (78.1, 0.05), "rear_drive": (63.8, 0.05)},
    ),
    Example(
        "parking on a grade",
        "R. N. Jazar, Vehicle Dynamics (Springer 2008), chapter 2 (formulas read; angles derived by a moment balance, "
        "since one printed formula contradicts its own premise)",
        {"to_front": "1.2 m", "to_rear": "1.4 m", "height": "0.55 m"},
        {
            "rear_only": ("atan(0.8 * case.to_front / (case.to_front + case.to_rear - 0.8 * case.height))", "deg"),
            "front_only": ("atan(0.8 * case.to_rear / (case.to_front + case.to_rear + 0.8 * case.height))", "deg"),
            "all_wheels": ("atan(0.8)", "deg"),
            "tilting": ("atan(case.to_rear / case.height)", "deg"),
        },
        {
            "rear_only": (23.962, 5e-4),
            "front_only": (20.225, 5e-4),
            "all_wheels": (38.66, 5e-3),
            "tilting": (68.552, 5e-4),
        },
    ),
    Example(
        "steady cornering",
        "point mass with and without downforce (derived, closed form)",
        {"mass": "900 kg", "density": "1.225 kg/m^3", "downforce_area": "3 m^2"},
        {
            "without": ("sqrt(1.5 * 1 gn * 50 m)", "m/s"),
            "share": ("1.5 * case.density * case.downforce_area * 100 m / (2 * case.mass)", "1"),
            "with_downforce": ("sqrt(1.5 * 1 gn * 100 m / (1 - share))", "m/s"),
        },
        {"without": (27.12008, 5e-6), "with_downforce": (46.04733, 5e-6)},
    ),
    Example(
        "load transfer and recovered energy",
        "m a h/t and half the efficiency times m (v1^2 - v2^2) (derived, closed form)",
        {"mass": "1000 kg"},
        {
            "transfer": ("case.mass * 1.2 gn * 400 mm / 1.6 m", "N"),
            "energy": ("60 % * case.mass * ((80 m/s)^2 - (20 m/s)^2) / 2", "kJ"),
        },
        {"transfer": (2941.995, 1e-9), "energy": (1800, 0)},
    ),
)


@pytest.mark.parametrize("example", EXAMPLES, ids=[example.name for example in EXAMPLES])
def test_printed_figures(tmp_path, example):
    units = {name: text.partition(" ")[2] for name, text in example.inputs.items()}
    write_ruleset(
        tmp_path,
        inputs={f"case.{name}": {"unit": unit, "meaning": "Given"} for name, unit in units.items()},
        derived={
            name: {"formula": formula, "unit": unit, "meaning": "Worked out"}
            for name, (formula, unit) in example.figures.items()
        },
        rules={
            f"read_{name}": {"require": f"{name} > 0 {unit}".removesuffix(" 1")}
            for name, (_, unit) in example.figures.items()
        },
    )
    write_design(tmp_path, case=example.inputs)
    found = findings(tmp_path)
    for name, (due, room) in example.printed.items():
        value = found[f"read_{name}"].value
        assert as_float(value) == pytest.approx(due, abs=room, rel=0 if room else 1e-15), name
        assert value.unit == example.figures[name][1]


def test_adhesion_limit_line(tmp_path):
    """z >= 0.1 + 0.85 (k - 0.2) is the same line as k <= (z + 0.07)/0.85: UN R13 Annex 10, as restated in D. A. Crolla
    (ed.), Automotive Engineering (Elsevier 2009), chapter 12.1 (read). The car's margin is exactly none on it."""
    write_ruleset(
        tmp_path,
        inputs={"axle.utilisation": {"unit": "1", "meaning": "k"}, "axle.braking_rate": {"unit": "1", "meaning": "z"}},
        rules={
            "by_rate": {"require": "axle.braking_rate >= 0.1 + 0.85 * (axle.utilisation - 0.2)"},
            "by_utilisation": {"require": "axle.utilisation <= (axle.braking_rate + 0.07) / 0.85"},
        },
    )
    for utilisation, rate in (("0.2", "0.1"), ("0.4", "0.27"), ("0.6", "0.44"), ("0.8", "0.61")):
        write_design(tmp_path, axle={"utilisation": utilisation, "braking_rate": rate})
        for finding in findings(tmp_path).values():
            assert (as_fraction(finding.margin), finding.verdict) == (0, "complies")
        below = str(float(rate) - 0.001)
        assert {f.verdict for f in findings(tmp_path, {"axle.braking_rate": below}).values()} == {"breach"}


def test_rumps_polynomial(tmp_path):
    """S. M. Rump 1988; E. Loh, G. W. Walster, Reliable Computing 8 (2002): exactly -54767/66192 (value read in several
    files, papers from memory). In double precision the same expression comes out near -1.18e21."""
    formula = "333.75*b^6 + a^2*(11*a^2*b^2 - b^6 - 121*b^4 - 2) + 5.5*b^8 + a/(2*b)"
    text = formula.replace("a", "case.a").replace("b", "case.b")
    write_ruleset(
        tmp_path,
        inputs={f"case.{name}": {"unit": "1", "meaning": "Given"} for name in "ab".replace("", " ").split()},
        rules={"value": {"require": text.replace("case.case", "case") + " <= 0"}},
    )
    write_design(tmp_path, case={"a": "77617", "b": "33096"})
    finding = findings(tmp_path)["value"]
    assert as_fraction(finding.value) == Fraction(-54767, 66192)
    assert as_float(finding.value) == pytest.approx(-0.827396059946821368141165095479816292, rel=1e-15)
    a, b = 77617.0, 33096.0
    double = 333.75 * b**6 + a**2 * (11 * a**2 * b**2 - b**6 - 121 * b**4 - 2) + 5.5 * b**8 + a / (2 * b)
    assert abs(double) > 1e20


READINGS = {
    "volts": ("V", [5.007, 4.994, 5.005, 4.990, 4.999]),
    "current": ("mA", [19.663, 19.639, 19.640, 19.685, 19.678]),
    "phase": ("rad", [1.0456, 1.0438, 1.0468, 1.0428, 1.0433]),
}


def test_means_of_five_readings(tmp_path):
    """JCGM 100:2008, annex H.2: readings, and resistance, reactance and impedance at the means (read); standard
    uncertainties of the means 0.0032 V, 0.0095 mA and 0.00075 rad (from memory of table H.2)."""
    mean = {name: f"mean(r.{name} for r in readings)" for name in READINGS}
    impedance = f"{mean['volts']} / {mean['current']}"
    figures = {
        "resistance": (f"{impedance} * cos({mean['phase']})", "ohm"),
        "reactance": (f"{impedance} * sin({mean['phase']})", "ohm"),
        "impedance": (impedance, "ohm"),
    }
    figures |= {
        f"spread_{name}": (f"deviation(r.{name} for r in readings) / sqrt(5)", unit)
        for name, (unit, _) in READINGS.items()
    }
    write_ruleset(
        tmp_path,
        inputs={
            "readings": {
                "kind": "collection",
                "meaning": "Readings",
                "element": {name: {"unit": unit, "meaning": "Reading"} for name, (unit, _) in READINGS.items()},
            }
        },
        derived={name: {"formula": text, "unit": unit, "meaning": "Figure"} for name, (text, unit) in figures.items()},
        rules={f"read_{name}": {"require": f"{name} > 0 {unit}"} for name, (_, unit) in figures.items()},
    )
    write_design(
        tmp_path,
        readings={
            f"reading{index}": {name: f"{given[index]} {unit}" for name, (unit, given) in READINGS.items()}
            for index in range(5)
        },
    )
    found = {name: as_float(finding.value) for name, finding in findings(tmp_path).items()}
    printed = {"resistance": 127.732, "reactance": 219.847, "impedance": 254.260}
    for name, due in printed.items():
        assert found[f"read_{name}"] == pytest.approx(due, abs=6e-4), name
    for name, due, room in (("volts", 0.0032, 5e-5), ("current", 0.0095, 5e-5), ("phase", 0.00075, 5e-6)):
        assert found[f"read_spread_{name}"] == pytest.approx(due, abs=room), name
    assert math.hypot(found["read_resistance"], found["read_reactance"]) == pytest.approx(found["read_impedance"])
