"""Readers of the graph: each evaluates terms in its own way and keeps nothing of designs or rules.

`exact` gives certain values, signs and truths; `algebraic` proves for it that roots cancel; `symbolic`
gives closed forms and is the only module that loads sympy. A reader takes a bank and the inputs by
path, never a file, and gives values of `operations.values` or plain results. May import `graph` and below.
"""
