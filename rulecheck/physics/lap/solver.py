"""The lap as a solver: what it is handed, in the formula language, and what it gives."""

from __future__ import annotations

from rulecheck.model.solver import Solver, SolverFormula, SolverInput, SolverOutput
from rulecheck.physics.handed import LAW, tyre_formulas
from rulecheck.physics.lap.driving import drive

_RECOVERED = ("energy_recovered", "energy_recovered_front", "energy_recovered_rear", "energy_stored")
_STORED = ("energy_stored",)
_WITH_MACHINE = "recovery.axle == {axle} or recovery.axle == both"


def _axle_formulas(axle: str, share: str) -> tuple[SolverFormula, ...]:
    stiffness = "(suspension.front.roll_stiffness + suspension.rear.roll_stiffness - mass.sprung * 1 gn * load_transfer.roll_arm)"
    roll = f"suspension.{axle}.roll_stiffness * mass.sprung * load_transfer.roll_arm / {stiffness}"
    height = f"mass.sprung * ({share}) * suspension.{axle}.roll_centre_height + load_transfer.unsprung_{axle}_moment"
    return (
        *tyre_formulas(axle),
        SolverFormula(
            f"{axle}_transfer", f"0 kg if {LAW} else ({roll} + {height}) / dimensions.{axle}_track", "kg",
            f"Load that moves from the inner to the outer {axle} wheel, over the lateral acceleration", "milliken",
        ),
        SolverFormula(
            f"{axle}_machine_force",
            f"recovery.torque * recovery.ratio / tyres.{axle}.loaded_radius * recovery.machine_efficiency if {_WITH_MACHINE.format(axle=axle)} else 0 N",
            "N", f"Power at the DC bus over speed while the torque of the {axle} machine binds; none where none stands", "chain",
        ),
    )  # fmt: skip


def _output(name: str, unit: str, meaning: str, source: str = "quasi_steady") -> SolverOutput:
    return SolverOutput(name, unit, meaning, source)


