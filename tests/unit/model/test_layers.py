"""Rule books in layers: what replaces, withdraws and keeps what."""

from __future__ import annotations

from small_files import CAR, check_files, findings

from rulecheck.diagnostics import Refused
from rulecheck.outcome.results import Report

WIDE = "dimensions: {overall_width: 1890 mm}\n"
GENERAL = """\
ruleset: General
rules:
  width: {require: dimensions.overall_width <= 1800 mm}
  mirror: {require: dimensions.overall_width <= 2000 mm}
"""


def layered(top: str, **books: str) -> Report:
    """A check against `top`, with other rule books beside it by their name."""
    files = {f"{name}.ruleset.yaml": text for name, text in books.items()}
    return check_files({"car.design.yaml": CAR + WIDE, "cup.ruleset.yaml": "ruleset: Cup\n" + top, **files})


def refused(top: str, **books: str) -> list[tuple[str, str]]:
    try:
        report = layered(top, **books)
    except Refused as error:
        return [(item.code, str(item.span)) for item in error.diagnostics]
    raise AssertionError(f"not refused: {report.verdict}")


def test_a_rule_of_the_same_name_replaces_and_says_what() -> None:
    found = findings(
        layered(
            "extends: general.ruleset.yaml\nrules: {width: {require: dimensions.overall_width <= 1900 mm}}\n",
            general=GENERAL,
        )
    )
    assert list(found) == ["width", "mirror"]
    assert found["width"].verdict == "complies"
    assert found["width"].history == ("replaced: general.ruleset.yaml:3:3",)
    assert found["mirror"].history == ()


def test_rules_of_every_base_can_be_withdrawn() -> None:
    report = layered(
        "extends: [one.ruleset.yaml, two.ruleset.yaml]\nwithdrawn: {a: bulletin 1, b: bulletin 2}\n",
        one="ruleset: One\nrules: {a: {require: 2 <= 1}, c: {require: 1 <= 2}}\n",
        two="ruleset: Two\nrules: {b: {require: 2 <= 1}}\n",
    )
    assert list(findings(report)) == ["c"]
    assert report.rulesets[0].withdrawn == ("a: bulletin 1", "b: bulletin 2")


def test_two_books_on_one_ground_keep_what_either_has_changed() -> None:
    """The second stands on the first form of `width`, which the first of the two has replaced, and on `mirror`."""
    report = layered(
        "extends: [one.ruleset.yaml, two.ruleset.yaml]\n",
        general=GENERAL,
        one="ruleset: One\nextends: general.ruleset.yaml\nwithdrawn: {mirror: bulletin 3}\n"
        "rules: {width: {require: dimensions.overall_width <= 1900 mm}}\n",
        two="ruleset: Two\nextends: general.ruleset.yaml\nrules: {more: {require: 1 <= 2}}\n",
    )
    found = findings(report)
    assert list(found) == ["width", "more"]
    assert found["width"].verdict == "complies"
    assert [book.name for book in report.rulesets[0].extends] == ["General", "One", "Two"]


def test_what_cannot_be_withdrawn() -> None:
    rules = "rules: {own: {require: 1 <= 2}}\n"
    general = {"general": GENERAL}
    place = "cup.ruleset.yaml:2:13"
    assert refused("withdrawn: {own: since}\n" + rules) == [("unknown-name", place)]
    assert refused("withdrawn: {}\n" + "withdrawm: {}\n" + rules)[0][0] == "unknown-key"
    extends = "extends: general.ruleset.yaml\n"
    assert refused("withdrawn: {miror: since}\n" + extends + rules, **general) == [("unknown-name", place)]
    assert refused("withdrawn: {own: since}\n" + extends + rules, **general) == [("name-taken", place)]
    assert refused("withdrawn: {mirror: }\n" + extends + rules, **general) == [("quote-this", place)]


def test_a_name_means_one_thing_in_all_layers() -> None:
    top = "extends: general.ruleset.yaml\nderived: {width: {formula: 5 mm, unit: mm}}\n"
    assert refused(top, general=GENERAL) == [("name-taken", "general.ruleset.yaml:3:3")]
