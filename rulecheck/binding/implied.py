"""Choices that have an answer though the design does not state them."""

from __future__ import annotations

from rulecheck.binding.scope import Scope
from rulecheck.model.vocabulary import Entry

IMPLIED = {
    "aero.source": ("aero.map", "surfaces"),
    "aero.drag_source": ("frontal.drag_coefficient", "surfaces"),
    "frontal.area_source": ("outlines", "reference"),
}
"""Choices that have one answer where the design states nothing under another path, and must be stated else."""


def implied(scope: Scope, path: str, entry: Entry) -> str:
    """Tyres and corners carry their axle and side in their name; some choices have one answer."""
    if path in IMPLIED and not scope.shared.stand_ins:
        other, answer = IMPLIED[path]
        scope.touched.add(other)
        design = scope.view.design
        return "" if other in design.leaves or design.names(other) else answer
    if entry.path in ("tyres.*.axle", "corners.*.axle", "corners.*.side"):
        words = path.split(".")[1].split("_")
        return next((word for word in words if word in entry.choices), "")
    return ""
