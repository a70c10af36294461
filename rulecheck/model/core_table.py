"""The core vocabulary: the source of the design schema and of the handbook page on design files.

Terms of dimensions are those of ISO 612, of masses ISO 1176, of vehicle dynamics ISO 8855 (common practice; clause
numbers are left out, since they differ between editions).
"""

from __future__ import annotations

from rulecheck.model.aero_table import AERO
from rulecheck.model.operating_table import BALLASTING, COMPUTED, CONDITIONS, LAP, WEIGHING
from rulecheck.model.record_table import RECORDS
from rulecheck.model.shape_table import OUTLINES
from rulecheck.model.value_signs import signed
from rulecheck.model.vocabulary import Entry


def _numbers(prefix: str, unit: str, **meanings: str) -> tuple[Entry, ...]:
    return tuple(Entry(f"{prefix}.{name}", "number", meaning, unit=unit) for name, meaning in meanings.items())


DIMENSIONS = (
    Entry("dimensions.wheelbase", "number", "Distance between the axle lines", unit="mm", term="wheelbase (ISO 8855)"),
    Entry("dimensions.front_track", "number", "Distance between the front wheels", unit="mm", term="track (ISO 612)"),
    Entry("dimensions.rear_track", "number", "Distance between the rear wheels", unit="mm", term="track (ISO 612)"),
    Entry("dimensions.overall_length", "number", "Length over everything", unit="mm", term="vehicle length (ISO 612)"),
    Entry("dimensions.overall_width", "number", "Width over everything", unit="mm", term="vehicle width (ISO 612)"),
    Entry("dimensions.overall_height", "number", "Height above ground", unit="mm", term="vehicle height (ISO 612)"),
    Entry(
        "dimensions.front_overhang",
        "number",
        "Foremost point to front axle",
        unit="mm",
        term="front overhang (ISO 612)",
    ),
    Entry(
        "dimensions.rear_overhang", "number", "Rear axle to rearmost point", unit="mm", term="rear overhang (ISO 612)"
    ),
    Entry(
        "dimensions.ground_clearance",
        "number",
        "Lowest point above ground",
        unit="mm",
        term="ground clearance (ISO 612)",
    ),
    *_numbers(
        "dimensions",
        "mm",
        front_ride_height="Reference plane above ground at the front axle line",
        rear_ride_height="Reference plane above ground at the rear axle line",
        steering_wheel_diameter="Diameter of the steering wheel",
    ),
)

OPTIONS = (
    Entry("options.driven_axle", "choice", "Axle that the engine drives", choices=("front", "rear", "both")),
    Entry("options.power_steering", "flag", "Fitted"),
)

MASSES = (
    Entry("masses", "collection", "The ledger: everything that has mass"),
    Entry("masses.*.mass", "number", "Mass of one piece", unit="kg"),
    Entry("masses.*.at", "point", "Centre of gravity of the piece", unit="mm"),
    Entry("masses.*.datum", "datum", "What the place is counted from", default="front_axle"),
    Entry("masses.*.quantity", "number", "How many pieces", unit="1", default="1"),
    Entry("masses.*.mirror", "flag", "A second one stands at -y", default="no"),
    Entry(
        "masses.*.basis",
        "choice",
        "Where the values come from",
        choices=("measured", "weighed", "calculated", "drawing", "supplier", "estimated"),
        default="estimated",
    ),
    Entry(
        "masses.*.maturity",
        "choice",
        "How far the part is designed",
        choices=("concept", "layout", "detail", "released", "made"),
    ),
    Entry(
        "masses.*.growth", "number", "Growth that is still expected, as a share of the mass", unit="%", default="0 %"
    ),
    Entry(
        "masses.*.unsprung",
        "choice",
        "Axle whose unsprung mass it belongs to",
        choices=("front", "rear", "none"),
    ),
    Entry(
        "masses.*.taken_from",
        "choice",
        "Where the mass comes from: the row itself, the fuel in the tank (its place then counts from that of the row), "
        "or what the driver lacks to the reference mass",
        choices=("stated", "tank", "driver_ballast"),
        default="stated",
    ),
    Entry("masses.*.owner", "text", "Who answers for it"),
    Entry("masses.*.group", "text", "Group of the ledger"),
    *(
        Entry(
            f"masses.*.inertia.{axis}",
            "number",
            f"Moment of inertia of one piece about its own {name} axis",
            unit="kg*m^2",
        )
        for axis, name in (("xx", "longitudinal"), ("yy", "transverse"), ("zz", "vertical"))
    ),
)


