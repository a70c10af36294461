"""Arguments, streams and exit codes.

Exit codes: 0 nothing that binds fails, 1 a breach, 2 unusable input, 3 not settled (open or unproven), 130 interrupted.
The engine is loaded by the command that needs it, so that `--help` and `--version` answer at once.
"""

from __future__ import annotations

import gc
import os
import re
import sys
from collections.abc import Callable, Sequence
from dataclasses import dataclass
from datetime import date
from fractions import Fraction
from pathlib import Path
from typing import TYPE_CHECKING, Any, NoReturn, TypeVar

import click

from rulecheck import __version__
from rulecheck.diagnostics import Diagnostic, Refused

if TYPE_CHECKING:
    from rulecheck.api import Session
    from rulecheck.output.screen import Screen

COMPLIES, BREACH, UNUSABLE, NOT_SETTLED, INTERRUPTED = 0, 1, 2, 3, 130
FORMS = ("terminal", "json")
SCHEMAS = ("design", "ruleset", "house", "change", "report", "workings", "diagnostics")

Command = TypeVar("Command", bound=Callable[..., Any])


def main() -> NoReturn:
    """The command `rulecheck`."""
    # One command is one short process: its bounded memory is given back whole at the end, and searching the terms
    # for circles meanwhile would cost more than it frees.
    gc.disable()
    sys.exit(run(sys.argv[1:]))


def run(arguments: Sequence[str]) -> int:
    """Run one command line and give its exit code; nothing but the code leaves by another way than the streams."""
    try:
        answer = rulecheck.main(list(arguments), prog_name="rulecheck", standalone_mode=False)
        sys.stdout.flush()
    except click.exceptions.Exit as left:
        return left.exit_code
    except click.ClickException as error:
        return _refuse([_usage(error)])
    except Refused as refused:
        return _refuse(refused.diagnostics)
    except (KeyboardInterrupt, click.Abort):
        click.echo("interrupted", err=True)
        return INTERRUPTED
    except BrokenPipeError:
        # Whoever read the output has closed it; what Python would still write at exit has nowhere to go.
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        return COMPLIES
    return answer if isinstance(answer, int) else COMPLIES


def _usage(error: click.ClickException) -> Diagnostic:
    """A fault of the command line in our own form."""
    message = error.format_message().rstrip(".")
    message = message[:1].lower() + message[1:]
    context = getattr(error, "ctx", None)
    command = context.command_path if context else "rulecheck"
    return Diagnostic("usage", message, advice=f"'{command} --help' says what it takes")


def _refuse(diagnostics: Sequence[Diagnostic], session: Session | None = None, *, as_json: bool = False) -> int:
    from rulecheck.output.diagnostics_json import diagnostics_json
    from rulecheck.output.diagnostics_text import diagnostics_text
    from rulecheck.output.escaping import encodable

    text = diagnostics_text(diagnostics, session.texts if session else {})
    click.echo(encodable(text, sys.stderr.encoding or "utf-8"), err=True, nl=False)
    if as_json:
        click.echo(encodable(diagnostics_json(diagnostics), sys.stdout.encoding or "utf-8"), nl=False)
    return UNUSABLE


# --- options ---------------------------------------------------------------------------------------------------------


@dataclass(frozen=True, slots=True)
class Asked:
    """What every question about a design takes."""

    design: str
    rules: tuple[str, ...]
    settings: tuple[tuple[str, str], ...]
    changes: tuple[str, ...]
    states: dict[str, str]
    on: date | None
    deliveries: tuple[tuple[str, Path | None], ...]

    @property
    def json_on_stream(self) -> bool:
        """True where standard output is to be JSON."""
        return ("json", None) in self.deliveries


class _Pair(click.ParamType):
    """NAME=VALUE."""

    name = "pair"

    def convert(self, value: Any, param: click.Parameter | None, ctx: click.Context | None) -> tuple[str, str]:
        if isinstance(value, tuple):
            return value
        name, equals, text = str(value).partition("=")
        if not equals or not name.strip() or not text.strip():
            self.fail(f"'{value}' is not of the form {param.metavar if param else 'NAME=VALUE'}", param, ctx)
        return name.strip(), text.strip()


class _Day(click.ParamType):
    """A date as YYYY-MM-DD."""

    name = "date"

    def convert(self, value: Any, param: click.Parameter | None, ctx: click.Context | None) -> date:
        if isinstance(value, date):
            return value
        try:
            if re.fullmatch(r"\d{4}-\d\d-\d\d", value):
                return date.fromisoformat(value)
        except ValueError:
            pass
        self.fail(f"'{value}' is not a date of the form 2027-03-01", param, ctx)


