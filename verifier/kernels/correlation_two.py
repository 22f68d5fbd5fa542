"""The correlation measure of order 2: the largest window sum over all lags.

The terms are packed into 64-bit words; the word of products at lag t is the exclusive or of the
packed terms with those shifted by t. Partial sums at the ends of words come from population counts
and bound the range: between two such ends a sum strays by at most 32 from the nearer one, so the
range is at most 2 (coarse range) + 2 max(32, tail) in the units of half sums used here. Only lags
whose bound reaches the best value so far are summed term by term.
"""

import numpy as np
from numba import njit
from numpy.typing import NDArray

from verifier.kernels.autocorrelation import periodic_autocorrelation

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
    Cost: about N^2/64 word operations, 64 N/8 bytes. Sums are below N < 2^31 in int32.
    """
    count = len(signs)
    best = 0
    for lag in _promising(signs):
        best = max(best, int(_range_at(signs, lag)))
    attained: list[int] = []
    words = _shifted(signs)
    for shift in range(64):
        full = (count - shift) // 64
        tail = (count - shift) % 64
        high, low = _coarse(words[0], words[shift], full)
        bound = 2 * (high - low) + 2 * max(32, tail)
        lags = np.flatnonzero(bound >= best) * 64 + shift
        for lag in lags[(lags > 0) & (lags < count)].tolist():
            if count - lag < best or bound[lag // 64] < best:
                continue
            value = int(_range_at(signs, lag))
            if value > best:
                best, attained = value, []
            if value == best:
                attained.append(lag)
    return best, [(lag,) for lag in sorted(attained)]


def _promising(signs: NDArray[np.int8]) -> list[int]:
    """Return the lags with the largest periodic autocorrelation: good places to begin, no more."""
    sums = np.abs(periodic_autocorrelation(signs))[1:]
    few = min(CANDIDATES, len(sums))
    return [int(place) + 1 for place in np.argsort(-sums, kind="stable")[:few]]


def _shifted(signs: NDArray[np.int8]) -> list[NDArray[np.uint64]]:
    """Return the packed terms from each of the first 64 places on, bit 1 for -1, zeros behind."""
    bits = (signs < 0).astype(np.uint8)
    found: list[NDArray[np.uint64]] = []
    for shift in range(64):
        packed = np.packbits(bits[shift:], bitorder="little")
        size = (len(bits) // 64 + 2) * 8
        padded = np.zeros(size, np.uint8)
        padded[: len(packed)] = packed
        found.append(padded.view(np.uint64))
    return found


@njit(cache=True)
def _bits(word):
    word = word - ((word >> np.uint64(1)) & np.uint64(0x5555555555555555))
    word = (word & np.uint64(0x3333333333333333)) + (
        (word >> np.uint64(2)) & np.uint64(0x3333333333333333)
    )
    word = (word + (word >> np.uint64(4))) & np.uint64(0x0F0F0F0F0F0F0F0F)
    return (word * np.uint64(0x0101010101010101)) >> np.uint64(56)


@njit(cache=True)
def _range_at(signs, lag):
    total = high = low = 0
    for x in range(signs.shape[0] - lag):
        total += np.int64(signs[x] * signs[x + lag])
        high = max(high, total)
        low = min(low, total)
    return high - low


@njit(cache=True, boundscheck=False)
def _coarse(first, second, full):
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
                total = sums[q] + np.int32(32) - np.int32(_bits(word ^ others[q]))
                sums[q] = total
                high[q] = max(high[q], total)
                low[q] = min(low[q], total)
        highs[start : start + width] = high[:width]
        lows[start : start + width] = low[:width]
    return highs, lows
