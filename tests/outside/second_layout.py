"""Second computations: air, mass, platform, tipping, weighing, ballast and diffuser."""

from __future__ import annotations

import math

import numpy as np
from physics_cars import Mass
from second_computations import DRY_AIR, GRAVITY, Bench, constants, second
from whole_cars import ENDS, SIDES

# --- air --------------------------------------------------------------------------------------------------------------


@second("air.gravity", "air.gas_constant", closely=2e-8)
def of_nature(bench: Bench):
    """The standard's fall, and R* over the molar mass of dry air: 8314.32 and 28.964420 (ISO 2533:1975, from memory)."""
    return constants.g, 8314.32 / 28.964420


@second("air.vapour_gas_constant", closely=1e-4)
def of_vapour(bench: Bench):
    """R over the molar mass of water 18.0153 g/mol; the trade's 461.495 differs in the fifth digit."""
    return constants.R / 18.0153e-3


@second("air.standard_temperature", "air.pressure", "air.standard_density", "air.relative_speed")
def standard_air(bench: Bench):
    kelvin, pascal = bench.standard_temperature, bench.pressure
    return kelvin, pascal, pascal / (DRY_AIR * kelvin), bench.air_speed


@second("air.saturation_pressure", "air.vapour_pressure", "air.density", "air.speed_of_sound")
def moist_air(bench: Bench):
    # Speed of sound: root of 1.4 p/rho in dry air, at any pressure.
    rho = 1e5 / (DRY_AIR * bench["air.temperature"])
    return bench.saturation, bench.vapour, bench.density, math.sqrt(1.4 * 1e5 / rho)


# --- mass -------------------------------------------------------------------------------------------------------------


@second("mass.total", "mass.x", "mass.y", "mass.z", "mass.height", "mass.predicted")
def mass_and_place(bench: Bench):
    pieces = bench.car.masses
    z = np.average([p.z for p in pieces], weights=[p.mass for p in pieces])
    grown = sum(sum(p.mass for p in row.pieces) * (1 + row.growth) for row in bench.car.rows.values())
    return sum(p.mass for p in pieces), bench.centre[0], bench.centre[1], z, bench.centre[2], grown


@second("mass.front", "mass.rear", "mass.front_share")
def axle_masses(bench: Bench):
    front, rear = bench.standing / GRAVITY
    return front, rear, front / (front + rear)


@second("mass.unsprung_front", "mass.unsprung_rear", "mass.sprung")
def sprung_and_unsprung(bench: Bench):
    ends = [sum(p.mass for p in bench.car.masses if p.unsprung == end) for end in ENDS]
    return *ends, bench.body[0]


def four_masses(bench: Bench) -> np.ndarray:
    """Front left, front right, rear left, rear right: force, both moments, and a chassis without preload in warp."""
    half = [bench[f"dimensions.{end}_track"] / 2 for end in ENDS]
    stiff = [bench[f"suspension.{end}.roll_stiffness"] for end in ENDS]
    x, y, _ = bench.centre
    rows = [
        [1, 1, 1, 1],
        [0, 0, bench.wheelbase, bench.wheelbase],
        [-half[0], half[0], -half[1], half[1]],
        # The same angle of roll at both ends: moment over stiffness.
        [-half[0] / stiff[0], half[0] / stiff[0], half[1] / stiff[1], -half[1] / stiff[1]],
    ]
    return np.linalg.solve(rows, bench.car.total * np.array([1, x, y, 0]))


@second("mass.front_left", "mass.front_right", "mass.rear_left", "mass.rear_right", closely=1e-8)
def corner_masses(bench: Bench):
    return four_masses(bench)


@second("mass.front_roll_share")
def roll_share(bench: Bench):
    """Of a moment that turns both springs by one angle."""
    moments = [bench[f"suspension.{end}.roll_stiffness"] * 0.01 for end in ENDS]
    return moments[0] / sum(moments)


