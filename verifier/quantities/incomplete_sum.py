"""The largest sum of chi(f) over a window of 0..p."""

from fractions import Fraction

from verifier.kernels.windows import largest_window, prefix_sums
from verifier.records import Measurement
from verifier.registry import quantity
from verifier.structures.require import character_of
from verifier.structures.subject import Subject


@quantity(
    "incomplete_sum",
    definition="max over windows 0 <= A <= B <= p of abs(sum_(A<=x<B) chi(f(x)))",
    source="MauduitSarkozy1997",
    needs="character",
    symbol=r"\max_{0\le A\le B\le p}\Bigl\lvert\sum_{A\le x<B}\chi(f(x))\Bigr\rvert",
    witness=("A", "B"),
    maximum=lambda sizes: Fraction(sizes.p),
)
def incomplete_sum(subject: Subject) -> Measurement:
    r"""Return the largest absolute sum over a window of 0..p, with the least window.

    .. math:: \max_{0 \le A \le B \le p} \Bigl|\sum_{A \le x < B} \chi(f(x))\Bigr|

    Returns
    -------
    Measurement
        value: integer in 0..p. witness: the least (A, B); (0, 0) where the value is 0.

    Notes
    -----
    The maximum is the range of the prefix sums. Cost: p additions.
    """
    value, first, end = largest_window(prefix_sums(character_of(subject).values))
    return Measurement(value, (first, end))
