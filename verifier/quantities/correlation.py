"""The correlation measure of a sequence."""

from fractions import Fraction

import numpy as np
from numpy.typing import NDArray

from verifier.errors import CaseError
from verifier.kernels.correlation_plain import correlation_plain
from verifier.kernels.lag_ranges import least_window
from verifier.records import Cost, Measurement, Sizes
from verifier.registry import quantity
from verifier.structures.require import sequence_of
from verifier.structures.subject import Subject

SHORT = {2: 2000, 3: 150}  # up to this length plain numpy is faster than loading compiled code


def _cost(sizes: Sizes, order: int) -> Cost:
    N = sizes.N
    return Cost(N**order // (32 * order) + 100 * N, N ** (order - 1) // 8 + 64 * N)


@quantity(
    "correlation",
    definition="max over M >= 1 and 0 <= d_1 < ... < d_l with M + d_l <= N of "
    "abs(sum_(x=0..M-1) e_(x+d_1) ... e_(x+d_l))",
    source="MauduitSarkozy1997",
    needs="sequence",
    symbol=r"C_{{0}}(E)",
    arguments=("order",),
    orders=(2, 3),
    witness=("d_1", "...", "M"),
    maximum=lambda sizes, order: Fraction(max(sizes.N - order + 1, 0)),
    cost=_cost,
)
def correlation(subject: Subject, order: int) -> Measurement:
    r"""Return the largest absolute window sum of products of shifts, with the least witness.

    .. math:: C_\ell(E) = \max_{M, D} \Bigl|\sum_{x < M} e_{x+d_1} \cdots e_{x+d_\ell}\Bigr|

    Parameters
    ----------
    subject
        With a sequence of N terms.
    order
        The number of shifts, 2 or 3.

    Returns
    -------
    Measurement
        value: integer in 0..N - order + 1; 0 where N < order. witness: d_1, ..., d_l, M.

    Raises
    ------
    CaseError
        If the order is another.

    Notes
    -----
    For one tuple of differences of the shifts, d_1 and M choose any window of the product word, so
    the measure is the largest range of its partial sums. Cost: about N^l/(64 l) word operations.
    """
    signs = sequence_of(subject).signs
    value, lags = _attained(signs, order)
    if value == 0:
        return Measurement(0)
    return Measurement(value, least_window(signs, lags))


def _attained(signs: NDArray[np.int8], order: int) -> tuple[int, list[tuple[int, ...]]]:
    """Return the measure, and lags that attain it with the one of the least witness among them."""
    if order not in SHORT:
        raise CaseError(f"correlation({order}) is not supported; known orders: 2, 3")
    if len(signs) <= SHORT[order]:
        return correlation_plain(signs, order)
    if order == 2:
        from verifier.kernels.correlation_two import (  # noqa: PLC0415 numba costs 0.3 s
            correlation_two,
        )

        return correlation_two(signs)
    from verifier.kernels.correlation_three import (  # noqa: PLC0415 numba costs 0.3 s
        correlation_three,
    )

    return correlation_three(signs)
