"""Where things are in files, and what is wrong with them.

Lives here: `Span`, `Diagnostic`, the catalogue of codes, and the exception that carries a
bundle of diagnostics. Imports nothing of ours. All values are frozen and hashable.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, field


@dataclass(frozen=True, slots=True, order=True)
class Span:
    """A stretch of a file: `start` and `end` are character offsets, `line` and `column` count from 1.

    The path is relative to the repository, with forward slashes.

    >>> str(Span("car.design.yaml", 10, 14, 2, 3))
    'car.design.yaml:2:3'
    """

    file: str
    start: int
    end: int
    line: int
    column: int

    def __str__(self) -> str:
        return f"{self.file}:{self.line}:{self.column}"


@dataclass(frozen=True, slots=True)
class Related:
    """A second place that a diagnostic speaks of, and what it is."""

    message: str
    span: Span


@dataclass(frozen=True, slots=True)
class Diagnostic:
    """One fault: what is wrong, where, what was expected there, and what to do about it.

    >>> print(Diagnostic("unknown-name", "no input is called 'tyre'", advice="did you mean 'tyres'?"))
    unknown-name: no input is called 'tyre'; did you mean 'tyres'?
    """

    code: str
    message: str
    span: Span | None = None
    expected: str = ""
    advice: str = ""
    related: tuple[Related, ...] = ()

    def __post_init__(self) -> None:
        if self.code not in CODES:
            raise ValueError(f"code {self.code!r} is not in the catalogue")

    def __str__(self) -> str:
        place = f"{self.span}: " if self.span else ""
        expected = f"; expected {self.expected}" if self.expected else ""
        advice = f"; {self.advice}" if self.advice else ""
        return f"{place}{self.code}: {self.message}{expected}{advice}"


class Refused(Exception):
    """Raised once by a stage, with all the faults that it found (at least one)."""

    def __init__(self, diagnostics: Iterable[Diagnostic]) -> None:
        self.diagnostics = tuple(diagnostics)
        super().__init__("\n".join(str(item) for item in self.diagnostics))


@dataclass(slots=True)
class Faults:
    """Collects the diagnostics of a stage, so that all are reported and not the first.

    >>> faults = Faults()
    >>> faults.add("unknown-name", "no input is called 'x'")
    >>> bool(faults)
    True
    """

    found: list[Diagnostic] = field(default_factory=list)

    def add(
        self,
        code: str,
        message: str,
        span: Span | None = None,
        *,
        expected: str = "",
        advice: str = "",
        related: Iterable[Related] = (),
    ) -> None:
        """Note one fault; the same fault at the same place is kept once."""
        item = Diagnostic(code, message, span, expected, advice, tuple(related))
        if item not in self.found:
            self.found.append(item)

    def take(self, refused: Refused) -> None:
        """Note all faults of a stage that was refused."""
        self.found.extend(item for item in refused.diagnostics if item not in self.found)

    def __bool__(self) -> bool:
        return bool(self.found)

    def settle(self) -> None:
        """Raise `Refused` with everything that was found, if anything was, in order of place."""
        if self.found:
            raise Refused(sorted(self.found, key=_place))


def _place(item: Diagnostic) -> tuple[str, int]:
    return (item.span.file, item.span.start) if item.span else ("", -1)


CODES: dict[str, str] = {
    # reading
    "no-such-file": "A file that is named cannot be found.",
    "not-a-file": "What is named is a folder, a device, a pipe or another thing that is not a regular file.",
    "outside-root": "A file lies outside the folder that files of this design may not leave.",
    "too-large": "A file, a number or a formula is larger than the stated bound.",
    "not-utf8": "A file is not UTF-8 text.",
    "yaml-syntax": "A file is not YAML, or uses a part of YAML that is refused here.",
    "yaml-refused": "Tags, merge keys, several documents and aliases beyond the bound are refused.",
    "duplicate-key": "A key stands twice in one mapping.",
    "quote-this": "YAML would read this formula as something else; it has to be quoted.",
    "ledger-row": "A row of a ledger cannot be read.",
    "column-file": "A file of columns cannot be read.",
    "bad-curve": "The rows of a curve or map do not make one.",
    "log-file": "A log of channels cannot be read, or its rows do not make a signal.",
    "ledger-header": "The header of a ledger lacks a column or names an unknown one.",
    # numbers and units
    "bad-number": "This is not a number as the language writes numbers.",
    "unknown-unit": "No unit has this symbol.",
    "unit-missing": "A number stands without a unit where one is due.",
    "wrong-dimension": "A value has another dimension than the one that is due.",
    "bad-value": "A value is not of the kind that is due.",
    # formulas
    "formula-syntax": "A formula cannot be read.",
    "dimension-mismatch": "The two sides of an operation have dimensions that do not go together.",
    "kind-mismatch": "An operation is given a kind of value that it does not take.",
    "unknown-name": "Nothing has this name.",
    "unknown-function": "No function has this name.",
    "wrong-arguments": "A function is given too few, too many or unfit arguments.",
    "cycle": "Names are defined in a circle.",
    "ambiguous-angle": "A bare number is handed to a trigonometric function.",
    # models
    "unknown-key": "A key is not one that this file may have.",
    "missing-key": "A key that is needed is not there.",
    "bad-structure": "A part of the file has another shape than the one that is due.",
    "name-taken": "A name is used twice where it must be used once.",
    "bad-name": "This cannot be a name.",
    "unknown-choice": "This is not one of the choices.",
    "scale-needed": "Margins without a common measure are compared, and the rule gives no scale.",
    "state-clash": "Two states set the same path.",
    "unknown-state": "No state has this name.",
    "no-rules": "There is nothing to check the design against.",
    "bad-date": "This is not a date.",
    "bad-physics": "A physics module cannot be used.",
    "bad-track": "A track cannot be driven as it is written.",
    "no-closed-form": "A figure cannot be written as a formula of the inputs.",
    # the command line
    "usage": "The command line cannot be understood.",
    "cannot-write": "An output file cannot be written.",
    "internal": "A fault of rulecheck itself.",
}
