"""Rows of the vocabulary for the shape of a thing: outlines by view, measured extents by axis."""

from __future__ import annotations

from rulecheck.model.vocabulary import Entry

VIEWS = {"side": "xz", "plan": "xy", "front": "yz"}
"""The axes of each view, across the paper first."""
_OUTLINE = "Corners of its outline in {view} view, {axes} each, in order around it"
_WAYS = {"x": "along the car", "y": "across the car", "z": "in height"}


def outline_rows(prefix: str) -> tuple[Entry, ...]:
    """Outlines by view below a path, and whether they stand on both sides of the car."""
    views = (
        Entry(f"{prefix}.{view}", "outline", _OUTLINE.format(view=view, axes=" ".join(axes)), unit="mm")
        for view, axes in VIEWS.items()
    )
    return (*views, Entry(f"{prefix}.mirror", "flag", "A second one stands at -y", default="no"))


def extent_rows(prefix: str) -> tuple[Entry, ...]:
    """Measured extents by axis below a path."""
    rows: list[Entry] = []
    for axis, way in _WAYS.items():
        path = f"{prefix}.{axis}"
        rows.append(Entry(path, "range", f"Least and greatest {axis} of all of it, {way}", unit="mm"))
        rows.append(Entry(f"{path}.from", "number", f"Least {axis} of all of it", unit="mm"))
        rows.append(Entry(f"{path}.to", "number", f"Greatest {axis} of all of it", unit="mm"))
    return tuple(rows)


OUTLINES = (
    Entry("outlines", "collection", "Things by their outlines"),
    *outline_rows("outlines.*"),
    *extent_rows("outlines.*.extent"),
    Entry("outlines.*.datum", "datum", "What its places are counted from", default="front_axle"),
)
