"""Studies: questions put to a graph, one file each. They give outcomes and print nothing; `check` is the lowest."""
