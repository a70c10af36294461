"""Rows of the vocabulary for papers: evidence, records of tests, judgements, dispensations, claims."""

from __future__ import annotations

from rulecheck.model.vocabulary import Entry
from rulecheck.quantity.reading_records import BASES

RECORDS = (
    Entry("signals.*", "signal", "Logged channel, read where a rule asks for it"),
    Entry("evidence", "collection", "Certificates, drawings, measurement sheets and inspections"),
    Entry(
        "evidence.*.kind",
        "choice",
        "What it is",
        choices=(
            "certificate",
            "homologation",
            "licence",
            "drawing",
            "measurement",
            "calculation",
            "inspection",
            "declaration",
            "data_sheet",
        ),
    ),
    Entry("evidence.*.reference", "text", "Number or title of the document"),
    Entry("evidence.*.issuer", "text", "Who issued it"),
    Entry("evidence.*.part", "text", "Part that it covers"),
    Entry("evidence.*.issued", "date", "Day of issue"),
    Entry("evidence.*.made", "date", "Day of making on the label"),
    Entry("evidence.*.until", "date", "Last day on which it is good"),
    *(
        Entry(f"judgements.{stars}.{name}", kind, meaning, choices=choices)  # type: ignore[arg-type]
        for stars in ("*", "*.*")
        for name, kind, meaning, choices in (
            ("verdict", "choice", "What the person decided", ("complies", "breach")),
            ("role", "text", "In which role", ()),
            ("date", "date", "When", ()),
            ("reason", "text", "Why", ()),
        )
    ),
    Entry("records", "collection", "Tests that were made"),
    Entry("records.*.date", "date", "Day of the test"),
    Entry("records.*.report", "text", "Number or title of the report"),
    Entry("records.*.basis", "choice", "Where its values come from", choices=BASES),
    Entry("records.*.of", "text", "Item that was tested"),
    Entry("records.*.runs", "collection", "Runs of the test, where it was made several times"),
    Entry("records.*.runs.*.date", "date", "Day of the run, where it is not that of the record"),
    Entry("records.*.runs.*.report", "text", "Report of the run, where it is not that of the record"),
    Entry("baselines", "collection", "Older designs that this one is held against"),
    Entry("baselines.*.design", "text", "File of the design, beside this one"),
    Entry("baselines.*.consents", "collection", "Written consents to changes since then"),
    Entry("baselines.*.consents.*.path", "text", "Path that may change; * for any name, ** for all below"),
    Entry("baselines.*.consents.*.reference", "text", "Number of the letter"),
    Entry("baselines.*.consents.*.date", "date", "Day of the letter"),
    Entry("dispensations.*.rule", "text", "Rule that it departs from"),
    Entry("dispensations.*.reference", "text", "Number of the letter"),
    Entry("dispensations.*.until", "date", "Last day on which it is good"),
    Entry("claims.*", "text", "Branch that is claimed for a rule"),
)
