"""Arguments, streams and exit codes.

Exit codes: 0 nothing that binds fails, 1 a breach, 2 unusable input, 3 not settled (open or unproven), 130 interrupted.
The engine is loaded by the command that needs it, so that `--help` and `--version` answer at once.
"""

from __future__ import annotations

import gc
import sys
from collections.abc import Sequence
from datetime import date
from fractions import Fraction
from pathlib import Path
from typing import TYPE_CHECKING, Any, NoReturn

import click

from rulecheck import __version__
from rulecheck.answering import UNUSABLE, Forms, deliver, refuse, say
from rulecheck.arguments import (
    Asked,
    Question,
    asked_from,
    deliveries_of,
    delivery,
    own_fault,
    question,
    reserve_option,
    trials_option,
    usage_fault,
    vary_option,
)
from rulecheck.diagnostics import Refused

if TYPE_CHECKING:
    from rulecheck.api import Session

COMPLIES, BREACH, NOT_SETTLED, INTERRUPTED = 0, 1, 3, 130
SCHEMAS = (
    "design", "ruleset", "physics", "house", "change", "track",
    "report", "workings", "varied", "whatif", "headroom", "proofreading", "diagnostics",
)  # fmt: skip


def main() -> NoReturn:
    """The command `rulecheck`."""
    # One command is one short process: its bounded memory is given back whole at the end, and searching the terms
    # for circles meanwhile would cost more than it frees.
    gc.disable()
    sys.exit(run(sys.argv[1:]))


def run(arguments: Sequence[str]) -> int:
    """Run one command line and give its exit code. What is said goes to the streams; nothing is raised."""
    try:
        answer = rulecheck.main(list(arguments), prog_name="rulecheck", standalone_mode=False)
    except click.ClickException as error:
        return refuse([usage_fault(error)])
    except Refused as refused:
        return refuse(refused.diagnostics)
    except (KeyboardInterrupt, click.Abort):
        click.echo("interrupted", err=True)
        return INTERRUPTED
    except Exception as error:  # noqa: BLE001 - a crash must not be taken for a breach, whose exit code it would have
        return refuse([own_fault(error)])
    return answer if isinstance(answer, int) else COMPLIES


# --- commands --------------------------------------------------------------------------------------------------------


@click.group(context_settings={"help_option_names": ["--help", "-h"]}, invoke_without_command=True)
@click.version_option(__version__, message="rulecheck %(version)s")
@click.pass_context
def rulecheck(context: click.Context) -> None:
    """Hold a car's design file against a technical rule book: verdicts, margins, and how they came about.

    Begin with 'rulecheck handbook'. A check is not approval: the event's officials decide.
    """
    if context.invoked_subcommand is None:
        click.echo(context.get_help(), err=True)
        context.exit(UNUSABLE)


@rulecheck.command(cls=Question)
@click.argument("design", metavar="DESIGN")
@question
@reserve_option
@trials_option
def check(design: str, reserve: Fraction | None, trials: int | None, **given: Any) -> int:
    """Verdict and margin of every rule for one design.

    Exit code: 0 nothing that binds fails, 1 a breach, 2 unusable input, 3 open or unproven.
    """
    from rulecheck import api
    from rulecheck.output.json_report import report_json
    from rulecheck.output.terminal import report_text

    asked, session = asked_from(design, given), api.Session()
    try:
        report = api.check(asked.design, reserve=reserve, trials=trials or 0, session=session, **asked.options)
        deliver(
            asked.deliveries,
            session,
            {"terminal": lambda on: report_text(report, on), "json": lambda _: report_json(report)},
        )
    except Refused as refused:
        return refuse(refused.diagnostics, session, as_json=asked.json_on_stream)
    return {"breach": BREACH, "open": NOT_SETTLED, "unproven": NOT_SETTLED}.get(report.verdict, COMPLIES)


