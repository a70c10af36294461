"""Outlines and zones: outlines read, and room inside of zones or clear of them as ordinary terms.

`outlines` reads; `polygons`, `cells` and `rooms` are what `zones` is made of; `bodies` is what is measured. Everything
is expanded to terms of the catalogue's operations, so every reader knows it.
"""
