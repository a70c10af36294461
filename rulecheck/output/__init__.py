"""Outcomes as text: one file a form.

Lives here: diagnostics for people and for programs, the terminal form of `check` and `workings`, their JSON form with
its schemas, and the writing of output files. Sees outcomes and diagnostics only: no stage, no clock, no input file.
Text that came from a file passes `escaping.plain` before it reaches a screen.
"""
