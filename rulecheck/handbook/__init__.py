"""The pages that `rulecheck handbook` shows.

Each page is a Markdown file beside this one. A line `<!-- table: NAME -->` in it is filled from the code, so that
what the code knows is written once. Promise: every page can be read with the package alone, without a network.
"""
