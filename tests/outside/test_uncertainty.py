"""Uncertainty, conformity and trials against what the guides print, and against a second computation.

Each check says where its numbers come from; "from memory" means that the document was not at hand when it was written,
and that the numbers were recomputed from its formula.
"""

from __future__ import annotations

import math
from fractions import Fraction
from statistics import NormalDist, correlation, mean, stdev

import numpy
import pytest
import uncertainties
from scipy import stats
from small_files import only
from uncertainties import umath

from rulecheck.outcome.spread import SpreadResult
from rulecheck.quantity.quantity import Uncertainty
from rulecheck.studies.conformity import fails, normal_share


def spread_of(formula: str, inputs: dict[str, tuple[str, str]], more: str = "", **options: object) -> SpreadResult:
    """The spread of a formula that is limited to be positive; inputs with their unit and value."""
    declared = ", ".join(f"q.{name}: {{unit: '{unit}', meaning: A quantity}}" for name, (unit, _) in inputs.items())
    stated = ", ".join(f"{name}: {value}" for name, (_, value) in inputs.items())
    rules = f"inputs: {{{declared}}}\nrules:\n  it:\n    scale: {more or '1'}\n    require: >-\n      {formula}\n"
    correlations = options.pop("correlations", "")
    found = only(f"q: {{{stated}}}\n{correlations}", rules, **options)
    assert found.spread is not None, found
    return found.spread


def standard(found: SpreadResult) -> float:
    assert found.measured is not None
    assert found.measured.standard.value is not None
    return found.measured.standard.value


# --- JCGM 100:2008 (GUM) ---------------------------------------------------------------------------------------------


def test_end_gauge_of_annex_h1() -> None:
    """GUM H.1: u(l) = 32 nm. Inputs and result as other programs' tests quote the table; recomputed: 31.66 nm."""
    inputs = {
        "ls": ("nm", "50000623 nm ± 75 nm (k=3)"),
        "d1": ("nm", "215 nm ± 5.8 nm (k=1)"),
        "d2": ("nm", "0 nm ± 3.9 nm (k=1)"),
        "d3": ("nm", "0 nm ± 6.7 nm (k=1)"),
        "alpha": ("1/K", "0.0000115 1/K ± 0.000002 1/K"),
        "theta": ("K", "-0.1 K ± 0.2 K (k=1)"),
        "da": ("1/K", "0 1/K ± 0.000001 1/K"),
        "dt": ("K", "0 K ± 0.05 K"),
    }
    found = spread_of("q.ls + q.d1 + q.d2 + q.d3 - q.ls * (q.da * q.theta + q.alpha * q.dt) >= 0 nm", inputs, "1 nm")
    assert standard(found) == pytest.approx(31.6639, abs=1e-4)
    assert round(standard(found)) == 32
    parts = {item.path: item.contribution.value for item in found.contributors}
    assert parts["q.ls"] == pytest.approx(25)
    assert parts["q.dt"] == pytest.approx(16.599, abs=1e-3)
    assert parts["q.da"] == pytest.approx(2.8868, abs=1e-4)


VOLTS = (5.007, 4.994, 5.005, 4.990, 4.999)
MILLIAMPERES = (19.663, 19.639, 19.640, 19.685, 19.678)
RADIANS = (1.0456, 1.0438, 1.0468, 1.0428, 1.0433)


