"""The largest sum of chi(f) over any interval of length at most p."""

from fractions import Fraction

from verifier.kernels.windows import largest_cyclic_window
from verifier.records import Measurement
from verifier.registry import quantity
from verifier.structures.require import character_of
from verifier.structures.subject import Subject


@quantity(
    "cyclic_incomplete_sum",
    definition="max over all intervals I of length at most p, past p included, "
    "of abs(sum_(x in I) chi(f(x)))",
    source="MauduitSarkozy1997",
    needs="character",
    symbol=r"\max_{\lvert I\rvert\le p}\Bigl\lvert\sum_{x\in I}\chi(f(x))\Bigr\rvert",
    witness=("A", "B"),
    maximum=lambda sizes: Fraction(sizes.p),
)
def cyclic_incomplete_sum(subject: Subject) -> Measurement:
    r"""Return the largest absolute sum over an interval of length at most p, with the least one.

    .. math:: \max_{A \le B \le A + p} \Bigl|\sum_{A \le x < B} \chi(f(x))\Bigr|

    Returns
    -------
    Measurement
        value: integer in 0..p. witness: the least (A, B), 0 <= A < p.

    Notes
    -----
    x runs on periodically, which makes this the form that theorems on intervals speak of. Cost:
    about 10 p operations.
    """
    value, first, end = largest_cyclic_window(character_of(subject).values)
    return Measurement(value, (first, end))