class _Share(click.ParamType):
    """A share, as `5 %` or `0.05`, from 0 to 1."""

    name = "share"

    def convert(self, value: Any, param: click.Parameter | None, ctx: click.Context | None) -> Fraction:
        if isinstance(value, Fraction):
            return value
        found = re.fullmatch(r"(\d{1,9}(?:\.\d{1,9})?) ?(%?)", str(value).strip(), re.ASCII)
        share = Fraction(found[1]) / (100 if found[2] else 1) if found else None
        if share is None or share > 1:
            self.fail(f"'{value}' is not a share such as 5% or 0.05, from 0 to 1", param, ctx)
        return share


class _Question(click.Command):
    """A command whose every `--form` may be followed by its own `--output`; keeps the order in which they stand."""

    def parse_args(self, ctx: click.Context, args: list[str]) -> list[str]:
        """Note the order, then parse as usual."""
        _, _, order = self.make_parser(ctx).parse_args(args=list(args))
        ctx.meta["order"] = [parameter.name for parameter in order if parameter.name in ("form", "output")]
        return super().parse_args(ctx, args)


def _deliveries(forms: Sequence[str], outputs: Sequence[str]) -> tuple[tuple[str, Path | None], ...]:
    """Each form with the file that follows it; None stands for standard output."""
    if not forms and len(outputs) == 1:
        return (("terminal", Path(outputs[0])),)
    pairs: list[tuple[str, Path | None]] = []
    form_left, output_left = iter(forms), iter(outputs)
    for what in click.get_current_context().meta["order"]:
        if what == "form":
            pairs.append((next(form_left), None))
        elif not pairs or pairs[-1][1] is not None:
            raise click.UsageError("every --output stands behind the --form that it belongs to")
        else:
            pairs[-1] = (pairs[-1][0], Path(next(output_left)))
    if sum(path is None for _, path in pairs) > 1:
        raise click.UsageError("at most one --form goes to standard output; give the others an --output each")
    places = [os.path.realpath(path) for _, path in pairs if path is not None]
    if len(set(places)) < len(places):
        raise click.UsageError("two forms would go to one file")
    return tuple(pairs) or (("terminal", None),)


def _states(pairs: Sequence[tuple[str, str]]) -> dict[str, str]:
    states = dict(pairs)
    if len(states) < len(pairs):
        raise click.UsageError("an axis is given two states")
    return states


_OPTIONS = (
    click.option("--rules", metavar="FILE", multiple=True, help="Rule book to use instead of those that the design names; repeatable."),
    click.option("--set", "settings", metavar="PATH=VALUE", type=_Pair(), multiple=True, help="Lay a value over the design; repeatable."),
    click.option("--change", "changes", metavar="FILE", multiple=True, help="Lay a change file over the design; repeatable."),
    click.option("--state", "states", metavar="AXIS=NAME", type=_Pair(), multiple=True, help="Judge the design as written in this state."),
    click.option("--on", metavar="DATE", type=_Day(), help="Evaluation date, as 2027-03-01; today if left out."),
    click.option("--form", metavar="FORM", type=click.Choice(FORMS), multiple=True, help="Form of the answer: terminal or json; repeatable."),
    click.option("--output", metavar="FILE", multiple=True, help="File for the form before it, instead of standard output."),
)  # fmt: skip


def _question(command: Command) -> Command:
    for option in reversed(_OPTIONS):
        command = option(command)
    return command


def _asked(design: str, given: dict[str, Any]) -> Asked:
    return Asked(
        design,
        given["rules"],
        given["settings"],
        given["changes"],
        _states(given["states"]),
        given["on"],
        _deliveries(given["form"], given["output"]),
    )


# --- commands --------------------------------------------------------------------------------------------------------


@click.group(context_settings={"help_option_names": ["--help", "-h"], "max_content_width": 96})
@click.version_option(__version__, message="rulecheck %(version)s")
def rulecheck() -> None:
    """Hold a car's design file against a technical rule book: verdicts, margins, and how they came about.

    Begin with 'rulecheck handbook'. A check is not approval: the event's officials decide.
    """


@rulecheck.command(cls=_Question)
@click.argument("design", metavar="DESIGN")
@_question
@click.option("--reserve", metavar="SHARE", type=_Share(), help="Room to keep beyond every limit, for this run: 5% or 0.05.")
def check(design: str, reserve: Fraction | None, **given: Any) -> int:
    """Verdict and margin of every rule for one design.

    Exit code: 0 nothing that binds fails, 1 a breach, 2 unusable input, 3 open or unproven.
    """
    from rulecheck import api
    from rulecheck.output.json_report import report_json
    from rulecheck.output.terminal import report_text

    asked, session = _asked(design, given), api.Session()
    try:
        report = api.check(
            asked.design,
            rules=asked.rules,
            settings=asked.settings,
            changes=asked.changes,
            states=asked.states,
            on=asked.on,
            reserve=reserve,
            session=session,
        )
        _deliver(asked, session, lambda screen: report_text(report, screen), lambda: report_json(report))
    except Refused as refused:
        return _refuse(refused.diagnostics, session, as_json=asked.json_on_stream)
    return {"breach": BREACH, "open": NOT_SETTLED, "unproven": NOT_SETTLED}.get(report.verdict, COMPLIES)