@pytest.mark.parametrize(
    ("formula", "published"),
    [
        ("q.v / q.i * cos(q.phi) >= 0 V/A", 0.071),
        ("q.v / q.i * sin(q.phi) >= 0 V/A", 0.295),
        ("q.v / q.i >= 0 V/A", 0.236),
    ],
)
def test_correlated_readings_of_annex_h2(formula: str, published: float) -> None:
    """GUM H.2, tables H.2 to H.4: five simultaneous readings; u of R, X, Z as quoted by other programs' tests."""
    columns = {"v": VOLTS, "i": MILLIAMPERES, "phi": RADIANS}
    units = {"v": "V", "i": "mA", "phi": "rad"}
    inputs = {
        name: (units[name], f"{Fraction(str(round(mean(row), 9))).limit_denominator(10**9).__float__():.9f} {units[name]} "
               f"± {stdev(row) / math.sqrt(5):.12f} {units[name]} (k=1)")
        for name, row in columns.items()
    }  # fmt: skip
    pairs = [("v", "i"), ("v", "phi"), ("i", "phi")]
    listed = ", ".join(
        f"{{between: [q.{one}, q.{other}], coefficient: {correlation(columns[one], columns[other]):.12f}}}"
        for one, other in pairs
    )
    found = spread_of(formula, inputs, "1 V/A", correlations=f"correlations: [{listed}]\n")
    assert standard(found) == pytest.approx(published, abs=0.0008)
    jacobian = _slopes_of_h2(formula, *(mean(row) for row in columns.values()))
    rows = numpy.array([VOLTS, MILLIAMPERES, RADIANS])
    own = math.sqrt(float(jacobian @ (numpy.cov(rows) / 5) @ jacobian))
    assert standard(found) == pytest.approx(own, rel=1e-6)


def _slopes_of_h2(formula: str, v: float, i: float, phi: float) -> numpy.ndarray:
    """By hand; i in mA, so that a slope by it is a thousandth."""
    z, by_i = 1e3 / i, -1e3 * v / i**2
    if "cos" in formula:
        return numpy.array([z * math.cos(phi), by_i * math.cos(phi), -z * v * math.sin(phi)])
    if "sin" in formula:
        return numpy.array([z * math.sin(phi), by_i * math.sin(phi), z * v * math.cos(phi)])
    return numpy.array([z, by_i, 0.0])


def test_product_of_section_g4() -> None:
    """GUM G.4.1, from memory: relative standard uncertainties 0.25, 0.57 and 0.82 % of three factors give 1.03 %."""
    inputs = {
        name: ("1", f"1 ± {share} (k=1)") for name, share in zip("abc", ("0.0025", "0.0057", "0.0082"), strict=True)
    }
    assert round(100 * standard(spread_of("q.a * q.b * q.c >= 0", inputs)), 2) == 1.03


def test_voltmeter_of_clause_5_1() -> None:
    """GUM 4.3.7 and 5.1.5, from memory: 12 uV from readings, 15 uV as rectangular bounds: u^2 = 219e-12 V^2."""
    inputs = {"v": ("V", "0.928571 V ± 12 µV (k=1)"), "b": ("V", "0 V ± 15 µV")}
    assert standard(spread_of("q.v + q.b >= 0 V", inputs, "1 V")) ** 2 == pytest.approx(219e-12, rel=1e-9)


@pytest.mark.parametrize(
    ("spread", "published"),
    [
        (Uncertainty(Fraction(240), Fraction(3), "normal"), 80),
        (Uncertainty(Fraction(129), Fraction("2.58"), "normal"), 50),
        (Uncertainty(Fraction("0.40")), 0.23),
        (Uncertainty(Fraction(1), None, "triangular"), 1 / math.sqrt(6)),
    ],
)
def test_stated_widths_of_clause_4_3(spread: Uncertainty, published: float) -> None:
    """GUM 4.3.3, 4.3.4, 4.3.7 and 4.3.9, from memory: 240 ug at three deviations, 129 uohm at 99 %, bounds."""
    assert math.sqrt(spread.variance()) == pytest.approx(published, abs=0.005)


# --- JCGM 101:2008 ---------------------------------------------------------------------------------------------------

FOUR = ("a", "b", "c", "d")


