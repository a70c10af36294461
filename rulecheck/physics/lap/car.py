"""The car as the lap is handed it, in SI units."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from rulecheck.model.solver import Argument
from rulecheck.physics.handed import number

GRAVITY = 9.80665


@dataclass(frozen=True, slots=True)
class Tyre:
    """The grip of an axle: `grip` at `load` of one wheel, of which `fade` is lost while the load doubles; `transfer` in
    kg is the load that moves from the inner to the outer wheel over the lateral acceleration."""

    grip: float
    fade: float
    load: float
    transfer: float


@dataclass(frozen=True, slots=True)
class Car:
    """What drives round: mass in kg, places in m, areas in m², powers in W."""

    mass: float
    rear_share: float
    height_ratio: float
    front_area: float
    rear_area: float
    drag_area: float
    density: float
    altitude: float
    temperature: float
    rolling: float
    power: float
    fuel_flow: float
    driven: str
    front: Tyre
    rear: Tyre
    front_brakes: float
    ideal_brakes: bool


def car_of(values: Mapping[str, Argument]) -> Car:
    """The car from the solver's arguments. Raises `ValueError` where one cannot be."""
    mass, wheelbase = number(values, "mass"), number(values, "wheelbase")
    for name, value in (("mass", mass), ("wheelbase", wheelbase), ("density", number(values, "density"))):
        if value <= 0:
            raise ValueError(f"{name} is not positive")
    place = number(values, "place")
    if not 0 < place < wheelbase:
        raise ValueError("the centre of gravity is not between the axles")
    front, rear = (
        Tyre(*(number(values, f"{end}_{part}") for part in ("grip", "fade", "load", "transfer")))
        for end in ("front", "rear")
    )
    if min(front.grip, rear.grip) <= 0 or min(front.load, rear.load) <= 0:
        raise ValueError("grip or its load is not positive")
    return Car(
        mass=mass,
        rear_share=place / wheelbase,
        height_ratio=max(0.0, number(values, "height") / wheelbase),
        front_area=number(values, "front_area"),
        rear_area=number(values, "rear_area"),
        drag_area=number(values, "drag_area"),
        density=number(values, "density"),
        altitude=number(values, "altitude"),
        temperature=number(values, "temperature"),
        rolling=number(values, "rolling"),
        power=max(0.0, number(values, "power")),
        fuel_flow=max(0.0, number(values, "fuel_flow")),
        driven=str(values["driven"]),
        front=front,
        rear=rear,
        front_brakes=number(values, "distribution"),
        ideal_brakes=values["distribution_law"] == "ideal",
    )
