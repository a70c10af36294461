"""What every decision rule promises: guarding never makes a rule comply that did not, nor a breach of one that complied
by measurement alone; a wider uncertainty proves no more."""

from __future__ import annotations

from fractions import Fraction

from hypothesis import given, settings
from hypothesis import strategies as some
from small_files import only

ROOMS = some.fractions(min_value=-4, max_value=4, max_denominator=8)
WIDTHS = some.fractions(min_value=0, max_value=4, max_denominator=8)
PROVED = ("complies", "breach")


def judged(decision: str, room: Fraction, width: Fraction, shape: str) -> str:
    car = f"{{value: {float(1900 - room)} mm, uncertainty: {float(width)} mm{shape}}}"
    rules = f"decision: {decision}\nrules: {{it: {{require: dimensions.overall_width <= 1900 mm}}}}\n"
    return only(f"dimensions: {{overall_width: {car}}}\n", rules).verdict


@settings(max_examples=25, deadline=None)
@given(room=ROOMS, width=WIDTHS, more=WIDTHS, shape=some.sampled_from(["", ", coverage: 2", ", shape: triangular"]))
def test_guarding_only_takes_proofs_away(room: Fraction, width: Fraction, more: Fraction, shape: str) -> None:
    simple = judged("simple", room, width, shape)
    assert simple == ("complies" if room >= 0 else "breach")
    for decision in ("guarded", "worst case"):
        found, wider = (judged(decision, room, w, shape) for w in (width, width + more))
        assert found in (simple, "unproven")
        assert wider in (found, "unproven")
