"""Binding: design, overlay, rulesets and physics become one graph.

Names are resolved, kinds and dimensions checked, collections, pairs, aggregates, points, states and references to rules
expanded. All faults are gathered and raised at once; nothing is evaluated but what choices and presence settle.
"""