@rulecheck.command(cls=_Question)
@click.argument("design", metavar="DESIGN")
@click.argument("names", metavar="NAME...", nargs=-1, required=True)
@_question
@click.option("--closed-form", is_flag=True, help="Also the margin as one formula of the inputs, with its derivatives.")
@click.option("--solve-for", metavar="PATH", default="", help="Solve the closed form for this input.")
def workings(design: str, names: tuple[str, ...], closed_form: bool, solve_for: str, **given: Any) -> int:
    """How rules, derived figures, physics figures or whole physics modules came about, step by step."""
    from rulecheck import api
    from rulecheck.output.json_report import workings_json
    from rulecheck.output.terminal_workings import workings_text

    asked, session = _asked(design, given), api.Session()
    try:
        found = api.workings(
            asked.design,
            names,
            rules=asked.rules,
            settings=asked.settings,
            changes=asked.changes,
            states=asked.states,
            on=asked.on,
            closed_form=closed_form or bool(solve_for),
            solve_for=solve_for,
            session=session,
        )
        _deliver(asked, session, lambda screen: workings_text(found, screen), lambda: workings_json(found))
    except Refused as refused:
        return _refuse(refused.diagnostics, session, as_json=asked.json_on_stream)
    return COMPLIES


def _deliver(
    asked: Asked, session: Session, for_terminal: Callable[[Screen], str], as_json: Callable[[], str]
) -> None:
    """Files first, so that nothing is said where one of them cannot be written."""
    from rulecheck.output.escaping import encodable
    from rulecheck.output.screen import PAPER, screen_of
    from rulecheck.output.writing import write_files

    files: dict[Path, str] = {}
    shown = ""
    for form, path in asked.deliveries:
        screen = PAPER if path is not None else screen_of(sys.stdout)
        text = for_terminal(screen) if form == "terminal" else as_json()
        if path is None:
            shown = encodable(text, screen.encoding)
        else:
            files[path] = text
    write_files(files, sources=_sources(session))
    click.echo(shown, nl=False)


def _sources(session: Session) -> list[Path]:
    return [Path(space.root, file) for space in session.workspaces for file in space.texts]


@rulecheck.command()
@click.argument("page", metavar="[PAGE]", default="")
@click.argument("what", metavar="[WHAT]", default="")
@click.option("--rules", metavar="FILE", multiple=True, help="Rule book whose inputs the design schema is to know; repeatable.")
def handbook(page: str, what: str, rules: tuple[str, ...]) -> None:
    """Pages of the handbook; without a page, the list of them.

    'handbook schema WHAT' prints the JSON Schema of a design, ruleset, house or change file, or of the report,
    workings or diagnostics in JSON.
    """
    from rulecheck.handbook import pages
    from rulecheck.output.escaping import encodable
    from rulecheck.output.pages import page_text
    from rulecheck.output.screen import screen_of

    screen = screen_of(sys.stdout)
    if page == "schema":
        text = _schema(what, rules)
    elif what or rules:
        raise click.UsageError("WHAT and --rules go with 'handbook schema'", click.get_current_context())
    elif not page:
        text = page_text(pages.page("index"), screen)
    elif page in pages.names():
        text = page_text(pages.page(page), screen)
    else:
        raise click.UsageError(f"the handbook has no page '{page}'; it has {', '.join(pages.names())}", click.get_current_context())
    click.echo(encodable(text, screen.encoding), nl=False)


def _schema(what: str, rules: Sequence[str]) -> str:
    import json

    if what not in SCHEMAS:
        raise click.UsageError(f"WHAT is one of {', '.join(SCHEMAS)}", click.get_current_context())
    if rules and what not in ("design", "change"):
        raise click.UsageError("--rules goes with the schema of a design or a change", click.get_current_context())
    if what in ("report", "workings", "diagnostics"):
        from rulecheck.output import report_schema

        found = {
            "report": report_schema.report_schema,
            "workings": report_schema.workings_schema,
            "diagnostics": report_schema.diagnostics_schema,
        }[what]()
    else:
        from rulecheck.api import load_ruleset
        from rulecheck.model import schemas

        books = [load_ruleset(path) for path in rules]
        found = {
            "design": lambda: schemas.design_schema(books),
            "change": lambda: schemas.change_schema(books),
            "ruleset": schemas.ruleset_schema,
            "house": schemas.house_schema,
        }[what]()
    return json.dumps(found, indent=2, ensure_ascii=False) + "\n"


if __name__ == "__main__":
    main()