@second(*(f"mass.{kind}_{axis}" for kind in ("point_inertia", "inertia") for axis in ("xx", "yy", "zz")))
def inertias(bench: Bench):
    """The diagonal of the tensor of points about the common centre, by the squared distances; and the pieces' own."""
    mass = np.array([p.mass for p in bench.car.masses])
    place = np.array([(p.x, p.y, p.z) for p in bench.car.masses])
    arms = place - np.average(place, axis=0, weights=mass)
    tensor = np.einsum("n,nij->ij", mass, np.einsum("nk,nk->n", arms, arms)[:, None, None] * np.eye(3))
    points = np.diagonal(tensor - np.einsum("n,ni,nj->ij", mass, arms, arms))
    own = sum(len(row.pieces) * np.array(row.inertia) for row in bench.car.rows.values())
    return *points, *(points + own)


# --- platform ---------------------------------------------------------------------------------------------------------


@second("platform.rake", "platform.rake_angle")
def rake(bench: Bench):
    rise = bench["dimensions.rear_ride_height"] - bench["dimensions.front_ride_height"]
    return np.polyfit([0, bench.wheelbase], [0, rise], 1)[0], math.atan2(rise, bench.wheelbase)


@second("platform.width_over_front_tyres", "platform.width_over_rear_tyres", "platform.width_over_tyres")
def widths(bench: Bench):
    """From the outermost edge on the left to the outermost on the right."""
    over = []
    for end in ENDS:
        centres = np.array([-0.5, 0.5]) * bench[f"dimensions.{end}_track"]
        edges = [centre + side * bench.at(end, "width") / 2 for centre in centres for side in (-1, 1)]
        over.append(np.ptp(edges))
    return *over, max(over)


@second("platform.length_over_overhangs")
def length(bench: Bench):
    return bench.wheelbase + bench["dimensions.rear_overhang"] - (-bench["dimensions.front_overhang"])


def compliance(bench: Bench, end: str) -> float:
    """Body over spring over two tyres: the sinking of the body under 1 N by the matrix of both springs."""
    spring, tyres = bench[f"suspension.{end}.heave_rate"], 2 * bench.at(end, "stiffness")
    return float(np.linalg.solve([[spring, -spring], [-spring, spring + tyres]], [1, 0])[0])


def rear_load_at(bench: Bench, front: float, rear: float) -> float:
    """Change of the load of the rear axle from rest with the plane at these heights, in N."""
    given = bench.car.axle_loads(bench.density, bench.air_speed, bench["vehicle.deceleration"], (front, rear))
    return given[1] - bench.standing[1]


@second("platform.front_compliance", "platform.rear_compliance")
def compliances(bench: Bench):
    return [compliance(bench, end) for end in ENDS]


@second("platform.level_rear_load", "platform.front_height_rate", "platform.rear_height_rate", closely=1e-8)
def height_rates(bench: Bench):
    """The load goes in a straight line with the heights: two heights each."""
    level = rear_load_at(bench, 0.0, 0.0)
    return level, rear_load_at(bench, 1.0, 0.0) - level, rear_load_at(bench, 0.0, 1.0) - level


@second("platform.free_front_height", "platform.free_rear_height")
def free_heights(bench: Bench):
    rear = rear_load_at(bench, 0.0, 0.0)
    more = (bench.downforce(bench.air_speed) - rear, rear)
    return [rest(bench, end) - compliance(bench, end) * load for end, load in zip(ENDS, more, strict=True)]


def rest(bench: Bench, end: str) -> float:
    return bench[f"dimensions.{end}_ride_height"] + bench.at(end, "growth")


@second("platform.loaded_front_ride_height", "platform.loaded_rear_ride_height", closely=1e-8)
def loaded_heights(bench: Bench):
    """Let down step by step until springs and loads agree."""
    heights = [rest(bench, end) for end in ENDS]
    for _ in range(200):
        rear = rear_load_at(bench, *heights)
        more = (bench.downforce(bench.air_speed) - rear, rear)
        heights = [rest(bench, end) - compliance(bench, end) * load for end, load in zip(ENDS, more, strict=True)]
    return heights


