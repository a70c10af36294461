"""What the command line may say, and what it comes to: the options that every question about a design takes.

Options mean the same in every command. Faults are raised as click's usage errors; `cli` gives them our own form.
"""

from __future__ import annotations

import os
import re
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from datetime import date
from fractions import Fraction
from pathlib import Path
from typing import Any, TypeVar

import click

from rulecheck.diagnostics import Diagnostic

FORMS = ("terminal", "json", "csv", "svg", "markdown")

Command = TypeVar("Command", bound=Callable[..., Any])


@dataclass(frozen=True, slots=True)
class Asked:
    """A question about a design. A delivery is a form with its file; None stands for standard output."""

    design: str
    rules: tuple[str, ...]
    settings: tuple[tuple[str, str], ...]
    changes: tuple[str, ...]
    states: dict[str, str]
    on: date | None
    deliveries: tuple[tuple[str, Path | None], ...]

    @property
    def options(self) -> dict[str, Any]:
        """What every verb about a design takes by name."""
        return {
            "rules": self.rules,
            "settings": self.settings,
            "changes": self.changes,
            "states": self.states,
            "on": self.on,
        }

    @property
    def json_on_stream(self) -> bool:
        """True where standard output is to be JSON."""
        return ("json", None) in self.deliveries


class Question(click.Command):
    """A command whose every `--form` may be followed by its own `--output`; keeps the order in which they stand."""

    def parse_args(self, ctx: click.Context, args: list[str]) -> list[str]:
        """Note the order, then parse as usual."""
        _, _, order = self.make_parser(ctx).parse_args(args=list(args))
        ctx.meta["order"] = [parameter.name for parameter in order if parameter.name in ("form", "output")]
        return super().parse_args(ctx, args)


def pair(text: str, form: str) -> tuple[str, str]:
    """The two sides of NAME=VALUE. Raises `ValueError`.

    >>> pair("tyres.rear.width=250 mm", "PATH=VALUE")
    ('tyres.rear.width', '250 mm')
    """
    name, equals, value = (part.strip() for part in text.partition("="))
    if not (name and equals and value):
        raise ValueError(f"'{text}' is not of the form {form}")
    return name, value


def day(text: str) -> date:
    """A date as YYYY-MM-DD, and in no other form. Raises `ValueError`.

    >>> day("2027-03-01")
    datetime.date(2027, 3, 1)
    """
    if re.fullmatch(r"[0-9]{4}-[0-9]{2}-[0-9]{2}", text):
        try:
            return date.fromisoformat(text)
        except ValueError:
            raise ValueError(f"'{text}' is not a day of the calendar") from None
    raise ValueError(f"'{text}' is not a date of the form 2027-03-01")


def share(text: str) -> Fraction:
    """A share from 0 to 1, written as `5%`, `5 %` or `0.05`. Raises `ValueError`.

    >>> share("5 %"), share("0.05")
    (Fraction(1, 20), Fraction(1, 20))
    """
    found = re.fullmatch(r"([0-9]{1,9}(?:\.[0-9]{1,9})?) ?(%?)", text.strip())
    value = Fraction(found[1]) / (100 if found[2] else 1) if found else None
    if value is None or value > 1:
        raise ValueError(f"'{text}' is not a share such as 5% or 0.05, from 0 to 1")
    return value


def _reading(read: Callable[[str], object]) -> Callable[[click.Context, click.Parameter, Any], Any]:
    """A callback that reads every text of an option, so that a fault names the option."""

    def callback(ctx: click.Context, parameter: click.Parameter, given: Any) -> Any:
        try:
            if isinstance(given, tuple):
                return tuple(read(text) for text in given)
            return None if given is None else read(given)
        except ValueError as error:
            raise click.BadParameter(str(error), ctx, parameter) from error

    return callback


_OPTIONS = (
    click.option(
        "--rules",
        metavar="FILE",
        multiple=True,
        help="Rule book to use instead of those that the design names; repeatable.",
    ),
    click.option(
        "--set",
        "settings",
        metavar="PATH=VALUE",
        multiple=True,
        callback=_reading(lambda text: pair(text, "PATH=VALUE")),
        help="Lay a value over the design, such as tyres.rear.width=250mm; repeatable.",
    ),
    click.option(
        "--change", "changes", metavar="FILE", multiple=True, help="Lay a change file over the design; repeatable."
    ),
    click.option(
        "--state",
        "states",
        metavar="AXIS=NAME",
        multiple=True,
        callback=_reading(lambda text: pair(text, "AXIS=NAME")),
        help="Take the design as it is in this state, such as fuel=empty; one an axis.",
    ),
    click.option(
        "--on", metavar="DATE", callback=_reading(day), help="Evaluation date, such as 2027-03-01; today if left out."
    ),
    click.option(
        "--form",
        metavar="FORM",
        type=click.Choice(FORMS),
        multiple=True,
        help="Form of the answer: terminal, json, or another that the command has; repeatable.",
    ),
    click.option(
        "--output", metavar="FILE", multiple=True, help="File for the form before it, instead of standard output."
    ),
)


