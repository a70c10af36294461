"""The table of units: what each is in the SI, exactly, and where that is laid down.

Only data stands here. Factors are exact rationals, times a whole power of pi. The radian is 1, as in
the SI, so that torque times angular speed is power. A lone `g` is no unit, since it would be read as
a gram by some and as the acceleration of free fall by others: `gram` and `gn` are the two.
Sources are cited from memory of the editions named; tests hold every row against a second source.
"""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

from rulecheck.quantity.dimension import ACCELERATION, CALENDAR, LENGTH, MASS, PURE, TEMPERATURE, TIME, Dimension

PREFIXES: dict[str, Fraction] = {
    "k": Fraction(10**3),
    "m": Fraction(1, 10**3),
    "c": Fraction(1, 10**2),
    "d": Fraction(1, 10),
    "M": Fraction(10**6),
    "µ": Fraction(1, 10**6),
    "G": Fraction(10**9),
    "n": Fraction(1, 10**9),
    "T": Fraction(10**12),
    "p": Fraction(1, 10**12),
    "h": Fraction(10**2),
    "da": Fraction(10),
}
"""From pico to tera; those beyond make traps (`as`, `Es`) and measure nothing on a car. Likelier ones first."""

SI = tuple(PREFIXES)
_BROCHURE = "SI Brochure, 9th edition (2019)"
_BROCHURE_ACCEPTED = "SI Brochure, 9th edition (2019), table 8"
_YARD_AND_POUND = "international yard and pound agreement (1959)"
_FREE_FALL = Fraction("9.80665")
_POUND = Fraction("0.45359237")
_FOOT = Fraction("0.3048")
_INCH = Fraction("0.0254")


@dataclass(frozen=True, slots=True)
class Row:
    """One unit: SI value = value * factor * pi^power + offset. `prefixes` are those that it takes."""

    symbol: str
    name: str
    dimension: Dimension
    factor: Fraction
    source: str
    prefixes: tuple[str, ...] = ()
    power: int = 0
    offset: Fraction = Fraction(0)


_AREA = LENGTH**2
_VOLUME = LENGTH**3
_SPEED = LENGTH / TIME
_PER_TIME = TIME**-1
_FORCE = MASS * ACCELERATION
_PRESSURE = _FORCE / _AREA
_ENERGY = _FORCE * LENGTH
_POWER = _ENERGY / TIME
_CURRENT = Dimension.of(A=1)
_CHARGE = _CURRENT * TIME
_VOLTAGE = _POWER / _CURRENT
_ONE = Fraction(1)


def _si(symbol: str, name: str, dimension: Dimension) -> Row:
    return Row(symbol, name, dimension, _ONE, _BROCHURE, SI)


