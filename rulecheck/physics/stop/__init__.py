"""A stop at the grip that each axle has at its load: what the solver is handed, and the integration over the speed.

`solver` states the facts, `braking` does the work. Works in SI units on floats; what it gives has a bound.
"""