def _tyre_rows(collection: str) -> tuple[Entry, ...]:
    return (
        *_numbers(
            f"{collection}.*",
            "mm",
            width="Tread width",
            section_width="Greatest width of the inflated tyre",
            diameter="Outer diameter, unloaded",
            loaded_radius="Wheel centre above ground under static load",
            rim_width="Width of the rim between its flanges",
            rim_diameter="Diameter of the rim at the bead seat",
            tread_depth="Depth of the tread",
            growth="Growth of the radius at speed",
        ),
        *_numbers(
            f"{collection}.*",
            "1",
            grip="Coefficient of friction at the load of the data",
            grip_fade="Share of the grip lost while the load doubles from that of the data",
            cornering_factor="Greatest cornering stiffness (per radian) over the load of the data",
            cornering_load_factor="Load of the greatest cornering stiffness over the load of the data",
        ),
        *_numbers(f"{collection}.*", "kN", grip_load="Load of the data", load_rating="Load that the maker allows"),
        *_numbers(f"{collection}.*", "km/h", speed_rating="Speed that the maker allows"),
        *_numbers(
            f"{collection}.*",
            "bar",
            pressure="Inflation pressure",
            least_pressure="Least pressure that the maker allows",
            greatest_pressure="Greatest pressure that the maker allows",
        ),
        *_numbers(
            f"{collection}.*",
            "deg",
            greatest_camber="Greatest camber to either side that the maker allows",
        ),
        Entry(f"{collection}.*.stiffness", "number", "Vertical stiffness", unit="N/mm"),
        Entry(f"{collection}.*.axle", "choice", "Axle that it stands on", choices=("front", "rear")),
        Entry(f"{collection}.*.camber", "number", "Camber at rest, negative where the top leans inwards", unit="deg"),
        Entry(f"{collection}.*.bulge", "number", "How far the loaded sidewall stands out beyond the tread", unit="mm"),
    )


TYRES = (
    Entry("tyres", "collection", "Tyres by axle", items=("front", "rear")),
    *_tyre_rows("tyres"),
    Entry("corners", "collection", "The four wheels", items=("front_left", "front_right", "rear_left", "rear_right")),
    *_tyre_rows("corners"),
    Entry("corners.*.side", "choice", "Side of the car", choices=("left", "right")),
    Entry("corners.*.mass", "number", "What the scale under the wheel shows", unit="kg"),
)

PLACES = (
    Entry("points", "collection", "Named points of the car"),
    Entry("points.*", "point", "A point", unit="mm"),
    Entry("points.*.at", "point", "A point, where it also names a datum", unit="mm"),
    Entry("points.*.datum", "datum", "What the place is counted from", default="front_axle"),
    Entry("datums.*.from", "datum", "What the datum itself is counted from", default="front_axle"),
    Entry("datums.*.at", "point", "Where the datum lies", unit="mm"),
    Entry("edges", "collection", "Edges that people may meet"),
    Entry("edges.*.radius", "number", "Radius of the edge", unit="mm"),
    Entry("edges.*.exposed", "flag", "A person can touch it"),
    Entry("members", "collection", "Members of the structure"),
    Entry("members.*.material", "text", "Grade of the material"),
    *_numbers(
        "members.*",
        "mm",
        outer_diameter="Outer diameter of the tube",
        wall="Wall thickness",
        length="Length between nodes",
        bend_radius="Radius of the bend on the centre line",
    ),
    *_numbers("members.*", "MPa", yield_strength="Yield strength of the material"),
)


def _by_axle(path: str, unit: str, meaning: str, axles: tuple[str, ...] = ("front", "rear")) -> tuple[Entry, ...]:
    before, after = path.split("*")
    return tuple(Entry(f"{before}{axle}{after}", "number", f"{meaning}, {axle}", unit=unit) for axle in axles)