@pytest.mark.parametrize(
    ("width", "half", "tolerance"),
    [("1 (k=1)", 3.92, 0.02), (f"{math.sqrt(3):.12f}", 3.88, 0.02)],
    ids=["normal, 9.2.2", "rectangular, 9.2.3"],
)
def test_sums_of_four_of_clause_9_2(width: str, half: float, tolerance: float) -> None:
    """JCGM 101, 9.2.2 and 9.2.3 (tables 2 and 3 as other programs' tests quote them): u = 2, and the 95 % intervals."""
    inputs = {name: ("1", f"0 ± {width}") for name in FOUR}
    found = spread_of("q.a + q.b + q.c + q.d >= -100", inputs, trials=1_000_000)
    trials = found.trials
    assert trials is not None
    assert trials.low.value is not None
    assert trials.high.value is not None
    assert standard(found) == pytest.approx(2.0, rel=1e-9)
    assert trials.standard.value == pytest.approx(2.0, abs=0.01)
    assert (trials.low.value - 100, trials.high.value - 100) == pytest.approx((-half, half), abs=tolerance)


def test_triangles_and_steps_against_their_own_distribution() -> None:
    """One triangular input: its quantiles are known in closed form (scipy.stats.triang)."""
    inputs = {"a": ("1", "{value: 0, uncertainty: 1, shape: triangular}")}
    trials = spread_of("q.a >= -5", inputs, trials=1_000_000).trials
    assert trials is not None
    low, high = stats.triang(0.5, loc=-1, scale=2).ppf([0.025, 0.975])
    assert (trials.low.value, trials.high.value) == pytest.approx((low + 5, high + 5), abs=0.01)


def test_correlated_draws_have_the_stated_covariance() -> None:
    """The variance of a difference of two correlated normal values, by trials."""
    inputs = {name: ("1", "0 ± 1 (k=1)") for name in "ab"}
    text = "correlations: [{between: [q.a, q.b], coefficient: 0.8}]\n"
    trials = spread_of("q.a - q.b >= -100", inputs, trials=1_000_000, correlations=text).trials
    assert trials is not None
    assert trials.standard.value == pytest.approx(math.sqrt(0.4), rel=0.01)


# --- JCGM 106:2012 and ISO 14253-1 -----------------------------------------------------------------------------------


def test_conformity_of_a_diode() -> None:
    """JCGM 106, 7.3, from memory: -5.47 V with 0.05 V against at most -5.40 V conforms with 0.92."""
    assert 1 - fails([0.07], 0.05) == pytest.approx(0.92, abs=0.005)


def test_conformity_of_an_oil() -> None:
    """JCGM 106, 7.4, from memory: 13.6 with 1.8 between 12.5 and 16.3 conforms with 0.66."""
    assert 1 - fails([16.3 - 13.6, 13.6 - 12.5], 1.8) == pytest.approx(0.66, abs=0.005)


@pytest.mark.parametrize(("share", "deviate"), [(0.80, 0.84), (0.90, 1.28), (0.95, 1.64), (0.99, 2.33), (0.999, 3.09)])
def test_deviates_of_table_1(share: float, deviate: float) -> None:
    """JCGM 106, table 1, from memory; 1.645 is printed as 1.64."""
    assert NormalDist().inv_cdf(share) == pytest.approx(deviate, abs=0.0051)
    assert normal_share(NormalDist().inv_cdf(share)) == pytest.approx(share)


@pytest.mark.parametrize(
    ("room", "verdict"), [("1.7", "complies"), ("1.6", "unproven"), ("-1.6", "unproven"), ("-1.7", "breach")]
)
def test_neither_proved_between_the_zones(room: str, verdict: str) -> None:
    """ISO 14253-1 (2017), from memory: with 95 % conformance probability a one-sided guard band of 1.65 u."""
    rules = (
        "inputs: {q.a: {unit: mm, meaning: A length}}\ndecision: {rule: guarded, coverage: 1.65}\n"
        "rules: {it: {require: q.a >= 0 mm, scale: 1 mm}}\n"
    )
    assert only(f"q: {{a: {room} mm ± 1 mm (k=1)}}\n", rules).verdict == verdict


# --- against a second computation ------------------------------------------------------------------------------------

