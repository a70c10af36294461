"""A complaint of the YAML parser: its wording, its place, and what stands around it."""

from __future__ import annotations

import re
from collections.abc import Callable
from dataclasses import dataclass

from yaml.error import MarkedYAMLError, YAMLError

from rulecheck.diagnostics import Faults, Span
from rulecheck.reading.characters import span_at
from rulecheck.reading.yaml_traps import quote_this, value_end

_BEFORE_VALUE = re.compile(r"[ ]*(?:- +)*(?:[^\s:][^:\n]*:[ ]+)?")


@dataclass(frozen=True, slots=True)
class Complaint:
    """Wording and place, where the part in question begins, and whether that is between braces or brackets."""

    file: str
    text: str
    wording: str
    context: str
    index: int
    begin: int
    flow: bool

    @property
    def character(self) -> str:
        """The character at the place of the complaint, or nothing at the end of the file."""
        return self.text[self.index : self.index + 1]

    @property
    def before(self) -> str:
        """What stands on the line before the place of the complaint, blanks at its ends left out."""
        return self.text[self.text.rfind("\n", 0, self.index) + 1 : self.index].strip()

    @property
    def line_end(self) -> int:
        """The offset of the end of the line."""
        end = self.text.find("\n", self.index)
        return end if end >= 0 else len(self.text)

    def span(self, start: int, length: int = 1) -> Span:
        """A place in the file."""
        return span_at(self.file, self.text, start, start + length)

    def value_start(self) -> int:
        """The offset at which the value begins on the line of the complaint, behind `- ` and `key: `."""
        line_start = self.text.rfind("\n", 0, self.index) + 1
        before = _BEFORE_VALUE.match(self.text, line_start, self.index)
        return before.end() if before else line_start


Known = Callable[[Complaint, Faults], bool]
"""Knows one kind of mistake: notes what a complaint means and gives True, or gives False."""


def complaint_of(error: YAMLError, file: str, text: str, flow: bool) -> Complaint:
    """The complaint that an error of the parser makes."""
    if not isinstance(error, MarkedYAMLError):
        return Complaint(file, text, str(error), "", 0, 0, flow)
    mark = error.problem_mark or error.context_mark
    index = mark.index if mark else 0
    begin = error.context_mark.index if error.context_mark else index
    return Complaint(file, text, error.problem or "", error.context or "", index, begin, flow)


def note_syntax(
    complaint: Complaint, faults: Faults, message: str, place: int, *, expected: str = "", advice: str = ""
) -> bool:
    """Note that the file is no YAML at `place`; gives True."""
    faults.add("yaml-syntax", message, complaint.span(place), expected=expected, advice=advice)
    return True


def note_quote(complaint: Complaint, faults: Faults, start: int, why: str) -> bool:
    """Note that the value that begins at `start` has to be quoted; gives True."""
    end = value_end(complaint.text, start, complaint.flow)
    quote_this(faults, complaint.file, complaint.text, start, end, why)
    return True