UNITS: tuple[Row, ...] = (
    # pure numbers and angles
    Row("1", "one", PURE, _ONE, _BROCHURE),
    Row("%", "per cent", PURE, Fraction(1, 100), "a hundredth"),
    Row("ppm", "parts per million", PURE, Fraction(1, 10**6), "a millionth"),
    _si("rad", "radian", PURE),
    Row("sr", "steradian", PURE, _ONE, _BROCHURE),
    Row("deg", "degree", PURE, Fraction(1, 180), _BROCHURE_ACCEPTED, power=1),
    Row("turn", "turn", PURE, Fraction(2), "2 pi rad", power=1),
    Row("rpm", "turn per minute", _PER_TIME, Fraction(1, 30), "turn/min", power=1),
    # SI base units and named units
    _si("m", "metre", LENGTH),
    Row("gram", "gram", MASS, Fraction(1, 1000), _BROCHURE),
    _si("s", "second", TIME),
    _si("A", "ampere", _CURRENT),
    _si("K", "kelvin", TEMPERATURE),
    _si("mol", "mole", Dimension.of(mol=1)),
    _si("cd", "candela", Dimension.of(cd=1)),
    _si("Hz", "hertz", _PER_TIME),
    _si("N", "newton", _FORCE),
    _si("Pa", "pascal", _PRESSURE),
    _si("J", "joule", _ENERGY),
    _si("W", "watt", _POWER),
    _si("C", "coulomb", _CHARGE),
    _si("V", "volt", _VOLTAGE),
    _si("F", "farad", _CHARGE / _VOLTAGE),
    _si("ohm", "ohm", _VOLTAGE / _CURRENT),
    _si("S", "siemens", _CURRENT / _VOLTAGE),
    _si("Wb", "weber", _VOLTAGE * TIME),
    _si("T", "tesla", _VOLTAGE * TIME / _AREA),
    _si("H", "henry", _VOLTAGE * TIME / _CURRENT),
    _si("lm", "lumen", Dimension.of(cd=1)),
    _si("lx", "lux", Dimension.of(cd=1, m=-2)),
    # time, volume, mass, pressure, energy and charge beside the SI
    Row("min", "minute", TIME, Fraction(60), _BROCHURE_ACCEPTED),
    Row("h", "hour", TIME, Fraction(3600), _BROCHURE_ACCEPTED),
    Row("L", "litre", _VOLUME, Fraction(1, 1000), _BROCHURE_ACCEPTED, ("m", "c", "d")),
    Row("t", "tonne", MASS, Fraction(1000), _BROCHURE_ACCEPTED),
    Row("bar", "bar", _PRESSURE, Fraction(10**5), "SI Brochure, 8th edition (2006), table 8", ("m",)),
    Row("atm", "standard atmosphere", _PRESSURE, Fraction(101325), "10th CGPM (1954), resolution 4"),
    Row("Wh", "watt hour", _ENERGY, Fraction(3600), "watt times hour", ("k", "M")),
    Row("Ah", "ampere hour", _CHARGE, Fraction(3600), "ampere times hour", ("m", "k")),
    # acceleration of free fall, and what rests on it
    Row("gn", "standard acceleration of free fall", ACCELERATION, _FREE_FALL, "3rd CGPM (1901)"),
    Row("kgf", "kilogram-force", _FORCE, _FREE_FALL, "kilogram times gn"),
    Row("PS", "metric horsepower", _POWER, 75 * _FREE_FALL, "75 kgf*m/s, DIN 66036"),
    # inch and pound
    Row("in", "inch", LENGTH, _INCH, _YARD_AND_POUND),
    Row("thou", "thousandth of an inch", LENGTH, _INCH / 1000, _YARD_AND_POUND),
    Row("ft", "foot", LENGTH, _FOOT, _YARD_AND_POUND),
    Row("yd", "yard", LENGTH, 3 * _FOOT, _YARD_AND_POUND),
    Row("mi", "mile", LENGTH, 5280 * _FOOT, _YARD_AND_POUND),
    Row("mph", "mile per hour", _SPEED, 5280 * _FOOT / 3600, _YARD_AND_POUND),
    Row("lb", "pound", MASS, _POUND, _YARD_AND_POUND),
    Row("oz", "ounce", MASS, _POUND / 16, _YARD_AND_POUND),
    Row("lbf", "pound-force", _FORCE, _POUND * _FREE_FALL, "pound times gn"),
    Row("psi", "pound-force per square inch", _PRESSURE, _POUND * _FREE_FALL / _INCH**2, "lbf/in^2"),
    Row("hp", "horsepower", _POWER, 550 * _FOOT * _POUND * _FREE_FALL, "550 ft*lbf/s"),
    Row("gal_us", "gallon (US)", _VOLUME, 231 * _INCH**3, "231 in^3"),
    Row("gal_imp", "gallon (imperial)", _VOLUME, Fraction("0.00454609"), "Weights and Measures Act 1985 (UK)"),
    # temperature with its own zero
    Row("degC", "degree Celsius", TEMPERATURE, _ONE, _BROCHURE, offset=Fraction("273.15")),
    Row(
        "degF",
        "degree Fahrenheit",
        TEMPERATURE,
        Fraction(5, 9),
        "K = (degF + 459.67) / 1.8",
        offset=Fraction("459.67") * 5 / 9,
    ),
    # levels: each is compared with its own kind alone
    Row("dB", "decibel", Dimension.of(dB=1), _ONE, "compared with its own kind alone"),
    Row("dBA", "decibel, A-weighted", Dimension.of(dBA=1), _ONE, "weighting of IEC 61672-1"),
    Row("dBC", "decibel, C-weighted", Dimension.of(dBC=1), _ONE, "weighting of IEC 61672-1"),
    # the calendar: no fixed time
    Row("day", "calendar day", CALENDAR, _ONE, "Gregorian calendar, ISO 8601-1"),
    Row("month", "calendar month", Dimension.of(month=1), _ONE, "Gregorian calendar, ISO 8601-1"),
    Row("year", "calendar year", Dimension.of(month=1), Fraction(12), "Gregorian calendar, ISO 8601-1"),
)

