"""Correlation measures of short sequences, without compiled code."""

import numpy as np
from numpy.lib.stride_tricks import sliding_window_view
from numpy.typing import NDArray

from verifier.kernels.lag_ranges import product_word

BLOCK = 1 << 20


def correlation_plain(signs: NDArray[np.int8], order: int) -> tuple[int, list[tuple[int, ...]]]:
    """Return the largest window sum over all tuples of lags, and every tuple that attains it.

    Parameters
    ----------
    signs
        N terms, N < 2^31.
    order
        2 or 3.

    Notes
    -----
    Cost: N^order/order operations in whole tables of lags.
    """
    best = 0
    attained: list[tuple[int, ...]] = []
    for lag in _beginnings(len(signs), order):
        ranges = _ranges(product_word(signs, lag), signs, lag[-1] + 1 if lag else 1)
        largest = int(ranges.max(initial=0))
        if largest < best or not len(ranges):
            continue
        if largest > best:
            best, attained = largest, []
        last = np.flatnonzero(ranges == largest) + (lag[-1] + 1 if lag else 1)
        attained += [(*lag, int(t)) for t in last]
    return best, attained


def _beginnings(count: int, order: int) -> list[tuple[int, ...]]:
    """Return all lags but the last."""
    return [()] if order == 2 else [(t,) for t in range(1, count)]


def _ranges(word: NDArray[np.int8], signs: NDArray[np.int8], first: int) -> NDArray[np.int32]:
    """Return the largest window sum of word[x] signs[x + t] for t = first, ..., N - 1.

    Beyond the end of the signs stand zeros, which change no window sum.
    """
    count = len(signs)
    lags = count - first
    padded = np.zeros(first + lags + len(word), np.int8)
    padded[:count] = signs
    shifted = sliding_window_view(padded, len(word))
    found = np.zeros(max(lags, 0), np.int32)
    rows = max(1, BLOCK // max(1, len(word)))
    narrow = np.int16 if count < 1 << 15 else np.int32
    for start in range(first, count, rows):
        end = min(start + rows, count)
        reach = count - start  # a later lag has fewer terms yet
        sums = np.cumsum(shifted[start:end, :reach] * word[:reach], axis=1, dtype=narrow)
        high = np.maximum(sums.max(axis=1), 0).astype(np.int32)
        found[start - first : end - first] = high - np.minimum(sums.min(axis=1), 0)
    return found
