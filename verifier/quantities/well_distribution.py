"""The well-distribution measure of a sequence."""

from fractions import Fraction
from math import isqrt

import numpy as np
from numpy.typing import NDArray

from verifier.kernels.progressions import Progression, largest_progression
from verifier.records import Cost, Measurement
from verifier.registry import quantity
from verifier.structures.require import sequence_of
from verifier.structures.subject import Subject

LONG = 100_000  # from so many terms on, compiled code pays for its loading


@quantity(
    "well_distribution",
    definition="max over a, b, t of abs(sum_(j=0..t-1) e_(a+jb)), all indices in 0..N-1, b >= 1",
    source="MauduitSarkozy1997",
    needs="sequence",
    symbol=r"W(E)",
    witness=("b", "a", "t"),
    maximum=lambda sizes: Fraction(sizes.N),
    cost=lambda sizes: Cost(4 * sizes.N * isqrt(sizes.N), 40 * sizes.N),
)
def well_distribution(subject: Subject) -> Measurement:
    r"""Return the largest sum over an arithmetic progression, with the least (b, a, t).

    .. math:: W(E) = \max_{a, b, t} \Bigl|\sum_{j < t} e_{a+jb}\Bigr|

    Returns
    -------
    Measurement
        value: integer in 1..N. witness: b >= 1, a >= 0, t >= 1.

    Notes
    -----
    Cost: N operations for each step b below about N/W.
    """
    value, witness = _largest(sequence_of(subject).signs)
    return Measurement(value, witness)


def _largest(signs: NDArray[np.int8]) -> tuple[int, Progression]:
    if len(signs) < LONG:
        return largest_progression(signs)
    from verifier.kernels.progressions_long import step_ranges  # noqa: PLC0415 numba costs 0.3 s

    return largest_progression(signs, step_ranges)
