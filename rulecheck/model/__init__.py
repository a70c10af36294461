"""Designs, rulesets and house files as frozen values, and the one vocabulary table.

A design is a located tree laid flat: path to leaf. What its keys mean is told by the vocabulary, which a ruleset's
own inputs extend; binding holds the one against the other. Rulesets and house files are structured by pydantic at the
edge and are frozen dataclasses inside. Nothing here evaluates anything.
"""
