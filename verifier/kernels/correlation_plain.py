"""Correlation measures of short sequences, without compiled code."""

import numpy as np
from numpy.typing import NDArray

from verifier.kernels.lag_ranges import product_word


def correlation_plain(
    signs: NDArray[np.int8], order: int
) -> tuple[int, list[tuple[int, ...]]]:
    """Return the largest window sum over all tuples of lags, and every tuple that attains it.

    Parameters
    ----------
    signs
        N terms.
    order
        2 or 3.

    Notes
    -----
    Cost: N^order/order operations.
    """
    best = 0
    attained: list[tuple[int, ...]] = []
    for lag in _lags(len(signs), order):
        if len(signs) - lag[-1] < best:
            continue
        sums = np.cumsum(product_word(signs, lag), dtype=np.int64)
        value = max(0, int(sums.max())) - min(0, int(sums.min()))
        if value > best:
            best, attained = value, []
        if value == best:
            attained.append(lag)
    return best, attained


def _lags(count: int, order: int) -> list[tuple[int, ...]]:
    if order == 2:
        return [(t,) for t in range(1, count)]
    return [(t, u) for t in range(1, count) for u in range(t + 1, count)]
