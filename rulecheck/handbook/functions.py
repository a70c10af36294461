"""What each function of the language gives, with an example that runs.

The examples use the car of the page on the language; a test evaluates each of them and holds the result.
"""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Row:
    """One function: how it is written, what it gives, and an example with its result."""

    form: str
    gives: str
    example: str
    result: str

    @property
    def name(self) -> str:
        """The name of the function.

        >>> Row("sqrt(x)", "square root", "sqrt(9)", "3").name
        'sqrt'
        """
        return self.form.partition("(")[0]


FUNCTIONS: tuple[Row, ...] = (
    Row("abs(x)", "magnitude", "abs(3 mm - 5 mm)", "2 mm"),
    Row("sqrt(x)", "square root; its dimension is halved", "sqrt(9 m^2)", "3 m"),
    Row("exp(x)", "exponential function of a pure number", "exp(0)", "1"),
    Row("ln(x)", "natural logarithm of a pure number above zero", "ln(1)", "0"),
    Row("log10(x)", "logarithm to the base 10", "log10(1000)", "3"),
    Row("sin(x)", "sine of an angle", "sin(30 deg)", "0.5"),
    Row("cos(x)", "cosine of an angle", "cos(60 deg)", "0.5"),
    Row("tan(x)", "tangent of an angle", "tan(45 deg)", "1"),
    Row("asin(x)", "angle from its sine, -90 to 90 deg", "asin(0.5)", "30 deg"),
    Row("acos(x)", "angle from its cosine, 0 to 180 deg", "acos(0.5)", "60 deg"),
    Row("atan(x)", "angle from its tangent, -90 to 90 deg", "atan(1)", "45 deg"),
    Row("atan2(y, x)", "angle of a vector, above -180 up to 180 deg", "atan2(1 mm, 1 mm)", "45 deg"),
    Row("sinh(x)", "hyperbolic sine", "sinh(0)", "0"),
    Row("cosh(x)", "hyperbolic cosine", "cosh(0)", "1"),
    Row("tanh(x)", "hyperbolic tangent", "tanh(0)", "0"),
    Row("round(x, step)", "nearest multiple of the step; ties go away from zero", "round(12.5 mm, 1 mm)", "13 mm"),
    Row("floor(x, step)", "next multiple of the step below", "floor(12.5 mm, 1 mm)", "12 mm"),
    Row("ceil(x, step)", "next multiple of the step above", "ceil(12.1 mm, 1 mm)", "13 mm"),
    Row("min(a, b, …)", "least of two or more, or over a collection", "min(t.width for t in tyres)", "290 mm"),
    Row("max(a, b, …)", "greatest of two or more, or over a collection", "max(3 mm, 1 cm)", "10 mm"),
    Row("sum(… for x in c)", "sum over a collection", "sum(t.width for t in tyres)", "600 mm"),
    Row("mean(… for x in c)", "arithmetic mean", "mean(t.width for t in tyres)", "300 mm"),
    Row(
        "deviation(… for x in c)",
        "standard deviation of a sample, with n - 1",
        "deviation(2 * t.width for t in tyres) / sqrt(2)",
        "20 mm",
    ),
    Row("count(for x in c where …)", "how many elements", "count(for t in tyres where t.width >= 300 mm)", "1"),
    Row("share(for x in c where …)", "share of the elements", "share(for t in tyres where t.width >= 300 mm)", "50 %"),
    Row("every(… for x in c)", "yes where all are", "every(t.width > 0 mm for t in tyres)", "yes"),
    Row("some(… for x in c)", "yes where one is", "some(t.width > 400 mm for t in tyres)", "no"),
    Row("peak(s)", "greatest sample of a signal", "peak(signals.brake)", "6 V"),
    Row("longest(condition)", "longest time for which it holds unbroken", "longest(signals.brake > 1.5 V)", "0.8 s"),
    Row("duration(condition)", "how long it holds altogether", "duration(not signals.brake > 5 V)", "0.7 s"),
    Row(
        "rolling_mean(s, window)",
        "mean over the window before each time, where a full window fits the record; a signal",
        "peak(rolling_mean(signals.brake, 500 ms))",
        "4.4 V",
    ),
    Row("integral(s)", "over the record, each sample held up to the next", "integral(signals.brake)", "3 V*s"),
    Row("rising(c)", "yes where each row of a curve is above the one before", "rising(engine.torque)", "no"),
    Row(
        "slope(c, from, to)",
        "every slope of a curve between two keys, to be held against a limit",
        "slope(engine.torque, 2000 rpm, 4000 rpm) >= 0.01 N*m/rpm",
        "yes",
    ),
    Row(
        "over(c, other, from, to)",
        "least height of a curve over another curve or a level, between two keys",
        "over(engine.torque, 250 N*m, 2500 rpm, 6000 rpm)",
        "70 N*m",
    ),
    Row("point(x, y, z)", "a point from the front axle", "point(1 m, 0 m, 2 m).z", "2 m"),
    Row("line(a, b)", "a line without ends", "distance(points.nose, line(points.left, points.right))", "1200 mm"),
    Row("segment(a, b)", "a line with ends", "distance(points.nose, segment(points.left, points.right))", "1200 mm"),
    Row(
        "plane(a, b, c)",
        "a plane; the side from which a, b, c turn anticlockwise is positive",
        "abs(distance(points.nose, plane(points.left, points.right, points.roof)))",
        "1200 mm",
    ),
    Row(
        "distance(p, q)",
        "distance to a point, line, segment or plane; a view may follow: side, plan, front",
        "distance(points.left, points.right)",
        "800 mm",
    ),
    Row(
        "below(p, line(a, b))",
        "room in z under a line, in side view",
        "below(points.left, line(points.nose, points.roof))",
        "800 mm",
    ),
    Row(
        "above(p, line(a, b))",
        "room in z over a line, in side view",
        "above(points.roof, line(points.nose, points.left))",
        "800 mm",
    ),
    Row(
        "angle(line, line or plane)",
        "0 to 90 deg, also in a view; vertical, horizontal and rearward are lines",
        "angle(line(points.left, points.right), vertical)",
        "90 deg",
    ),
    Row(
        "turn_angle(a, b, c)",
        "0 to 180 deg, at b",
        "turn_angle(points.left, points.nose, points.right)",
        "36.8699 deg",
    ),
    Row(
        "depth(p, zone)",
        "signed distance to the border of a zone, or of a hull of points; positive inside; a view may follow a hull",
        "depth(point(400 mm, 0 mm, 0 mm), hull([points.nose, points.left, points.right]), plan)",
        "100 mm",
    ),
    Row(
        "hull([a, b, …])",
        "the least convex body around points, for `depth`: 4 to 12 in space, 3 to 12 in a view",
        "depth(point(480 mm, 0 mm, 300 mm), hull([points.nose, points.left, points.roof]), side)",
        "20 mm",
    ),
    Row(
        "front_area(outlines)", "area of the front outlines together, each spot once", "front_area(outlines)", "1.5 m^2"
    ),
    Row("above_ground(p)", "height above ground in the state", "above_ground(points.nose)", "150 mm"),
    Row(
        "standard_uncertainty(x)",
        "what an input says of its measurement uncertainty, as a standard one; else not known",
        "standard_uncertainty(dimensions.wheelbase)",
        "0.5 mm",
    ),
    Row("present(x)", "yes if stated, no if stated none, else not known", "present(aero_surfaces.rear_wing)", "no"),
    Row("rule(x)", "yes where that rule does not stop the car", "rule(overall_width)", "yes"),
    Row("margin(x)", "the margin of that rule", "margin(overall_width)", "10 mm"),
    Row("end_of_year(day)", "the last day of the year", "end_of_year(2027-03-01)", "2027-12-31"),
    Row("years_between(a, b)", "whole years from one day to another", "years_between(2024-03-01, 2027-02-28)", "2"),
)
