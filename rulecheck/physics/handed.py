"""What several solvers are handed: the law of a tyre's grip as formulas, and numbers among arguments."""

from __future__ import annotations

from collections.abc import Mapping

from rulecheck.model.solver import Argument, SolverFormula

LAW = "vehicle.grip_law == constant"


def tyre_formulas(axle: str) -> tuple[SolverFormula, ...]:
    """Grip, what of it fades, and the load of the data, for the tyres of an axle; one grip where the law is constant."""
    return (
        SolverFormula(
            f"{axle}_grip", f"vehicle.grip if {LAW} else tyres.{axle}.grip", "1",
            f"Coefficient of friction of the {axle} tyres at the load of their data", "grip",
        ),
        SolverFormula(
            f"{axle}_fade", f"0 if {LAW} else tyres.{axle}.grip_fade", "1",
            f"Share of the grip of the {axle} tyres that is lost while the load doubles", "grip",
        ),
        SolverFormula(
            f"{axle}_load", f"1 N if {LAW} else tyres.{axle}.grip_load", "N",
            f"Load of the data of the {axle} tyres; of no account at constant grip", "grip",
        ),
    )  # fmt: skip


def number(values: Mapping[str, Argument], name: str) -> float:
    """A number among the arguments. Raises `ValueError` where it is none."""
    value = values[name]
    if not isinstance(value, float):
        raise ValueError(f"{name} is not known")
    return value
