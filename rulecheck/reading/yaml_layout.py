"""Mistakes of layout in YAML: colons, brackets, indentation, and text behind the end of a value."""

from __future__ import annotations

import re

from rulecheck.diagnostics import Faults
from rulecheck.reading.characters import line_at
from rulecheck.reading.yaml_complaint import Complaint, Known, note_quote, note_syntax

_LONGEST_KEY = 1024  # the bound of YAML itself
_KEY_CLOSED_UP = re.compile(r" *(?:- +)*[\w.*]+:[^\s:/]")


def _item_on_key_line(complaint: Complaint, faults: Faults) -> bool:
    if "sequence entries are not allowed" not in complaint.wording:
        return False
    if not complaint.before:
        return note_syntax(
            complaint,
            faults,
            "a list begins where none can stand",
            complaint.index,
            expected="a list below its key",
            advice="look at the indentation, and at the line before",
        )
    why = "YAML reads `- ` as an item of a list, which cannot stand on the line of its key"
    return note_quote(complaint, faults, complaint.index, why)


def _colon(complaint: Complaint, faults: Faults) -> bool:
    if "mapping values are not allowed" not in complaint.wording and "mapping keys are not" not in complaint.wording:
        return False
    if ": " in complaint.before + " " and complaint.character == ":" and not complaint.before.startswith("#"):
        return note_syntax(
            complaint,
            faults,
            "a second `: ` stands on this line, so YAML cannot tell key from value",
            complaint.index,
            expected="one `: ` between key and value",
            advice="put the value between quotes",
        )
    if complaint.character == "?":
        return note_quote(complaint, faults, complaint.index, "YAML reads `? ` as the sign of a key")
    return _line_before(complaint, faults)


def _long_key(complaint: Complaint, faults: Faults) -> bool:
    if "mapping values are not allowed" not in complaint.wording or len(complaint.before) < _LONGEST_KEY:
        return False
    place = complaint.index - len(complaint.before)
    return note_syntax(complaint, faults, f"a key is longer than {_LONGEST_KEY} characters", place, advice="shorten it")


def _line_before(complaint: Complaint, faults: Faults) -> bool:
    """A key where the value before it is not at its end: the fault lies in the line before, or in the indentation."""
    line_start = complaint.text.rfind("\n", 0, complaint.index) + 1
    previous = complaint.text[:line_start].rstrip()
    place = previous.rfind("\n") + 1
    line = line_at(previous, place)
    if _KEY_CLOSED_UP.match(line):
        return _closed_up(complaint, faults, place)
    if line.strip() and ":" not in line and not line.lstrip().startswith("#"):
        return _no_colon(complaint, faults, place + len(line) - len(line.lstrip()))
    return note_syntax(
        complaint,
        faults,
        "this key is indented deeper than the keys that it follows",
        line_start + len(complaint.text[line_start : complaint.index]) - len(complaint.before),
        expected="the indentation of the keys before",
        advice="indent the keys of one mapping alike, and put text that spans lines between quotes",
    )


def _closed_up(complaint: Complaint, faults: Faults, place: int) -> bool:
    colon = complaint.text.index(":", place)
    return note_syntax(
        complaint,
        faults,
        "the blank behind the colon is missing",
        colon,
        expected="`key: value`",
        advice="put a blank behind the colon",
    )


def _no_colon(complaint: Complaint, faults: Faults, place: int) -> bool:
    return note_syntax(
        complaint,
        faults,
        "this line is neither a key with its value nor an item of a list",
        place,
        expected="`key: value`, or `- item`",
        advice="put a colon and a blank behind the key, or indent the line below the text that it continues",
    )


def _key_without_colon(complaint: Complaint, faults: Faults) -> bool:
    if "simple key" not in complaint.context:
        return False
    if _KEY_CLOSED_UP.match(complaint.text[complaint.begin : complaint.index]):
        return _closed_up(complaint, faults, complaint.begin)
    return _no_colon(complaint, faults, complaint.begin)


