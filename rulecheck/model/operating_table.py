"""Rows of the core vocabulary that are not of the car itself: operating conditions, a weighing, ballast that is tried."""

from __future__ import annotations

from rulecheck.model.vocabulary import Entry

CONDITIONS = (
    Entry("vehicle.speed", "number", "Speed over ground", unit="km/h"),
    Entry("vehicle.deceleration", "number", "Deceleration, positive while braking", unit="m/s^2"),
    Entry("vehicle.lateral_acceleration", "number", "Lateral acceleration, positive to the right", unit="m/s^2"),
    Entry("vehicle.end_speed", "number", "Speed over ground at the end of the braking", unit="km/h"),
    Entry("vehicle.corner_radius", "number", "Radius of the path, positive to the right", unit="m"),
    Entry("vehicle.grip", "number", "Coefficient of friction, one for all wheels and loads", unit="1"),
    Entry("vehicle.rolling_resistance", "number", "Rolling resistance over load", unit="1"),
    Entry("vehicle.yaw", "number", "Yaw of the car to the air that it meets", unit="deg"),
    Entry("vehicle.roll", "number", "Roll of the car to the ground, right side down positive", unit="deg"),
    Entry("vehicle.grade", "number", "Rise of the road over its level length, positive uphill", unit="%"),
    Entry("air.altitude", "number", "Geopotential altitude", unit="m"),
    Entry("air.temperature", "number", "Temperature of the air", unit="degC"),
    Entry("air.humidity", "number", "Relative humidity", unit="%"),
    Entry("air.wind", "number", "Wind against the direction of travel, positive ahead", unit="m/s"),
)

WEIGHING = (
    Entry("weighing.front_lifted", "number", "Mass on the front scales with the rear axle lifted", unit="kg"),
    Entry("weighing.angle", "number", "Turn of the body from level, rear up positive", unit="deg"),
    Entry("weighing.lift", "number", "Lift of the rear wheel centres", unit="mm"),
)

BALLASTING = (
    Entry("ballasting.mass", "number", "Mass of a piece that is tried", unit="kg"),
    Entry("ballasting.at", "point", "Where that piece is tried", unit="mm"),
    Entry("ballasting.datum", "datum", "What the place is counted from", default="front_axle"),
    Entry("ballasting.front_share_aim", "number", "Front share of the mass that is aimed at", unit="%"),
    *(
        Entry(f"ballasting.{slot}_slot.{name}", kind, f"{meaning} of the {slot} slot", unit=unit, default=default)  # type: ignore[arg-type]
        for slot in ("first", "second")
        for name, kind, meaning, unit, default in (
            ("at", "point", "Place", "mm", ""),
            ("datum", "datum", "What the place is counted from,", "", "front_axle"),
            ("capacity", "number", "Mass that fits into it, capacity", "kg", ""),
        )
    ),
    Entry("ballasting.total_aim", "number", "Total mass that is aimed at", unit="kg"),
)

COMPUTED = (
    Entry("mass.reserve", "number", "Mass that the project keeps beside the growth of the rows", unit="kg"),
    Entry("mass.total", "number", "Declared total mass, beside the ledger", unit="kg", computed=True),
    Entry(
        "platform.tyre_width",
        "choice",
        "What counts in the width over the tyres: treads alone, or loaded sections with camber and bulge",
        choices=("tread", "section"),
        default="tread",
    ),
    Entry("platform.width_over_tyres", "number", "Declared width over the tyres", unit="mm", computed=True),
)
"""What stands beside figures that the car's own parts give."""

LAP = (
    Entry("track", "text", "File of the track that a lap is driven on, beside this file"),
    Entry(
        "vehicle.grip_law",
        "choice",
        "Grip in a lap: one coefficient for all wheels, or each tyre's own law at its load",
        choices=("constant", "load"),
        default="constant",
    ),
    Entry(
        "brakes.distribution_law",
        "choice",
        "How a lap shares the brake force: as brakes.distribution says, or so that both axles use their grip",
        choices=("fixed", "ideal"),
        default="fixed",
    ),
)