@rulecheck.command(cls=Question, short_help="How rules and figures came about, step by step.")
@click.argument("design", metavar="DESIGN")
@click.argument("names", metavar="NAME...", nargs=-1, required=True)
@question
@click.option("--closed-form", is_flag=True, help="Also the margin as one formula of the inputs, with its derivatives.")
@click.option("--solve-for", metavar="PATH", default="", help="Solve the closed form for this input.")
@vary_option
def workings(
    design: str,
    names: tuple[str, ...],
    closed_form: bool,
    solve_for: str,
    vary: tuple[tuple[str, str], ...],
    **given: Any,
) -> int:
    """How rules, derived figures, physics figures or whole physics modules came about, step by step.

    With --vary instead: how they run along the values of an input, as a table and a plot; a second --vary gives a
    curve for each of its values.
    """
    from rulecheck import api
    from rulecheck.output.json_report import workings_json
    from rulecheck.output.terminal_workings import workings_text

    if vary and (closed_form or solve_for):
        raise click.UsageError("a closed form is of the design as it stands, and does not go with --vary")
    asked, session = asked_from(design, given), api.Session()
    if vary:
        return _varied(asked, session, names, vary)
    try:
        found = api.workings(
            asked.design,
            names,
            closed_form=closed_form or bool(solve_for),
            solve_for=solve_for,
            session=session,
            **asked.options,
        )
        deliver(
            asked.deliveries,
            session,
            {"terminal": lambda on: workings_text(found, on), "json": lambda _: workings_json(found)},
        )
    except Refused as refused:
        return refuse(refused.diagnostics, session, as_json=asked.json_on_stream)
    return COMPLIES


def _varied(asked: Asked, session: Session, names: Sequence[str], along: Sequence[tuple[str, str]]) -> int:
    """`workings --vary`."""
    from rulecheck import api
    from rulecheck.output.csv_table import varied_csv
    from rulecheck.output.json_varied import varied_json
    from rulecheck.output.svg_varied import varied_svg
    from rulecheck.output.terminal_varied import varied_text

    try:
        found = api.vary(asked.design, names, along, session=session, **asked.options)
        forms: Forms = {
            "terminal": lambda on: varied_text(found, on),
            "json": lambda _: varied_json(found),
            "csv": lambda _: varied_csv(found),
            "svg": lambda _: varied_svg(found),
        }
        deliver(asked.deliveries, session, forms)
    except Refused as refused:
        return refuse(refused.diagnostics, session, as_json=asked.json_on_stream)
    return COMPLIES


@rulecheck.command(cls=Question, short_help="Every margin and figure before and after changes.")
@click.argument("design", metavar="DESIGN")
@click.option("--keep", metavar="FILE", default="", help="Write the design with the change as a variant to this file.")
@question
def whatif(design: str, keep: str, **given: Any) -> int:
    """Every margin and every physics figure before and after changes, most affected first.

    What --set lays over the design is one change; each --change is a column of its own, and --set goes with each.
    """
    from rulecheck import api
    from rulecheck.output.json_whatif import whatif_json
    from rulecheck.output.terminal_whatif import whatif_text

    asked, session = asked_from(design, given), api.Session()
    try:
        columns = [api.Change((path,), asked.settings) for path in asked.changes]
        if asked.settings and not columns:
            columns = [api.Change((), asked.settings)]
        found = api.whatif(
            asked.design, columns, rules=asked.rules, states=asked.states, on=asked.on, session=session
        )  # fmt: skip
        kept = api.kept_variant(asked.design, columns, Path(keep), session) if keep else ""
        forms: Forms = {"terminal": lambda on: whatif_text(found, on), "json": lambda _: whatif_json(found)}
        deliver(asked.deliveries, session, forms, (keep, kept))
    except Refused as refused:
        return refuse(refused.diagnostics, session, as_json=asked.json_on_stream)
    return COMPLIES


@rulecheck.command(cls=Question, short_help="How far each input may move before the first rule breaks.")
@click.argument("design", metavar="DESIGN")
@click.argument("names", metavar="[PATH]...", nargs=-1)
@question
def headroom(design: str, names: tuple[str, ...], **given: Any) -> int:
    """How far each input, or those named, may move down and up before the first rule breaks, and which rule."""
    from rulecheck import api
    from rulecheck.output.json_whatif import headroom_json
    from rulecheck.output.terminal_headroom import headroom_text

    asked, session = asked_from(design, given), api.Session()
    try:
        found = api.headroom(asked.design, names, session=session, **asked.options)
        deliver(
            asked.deliveries,
            session,
            {"terminal": lambda on: headroom_text(found, on), "json": lambda _: headroom_json(found)},
        )
    except Refused as refused:
        return refuse(refused.diagnostics, session, as_json=asked.json_on_stream)
    return COMPLIES


