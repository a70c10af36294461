"""The catalogue of operations: every fact of an operation in one place, one small file a family.

`CATALOGUE` in `catalogue` holds them all by name; `rational_power` makes the powers with a constant
exponent. Values are those of `values` and `exact`; the only module that knows the library of exact
numbers is `exact`. Operations hold no state and load neither numpy nor sympy: those name spaces are
handed in. May import `diagnostics` and `quantity`.
"""
