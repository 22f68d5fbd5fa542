"""The largest sum of chi(f) over any interval of length at most p."""

from fractions import Fraction

from verifier.kernels.windows import largest_cyclic_window
from verifier.records import Measurement
from verifier.registry import quantity
from verifier.structures.require import character_of
from verifier.structures.subject import Subject


@quantity(
    "cyclic_incomplete_sum",
    definition="the same over all intervals of length at most p, past p included",
    source="MauduitSarkozy1997",
    needs="character",
    symbol=r"\max_{\lvert I\rvert\le p}\Bigl\lvert\sum_{x\in I}\chi(f(x))\Bigr\rvert",
    witness=("A", "B"),
    maximum=lambda sizes: Fraction(sizes.p),
)
def cyclic_incomplete_sum(subject: Subject) -> Measurement:
    """Return the largest absolute interval sum, with the least interval."""
    value, first, end = largest_cyclic_window(character_of(subject).values)
    return Measurement(value, (first, end))
