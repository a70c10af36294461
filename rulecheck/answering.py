"""Answers to the streams and to files: a form that is asked for, or what is wrong, with the exit code of that.

The output modules are loaded by the answer that needs them, so that `--help` and `--version` come at once.
"""

from __future__ import annotations

import os
import sys
from collections.abc import Callable, Sequence
from pathlib import Path
from typing import TYPE_CHECKING

import click

from rulecheck.diagnostics import Diagnostic, Refused

if TYPE_CHECKING:
    from rulecheck.loading import Session
    from rulecheck.output.screen import Screen

Forms = dict[str, "Callable[[Screen], str]"]
Deliveries = Sequence[tuple[str, Path | None]]
UNUSABLE = 2
"""The exit code where the input cannot be used."""


def say(text: str, encoding: str) -> None:
    """Text on standard output. Whoever reads it may close it before the end, which is no fault."""
    from rulecheck.output.escaping import encodable

    try:
        click.echo(encodable(text, encoding), nl=False)
        sys.stdout.flush()
    except BrokenPipeError:
        # What Python would still write at exit has nowhere to go.
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
    except OSError as error:
        raise Refused([Diagnostic("cannot-write", f"standard output cannot be written: {error.strerror}")]) from error


def refuse(diagnostics: Sequence[Diagnostic], session: Session | None = None, *, as_json: bool = False) -> int:
    """Say what is wrong, on standard error, and as JSON on standard output where that was asked for."""
    from rulecheck.output.diagnostics_json import diagnostics_json
    from rulecheck.output.diagnostics_text import diagnostics_text
    from rulecheck.output.escaping import encodable

    text = diagnostics_text(diagnostics, session.texts if session else {})
    click.echo(encodable(text, sys.stderr.encoding or "utf-8"), err=True, nl=False)
    if as_json:
        say(diagnostics_json(diagnostics), sys.stdout.encoding or "utf-8")
    return UNUSABLE


def deliver(
    asked: Deliveries,
    session: Session,
    forms: Forms,
    kept: tuple[str, str] = ("", ""),
) -> None:
    """Files first, so that nothing is said where one of them cannot be written. `forms` writes each form for a screen."""
    from rulecheck.output.screen import PAPER, screen_of
    from rulecheck.output.writing import write_files

    files: dict[Path, str] = {Path(kept[0]): kept[1]} if kept[0] else {}
    shown = ""
    for form, path in asked:
        screen = PAPER if path is not None else screen_of(sys.stdout)
        if form not in forms:
            message = f"there is no form '{form}' of this answer"
            raise Refused([Diagnostic("usage", message, expected=" or ".join(forms))])
        text = forms[form](screen)
        if path is None:
            shown = text
        else:
            files[path] = text
    write_files(files, sources=_sources(session))
    say(shown, sys.stdout.encoding or "utf-8")


def _sources(session: Session) -> list[Path]:
    return [Path(space.root, file) for space in session.workspaces for file in space.texts]
