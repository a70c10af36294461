"""Output files, written whole or not at all."""

from __future__ import annotations

import os
import stat
import tempfile
from collections.abc import Collection, Mapping
from pathlib import Path

from rulecheck.diagnostics import Diagnostic, Faults


def write_files(contents: Mapping[Path, str], *, sources: Collection[Path] = ()) -> None:
    """Write every file, or none. Raises `Refused` where one cannot be written or is one of the `sources`.

    Each text is first written beside its place under a name of its own, and takes the place when all are on the disk.
    """
    faults = Faults()
    targets = {path: Path(os.path.realpath(path)) for path in contents}
    for path, target in targets.items():
        _check(path, target, sources, faults)
    faults.settle()
    made: list[tuple[Path, Path]] = []
    try:
        for path, text in contents.items():
            made.append((_written(targets[path], text), targets[path]))
        for fresh, target in made:
            fresh.replace(target)
    except OSError as error:
        faults.found.append(_refusal(str(error.filename or ""), error.strerror or str(error)))
    finally:
        for fresh, _ in made:
            fresh.unlink(missing_ok=True)
    faults.settle()


def _check(path: Path, target: Path, sources: Collection[Path], faults: Faults) -> None:
    try:
        mode = target.stat().st_mode
    except FileNotFoundError:
        mode = None
    except OSError as error:
        faults.found.append(_refusal(str(path), error.strerror or str(error), "name another file"))
        return
    if target in {Path(os.path.realpath(source)) for source in sources}:
        faults.found.append(_refusal(str(path), "it is one of the files that were read", "name another file"))
    elif mode is not None and not stat.S_ISREG(mode):
        faults.found.append(_refusal(str(path), "it is there and is not a regular file", "name another file"))
    elif not target.parent.is_dir():
        faults.found.append(_refusal(str(path), f"there is no folder {path.parent}", "make the folder first"))


def _written(target: Path, text: str) -> Path:
    """The text in a new file beside the target, with the mode that the target has or would get."""
    handle, name = tempfile.mkstemp(prefix=f".{target.name[:80]}.", dir=target.parent)
    fresh = Path(name)
    try:
        with os.fdopen(handle, "w", encoding="utf-8", newline="\n") as stream:
            stream.write(text)
            stream.flush()
            os.fsync(stream.fileno())
        fresh.chmod(stat.S_IMODE(target.stat().st_mode) if target.exists() else 0o666 & ~_umask())
    except BaseException:
        fresh.unlink(missing_ok=True)
        raise
    return fresh


def _umask() -> int:
    mask = os.umask(0)
    os.umask(mask)
    return mask


def _refusal(path: str, why: str, advice: str = "") -> Diagnostic:
    return Diagnostic("cannot-write", f"{path} cannot be written: {why}", advice=advice)