@rulecheck.command(cls=Question, short_help="Hold rule books against themselves, without a design.")
@click.argument("rulesets", metavar="RULESET...", nargs=-1, required=True)
@click.option(
    "--listing", is_flag=True, help="Also the effective rule book of the day: each rule and where it is from."
)
@click.option("--strict", is_flag=True, help="Exit code 1 where there is a fault.")
@delivery
def proofread(rulesets: tuple[str, ...], listing: bool, strict: bool, on: date | None, **given: Any) -> int:
    """Find what is wrong with rule books themselves, and which clauses have no rule yet.

    Exit code: 0 it was read, 1 with --strict where there is a fault, 2 unusable input.
    """
    from rulecheck import api
    from rulecheck.output.json_proofreading import proofreading_json
    from rulecheck.output.markdown_proofreading import proofreading_markdown
    from rulecheck.output.terminal_proofreading import proofreading_text

    asked, session = deliveries_of(given), api.Session()
    try:
        found = api.proofread(rulesets, on=on, listed=listing, session=session)
        forms: Forms = {
            "terminal": lambda on: proofreading_text(found, on),
            "json": lambda _: proofreading_json(found),
            "markdown": lambda _: proofreading_markdown(found),
        }
        deliver(asked, session, forms)
    except Refused as refused:
        return refuse(refused.diagnostics, session, as_json=("json", None) in asked)
    return BREACH if strict and found.counts["fault"] else COMPLIES


@rulecheck.command()
@click.argument("page", metavar="[PAGE]", default="")
@click.argument("what", metavar="[WHAT]", default="")
@click.option(
    "--rules", metavar="FILE", multiple=True, help="Rule book whose inputs the design schema is to know; repeatable."
)
def handbook(page: str, what: str, rules: tuple[str, ...]) -> None:
    """Pages of the handbook; without a page, the list of them.

    'handbook schema WHAT' prints the JSON Schema of a design, ruleset, physics, house, change or track file, or of what a
    command gives in JSON: report, workings, varied, whatif, headroom, proofreading, diagnostics.
    """
    from rulecheck.handbook import pages
    from rulecheck.output.pages import page_text
    from rulecheck.output.screen import screen_of

    screen = screen_of(sys.stdout)
    if page == "schema":
        text = _schema(what, rules)
    elif what or rules:
        raise click.UsageError("WHAT and --rules go with 'handbook schema'", click.get_current_context())
    elif not page:
        text = page_text(pages.page("index"), screen)
    elif pages.meant(page) in pages.names():
        text = page_text(pages.page(pages.meant(page)), screen)
    else:
        raise click.UsageError(
            f"the handbook has no page '{page}'; it has {', '.join(pages.names())}", click.get_current_context()
        )
    say(text, screen.encoding)


def _schema(what: str, rules: Sequence[str]) -> str:
    import json

    if what not in SCHEMAS:
        raise click.UsageError(f"WHAT is one of {', '.join(SCHEMAS)}", click.get_current_context())
    if rules and what not in ("design", "change"):
        raise click.UsageError("--rules goes with the schema of a design or a change", click.get_current_context())
    from rulecheck.output.schemas import OUTPUTS

    if what in OUTPUTS:
        found = OUTPUTS[what]()
    else:
        from rulecheck.api import load_ruleset
        from rulecheck.model import schemas

        books = [load_ruleset(path) for path in rules]
        found = {
            "design": lambda: schemas.design_schema(books),
            "change": lambda: schemas.change_schema(books),
            "ruleset": schemas.ruleset_schema,
            "house": schemas.house_schema,
            "physics": schemas.physics_schema,
            "track": schemas.track_schema,
        }[what]()
    return json.dumps(found, indent=2, ensure_ascii=False) + "\n"


if __name__ == "__main__":
    main()
