"""Builds located nodes from the events of the YAML parser, without recursion, and counts as it goes."""

from __future__ import annotations

import re
from dataclasses import dataclass, field
from typing import Any

import yaml
from yaml import events

from rulecheck.diagnostics import Faults, Span
from rulecheck.reading.bounds import MAXIMUM_ALIASES, MAXIMUM_DEPTH, MAXIMUM_FAULTS, MAXIMUM_NODES, MAXIMUM_SCALAR
from rulecheck.reading.nodes import Located, Node, Sequence
from rulecheck.reading.yaml_mapping import mapping_of
from rulecheck.reading.yaml_syntax import explain
from rulecheck.reading.yaml_traps import (
    cut_by_comment,
    quote_this,
    split_at_commas,
    still_open,
    value_end,
)

# The C parser where it is built in; the other reads the same language, slower.
_LOADER: type[Any] = getattr(yaml, "CSafeLoader", yaml.SafeLoader)

_PROPERTIES = re.compile(r"(?:[&!]\S*(?:\s+(?:#[^\n]*)?)*)+")


@dataclass(slots=True)
class Frame:
    """A mapping or list that is still open. `items` of a mapping are key, value, key, value, …"""

    mapping: bool
    flow: bool
    start: Any
    anchor: str | None
    nodes_before: int
    items: list[Node] = field(default_factory=list)
    height: int = 1


@dataclass(frozen=True, slots=True)
class Anchored:
    """A finished node with an anchor: how many nodes it counts, and how many levels it adds."""

    node: Node
    nodes: int
    height: int


class BoundReached(Exception):
    """Reading stops: a bound was reached, and the fault is noted."""


