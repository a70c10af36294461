"""Rows of the core vocabulary on the air: surfaces, the car's aero map, a coefficient on the frontal area."""

from __future__ import annotations

from rulecheck.model.shape_table import extent_rows, outline_rows
from rulecheck.model.vocabulary import Entry

SURFACES = (
    Entry("aero_surfaces", "collection", "Surfaces that make downforce or drag"),
    Entry(
        "aero_surfaces.*.kind",
        "choice",
        "What it is",
        choices=(
            "wing",
            "flap",
            "splitter",
            "diffuser",
            "floor",
            "body",
            "dive_plane",
            "louvre",
            "duct",
            "mirror",
            "other",
        ),
    ),
    Entry("aero_surfaces.*.at", "point", "Where its force acts", unit="mm"),
    Entry("aero_surfaces.*.datum", "datum", "What the place is counted from", default="front_axle"),
    Entry("aero_surfaces.*.downforce_area", "number", "Downforce over dynamic pressure, positive down", unit="m^2"),
    Entry("aero_surfaces.*.drag_area", "number", "Drag over dynamic pressure, positive rearward", unit="m^2"),
    Entry("aero_surfaces.*.in_map", "flag", "The aero map holds its forces already"),
    Entry("aero_surfaces.*.span", "number", "Width across the car", unit="mm"),
    Entry("aero_surfaces.*.chord", "number", "Depth along the car", unit="mm"),
    Entry("aero_surfaces.*.height", "number", "Top above the reference plane", unit="mm"),
    *outline_rows("aero_surfaces.*.outline"),
    *extent_rows("aero_surfaces.*.extent"),
)

CAR = (
    Entry("aero.reference_area", "number", "Area that coefficients are based on", unit="m^2"),
    Entry(
        "aero.source",
        "choice",
        "Where the forces of the air come from; surfaces where no aero map is stated",
        choices=("surfaces", "map"),
    ),
    Entry(
        "aero.drag_source",
        "choice",
        "Where the drag comes from without a map; surfaces where no drag coefficient is stated",
        choices=("surfaces", "coefficient"),
    ),
    Entry("aero.map.front_downforce_area", "map", "Downforce of the front axle over dynamic pressure", unit="m^2"),
    Entry("aero.map.rear_downforce_area", "map", "Downforce of the rear axle over dynamic pressure", unit="m^2"),
    Entry("aero.map.drag_area", "map", "Drag of the car over dynamic pressure", unit="m^2"),
    Entry("aero.map.correction", "number", "Factor on all three, such as tunnel to track", unit="1", default="1"),
    Entry(
        "aero.map.drag_moment",
        "choice",
        "Whether the axle values of the map hold the moment of drag about the ground; a balance under the wheels does",
        choices=("included", "apart"),
    ),
    Entry("aero.map.drag_height", "number", "Height above ground at which the drag of the map acts", unit="mm"),
    Entry("aero.wing_setting", "number", "Setting of the wing, as the map counts it", unit="deg"),
    Entry(
        "frontal.area_source",
        "choice",
        "Which frontal area counts: aero.reference_area, or that of the front outlines; reference without outlines",
        choices=("reference", "outlines"),
    ),
    Entry("frontal.drag_coefficient", "number", "Drag coefficient on the frontal area", unit="1"),
    Entry("frontal.drag_height", "number", "Height above ground at which that drag acts", unit="mm"),
)

AERO = (*SURFACES, *CAR)