def delivery(command: Command) -> Command:
    """The options of an answer that is about no design: on which day, and in which forms."""
    for option in reversed(_OPTIONS[-3:]):
        command = option(command)
    return command


def deliveries_of(given: dict[str, Any]) -> tuple[tuple[str, Path | None], ...]:
    """The forms that were asked for. Raises a usage error where they do not go together."""
    return deliveries(given["form"], given["output"], click.get_current_context().meta["order"])


def question(command: Command) -> Command:
    """The options of a question, in this order in the help."""
    for option in reversed(_OPTIONS):
        command = option(command)
    return command


vary_option = click.option(
    "--vary",
    metavar="PATH=VALUES",
    multiple=True,
    callback=_reading(lambda text: pair(text, "PATH=VALUES")),
    help="Tabulate and plot along a range or a list: vehicle.speed=60..320km/h:20km/h, recovery.axle=front,rear.",
)

reserve_option = click.option(
    "--reserve",
    metavar="SHARE",
    callback=_reading(share),
    help="Room to keep beyond every limit, for this run: 5% or 0.05.",
)


trials_option = click.option(
    "--trials",
    metavar="NUMBER",
    type=click.IntRange(10_000, 10_000_000),
    default=None,
    help="Also hold each uncertainty against Monte Carlo trials, at most so many.",
)


def asked_from(design: str, given: dict[str, Any]) -> Asked:
    """The question that the options come to. Raises a usage error where they do not go together."""
    return Asked(
        design,
        given["rules"],
        given["settings"],
        given["changes"],
        _states(given["states"]),
        given["on"],
        deliveries_of(given),
    )


def _states(pairs: Sequence[tuple[str, str]]) -> dict[str, str]:
    states = dict(pairs)
    if len(states) < len(pairs):
        raise click.UsageError("an axis is given two states", click.get_current_context())
    return states


def deliveries(
    forms: Sequence[str], outputs: Sequence[str], order: Sequence[str]
) -> tuple[tuple[str, Path | None], ...]:
    """Each form with the file that follows it; without a form the terminal form. Raises a usage error.

    >>> for form, path in deliveries(["terminal", "json"], ["report.json"], ["form", "form", "output"]):
    ...     print(form, path)
    terminal None
    json report.json
    """
    context = click.get_current_context(silent=True)
    if not forms and len(outputs) == 1:
        return (("terminal", Path(outputs[0])),)
    pairs: list[tuple[str, Path | None]] = []
    form_left, output_left = iter(forms), iter(outputs)
    for what in order:
        if what == "form":
            pairs.append((next(form_left), None))
        elif not pairs or pairs[-1][1] is not None:
            raise click.UsageError("every --output stands behind the --form that it belongs to", context)
        else:
            pairs[-1] = (pairs[-1][0], Path(next(output_left)))
    if sum(path is None for _, path in pairs) > 1:
        raise click.UsageError("at most one --form goes to standard output; give each other its --output", context)
    places = [os.path.realpath(path) for _, path in pairs if path is not None]
    if len(set(places)) < len(places):
        raise click.UsageError("two forms would go to one file", context)
    return tuple(pairs) or (("terminal", None),)


def usage_fault(error: click.ClickException) -> Diagnostic:
    """A fault of the command line in our own form."""
    message, _, near = error.format_message().partition("Did you mean")
    message = message.rstrip(" .(")
    if message[1:2].islower():
        message = message[0].lower() + message[1:]
    context = getattr(error, "ctx", None)
    command = context.command_path if context else "rulecheck"
    advice = f"did you mean{near.rstrip(')')}" if near else f"'{command} --help' says what it takes"
    return Diagnostic("usage", message, advice=advice)


def own_fault(error: Exception) -> Diagnostic:
    """A fault of ours, with the innermost place in the program."""
    trace = error.__traceback__
    while trace is not None and trace.tb_next is not None:
        trace = trace.tb_next
    place = f"{Path(trace.tb_frame.f_code.co_filename).name}, line {trace.tb_lineno}" if trace else "an unknown place"
    return Diagnostic(
        "internal",
        f"{type(error).__name__} in {place}: {error}",
        advice="this is a fault of rulecheck, not of your files; please report it with the files that brought it about",
    )
