"""The physics modules: YAML files in the formula language, read when their prefix is used, and solvers in Python.

Each figure states unit, meaning, source and range of validity; binding treats them like the derived figures of a
ruleset. `declared` says which declared inputs a computed figure can contradict; `solvers` finds what has no closed form.
"""