# --- tipping ----------------------------------------------------------------------------------------------------------


@second("rollover.mean_track", "rollover.static_stability_factor")
def stability_factor(bench: Bench):
    track = np.mean([bench[f"dimensions.{end}_track"] for end in ENDS])
    return track, track / 2 / bench.centre[2]


@second("rollover.half_width", "rollover.threshold", "rollover.tilt_angle", closely=1e-8)
def tipping(bench: Bench):
    """The moment about the line through two contacts, of weight and of side force, by the vector product."""
    x, y, h = bench.centre
    widths, limits = [], []
    for side in (-1, 1):
        feet = [
            np.array([at, side * bench[f"dimensions.{end}_track"] / 2, 0])
            for end, at in zip(ENDS, (0, bench.wheelbase), strict=True)
        ]
        along = feet[1] - feet[0]
        arm = np.array([x, y, h]) - feet[0]
        down, out = (np.dot(np.cross(arm, force), along) for force in ((0, 0, -1), (0, side, 0)))
        limits.append(-down / out)
        widths.append(abs(np.interp(x, [0, bench.wheelbase], [foot[1] for foot in feet]) - y))
    return min(widths), min(limits), math.atan(min(limits))


# --- weighing ---------------------------------------------------------------------------------------------------------


def scales(bench: Bench) -> tuple[np.ndarray, np.ndarray]:
    """What four scales say, and where they stand."""
    said, places = [], []
    for end, x in zip(ENDS, (0.0, bench.wheelbase), strict=True):
        for side, out in zip(SIDES, (-1, 1), strict=True):
            said.append(bench[f"corners.{end}_{side}.mass"])
            places.append((x, out * bench[f"dimensions.{end}_track"] / 2))
    return np.array(said), np.array(places)


@second(
    "weighing.total", "weighing.x", "weighing.y", "weighing.front_share", "weighing.left_share", "weighing.cross_share"
)
def from_scales(bench: Bench):
    said, places = scales(bench)
    x, y = np.average(places, axis=0, weights=said)
    total = said.sum()
    return total, x, y, said[:2].sum() / total, said[[0, 2]].sum() / total, said[[1, 2]].sum() / total


def turned(bench: Bench, angle: float) -> np.ndarray:
    """Wheel centres and the centre of gravity on the ground line, of a body turned rear up, as a matrix of points."""
    said, places = scales(bench)
    x = np.average(places[:, 0], weights=said)
    turn = np.array([[math.cos(angle), -math.sin(angle)], [math.sin(angle), math.cos(angle)]])
    radii = [bench.at(end, "loaded_radius") for end in ENDS]
    return turn @ np.array([[0, bench.wheelbase, x], [*radii, 0]])


def height_of(bench: Bench, angle: float) -> float:
    """The height at which the scales, once lifted, agree: share on the front wheels by places along the ground."""
    points = turned(bench, angle)
    share = bench["weighing.front_lifted"] / scales(bench)[0].sum()
    centre = points[0, 1] - share * (points[0, 1] - points[0, 0])
    # A unit higher in the body moves the place forward by the sine.
    return float((points[0, 2] - centre) / math.sin(angle))


@second("weighing.lift_angle")
def angle_of_lift(bench: Bench):
    """Rear wheel centre lifted against the front one, found by halving."""
    low, high = 0.0, 1.2
    for _ in range(80):
        middle = (low + high) / 2
        points = turned(bench, middle)
        lifted = points[1, 1] - points[1, 0] - (bench.at("rear", "loaded_radius") - bench.at("front", "loaded_radius"))
        low, high = (middle, high) if lifted < bench["weighing.lift"] else (low, middle)
    return low


