"""Outlines and zones of a car, below binding. Nothing lives here yet: points, lines and planes are bound in `binding`."""
