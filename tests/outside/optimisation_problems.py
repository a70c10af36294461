"""Published constrained problems, as facts: constraints, bounds, best point and best value.

The sources stand beside each problem. Every figure here was read in the public source named; nothing is from memory.
`margins` are written so that not negative means satisfied. Numbers are text, so that they are exact.
"""

from __future__ import annotations

from dataclasses import dataclass, field

COLLECTION = (
    "W. Hock, K. Schittkowski, Test Examples for Nonlinear Programming Codes, LNEMS 187, Springer 1981; formula, "
    "bounds, best point and value read in the Fortran sources of Schittkowski's collection"
)


@dataclass(frozen=True)
class Problem:
    """One problem. `active` are the constraints that bind at the best point; `bounds` are texts, empty where free."""

    name: str
    source: str
    objective: str
    value: str
    point: dict[str, str]
    margins: dict[str, str]
    active: frozenset[str]
    bounds: dict[str, tuple[str, str]] = field(default_factory=dict)
    derived: dict[str, str] = field(default_factory=dict)
    ranges: dict[str, tuple[str, str, str]] = field(default_factory=dict)


def _point(*values: str) -> dict[str, str]:
    return {f"x{index}": value for index, value in enumerate(values, 1)}


def _bounds(*values: str) -> dict[str, tuple[str, str]]:
    """`2..50` for both, `0..` for one."""
    pairs = [value.split("..") for value in values]
    return {f"x{index}": (low, high) for index, (low, high) in enumerate(pairs, 1)}


def _margins(*texts: str) -> dict[str, str]:
    return {f"g{index}": text for index, text in enumerate(texts, 1)}


def _active(*numbers: int) -> frozenset[str]:
    return frozenset(f"g{number}" for number in numbers)


HS83_U = "85.334407 + 0.0056858*x2*x5 + 0.0006262*x1*x4 - 0.0022053*x3*x5"
HS83_V = "80.51249 + 0.0071317*x2*x5 + 0.0029955*x1*x2 + 0.0021813*x3^2"
HS83_W = "9.300961 + 0.0047026*x3*x5 + 0.0012547*x1*x3 + 0.0019085*x3*x4"
HS104_F = "0.4*x1^0.67*x7^-0.67 + 0.4*x2^0.67*x8^-0.67 + 10 - x1 - x2"

