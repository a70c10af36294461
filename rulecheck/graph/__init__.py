"""The graph: terms, figures and the bound rules that rest on them.

A graph is a pure function of its inputs. Terms are interned and in order; a figure is the only thing with a name; a bound
rule is a tree of conditions for each of its cases. Nothing here evaluates: readers do.
"""
