"""Formula text to a syntax tree and back, with the place of every part.

`parser` reads a formula or the head of an `each`; `printing` writes a tree with least parentheses; `walk` goes through
one. Nothing here knows units, names, kinds or values: binding does. Trees are frozen and hashable; places do not count
in equality. Promises: `parse_formula` of `show(tree)` is the tree again; text that is no formula raises `Refused` and
nothing else, whatever its length or depth.
"""
