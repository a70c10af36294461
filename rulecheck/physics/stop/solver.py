"""The stop as a solver: what it is handed, in the formula language, and what it gives."""

from __future__ import annotations

from rulecheck.model.solver import Solver, SolverFormula, SolverInput, SolverOutput
from rulecheck.physics.handed import tyre_formulas
from rulecheck.physics.stop.braking import stop

STOP = Solver(
    name="stop",
    meaning="A stop from speed to end speed with no wheel locked, at the grip that each axle has at its load on the way",
    method=(
        "each axle by its own load and grip at every speed; the integral over the speed by Simpson's rule; the bound is "
        "what halving the step changes"
    ),
    caution=(
        "Figures for design comparison: no time of reaction, no rise of pressure, no heat, no rolling resistance are in "
        "them. Brakes need qualified practice, tests on the car, local rules and the approval of the officials."
    ),
    sources={
        "statics": "balance of forces and moments about the contacts with the ground; any textbook of statics",
        "grip": "grip that falls in a straight line with load, as in module tyre; common practice",
        "integral": "distance is the integral of v dv / d, time that of dv / d; any textbook of mechanics",
    },
    formulas=(
        *tyre_formulas("front"),
        *tyre_formulas("rear"),
        SolverFormula(
            "brake_share",
            "50 % if brakes.distribution_law == ideal else brakes.distribution",
            "%",
            "Share of the brake force at the front axle; of no account with the ideal distribution",
            "statics",
        ),
    ),
    inputs=(
        SolverInput("mass", "mass.total", "kg"),
        SolverInput("place", "mass.x", "mm"),
        SolverInput("height", "mass.height", "mm"),
        SolverInput("wheelbase", "dimensions.wheelbase", "mm"),
        SolverInput("front_area", "aero.front_downforce_area", "m^2"),
        SolverInput("rear_area", "aero.rear_downforce_area", "m^2"),
        SolverInput("drag_area", "aero.drag_area", "m^2"),
        SolverInput("density", "air.density", "kg/m^3"),
        SolverInput("speed", "vehicle.speed", "km/h"),
        SolverInput("end_speed", "vehicle.end_speed", "km/h"),
        *(
            SolverInput(f"{axle}_{part}", f"{axle}_{part}", unit)
            for axle in ("front", "rear")
            for part, unit in (("grip", "1"), ("fade", "1"), ("load", "N"))
        ),
        SolverInput("distribution", "brake_share", "%"),
        SolverInput("distribution_law", "brakes.distribution_law"),
    ),
    outputs=(
        SolverOutput("distance", "m", "Distance from speed to end speed", "integral"),
        SolverOutput("time", "s", "Time from speed to end speed", "integral"),
        SolverOutput("deceleration", "m/s^2", "Deceleration at the speed", "statics"),
        SolverOutput("end_deceleration", "m/s^2", "Deceleration at the end speed", "statics"),
        SolverOutput(
            "locks_first", "", "Axle that locks first at the speed; both with the ideal distribution", "statics"
        ),
        SolverOutput("locks_first_at_end", "", "Axle that locks first at the end speed", "statics"),
    ),
    run=stop,
    valid=("abs(air.wind) <= 0 m/s and vehicle.speed >= vehicle.end_speed and vehicle.end_speed >= 0 m/s"),
    traps=(
        "Grip that falls with load makes downforce and mass bring less than in proportion: the closed forms of module "
        "braking, at constant grip, promise a shorter stop to a heavily loaded car.",
        "The distribution that is right at the speed need not be right at the end: compare which axle locks first at both.",
        "The bound is that of the calculation. Reaction, rise of pressure, heat and the road are not in it.",
    ),
)
