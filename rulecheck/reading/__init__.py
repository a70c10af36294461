"""Files to located data: the only folder that opens what a design or a ruleset is read from.

Lives here: the workspace (a root that files may not leave), the YAML reader, the ledger reader, the
bounds, and the search for the nearest name. Promises: text only, each piece with its place in the
file (`Located`); nothing is guessed of kinds, numbers or units; every fault of a file is a diagnostic,
all at once; bounds are counts, and reaching one is a diagnostic too. Imports diagnostics only.
"""