def _flow(complaint: Complaint, faults: Faults) -> bool:
    if not complaint.context.endswith(("flow sequence", "flow mapping")):
        return False
    other_line = "\n" in complaint.text[complaint.begin : complaint.index]
    if not complaint.character or (other_line and complaint.character == ":"):
        bracket = complaint.text[complaint.begin : complaint.begin + 1]
        return note_syntax(
            complaint,
            faults,
            f"the bracket `{bracket}` that opens here is never closed",
            complaint.begin,
            expected=f"`{'}' if bracket == '{' else ']'}`",
            advice="close the bracket",
        )
    why = f"between braces or brackets YAML ends this value before `{complaint.character}`"
    return note_quote(complaint, faults, _piece_start(complaint), why)


def _piece_start(complaint: Complaint) -> int:
    """Where the value of a flow collection begins that goes on at the place of the complaint."""
    text, place, depth = complaint.text, complaint.index - 1, 0
    while place > complaint.begin:
        character = text[place]
        if character in "]}":
            depth += 1
        elif character in "[{":
            depth -= 1
        elif not depth and (character == "," or text.startswith(": ", place)):
            break
        place -= 1
    place += 1
    return place + len(text[place : complaint.index]) - len(text[place : complaint.index].lstrip(" :"))


def _missing_node(complaint: Complaint, faults: Faults) -> bool:
    if "node content" not in complaint.wording:
        return False
    if complaint.character in ("]", "}"):
        return _stray_bracket(complaint, faults)
    if complaint.character == ",":
        return note_syntax(
            complaint,
            faults,
            "a comma stands where a value is due",
            complaint.index,
            expected="a value",
            advice="delete the comma, or write the value before it",
        )
    return note_syntax(
        complaint,
        faults,
        f"`{complaint.character}` stands where a value is due" if complaint.character else "a value is missing",
        complaint.index,
        expected="a value",
        advice="write the value, between quotes if it begins with such a sign",
    )


def _stray_bracket(complaint: Complaint, faults: Faults) -> bool:
    return note_syntax(
        complaint,
        faults,
        f"the bracket `{complaint.character}` closes nothing",
        complaint.index,
        advice="delete it, or open the bracket that it closes",
    )


def _behind_value(complaint: Complaint, faults: Faults) -> bool:
    """Text behind a value that has ended: `"25CrMo4" in grades`, `[a, b] and c`, `*a + b`."""
    if not complaint.before or complaint.before == "-":
        return False
    if complaint.character in ("]", "}"):
        return _stray_bracket(complaint, faults)
    start = complaint.value_start()
    sign = complaint.text[start : start + 1]
    if sign == "*":
        why = "YAML reads `*` at the beginning of a value as the sign of an alias"
    else:
        why = f"YAML ends the value before `{complaint.character}`"
    return note_quote(complaint, faults, start, why)


def _other_kind(complaint: Complaint, faults: Faults) -> bool:
    """A line that does not belong to the mapping or list that it stands in."""
    if "block mapping" not in complaint.context and "block collection" not in complaint.context:
        return False
    if complaint.character in ("]", "}"):
        return _stray_bracket(complaint, faults)
    if "block collection" in complaint.context:
        message, expected = "a line among the items of a list is no item", "`- item`"
    elif complaint.text.startswith("- ", complaint.index):
        message, expected = "an item of a list stands among the keys of a mapping", "`key: value`"
    else:
        message, expected = "this line is indented otherwise than the keys before it", "`key: value`, indented alike"
    advice = "indent the lines of one mapping or list alike"
    return note_syntax(complaint, faults, message, complaint.index, expected=expected, advice=advice)


def _behind_document(complaint: Complaint, faults: Faults) -> bool:
    if "document start" not in complaint.wording:
        return False
    if re.search(r"^\.\.\.", complaint.text[: complaint.index], re.MULTILINE):
        faults.add(
            "yaml-refused",
            "a second document begins here",
            complaint.span(complaint.index),
            expected="one document a file",
            advice="delete the line `...`, or put the rest into a file of its own",
        )
        return True
    if complaint.before:
        return _behind_value(complaint, faults)
    return note_syntax(
        complaint,
        faults,
        "this stands behind the end of the content",
        complaint.index,
        advice="look at the brackets and at the indentation of the lines before",
    )


LAYOUT: tuple[Known, ...] = (
    _item_on_key_line,
    _long_key,
    _colon,
    _key_without_colon,
    _flow,
    _missing_node,
    _behind_document,
    _behind_value,
    _other_kind,
)
"""The mistakes of layout, in the order in which they are tried."""