SYSTEMS = (
    *_by_axle("suspension.*.heave_rate", "N/mm", "Rate of the axle in heave at the wheels"),
    *_by_axle("suspension.*.roll_stiffness", "N*m/deg", "Roll stiffness of the axle"),
    *_by_axle("suspension.*.roll_centre_height", "mm", "Roll centre above ground"),
    *_by_axle("suspension.*.travel", "mm", "Usable wheel travel"),
    Entry("brakes.circuits", "number", "Independent hydraulic circuits", unit="1"),
    Entry("brakes.distribution", "number", "Share of the brake force at the front axle", unit="%"),
    Entry("brakes.deceleration", "number", "Mean deceleration reached", unit="m/s^2"),
    *_numbers(
        "brakes",
        "1",
        adhesion_coefficient="Slope of the rule's limit of deceleration against utilisation",
        adhesion_offset="What the rule adds to the deceleration in that limit",
    ),
    *_by_axle("brakes.*.pressure", "bar", "Line pressure of the brakes"),
    *_by_axle("brakes.*.piston_area", "cm^2", "Piston area of one side of the caliper"),
    *_by_axle("brakes.*.pad_friction", "1", "Friction of the pads"),
    *_by_axle("brakes.*.effective_radius", "mm", "Radius at which the pads act"),
    *_by_axle("brakes.*.disc_diameter", "mm", "Diameter of the disc"),
    Entry("powertrain.kind", "choice", "Kind of drive", choices=("combustion", "hybrid", "electric")),
    Entry("powertrain.aspiration", "choice", "How the engine breathes", choices=("natural", "forced")),
    Entry("powertrain.displacement", "number", "Swept volume of the engine", unit="cm^3"),
    Entry("powertrain.cylinders", "number", "Cylinders of the engine", unit="1"),
    Entry("powertrain.power", "number", "Greatest power of the engine", unit="kW"),
    Entry("powertrain.speed", "number", "Engine speed of the operating point", unit="rpm"),
    Entry("powertrain.fuel_flow", "number", "Fuel mass flow at the operating point", unit="kg/h"),
    Entry("powertrain.final_drive", "number", "Ratio of the final drive", unit="1"),
    Entry("powertrain.efficiency", "number", "Efficiency from crank to wheels", unit="%"),
    Entry("powertrain.tank_volume", "number", "Usable volume of the tank", unit="L"),
    Entry("tank.volume", "number", "Volume of fuel in the tank", unit="L"),
    Entry("tank.density", "number", "Density of the fuel", unit="kg/m^3"),
    *(
        Entry(
            f"tank.{axis}",
            "curve",
            f"{axis} of the fuel's centre over its volume, from the place of its row",
            unit="mm",
            over=("L",),
        )
        for axis in "xyz"
    ),
    Entry("recovery.axle", "choice", "Axle on which the machine stands", choices=("front", "rear", "both", "none")),
    Entry("recovery.power", "number", "Power of the machine", unit="kW"),
    Entry("recovery.torque", "number", "Torque of the machine", unit="N*m"),
    Entry("recovery.store", "number", "Usable energy of the store", unit="MJ"),
    Entry("recovery.allowance", "number", "Energy that may be used in one lap", unit="MJ"),
    Entry("recovery.efficiency", "number", "Efficiency from wheel to store", unit="%"),
    *_numbers(
        "recovery",
        "%",
        gear_efficiency="Efficiency from wheel to shaft of the machine",
        machine_efficiency="Efficiency from shaft of the machine to DC bus",
        store_efficiency="Efficiency from DC bus to store",
        front_share="Share of the machines' brake force at the front axle, where both axles have one",
    ),
    *_numbers(
        "recovery",
        "kW",
        power_allowed="Power that the rule allows at its measuring point",
        charging_power="Power that the store takes",
    ),
    Entry("recovery.ratio", "number", "Turns of the machine for one turn of the wheel", unit="1"),
    Entry("recovery.braking_force", "number", "Brake force of the machine at its wheels", unit="kN"),
    Entry("recovery.store_room", "number", "Energy that the store can still take", unit="MJ"),
    Entry("recovery.measuring_point", "choice", "Where power is measured", choices=("wheel", "shaft", "bus")),
    Entry("recovery.voltage", "number", "Greatest voltage of the store", unit="V"),
    Entry("diffuser.width_held", "choice", "What stays when tyres change", choices=("track", "outer")),
    *_numbers(
        "diffuser",
        "mm",
        gap="Gap to the tyre on each side",
        length="Length along the floor",
        inlet_height="Height of the throat",
        width="Width between its side plates",
        width_over_tyres="Width over the rear tyres, where that is held",
    ),
    Entry("diffuser.angle", "number", "Slope of the roof", unit="deg"),
    *_numbers(
        "diffuser",
        "1",
        flare="Outlet width over inlet width",
        efficiency="Pressure recovery over the ideal one",
        base_pressure="Pressure coefficient behind the car",
    ),
)

SAFETY = (
    Entry("driver.mass", "number", "Mass of the driver with all equipment", unit="kg"),
    Entry("driver.reference_mass", "number", "Mass to which a lighter driver is ballasted", unit="kg"),
    Entry("ballast", "collection", "Pieces of ballast"),
    Entry("ballast.*.mass", "number", "Mass of the piece", unit="kg"),
    Entry("ballast.*.at", "point", "Where it is fixed", unit="mm"),
    Entry("ballast.*.datum", "datum", "What the place is counted from", default="front_axle"),
    Entry("ballast.*.sealed", "flag", "Can be sealed by the officials"),
    Entry("safety.extinguisher_charge", "number", "Mass of extinguishing agent", unit="kg"),
    Entry("safety.escape_time", "number", "Time for the driver to leave the car", unit="s"),
    Entry("electrical.system_voltage", "number", "Greatest voltage of the system", unit="V"),
    Entry("electrical.insulation", "number", "Insulation resistance", unit="kohm"),
)

CORE: tuple[Entry, ...] = signed(
    (
        *DIMENSIONS,
        *OPTIONS,
        *MASSES,
        *TYRES,
        *AERO,
        *PLACES,
        *OUTLINES,
        *SYSTEMS,
        *CONDITIONS,
        *WEIGHING,
        *BALLASTING,
        *LAP,
        *SAFETY,
        *RECORDS,
        *COMPUTED,
    )
)