GRAM_PREFIXES = SI
"""`kg`, `mg`, `µg` are units although `g` is none."""

ALIASES: dict[str, str] = {
    "Nm": "N*m",
    "kNm": "kN*m",
    "l": "L",
    "ml": "mL",
    "cl": "cL",
    "dl": "dL",
    "days": "day",
    "months": "month",
    "years": "year",
    **{f"{length}{power}": f"{length}^{power}" for length in ("mm", "cm", "m", "in", "ft") for power in (2, 3, 4)},
}
"""Second spellings: what stands on the right is what is meant, and what is printed."""

ADVICE: dict[str, str] = {
    "g": "write 'gram' for a mass or 'gn' for an acceleration",
    "gal": "write 'gal_us' or 'gal_imp'",
    "gallon": "write 'gal_us' or 'gal_imp'",
    "d": "write 'day'",
    "ton": "write 't' for 1000 kg",
    "mmHg": "write the pressure in 'Pa' or 'bar'",
    "bel": "write 'dB'",
}
"""What to write where a symbol is no unit, and one line is not enough of a spelling to offer."""

SPELLINGS: dict[str, str] = {
    **dict.fromkeys(("kph", "kmh", "kmph", "km/hr", "kilometres"), "km/h"),
    **dict.fromkeys(("mile/h", "mi/hr"), "mph"),
    **dict.fromkeys(("rev/min", "r/min", "min-1"), "rpm"),
    **dict.fromkeys(("rev", "revs", "revolution", "revolutions", "turns"), "turn"),
    **dict.fromkeys(("cc", "ccm", "cu_cm"), "cm^3"),
    **dict.fromkeys(("°", "degree", "degrees", "º"), "deg"),
    **dict.fromkeys(("°C", "ºC", "℃", "celsius", "Celsius"), "degC"),
    **dict.fromkeys(("°F", "ºF", "℉", "fahrenheit", "Fahrenheit"), "degF"),
    **dict.fromkeys(("°K", "kelvin", "Kelvin"), "K"),
    **dict.fromkeys(("percent", "pct", "per_cent"), "%"),
    **dict.fromkeys(("gs", "g0", "g_n", "gee"), "gn"),
    **dict.fromkeys(("grams", "gramme", "grammes", "gr"), "gram"),
    **dict.fromkeys(("kgs", "kilogram", "kilograms", "kilo", "kilos"), "kg"),
    **dict.fromkeys(("tonne", "tonnes"), "t"),
    **dict.fromkeys(("metre", "metres", "meter", "meters", "mtr"), "m"),
    **dict.fromkeys(("millimetre", "millimetres", "millimeter", "millimeters"), "mm"),
    **dict.fromkeys(("inch", "inches", '"', "\u2033"), "in"),
    **dict.fromkeys(("foot", "feet", "'", "\u2032"), "ft"),
    **dict.fromkeys(("yard", "yards"), "yd"),
    **dict.fromkeys(("mile", "miles"), "mi"),
    **dict.fromkeys(("lbs", "lbm", "pound", "pounds", "#"), "lb"),
    **dict.fromkeys(("lbft", "ftlb", "ftlbf", "lb-ft", "ft-lb", "ft.lb"), "ft*lbf"),
    **dict.fromkeys(("bhp", "horsepower"), "hp"),
    **dict.fromkeys(("cv", "ch"), "PS"),
    **dict.fromkeys(("sec", "secs", "second", "seconds"), "s"),
    **dict.fromkeys(("hr", "hrs", "hour", "hours"), "h"),
    **dict.fromkeys(("mins", "minute", "minutes"), "min"),
    **dict.fromkeys(("litre", "litres", "liter", "liters", "ltr"), "L"),
    **dict.fromkeys(("lpm", "L/mn"), "L/min"),
    **dict.fromkeys(("newton", "newtons"), "N"),
    **dict.fromkeys(("kp", "kgF"), "kgf"),
    **dict.fromkeys(("ohms", "Ohm"), "ohm"),
    **dict.fromkeys(("VA", "va"), "V*A"),
    **dict.fromkeys(("dB(A)", "db(A)"), "dBA"),
    **dict.fromkeys(("dB(C)", "db(C)"), "dBC"),
    **dict.fromkeys(("mtr/s", "mps"), "m/s"),
    **dict.fromkeys(("sqm", "sq_m"), "m^2"),
    **dict.fromkeys(("um", "micron", "microns"), "µm"),
    **dict.fromkeys(("us", "usec"), "µs"),
    **dict.fromkeys(("ug",), "µg"),
    **dict.fromkeys(("uF",), "µF"),
    **dict.fromkeys(("uV",), "µV"),
    **dict.fromkeys(("uA",), "µA"),
}
"""Spellings that are refused, and what to write in their place."""

