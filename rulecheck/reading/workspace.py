"""The workspace: the files that one run reads, below a root that they may not leave."""

from __future__ import annotations

import hashlib
import os
import posixpath
from dataclasses import dataclass, field
from pathlib import Path, PureWindowsPath

from rulecheck.diagnostics import Diagnostic, Refused, Span
from rulecheck.reading.characters import decode
from rulecheck.reading.store import Disk, Store, outside

HOUSE_FILE = "rulecheck.yaml"
"""The file whose folder is the root where there is no git work tree."""


@dataclass(slots=True)
class Workspace:
    """A root, and what was read below it: texts with line feeds, and digests of the bytes.

    `mark` is what makes the folder the root: `.git`, the house file, or nothing where it is the file's own folder.

    Names of files are relative to the root and written with forward slashes. Each file is read once,
    so that a run sees one content of it. `digests` are SHA-256, in hexadecimal.
    """

    root: Path
    texts: dict[str, str] = field(default_factory=dict)
    digests: dict[str, str] = field(default_factory=dict)
    store: Store | None = None
    mark: str | None = None

    @classmethod
    def around(cls, path: Path) -> Workspace:
        """The workspace of a file or folder: its git work tree, else the nearest folder above it
        with a house file, else the folder of the file itself.
        """
        place = Path(os.path.abspath(path))
        folder = place if os.path.isdir(place) else place.parent
        root, mark = _root_above(folder)
        return cls(root, mark=mark)

    def name(self, path: Path) -> str:
        """The name of a file given by its path; `Refused` with `outside-root` where it lies outside."""
        for settle in (os.path.abspath, os.path.realpath):  # as written first, then with links resolved
            try:
                return Path(settle(path)).relative_to(settle(self.root)).as_posix()
            except ValueError:
                continue
        raise Refused([self._outside(str(path), None)])

    def resolve(self, reference: str, beside: str, asked: Span | None) -> str:
        """The name of the file that `beside` refers to, relative to the folder of `beside`.

        `..` is allowed while the result, with links resolved, stays below the root. Raises `Refused`
        with `outside-root` otherwise, and for absolute references. The file need not exist.
        """
        if not reference.strip() or "\x00" in reference:
            raise Refused([_no_name(reference, asked)])
        if reference.startswith(("/", "\\")) or PureWindowsPath(reference).drive:
            raise Refused([self._outside(reference, asked)])
        whole = posixpath.join(posixpath.dirname(beside), reference)
        name = self._store().real(whole)
        if name is None:
            raise Refused([self._outside(reference, asked, posixpath.normpath(whole))])
        return name

    def read(self, file: str, asked: Span | None = None) -> str:
        """The text of a file by its name; `asked` is the place that asks for it.

        Raises `Refused` with `no-such-file`, `not-a-file`, `outside-root`, `too-large` or `not-utf8`.
        """
        known = self.texts.get(file)
        if known is not None:
            return known
        content = self._store().bytes(file, asked)
        text = decode(content, file)
        self.digests[file] = hashlib.sha256(content).hexdigest()
        self.texts[file] = text
        return text

    def _outside(self, file: str, asked: Span | None, whole: str = "") -> Diagnostic:
        """What the root is and how another folder is made the root; `whole` is the file as seen from the root."""
        if self.mark is None:
            return outside(file, asked)
        levels = sum(part == ".." for part in whole.split("/"))
        above = {0: "a folder that holds both", 1: "the folder above"}.get(levels, f"the folder {levels} levels above")
        house = f"a file '{HOUSE_FILE}' with the line 'house: NAME'"
        if self.mark == HOUSE_FILE:
            return outside(file, asked, f"the folder of {HOUSE_FILE}", f"move {HOUSE_FILE} into {above}")
        if self.mark:
            return outside(file, asked, "the git work tree", "move the file into the work tree")
        root = f"the design's own folder, which is the root where no git work tree and no {HOUSE_FILE} is above it"
        return outside(file, asked, root, f"put {house} into {above}, or make that a git work tree")

    def _store(self) -> Store:
        return self.store if self.store is not None else Disk(self.root)


def _root_above(folder: Path) -> tuple[Path, str]:
    """The root, and what marks it."""
    for mark in (".git", HOUSE_FILE):
        for place in (folder, *folder.parents):
            if os.path.exists(place / mark):
                return place, mark
    return folder, ""


def _no_name(reference: str, asked: Span | None) -> Diagnostic:
    message = f"{reference!r} cannot name a file" if reference.strip() else "the name of a file is empty"
    return Diagnostic("no-such-file", message, asked, expected="the name of a file", advice="write the name")