LAP = Solver(
    name="lap",
    meaning="A lap of the track that the design names: time, speeds, energies by axle, and the limits that hold it back",
    method=(
        "quasi-steady; each axle by its own load and grip, forward pass under power and backward pass under braking; "
        "the bound is what halving the step changes"
    ),
    caution=(
        "Figures for design comparison: a driver, tyres that warm and wear, kerbs and weather are not in them. Brakes and "
        "high voltage need qualified practice, tests on the car, local rules and the approval of the officials."
    ),
    sources={
        "quasi_steady": (
            "quasi-steady state lap with forward and backward passes; for gradients, banking and vertical curvature "
            "as on a three-dimensional road: G. Perantoni and D. J. N. Limebeer, Optimal control of a Formula One car "
            "on a three-dimensional track, part 1, ASME J. Dyn. Sys. Meas. Control 137 (2015) (from memory)"
        ),
        "chain": "power along the chain from wheel through shaft and DC bus to the store, each efficiency once",
        "grip": "grip that falls in a straight line with load, as in module tyre; common practice",
        "milliken": "W. F. Milliken and D. L. Milliken, Race Car Vehicle Dynamics, SAE 1995, chapter on wheel loads (from memory)",
        "energy": "balance of work: m v dv = (force at the tyres - drag - rolling resistance - weight along the road) ds",
    },
    formulas=(
        *_axle_formulas("front", "1 - load_transfer.sprung_x / dimensions.wheelbase"),
        *_axle_formulas("rear", "load_transfer.sprung_x / dimensions.wheelbase"),
        SolverFormula(
            "brake_share",
            "50 % if brakes.distribution_law == ideal else brakes.distribution",
            "%",
            "Share of the brake force at the front axle; of no account with the ideal distribution",
            "energy",
        ),
        SolverFormula(
            "fuel_flow",
            "0 kg/h if powertrain.kind == electric else powertrain.fuel_flow",
            "kg/h",
            "Fuel mass flow at full power; at less it goes by the power",
            "energy",
        ),
        SolverFormula(
            "store_allowance",
            "recovery.allowance * (recovery.wheel_to_bus if recovery.measuring_point == wheel else (recovery.machine_efficiency if recovery.measuring_point == shaft else 100 %)) * recovery.store_efficiency",
            "MJ",
            "Allowance of energy for one lap, referred to the store",
            "chain",
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
        SolverInput("altitude", "air.altitude", "m"),
        SolverInput("temperature", "air.temperature", "K"),
        SolverInput("rolling", "vehicle.rolling_resistance", "1"),
        SolverInput("power", "performance.wheel_power", "kW"),
        SolverInput("fuel_flow", "fuel_flow", "kg/h"),
        SolverInput("driven", "options.driven_axle"),
        *(
            SolverInput(f"{axle}_{part}", f"{axle}_{part}", unit)
            for axle in ("front", "rear")
            for part, unit in (("grip", "1"), ("fade", "1"), ("load", "N"), ("transfer", "kg"))
        ),
        SolverInput("distribution", "brake_share", "%"),
        SolverInput("distribution_law", "brakes.distribution_law"),
        SolverInput("to_bus", "recovery.wheel_to_bus", "%", _RECOVERED),
        SolverInput("machine", "recovery.machine_power", "kW", _RECOVERED),
        SolverInput("front_force", "front_machine_force", "N", _RECOVERED),
        SolverInput("rear_force", "rear_machine_force", "N", _RECOVERED),
        SolverInput("rule", "recovery.rule_power", "kW", _RECOVERED),
        SolverInput("store_power", "recovery.store_power", "kW", _RECOVERED),
        SolverInput("store_efficiency", "recovery.store_efficiency", "%", _STORED),
        SolverInput("store_room", "recovery.store_room", "MJ", _STORED),
        SolverInput("store_allowance", "store_allowance", "MJ", _STORED),
    ),
    outputs=(
        _output("time", "s", "Time of the lap; of a hill from standing start to finish"),
        _output("distance", "m", "Length of the driven line along the road"),
        _output("average_speed", "km/h", "Length over time"),
        _output("top_speed", "km/h", "Greatest speed"),
        _output("least_speed", "km/h", "Least speed; of a hill the least in its corners"),
        _output("finish_speed", "km/h", "Speed at the finish"),
        _output("fastest_place", "", "Segment of the greatest speed"),
        _output("slowest_place", "", "Segment of the least speed"),
        _output("energy_used", "MJ", "Work of the engine at the driven wheels", "energy"),
        _output("energy_used_front", "MJ", "Part of it at the front axle", "energy"),
        _output("energy_used_rear", "MJ", "Part of it at the rear axle", "energy"),
        _output("energy_braked", "MJ", "Work that the tyres take out while the car brakes", "energy"),
        _output("energy_braked_front", "MJ", "Part of it at the front axle", "energy"),
        _output("energy_braked_rear", "MJ", "Part of it at the rear axle", "energy"),
        _output("energy_lost", "MJ", "Work of drag and rolling resistance", "energy"),
        _output("energy_recovered", "MJ", "Energy at the DC bus from braking", "chain"),
        _output("energy_recovered_front", "MJ", "Part of it from the front axle", "chain"),
        _output("energy_recovered_rear", "MJ", "Part of it from the rear axle", "chain"),
        _output("energy_stored", "MJ", "Part of it that the store takes, held by its room and the allowance", "chain"),
        _output("fuel_used", "kg", "Fuel that is burnt", "energy"),
        _output("time_cornering", "s", "Time at the grip of a corner"),
        _output("time_braking", "s", "Time under braking"),
        _output("time_at_grip", "s", "Time under power at the grip of the driven axle"),
        _output("time_at_power", "s", "Time at the power of the engine"),
        _output("limit", "", "What holds the car back for the longest time"),
    ),
    run=drive,
    valid="abs(air.wind) <= 0 m/s and vehicle.rolling_resistance >= 0",
    drives_track=True,
    traps=(
        "A point mass cannot tell the axles apart; here each axle has its own load and grip, and the one that gives way "
        "first holds the car back.",
        "The bound is that of the calculation. What the model leaves out, a driver, warm tyres, kerbs, is not in it: "
        "compare layouts by the difference of two laps, and not a lap with a stopwatch.",
        "Recovered energy depends on the track: a machine that is held back by its power gains nothing from load, one "
        "that is held back by grip does. Read it beside the limits.",
    ),
)