@dataclass(slots=True)
class Builder:
    """One pass over one text; faults that leave the rest readable are noted and passed over."""

    file: str
    text: str
    faults: Faults
    root: Node | None = None
    stack: list[Frame] = field(default_factory=list)
    nodes: int = 0
    aliases: int = 0
    documents: int = 0
    last_end: int = 0
    anchors: dict[str, Anchored | None] = field(default_factory=dict)

    def build(self) -> Node | None:
        """The node of the first document, or None where there is no document."""
        loader = _LOADER(self.text)
        try:
            self._walk(loader)
        except yaml.YAMLError as error:
            self._explain(error)
        except BoundReached:
            pass
        finally:
            loader.dispose()
        return self.root

    def _walk(self, loader: Any) -> None:
        get_event = loader.get_event
        while True:
            event = get_event()
            kind = type(event)
            if kind is events.ScalarEvent:
                self._scalar(event)
            elif kind is events.MappingEndEvent or kind is events.SequenceEndEvent:
                self._close(event)
                self._stop_if_enough()
            elif kind is events.MappingStartEvent or kind is events.SequenceStartEvent:
                self._open(event, kind is events.MappingStartEvent)
            elif kind is events.AliasEvent:
                self._alias(event)
                self._stop_if_enough()
            elif kind is events.DocumentStartEvent:
                self._document(event)
            elif kind is events.StreamEndEvent:
                return

    # Values

    def _scalar(self, event: Any) -> None:
        self.nodes += 1
        start, value, text = event.start_mark, event.value, self.text
        begin, end = start.index, event.end_mark.index
        self.last_end = end
        if self.nodes > MAXIMUM_NODES or len(value) > MAXIMUM_SCALAR:
            self._too_many(event)
        if event.style or event.anchor or event.tag:
            node = self._unusual_scalar(event)
            self._stop_if_enough()
        else:
            raw = text[begin:end]
            span = Span(self.file, begin, end, start.line + 1, start.column + 1)
            node = Located(value, span, None if raw == value else raw)
            if end < len(text) and text[end] in " \t" and cut_by_comment(value, self._rest_of_line(end)):
                self._cut(begin, end)
                self._stop_if_enough()
        if self.stack:
            self.stack[-1].items.append(node)
        else:
            self._add(node, 0)

    def _unusual_scalar(self, event: Any) -> Located:
        """A value in quotes, on lines of its own, or behind an anchor or tag."""
        begin, end, style = event.start_mark.index, event.end_mark.index, event.style
        if event.tag is not None:
            self._refuse_tag(event)
        if event.anchor or event.tag is not None:
            properties = _PROPERTIES.match(self.text, begin, end)
            begin = properties.end() if properties else begin
        if style in ("|", ">"):
            node = self._block(event, begin, end)
        else:
            raw = self.text[begin:end]
            span = self._behind(event.start_mark, begin, end)
            node = Located(event.value, span, None if raw == event.value else raw, style in ("'", '"'))
        if event.anchor:
            self._settle_anchor(event, Anchored(node, 1, 0))
        return node

    def _block(self, event: Any, begin: int, end: int) -> Located:
        """A text on the lines below `|` or `>`: its place is that of the lines, without the header."""
        if not event.value and event.style == ">" and self.text[begin + 1 : begin + 2].isdigit():
            line_end = value_end(self.text, begin, flow=False)
            why = "YAML reads `>` at the beginning of a value as the sign of a text on the lines below"
            quote_this(self.faults, self.file, self.text, begin, line_end, why)
        end = begin + len(self.text[begin:end].rstrip())
        first = self.text.find("\n", begin, end) + 1
        if not first:  # nothing but the header
            return Located(event.value, self._behind(event.start_mark, end, end), "")
        while self.text.startswith("\n", first):
            first += 1
        indent = len(self.text[first:end]) - len(self.text[first:end].lstrip(" "))
        own = len(event.value) - len(event.value.lstrip(" "))
        first += max(0, indent - own)
        return Located(event.value, self._behind(event.start_mark, first, end), self.text[first:end])

    def _alias(self, event: Any) -> None:
        self.aliases += 1
        self.last_end = event.end_mark.index
        if self.aliases > MAXIMUM_ALIASES:
            self._beyond(f"more than {MAXIMUM_ALIASES} aliases stand in this file", event)
        if event.anchor not in self.anchors:
            why = f"no anchor is called {event.anchor!r}, and YAML reads `*` at the beginning of a value as an alias"
            self._quote_from(event.start_mark.index, why)
            self._add(Located(f"*{event.anchor}", self._span(event)), 0)
            return
        known = self.anchors[event.anchor]
        if known is None:
            message = f"the alias `*{event.anchor}` stands inside of what it repeats"
            self.faults.add("yaml-refused", message, self._span(event), advice="write the value itself")
            self._add(Located(f"*{event.anchor}", self._span(event)), 0)
            return
        if self.nodes + known.nodes > MAXIMUM_NODES:
            self._beyond(f"with what its aliases repeat, this file has more than {MAXIMUM_NODES} values", event)
        if len(self.stack) + known.height > MAXIMUM_DEPTH:
            self._too_deep(event)
        self.nodes += known.nodes
        self._add(known.node, known.height)

    # Mappings and lists

    def _open(self, event: Any, mapping: bool) -> None:
        if len(self.stack) >= MAXIMUM_DEPTH:
            self._too_deep(event)
        self.nodes += 1
        if self.nodes > MAXIMUM_NODES:
            self._too_many(event)
        if event.tag is not None:
            self._refuse_tag(event)
        if event.anchor:
            self._settle_anchor(event, None)
        self.stack.append(Frame(mapping, bool(event.flow_style), event.start_mark, event.anchor, self.nodes - 1))

    def _close(self, event: Any) -> None:
        frame = self.stack.pop()
        if frame.flow:
            self.last_end = event.end_mark.index
        start = frame.start
        end = max(self.last_end, start.index)
        span = Span(self.file, start.index, end, start.line + 1, start.column + 1)
        split = frame.flow and self._note_splits(frame)
        node: Node = (
            mapping_of(frame.items, span, split, self.faults) if frame.mapping else Sequence(tuple(frame.items), span)
        )
        if frame.anchor:
            self.anchors[frame.anchor] = Anchored(node, self.nodes - frame.nodes_before, frame.height)
        self._add(node, frame.height)

    def _note_splits(self, frame: Frame) -> bool:
        split = False
        for first, last in split_at_commas(frame.items):
            split = True
            why = "between braces or brackets YAML splits this at its comma"
            quote_this(self.faults, self.file, self.text, first.span.start, last.span.end, why)
        return split

    def _add(self, node: Node, height: int) -> None:
        if not self.stack:
            if self.root is None:
                self.root = node
            return
        frame = self.stack[-1]
        frame.items.append(node)
        if height >= frame.height:
            frame.height = height + 1

    # Faults

    def _document(self, event: Any) -> None:
        self.documents += 1
        if self.documents == 2:
            self.faults.add(
                "yaml-refused",
                "a second document begins here",
                self._span(event),
                expected="one document a file",
                advice="delete the line `---`, or put the rest into a file of its own",
            )
            raise BoundReached

    def _refuse_tag(self, event: Any) -> None:
        if self.text.startswith("!=", event.start_mark.index):
            why = "YAML reads `!` at the beginning of a value as the sign of a tag"
            self._quote_from(event.start_mark.index, why)
            return
        self.faults.add(
            "yaml-refused",
            "tags are refused: what a value is follows from its place",
            self._span(event),
            advice="delete the tag, or put the value between quotes",
        )

    def _settle_anchor(self, event: Any, anchored: Anchored | None) -> None:
        if event.anchor in self.anchors:
            message = f"the anchor `&{event.anchor}` is set twice"
            self.faults.add("yaml-refused", message, self._span(event), advice="give the second another name")
        self.anchors[event.anchor] = anchored

    def _cut(self, begin: int, end: int) -> None:
        line_end = end + len(self._rest_of_line(end))
        why = "YAML reads ` #` as the beginning of a comment, which cuts this off"
        quote_this(self.faults, self.file, self.text, begin, line_end, why)

    def _explain(self, error: yaml.YAMLError) -> None:
        mark = getattr(error, "problem_mark", None)
        line = mark.line + 1 if mark else 1
        if any(item.code == "quote-this" and item.span and item.span.line >= line - 1 for item in self.faults.found):
            return  # what follows a formula that YAML misread is no fault of its own
        for frame in self.stack:
            opened = still_open(frame.items) if frame.flow else None
            if opened is not None:
                why = "between braces or brackets YAML splits this at its comma or bracket"
                self._quote_from(opened.span.start, why)
                return
        explain(error, self.file, self.text, self._in_flow(), self.faults)

    def _quote_from(self, start: int, why: str) -> None:
        quote_this(self.faults, self.file, self.text, start, value_end(self.text, start, self._in_flow()), why)

    def _in_flow(self) -> bool:
        return bool(self.stack) and self.stack[-1].flow

    def _stop_if_enough(self) -> None:
        if len(self.faults.found) >= MAXIMUM_FAULTS:
            raise BoundReached

    def _too_many(self, event: Any) -> None:
        if self.nodes > MAXIMUM_NODES:
            message, advice = f"this file has more than {MAXIMUM_NODES} keys and values", "split the file"
        else:
            message, advice = f"a value is longer than {MAXIMUM_SCALAR} characters", "shorten it"
        self._too_large(message, self._span(event), advice)

    def _too_deep(self, event: Any) -> None:
        message = f"lists and mappings stand more than {MAXIMUM_DEPTH} deep inside each other"
        self._too_large(message, self._span(event), "write it flatter")

    def _too_large(self, message: str, span: Span, advice: str) -> None:
        self.faults.add("too-large", message, span, advice=advice)
        raise BoundReached

    def _beyond(self, message: str, event: Any) -> None:
        self.faults.add("yaml-refused", message, self._span(event), advice="write the values themselves, fewer of them")
        raise BoundReached

    # Places

    def _span(self, event: Any) -> Span:
        return self._behind(event.start_mark, event.start_mark.index, event.end_mark.index)

    def _behind(self, mark: Any, begin: int, end: int) -> Span:
        """The span from `begin` to `end`, where `begin` is at or behind the mark (so that few lines are counted)."""
        newlines = self.text.count("\n", mark.index, begin)
        column = begin - self.text.rfind("\n", 0, begin) if newlines else mark.column + 1 + begin - mark.index
        return Span(self.file, begin, end, mark.line + 1 + newlines, column)

    def _rest_of_line(self, index: int) -> str:
        end = self.text.find("\n", index)
        return self.text[index : end if end >= 0 else len(self.text)]
