"""Extreme partial sums over windows of a sequence, and the least window that attains them."""

import numpy as np
from numpy.typing import NDArray


def prefix_sums(values: NDArray[np.int8]) -> NDArray[np.int64]:
    """Return P with P[i] the sum of the first i values, from P[0] = 0."""
    sums = np.zeros(len(values) + 1, np.int64)
    np.cumsum(values, out=sums[1:])
    return sums


def largest_window(sums: NDArray[np.int64]) -> tuple[int, int, int]:
    """Return max over i <= j of |P[j] - P[i]|, and the lexicographically least (i, j).

    Parameters
    ----------
    sums
        Prefix sums, one at least.
    """
    high, low = int(sums.max()), int(sums.min())
    if high == low:
        return 0, 0, 0
    highs, lows = np.flatnonzero(sums == high), np.flatnonzero(sums == low)
    first = min(int(highs[0]), int(lows[0]))
    others = lows if sums[first] == high else highs
    return high - low, first, int(others[others > first][0])


def largest_cyclic_window(values: NDArray[np.int8]) -> tuple[int, int, int]:
    """Return max over 0 <= A < p, A <= B <= A + p of |sum over A <= x < B|, and the least (A, B).

    Parameters
    ----------
    values
        One period, p values; x runs on periodically.

    Notes
    -----
    A window that passes p is the complement of a window [B - p, A): its sum is S minus that of the
    complement, so four extremes of running minima and maxima suffice. Cost: about 10 p operations.
    """
    p = len(values)
    sums = prefix_sums(values)
    total = int(sums[-1])
    ahead_high = np.maximum.accumulate(sums[::-1])[::-1]  # over j >= i
    ahead_low = np.minimum.accumulate(sums[::-1])[::-1]
    behind_high = np.maximum.accumulate(sums)  # over j <= i, the wrapped ends
    behind_low = np.minimum.accumulate(sums)
    start = sums[:p]
    reach = np.maximum.reduce(
        [
            ahead_high[:p] - start,
            start - ahead_low[:p],
            total + behind_high[:p] - start,
            start - total - behind_low[:p],
        ]
    )
    best = int(reach.max())
    first = int(np.flatnonzero(reach == best)[0]) if best else 0
    ends = np.concatenate([sums[first:], total + sums[1 : first + 1]])
    return best, first, first + int(np.flatnonzero(np.abs(ends - sums[first]) == best)[0])
