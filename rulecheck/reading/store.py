"""Where the bytes of a workspace come from: the disk, or another store of the same shape."""

from __future__ import annotations

import errno
import os
import stat
from dataclasses import dataclass
from pathlib import Path
from typing import Protocol

from rulecheck.diagnostics import Diagnostic, Refused, Span
from rulecheck.reading.bounds import MAXIMUM_BYTES
from rulecheck.reading.nearest import nearest


class Store(Protocol):
    """Files below one root, named relative to it with forward slashes.

    A revision of a repository is such a store too; it holds no links that lead outside.
    """

    def real(self, file: str) -> str | None:
        """The name with `..` and links resolved, or None where that lies outside the root."""
        ...

    def bytes(self, file: str, asked: Span | None) -> bytes:
        """The content of a file; `Refused` where it is missing, no regular file, outside or too large."""
        ...


@dataclass(frozen=True, slots=True)
class Disk:
    """The files on disk below `root`.

    A pipe or a device is refused without being waited for, and a link is followed only while it
    stays below the root.
    """

    root: Path

    def real(self, file: str) -> str | None:
        """The name with `..` and links resolved, or None where that lies outside the root."""
        root = os.path.realpath(self.root)
        try:
            relative = Path(os.path.realpath(os.path.join(root, file))).relative_to(root)
        except ValueError:  # outside, or a name that no file can have
            return None
        return relative.as_posix()

    def bytes(self, file: str, asked: Span | None) -> bytes:
        """The content of a regular file of at most `MAXIMUM_BYTES` bytes."""
        name = self.real(file)
        if name is None:
            raise Refused([outside(file, asked)])
        path = os.path.join(os.path.realpath(self.root), name)
        try:
            return _content(path, file, asked)
        except OSError as error:
            raise Refused([_unreadable(error, file, _near(path), asked)]) from None


def outside(
    file: str,
    asked: Span | None,
    root: str = "the folder that the files of a design may not leave",
    advice: str = "move the file into the repository",
) -> Diagnostic:
    """The diagnostic for a file that lies outside the root, which is told in words."""
    return Diagnostic(
        "outside-root",
        f"{file} lies outside {root}",
        asked,
        expected="a file below that folder, named relative to the file that names it",
        advice=advice,
    )


def too_large(file: str, asked: Span | None) -> Diagnostic:
    """The diagnostic for a file of more bytes than may be read."""
    return Diagnostic(
        "too-large",
        f"{file} is larger than {MAXIMUM_BYTES} bytes",
        asked,
        expected=f"at most {MAXIMUM_BYTES} bytes a file",
        advice="split the file",
    )


def _content(path: str, file: str, asked: Span | None) -> bytes:
    flags = os.O_RDONLY
    # Without O_NONBLOCK a pipe that nobody writes to would hold the program for ever. Not every system has them all.
    for name in ("O_NONBLOCK", "O_NOFOLLOW", "O_CLOEXEC", "O_NOCTTY", "O_BINARY"):
        flags |= getattr(os, name, 0)
    descriptor = os.open(path, flags)
    try:
        if not stat.S_ISREG(os.fstat(descriptor).st_mode):
            raise Refused([_not_a_file(file, asked)])
        return _read(descriptor, file, asked)
    finally:
        os.close(descriptor)


def _read(descriptor: int, file: str, asked: Span | None) -> bytes:
    """All bytes up to the bound: counted while reading, since a file may grow or hide its size."""
    pieces: list[bytes] = []
    room = MAXIMUM_BYTES + 1
    while room > 0:
        piece = os.read(descriptor, min(room, 1 << 20))
        if not piece:
            return b"".join(pieces)
        pieces.append(piece)
        room -= len(piece)
    raise Refused([too_large(file, asked)])


def _near(path: str) -> str:
    """Advice that names the file of the same folder whose name is nearest."""
    folder, name = os.path.split(path)
    try:
        return nearest(name, os.listdir(folder))
    except OSError:
        return ""


def _not_a_file(file: str, asked: Span | None) -> Diagnostic:
    return Diagnostic(
        "not-a-file",
        f"{file} is not a regular file",
        asked,
        expected="a text file",
        advice="name a file, not a folder, a pipe or a device",
    )


def _unreadable(error: OSError, file: str, near: str, asked: Span | None) -> Diagnostic:
    if error.errno in (errno.EISDIR, errno.ENXIO, errno.EOPNOTSUPP):
        return _not_a_file(file, asked)
    if error.errno in (errno.EACCES, errno.EPERM):
        return Diagnostic("no-such-file", f"{file} may not be read", asked, advice="allow yourself to read the file")
    return Diagnostic(
        "no-such-file",
        f"there is no file {file}",
        asked,
        expected="the name of a file, relative to the file that names it",
        advice=near or "look at the spelling and at the folder",
    )