FORMULAS = (
    ("q.a * q.b - q.c / q.d", lambda a, b, c, d: a * b - c / d),
    ("sqrt(q.a ^ 2 + q.b ^ 2) * exp(-q.c / q.d)", lambda a, b, c, d: numpy.sqrt(a * a + b * b) * numpy.exp(-c / d)),
    ("max(q.a, q.b) + min(q.c, q.d) ^ (2 / 3)", lambda a, b, c, d: max(a, b) + min(c, d) ** (2 / 3)),
    ("sin(q.a) * atan(q.b) + ln(q.c) * tanh(q.d)",
     lambda a, b, c, d: numpy.sin(a) * numpy.arctan(b) + numpy.log(c) * numpy.tanh(d)),
)  # fmt: skip


@pytest.mark.parametrize(("formula", "function"), FORMULAS, ids=[text for text, _ in FORMULAS])
def test_first_order_against_complex_free_differences(formula: str, function) -> None:  # type: ignore[no-untyped-def]
    """The same sum of squares with slopes by central differences in doubles."""
    point, widths = (1.3, 0.7, 2.1, 1.9), (0.02, 0.03, 0.01, 0.05)
    inputs = {name: ("1", f"{value} ± {width} (k=1)") for name, value, width in zip(FOUR, point, widths, strict=True)}
    slopes = []
    for place in range(4):
        ends = []
        for side in (1e-6, -1e-6):
            moved = list(point)
            moved[place] += side
            ends.append(float(function(*moved)))
        slopes.append((ends[0] - ends[1]) / 2e-6)
    own = math.sqrt(sum((slope * width) ** 2 for slope, width in zip(slopes, widths, strict=True)))
    assert standard(spread_of(f"{formula} >= -100", inputs)) == pytest.approx(own, rel=1e-7)


@pytest.mark.parametrize("coefficient", [0.0, 0.6, -0.9])
def test_first_order_against_the_uncertainties_package(coefficient: float) -> None:
    """Two correlated values through the package `uncertainties`, which propagates by automatic derivatives."""
    a, b = uncertainties.correlated_values(
        [1.3, 0.7], [[0.02**2, coefficient * 0.02 * 0.03], [coefficient * 0.02 * 0.03, 0.03**2]]
    )
    c = uncertainties.ufloat(2.1, 0.01)
    own = umath.sqrt(a**2 + b**2) * umath.exp(-c) + a / b
    inputs = {"a": ("1", "1.3 ± 0.02 (k=1)"), "b": ("1", "0.7 ± 0.03 (k=1)"), "c": ("1", "2.1 ± 0.01 (k=1)")}
    listed = f"correlations: [{{between: [q.a, q.b], coefficient: {coefficient}}}]\n"
    found = spread_of("sqrt(q.a ^ 2 + q.b ^ 2) * exp(-q.c) + q.a / q.b >= 0", inputs, correlations=listed)
    assert standard(found) == pytest.approx(own.std_dev, rel=1e-9)


@pytest.mark.parametrize(("formula", "function"), FORMULAS[:3], ids=[text for text, _ in FORMULAS[:3]])
def test_worst_case_against_a_grid(formula: str, function) -> None:  # type: ignore[no-untyped-def]
    """No point of a grid over the tolerances lies below the certified worst case, and one comes close."""
    point, width = (1.3, 0.7, 2.1, 1.9), 0.05
    inputs = {name: ("1", f"{value} +{width}/-{width}") for name, value in zip(FOUR, point, strict=True)}
    found = spread_of(f"{formula} >= -100", inputs)
    assert found.worst_case is not None
    assert found.worst_case.margin is not None
    axes = [numpy.linspace(value - width, value + width, 5) for value in point]
    met = min(float(function(*corner)) + 100 for corner in numpy.stack(numpy.meshgrid(*axes), -1).reshape(-1, 4))
    assert found.worst_case.margin.value is not None
    assert found.worst_case.margin.value <= met + 1e-12
    assert found.worst_case.margin.value == pytest.approx(met, abs=1e-6)
