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

    Names of files are relative to the root and written with forward slashes. Each file is read once,
    so that a run sees one content of it. `digests` are SHA-256, in hexadecimal.
    """

    root: Path
    texts: dict[str, str] = field(default_factory=dict)
    digests: dict[str, str] = field(default_factory=dict)
    store: Store | None = None

    @classmethod
    def around(cls, path: Path) -> Workspace:
        """The workspace of a file or folder: its git work tree, else the nearest folder above it
        with a house file, else the folder of the file itself.
        """
        place = Path(os.path.abspath(path))
        folder = place if os.path.isdir(place) else place.parent
        return cls(_root_above(folder))

    def name(self, path: Path) -> str:
        """The name of a file given by its path; `Refused` with `outside-root` where it lies outside."""
        for settle in (os.path.abspath, os.path.realpath):  # as written first, then with links resolved
            try:
                return Path(settle(path)).relative_to(settle(self.root)).as_posix()
            except ValueError:
                continue
        raise Refused([outside(str(path), None)])

    def resolve(self, reference: str, beside: str, asked: Span | None) -> str:
        """The name of the file that `beside` refers to, relative to the folder of `beside`.

        `..` is allowed while the result, with links resolved, stays below the root. Raises `Refused`
        with `outside-root` otherwise, and for absolute references. The file need not exist.
        """
        if not reference.strip() or "\x00" in reference:
            raise Refused([_no_name(reference, asked)])
        if reference.startswith(("/", "\\")) or PureWindowsPath(reference).drive:
            raise Refused([outside(reference, asked)])
        name = self._store().real(posixpath.join(posixpath.dirname(beside), reference))
        if name is None:
            raise Refused([outside(reference, asked)])
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

    def _store(self) -> Store:
        return self.store if self.store is not None else Disk(self.root)


def _root_above(folder: Path) -> Path:
    for mark in (".git", HOUSE_FILE):
        for place in (folder, *folder.parents):
            if os.path.exists(place / mark):
                return place
    return folder


def _no_name(reference: str, asked: Span | None) -> Diagnostic:
    message = f"{reference!r} cannot name a file" if reference.strip() else "the name of a file is empty"
    return Diagnostic("no-such-file", message, asked, expected="the name of a file", advice="write the name")
