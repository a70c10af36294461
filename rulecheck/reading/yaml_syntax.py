"""What the YAML parser's complaints mean, in plain words: what is wrong, where, and what to do.

The complaint's place and the characters around it say more than its wording does; the wording is
looked at only where it must be. Each function below knows one kind of mistake and gives False for others.
"""

from __future__ import annotations

from yaml.error import YAMLError

from rulecheck.diagnostics import Faults
from rulecheck.reading.bounds import MAXIMUM_DEPTH
from rulecheck.reading.yaml_complaint import Complaint, Known, complaint_of, note_quote, note_syntax
from rulecheck.reading.yaml_layout import LAYOUT


def explain(error: YAMLError, file: str, text: str, flow: bool, faults: Faults) -> None:
    """Note what a complaint of the parser means."""
    complaint = complaint_of(error, file, text, flow)
    if not any(known(complaint, faults) for known in _KNOWN):
        faults.add(
            "yaml-syntax",
            "this cannot be read as YAML",
            complaint.span(complaint.index),
            expected="`key: value`, or `- item`",
            advice="look at the quotes, the brackets and the indentation of this line and of the one before",
        )


def _deep(complaint: Complaint, faults: Faults) -> bool:
    if "nesting" not in complaint.wording:
        return False
    message = f"lists and mappings stand more than {MAXIMUM_DEPTH} deep inside each other"
    faults.add("too-large", message, complaint.span(complaint.index), advice="write it flatter")
    return True


def _tab(complaint: Complaint, faults: Faults) -> bool:
    if complaint.character != "\t" and "tab character" not in complaint.wording:
        return False
    return note_syntax(
        complaint,
        faults,
        "a tab stands where blanks indent a line",
        complaint.index,
        expected="blanks",
        advice="replace the tab by blanks",
    )


def _first_character(complaint: Complaint, faults: Faults) -> bool:
    if "cannot start any token" not in complaint.wording:
        return False
    sign = "a backquote" if complaint.character == "`" else f"`{complaint.character}`"
    why = f"YAML keeps {sign} for itself at the beginning of a value"
    return note_quote(complaint, faults, complaint.index, why)


def _quotes(complaint: Complaint, faults: Faults) -> bool:
    if "quoted scalar" not in complaint.context:
        return False
    if "escape" in complaint.wording or "hex" in complaint.wording:
        return note_syntax(
            complaint,
            faults,
            "a backslash between double quotes begins an escape that YAML does not know",
            complaint.index,
            advice="put the text between single quotes, or write the backslash twice",
        )
    return note_syntax(
        complaint,
        faults,
        "the quote that opens here is never closed",
        complaint.begin,
        expected="a closing quote",
        advice="close the quote; between single quotes a single quote is written twice",
    )


def _alias(complaint: Complaint, faults: Faults) -> bool:
    if not complaint.context.endswith(("an alias", "an anchor")):
        return False
    sign = complaint.text[complaint.begin : complaint.begin + 1]
    return note_quote(
        complaint, faults, complaint.begin, f"YAML reads `{sign}` at the beginning of a value as its own sign"
    )


def _block_text(complaint: Complaint, faults: Faults) -> bool:
    if "block scalar" not in complaint.context:
        return False
    sign = complaint.text[complaint.begin : complaint.begin + 1]
    if sign == ">":
        why = "YAML reads `>` at the beginning of a value as the sign of a text on the lines below"
        return note_quote(complaint, faults, complaint.begin, why)
    return note_syntax(
        complaint,
        faults,
        "behind `|` the text begins on the next line",
        complaint.index,
        expected="the end of the line",
        advice="put the text on the lines below, indented, or put it between quotes",
    )


def _tag(complaint: Complaint, faults: Faults) -> bool:
    if "tag" not in complaint.context.split() and "tag handle" not in complaint.wording:
        return False
    faults.add("yaml-refused", "tags are refused", complaint.span(complaint.begin), advice="delete the tag")
    return True


def _directive(complaint: Complaint, faults: Faults) -> bool:
    if "directive" not in complaint.context and "incompatible YAML" not in complaint.wording:
        return False
    message = "lines that begin with `%` are directives of YAML, which are refused"
    faults.add("yaml-refused", message, complaint.span(complaint.begin), advice="delete the line")
    return True


_KNOWN: tuple[Known, ...] = (
    _deep,
    _tab,
    _first_character,
    _quotes,
    _alias,
    _block_text,
    _tag,
    _directive,
    *LAYOUT,
)
