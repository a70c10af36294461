"""Mutants that no test can tell from the program, each with the reason.

They are listed by file, function and the words of the change, with a number where one function has several changes of
the same words; lines may move.
"""

from __future__ import annotations

from collections.abc import Iterator

Key = tuple[str, str, str, int]
Changes = tuple[str | tuple[str, int], ...]


def _keys(file: str, function: str, changes: Changes) -> Iterator[Key]:
    for change in changes:
        name, number = (change, 1) if isinstance(change, str) else change
        yield (f"rulecheck/{file}", function, name, number)


_LISTED: tuple[tuple[str, str, str, Changes], ...] = (
    (
        "studies/judging.py",
        "Judge.relative",
        "only parts with a margin have a scale",
        ("part.margin is None or part.scale is None -> part.scale is None",),
    ),
    (
        "studies/judging.py",
        "Judge.relative",
        "a quotient over zero or over what is unknown has no value, which is what None says too",
        (
            "never: if isinstance(size, Unknown) or size == 0",
            "isinstance(size, Unknown) or size == 0 -> isinstance(size, Unknown) and size == 0",
            "isinstance(size, Unknown) or size == 0 -> size == 0",
            "isinstance(size, Unknown) or size == 0 -> isinstance(size, Unknown)",
        ),
    ),
    (
        "studies/judging.py",
        "Judge.relative",
        "margin and scale have one dimension, so their quotient is a pure number either way round",
        ("[part.margin.dimension, part.scale.dimension] -> [part.scale.dimension, part.margin.dimension]",),
    ),
    (
        "studies/judging.py",
        "Judge._number",
        "what was found before is only found again",
        ("always: if term.index not in self._rooms",),
    ),
    (
        "studies/judging.py",
        "Judge._number",
        "a number between bounds is no fraction and has no approximation, so it comes to None either way",
        ("never: if isinstance(value, Bounds)",),
    ),
    (
        "studies/judging.py",
        "Judge.condition",
        "there are always as many labels as branches",
        ("True -> False",),
    ),
)

EQUIVALENTS: dict[Key, str] = {
    key: reason for file, function, reason, changes in _LISTED for key in _keys(file, function, changes)
}
