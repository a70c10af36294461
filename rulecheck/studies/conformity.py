"""Probabilities of conformity, for display beside a verdict.

Source: JCGM 106:2012, 7.3 and 7.4: with a normal distribution around the estimate, a one-sided limit is met with
`Phi(margin / u)`, a two-sided one with the difference of two such values.
"""

from __future__ import annotations

import math
from collections.abc import Sequence


def normal_share(deviate: float) -> float:
    """The standard normal distribution function `Phi`.

    >>> round(normal_share(1.4), 4)
    0.9192
    """
    return 0.5 * math.erfc(-deviate / math.sqrt(2))


def fails(margins: Sequence[float], standard: float) -> float:
    """The probability that one of the limits of a value is not met; `margins` are the room to each of them.

    Exact for the two limits of one value, which cannot both be broken; for one limit it is that of the limit.

    >>> round(1 - fails([2.7, 1.1], 1.8), 2)
    0.66
    """
    if standard == 0:
        return 1.0 if any(margin < 0 for margin in margins) else 0.0
    return min(1.0, sum(normal_share(-margin / standard) for margin in margins))