PROBLEMS = (
    Problem(
        "HS21",
        COLLECTION,
        "0.01*x1^2 + x2^2 - 100",
        "-99.96",
        _point("2", "0"),
        _margins("10*x1 - x2 - 10"),
        _active(),
        _bounds("2..50", "-50..50"),
    ),
    Problem(
        "HS24",
        COLLECTION,
        "((x1-3)^2 - 9)*x2^3/(27*sqrt(3))",
        "-1",
        _point("3", "1.7320508075688772"),
        _margins("x1/sqrt(3) - x2", "x1 + sqrt(3)*x2", "6 - x1 - sqrt(3)*x2"),
        _active(1, 3),
        _bounds("0..", "0.."),
    ),
    Problem(
        "HS35",
        COLLECTION,
        "9 - 8*x1 - 6*x2 - 4*x3 + 2*x1^2 + 2*x2^2 + x3^2 + 2*x1*x2 + 2*x1*x3",
        "0.1111111111111111",
        _point("1.3333333333333333", "0.7777777777777778", "0.4444444444444444"),
        _margins("3 - x1 - x2 - 2*x3"),
        _active(1),
        _bounds("0..", "0..", "0.."),
    ),
    Problem(
        "HS36",
        COLLECTION,
        "-x1*x2*x3",
        "-3300",
        _point("20", "11", "15"),
        _margins("72 - x1 - 2*x2 - 2*x3"),
        _active(1),
        _bounds("0..20", "0..11", "0..42"),
    ),
    Problem(
        "HS43",
        COLLECTION,
        "x1^2 + x2^2 + 2*x3^2 + x4^2 - 5*x1 - 5*x2 - 21*x3 + 7*x4",
        "-44",
        _point("0", "1", "2", "-1"),
        _margins(
            "8 - x1^2 - x2^2 - x3^2 - x4^2 - x1 + x2 - x3 + x4",
            "10 - x1^2 - 2*x2^2 - x3^2 - 2*x4^2 + x1 + x4",
            "5 - 2*x1^2 - x2^2 - x3^2 - 2*x1 + x2 + x4",
        ),
        _active(1, 3),
    ),
    Problem(
        "HS44",
        COLLECTION,
        "x1 - x2 - x3 - x1*x3 + x1*x4 + x2*x3 - x2*x4",
        "-15",
        _point("0", "3", "0", "4"),
        _margins(
            "8 - x1 - 2*x2", "12 - 4*x1 - x2", "12 - 3*x1 - 4*x2", "8 - 2*x3 - x4", "8 - x3 - 2*x4", "5 - x3 - x4"
        ),
        _active(3, 5),
        _bounds("0..", "0..", "0..", "0.."),
    ),
    Problem(
        "HS66",
        COLLECTION,
        "0.2*x3 - 0.8*x1",
        "0.518163274159",
        _point("0.184126487951", "1.20216787321", "3.32732232258"),
        _margins("x2 - exp(x1)", "x3 - exp(x2)"),
        _active(1, 2),
        _bounds("0..100", "0..100", "0..10"),
    ),
    Problem(
        "HS71",
        COLLECTION,
        "x1*x4*(x1 + x2 + x3) + x3",
        "17.0140172895",
        _point("1", "4.74299937545", "3.82115032617", "1.37940824585"),
        _margins("x1*x2*x3*x4 - 25"),
        _active(1),
        _bounds("1..5", "1..5", "1..5", "1..5"),
    ),
    Problem(
        "HS76",
        COLLECTION,
        "x1^2 + x3^2 + (x2^2 + x4^2)/2 - x1*x3 + x3*x4 - x1 - 3*x2 + x3 - x4",
        "-4.68181818182",
        _point("0.272727272717", "2.09090909094", "0", "0.545454545496"),
        _margins("5 - x1 - 2*x2 - x3 - x4", "4 - 3*x1 - x2 - 2*x3 + x4", "x2 + 4*x3 - 1.5"),
        _active(1),
        _bounds("0..", "0..", "0..", "0.."),
    ),
    Problem(
        "HS83",
        COLLECTION + "; the best point to sixteen digits in the problem set of the CEC 2006 competition (g04)",
        "5.3578547*x3^2 + 0.8356891*x1*x5 + 37.293239*x1 - 40792.141",
        "-30665.5386717",
        _point("78", "33", "29.9952560256816", "45", "36.77581290578821"),
        _margins("92 - u", "w - 20"),
        _active(1, 2),
        _bounds("78..102", "33..45", "27..45", "27..45", "27..45"),
        {"u": HS83_U, "v": HS83_V, "w": HS83_W},
        {"u_range": ("0", "u", "92"), "v_range": ("90", "v", "110"), "w_range": ("20", "w", "25")},
    ),
    Problem(
        "HS104",
        COLLECTION,
        "objective_itself",
        "3.95116343955",
        _point(
            "6.46511402796",
            "2.23270864907",
            "0.667397491303",
            "0.595756422907",
            "5.93267567811",
            "5.52723456506",
            "1.01332200907",
            "0.400668229166",
        ),
        _margins(
            "1 - 0.0588*x5*x7 - 0.1*x1",
            "1 - 0.0588*x6*x8 - 0.1*x1 - 0.1*x2",
            "1 - (4*x3 + 2*x3^-0.71)/x5 - 0.0588*x3^-1.3*x7",
            "1 - (4*x4 + 2*x4^-0.71)/x6 - 0.0588*x4^-1.3*x8",
            "objective_itself - 1",
            "4.2 - objective_itself",
        ),
        _active(1, 2, 3, 4),
        _bounds(*["0.1..10"] * 8),
        {"objective_itself": HS104_F},
    ),
    Problem(
        "speed reducer",
        "J. Golinski, Journal of Mechanisms 5 (1970) 287-309; T. Ray, AIAA Journal 41 (2003) 556-558",
        "0.7854*x1*x2^2*(3.3333*x3^2 + 14.9334*x3 - 43.0934) - 1.508*x1*(x6^2 + x7^2) + 7.4777*(x6^3 + x7^3)"
        " + 0.7854*(x4*x6^2 + x5*x7^2)",
        "2994.471066247639",
        _point("3.5", "0.7", "17", "7.3", "7.715319912497795", "3.350214666225438", "5.286654465026051"),
        _margins(
            "1 - 27/(x1*x2^2*x3)",
            "1 - 397.5/(x1*x2^2*x3^2)",
            "1 - 1.93*x4^3/(x2*x3*x6^4)",
            "1 - 1.93*x5^3/(x2*x3*x7^4)",
            "1 - sqrt((745*x4/(x2*x3))^2 + 16900000)/(110*x6^3)",
            "1 - sqrt((745*x5/(x2*x3))^2 + 157500000)/(85*x7^3)",
            "1 - x2*x3/40",
            "1 - 5*x2/x1",
            "1 - x1/(12*x2)",
            "1 - (1.5*x6 + 1.9)/x4",
            "1 - (1.1*x7 + 1.9)/x5",
        ),
        _active(5, 6, 8, 11),
        _bounds("2.6..3.6", "0.7..0.8", "17..28", "7.3..8.3", "7.3..8.3", "2.9..3.9", "5..5.5"),
    ),
    Problem(
        "pressure vessel",
        "E. Sandgren, Journal of Mechanical Design 112 (1990) 223-229; B. K. Kannan, S. N. Kramer, the same 116 (1994) "
        "405-411; proof of the optimum: X.-S. Yang and others, IJBIC 5 (2013) 329-335",
        "0.6224*x1*x3*x4 + 1.7781*x2*x3^2 + 3.1661*x1^2*x4 + 19.84*x1^2*x3",
        "6059.714335048436",
        _point("0.8125", "0.4375", "42.09844559585492", "176.63659584243945"),
        _margins("x1 - 0.0193*x3", "x2 - 0.00954*x3", "pi*x3^2*x4 + 4/3*pi*x3^3 - 1296000", "240 - x4"),
        _active(1, 3),
        _bounds("0.0625..6.1875", "0.0625..6.1875", "10..200", "10..200"),
    ),
    Problem(
        "spring",
        "A. D. Belegundu, PhD thesis, University of Iowa 1982; J. S. Arora, Introduction to Optimum Design, 1989",
        "(x3 + 2)*x2*x1^2",
        "0.012665232788377",
        _point("0.051689031917057", "0.356717038149551", "11.289006887322081"),
        _margins(
            "x2^3*x3/(71785*x1^4) - 1",
            "1 - (4*x2^2 - x1*x2)/(12566*(x2*x1^3 - x1^4)) - 1/(5108*x1^2)",
            "140.45*x1/(x2^2*x3) - 1",
            "1 - (x1 + x2)/1.5",
        ),
        _active(1, 2),
        _bounds("0.05..2", "0.25..1.3", "2..15"),
    ),
    Problem(
        "three-bar truss",
        "H. Nowacki 1974; T. Ray, P. Saini, Engineering Optimization 33 (2001) 735-748; closed form ((3+sqrt 3)/6, 1/sqrt 6)",
        "100*(2*sqrt(2)*x1 + x2)",
        "263.8958433764684",
        _point("0.7886751345948128", "0.4082482904638631"),
        _margins(
            "2 - 2*(sqrt(2)*x1 + x2)/(sqrt(2)*x1^2 + 2*x1*x2)",
            "2 - 2*x2/(sqrt(2)*x1^2 + 2*x1*x2)",
            "2 - 2/(x1 + sqrt(2)*x2)",
        ),
        _active(1),
        _bounds("0..1", "0..1"),
    ),
)
