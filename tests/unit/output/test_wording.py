from decimal import Decimal

from hypothesis import given
from hypothesis import strategies as st

from rulecheck.outcome.results import Amount
from rulecheck.output.wording import counted, percent, short, state_words


def test_short_never_promises_more_room() -> None:
    assert short(Amount("8.99592", "mm")) == "8.995 mm"
    assert short(Amount("-0.00012345", "mm")) == "-0.0001234 mm"
    assert short(Amount("1234.56", "mm")) == "1234.56 mm"
    assert short(Amount("1 to 2", "mm")) == "1 to 2 mm"
    assert short(Amount("7", "1")) == "7"
    assert short(None) == ""


@given(st.decimals(-999, 999, places=6))
def test_short_keeps_sign_and_never_grows(number: Decimal) -> None:
    shown = Decimal(short(Amount(f"{number:f}", "")))
    assert abs(shown) <= abs(number)
    assert (shown > 0) == (number > 0)
    assert (shown < 0) == (number < 0)


def test_percent() -> None:
    assert percent(0.0) == "0 %"
    assert percent(0.0999) == "9.9 %"
    assert percent(1e-9) == "0.00 %"
    assert percent(-1e-9) == "-0.00 %"
    assert percent(12345.0) == "1e+6 %"


def test_states_and_counts() -> None:
    assert state_words({}) == ""
    assert counted(0, "fault") == "0 faults"