@second("weighing.height", "weighing.height_from_lift", closely=1e-8)
def heights_from_lift(bench: Bench):
    return height_of(bench, bench["weighing.angle"]), height_of(bench, angle_of_lift(bench))


# --- ballast ----------------------------------------------------------------------------------------------------------


def with_piece(bench: Bench, mass: float, place: tuple[float, float, float]) -> np.ndarray:
    """Centre of gravity of all pieces and one more, x, y, z."""
    pieces = [*bench.car.masses, Mass(mass, *place)]
    return np.average([(p.x, p.y, p.z) for p in pieces], axis=0, weights=[p.mass for p in pieces])


@second(*(f"ballasting.{name}" for name in ("shift", "shift_right", "shift_up", "total", "front_share")), closely=1e-7)
def a_piece(bench: Bench):
    piece = bench["ballasting.mass"]
    after = with_piece(bench, piece, bench.car.piece)
    before = with_piece(bench, 0.0, bench.car.piece)
    return *(after - before), bench.car.total + piece, 1 - after[0] / bench.wheelbase


def root_of_line(function, low: float, high: float) -> float:
    """Where a function that goes in a straight line is nothing."""
    one, other = function(low), function(high)
    return low - one * (high - low) / (other - one)


@second("ballasting.mass_for_share", "ballasting.place_for_share", "ballasting.mass_for_total", closely=1e-7)
def ballast_wanted(bench: Bench):
    """The moment about the place aimed at is nothing: it goes in a straight line with the mass, and with the place."""
    aim = bench.wheelbase * (1 - bench["ballasting.front_share_aim"])

    def moment(mass: float, x: float) -> float:
        return sum(p.mass * (p.x - aim) for p in bench.car.masses) + mass * (x - aim)

    mass = root_of_line(lambda m: moment(m, bench.car.piece[0]), 0.0, 100.0)
    place = root_of_line(lambda x: moment(bench["ballasting.mass"], x), -5.0, 5.0)
    return mass, place, max(bench["ballasting.total_aim"] - bench.car.total, 0)


# --- diffuser ---------------------------------------------------------------------------------------------------------


@second(
    *(
        f"diffuser.{name}"
        for name in ("outer_width", "track", "width_between_tyres", "width_between_sidewalls", "width_room")
    )
)
def between_the_tyres(bench: Bench):
    """Tyres as stretches across the car; what lies between the inner edges, with the gaps taken off."""
    tread, wall = bench.at("rear", "width"), bench.at("rear", "section_width")
    held = bench.choice("diffuser.width_held")
    outer = bench["diffuser.width_over_tyres"] / 2 if held == "outer" else (bench["dimensions.rear_track"] + tread) / 2
    middle = outer - tread / 2
    gap = bench["diffuser.gap"]
    room = [2 * (middle - width / 2 - gap) for width in (tread, wall)]
    return 2 * outer, 2 * middle, *room, room[0] - bench["diffuser.width"]


@second(*(f"diffuser.{name}" for name in ("area_ratio", "ideal_recovery", "recovery", "inlet_pressure")))
def pressure_recovered(bench: Bench):
    """Heights of inlet and outlet, speeds from areas, pressures from Bernoulli (Sovran and Klomp 1967, from memory)."""
    inlet = bench["diffuser.inlet_height"]
    outlet = inlet + bench["diffuser.length"] * math.sin(bench["diffuser.angle"]) / math.cos(bench["diffuser.angle"])
    ratio = outlet * bench["diffuser.flare"] / inlet
    # One unit of dynamic pressure at the inlet: what is left of it at the outlet.
    ideal = 1 - (1 / ratio) ** 2
    real = bench["diffuser.efficiency"] * ideal
    # Cp2 = base; Cp2 - Cp1 = real (1 - Cp1): solved for Cp1.
    inlet_pressure = np.linalg.solve([[1 - real]], [bench["diffuser.base_pressure"] - real])[0]
    return ratio, ideal, real, inlet_pressure