NAMES: tuple[tuple[str, str], ...] = (
    ("1", "pure number"),
    ("m", "length"),
    ("kg", "mass"),
    ("s", "time"),
    ("A", "electric current"),
    ("K", "temperature"),
    ("mol", "amount of substance"),
    ("cd", "luminous intensity"),
    ("m^2", "area"),
    ("m^3", "volume"),
    ("m^4", "second moment of area"),
    ("1/m", "curvature"),
    ("m/s", "speed"),
    ("m/s^2", "acceleration"),
    ("1/s", "frequency or angular speed"),
    ("1/s^2", "angular acceleration"),
    ("N", "force"),
    ("Pa", "pressure or stress"),
    ("J", "energy or torque"),
    ("W", "power"),
    ("N/m", "stiffness"),
    ("N*s", "impulse"),
    ("kg/m", "mass per length"),
    ("kg/m^2", "mass per area"),
    ("kg/m^3", "density"),
    ("kg/s", "mass flow"),
    ("m^3/s", "volume flow"),
    ("kg*m^2", "moment of inertia"),
    ("m^2/s^2", "energy per mass"),
    ("m/s^3", "jerk"),
    ("C", "electric charge"),
    ("V", "voltage"),
    ("ohm", "electric resistance"),
    ("ohm/V", "electric resistance per voltage"),
    ("S", "electric conductance"),
    ("F", "capacitance"),
    ("H", "inductance"),
    ("Wb", "magnetic flux"),
    ("T", "magnetic flux density"),
    ("lx", "illuminance"),
    ("W/K", "thermal conductance"),
    ("W/(m^2*K)", "heat transfer coefficient"),
    ("W/(m*K)", "thermal conductivity"),
    ("J/K", "heat capacity"),
    ("J/(kg*K)", "specific heat capacity"),
    ("day", "calendar days"),
    ("month", "calendar months"),
    ("dB", "level"),
    ("dBA", "A-weighted level"),
    ("dBC", "C-weighted level"),
)
"""The unit in which a dimension is spoken of, and the word for the dimension."""

EXAMPLES: dict[str, str] = {"m": "mm", "m/s": "km/h", "1/s": "rpm", "J": "N*m", "Pa": "bar", "W": "kW"}
"""The unit that an example takes, by the unit in which its dimension is spoken of."""
