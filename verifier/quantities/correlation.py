"""The correlation measure of a sequence."""

from fractions import Fraction

import numpy as np
from numpy.typing import NDArray

from verifier.errors import CaseError
from verifier.kernels.correlation_plain import correlation_plain
from verifier.kernels.lag_ranges import least_windows
from verifier.records import Cost, Measurement
from verifier.registry import quantity
from verifier.structures.require import sequence_of
from verifier.structures.subject import Subject


@quantity(
    "correlation",
    definition="max over M >= 1 and 0 <= d_1 < ... < d_l with M + d_l <= N of abs(sum_(x=0..M-1) e_(x+d_1) ... e_(x+d_l))",
    source="MauduitSarkozy1997",
    needs="sequence",
    symbol=r"C_{{0}}(E)",
    arguments=("order",),
    orders=(2, 3),
    witness=("d_1", "...", "M"),
    maximum=lambda sizes, l: Fraction(max(sizes.N - l + 1, 0)),
    cost=lambda sizes, l: Cost(sizes.N**l // (32 * l) + 100 * sizes.N, 16 * sizes.N ** (l - 1) // 64),
)
def correlation(subject: Subject, order: int) -> Measurement:
    """Return the largest absolute window sum of products of `order` shifts, with the least witness."""
    signs = sequence_of(subject).signs
    value, lags = _attained(signs, order)
    if value == 0:
        return Measurement(0)
    return Measurement(value, least_windows(signs, lags, value))


SHORT = {2: 1500, 3: 40}  # up to this length the plain kernel is faster than loading compiled code


def _attained(signs: NDArray[np.int8], order: int) -> tuple[int, list[tuple[int, ...]]]:
    """Return the measure and the lags that attain it."""
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
