"""Which inputs of the core vocabulary are more than zero, and which are at least zero.

A length between two things, a mass or a stiffness below zero is a slip of the hand, and one that could mend a rule: a
negative mass lowers a sum that has a maximum. Places, offsets, areas of lift, angles and temperatures have either sign.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import replace

from rulecheck.model.vocabulary import Entry

_TYRE = ("width", "section_width", "diameter", "loaded_radius", "rim_width", "rim_diameter", "stiffness", "grip",
         "grip_load", "cornering_factor", "cornering_load_factor", "load_rating", "speed_rating")  # fmt: skip

MORE_THAN_ZERO = frozenset(
    (
        "dimensions.wheelbase", "dimensions.front_track", "dimensions.rear_track", "dimensions.overall_length",
        "dimensions.overall_width", "dimensions.overall_height", "dimensions.steering_wheel_diameter",
        *(f"{holder}.*.{name}" for holder in ("tyres", "corners") for name in _TYRE),
        "aero.reference_area", "members.*.outer_diameter", "members.*.wall", "members.*.length",
        "suspension.front.heave_rate", "suspension.rear.heave_rate",
        "brakes.front.effective_radius", "brakes.rear.effective_radius",
        "diffuser.length", "diffuser.inlet_height", "platform.width_over_tyres", "mass.total",
    )
)  # fmt: skip
"""Zero here would be a car without wheelbase, a tyre without width."""

AT_LEAST_ZERO = frozenset(
    (
        "masses.*.mass", "masses.*.quantity", "masses.*.inertia.xx", "masses.*.inertia.yy", "masses.*.inertia.zz",
        "ballast.*.mass", "ballasting.mass", "corners.*.mass", "mass.reserve", "weighing.front_lifted",
        "safety.extinguisher_charge", "safety.escape_time", "tyres.*.tread_depth", "corners.*.tread_depth",
        "aero_surfaces.*.span", "aero_surfaces.*.chord", "edges.*.radius", "members.*.bend_radius",
        "suspension.front.roll_stiffness", "suspension.rear.roll_stiffness",
        "suspension.front.travel", "suspension.rear.travel", "brakes.circuits", "brakes.front.pressure",
        "brakes.rear.pressure", "brakes.front.piston_area", "brakes.rear.piston_area", "brakes.front.pad_friction",
        "brakes.rear.pad_friction", "brakes.front.disc_diameter", "brakes.rear.disc_diameter",
        "powertrain.displacement", "powertrain.cylinders", "powertrain.power", "powertrain.fuel_flow",
        "powertrain.efficiency", "powertrain.tank_volume", "recovery.power", "recovery.torque", "recovery.store",
        "recovery.allowance", "recovery.efficiency", "recovery.gear_efficiency", "recovery.machine_efficiency",
        "recovery.store_efficiency", "recovery.power_allowed", "recovery.charging_power", "recovery.store_room",
        "recovery.braking_force", "vehicle.grip", "vehicle.rolling_resistance", "air.humidity",
        "electrical.system_voltage", "electrical.insulation",
    )
)  # fmt: skip
"""Zero is a value here: an empty tank, a machine that gives nothing."""


def signed(entries: Iterable[Entry]) -> tuple[Entry, ...]:
    """The rows, with the sign that each value must have."""
    return tuple(_signed(entry) for entry in entries)


def _signed(entry: Entry) -> Entry:
    if entry.path in MORE_THAN_ZERO:
        return replace(entry, sign="more than 0")
    return replace(entry, sign="0 or more") if entry.path in AT_LEAST_ZERO else entry
