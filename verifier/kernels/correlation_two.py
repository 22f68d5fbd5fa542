"""The correlation measure of order 2: the largest window sum over all lags.

The terms are packed into 64-bit words; the word of products at lag t is the exclusive or of the
packed terms with those shifted by t. Partial sums at the ends of words come from population counts
and bound the range: between two such ends a sum strays by at most 32 from the nearer one, behind
the last one by the length of the tail. Sums at the ends of words are even and are kept halved, so
the range is at most 2 (coarse range) + 2 max(32, tail). Only lags whose bound reaches the best
value so far are summed in full.
"""

import numpy as np
from numpy.typing import NDArray

from verifier.kernels.autocorrelation import periodic_autocorrelation
from verifier.kernels.compiled import compiled
from verifier.kernels.packed import ones, packed_from, packed_range

CANDIDATES = 40
TILE = 512


def correlation_two(signs: NDArray[np.int8]) -> tuple[int, list[tuple[int, ...]]]:
    """Return the largest window sum over all lags, and every lag (t,) that attains it.

    Parameters
    ----------
    signs
        N terms, 2 <= N < 2^31.

    Notes
    -----
    Cost: about N^2/64 word operations, 8 N bytes. Sums are below N < 2^31 in int32.
    """
    count = len(signs)
    words = [packed_from(signs, shift, count // 64 + 2) for shift in range(min(64, count))]

    def value_at(lag: int) -> int:
        return int(packed_range(words[0], words[lag & 63][lag >> 6 :], count - lag))

    best = max(value_at(lag) for lag in _promising(signs))
    attained: list[int] = []
    for shift in range(len(words)):
        bound = lag_bounds(words, shift, count)
        for block in np.flatnonzero(bound >= best).tolist():
            lag = 64 * block + shift
            if not 0 < lag <= count - best or bound[block] < best:
                continue
            value = value_at(lag)
            if value > best:
                best, attained = value, []
            if value == best:
                attained.append(lag)
    return best, [(lag,) for lag in sorted(attained)]


def lag_bounds(words: list[NDArray[np.uint64]], shift: int, count: int) -> NDArray[np.int32]:
    """Return what the window sums at the lags 64 q + shift do not exceed, q = 0, 1, ..."""
    full, tail = divmod(count - shift, 64)
    high, low = _coarse(words[0], words[shift], full)
    bounds: NDArray[np.int32] = 2 * (high - low) + 2 * max(32, tail)
    return bounds


def _promising(signs: NDArray[np.int8]) -> list[int]:
    """Return the lags with the largest periodic autocorrelation: good places to begin, no more."""
    sums = np.abs(periodic_autocorrelation(signs))[1:]
    few = min(CANDIDATES, len(sums))
    return [int(place) + 1 for place in np.argsort(-sums, kind="stable")[:few]]


@compiled
def _coarse(
    first: NDArray[np.uint64], second: NDArray[np.uint64], full: int
) -> tuple[NDArray[np.int32], NDArray[np.int32]]:
    """Return extremes of half the partial sums at ends of words, for the lags 64 q + shift."""
    highs = np.zeros(full + 1, np.int32)
    lows = np.zeros(full + 1, np.int32)
    sums = np.zeros(TILE, np.int32)
    high = np.zeros(TILE, np.int32)
    low = np.zeros(TILE, np.int32)
    for start in range(0, full + 1, TILE):
        width = min(TILE, full + 1 - start)
        sums[:] = 0
        high[:] = 0
        low[:] = 0
        for k in range(full - start):
            word = first[k]
            reach = min(width, full - start - k)
            others = second[k + start : k + start + reach]
            for q in range(reach):
                total = sums[q] + np.int32(32) - np.int32(ones(word ^ others[q]))
                sums[q] = total
                high[q] = max(high[q], total)
                low[q] = min(low[q], total)
        highs[start : start + width] = high[:width]
        lows[start : start + width] = low[:width]
    return highs, lows
