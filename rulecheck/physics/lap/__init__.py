"""The lap: a quasi-steady car on a chain of segments, limited axle by axle.

`solver` states what the lap is handed and gives; `road` cuts the track into steps; `forces` says what tyres, brakes and
engine can do at one place and speed; `passes` makes the speed along the track; `tally` adds up times and energies.
Plain Python and doubles: nothing here decides a verdict, since every number comes with its bound.
"""
