"""The correlation measure of order 3, on products of packed rows."""

import numpy as np
from numba import njit
from numpy.typing import NDArray


def correlation_three(signs: NDArray[np.int8]) -> tuple[int, list[tuple[int, ...]]]:
    """Return the largest window sum over all pairs of lags, and every pair that attains it.

    Parameters
    ----------
    signs
        N terms, 3 <= N <= 30,000.

    Notes
    -----
    Cost: about N^3/384 word operations and N^2/8 bytes. Twice: once for the value, once for the
    pairs that attain it.
    """
    rows = _rows(signs)
    best = int(_largest(rows, len(signs)))
    found = _attaining(rows, len(signs), best)
    return best, [(int(t), int(u)) for t, u in found]


def _rows(signs: NDArray[np.int8]) -> NDArray[np.uint64]:
    """Return the packed terms from each place on, bit 1 for -1."""
    count = len(signs)
    bits = (signs < 0).astype(np.uint8)
    rows = np.zeros((count, -(-count // 64)), np.uint64)
    for place in range(count):
        packed = np.packbits(bits[place:], bitorder="little")
        rows[place].view(np.uint8)[: len(packed)] = packed
    return rows


@njit(cache=True)
def _bits(word):
    word = word - ((word >> np.uint64(1)) & np.uint64(0x5555555555555555))
    word = (word & np.uint64(0x3333333333333333)) + (
        (word >> np.uint64(2)) & np.uint64(0x3333333333333333)
    )
    word = (word + (word >> np.uint64(4))) & np.uint64(0x0F0F0F0F0F0F0F0F)
    return (word * np.uint64(0x0101010101010101)) >> np.uint64(56)


@njit(cache=True, boundscheck=False)
def _range(word, row, length, least):
    """Return the range of the partial sums, or -1 where a bound shows that it is below `least`."""
    total = high = low = 0
    for j in range(length >> 6):
        total += 32 - np.int64(_bits(word[j] ^ row[j]))
        high = max(high, total)
        low = min(low, total)
    if 2 * (high - low) + 2 * max(32, length & 63) < least:
        return -1
    total = high = low = 0
    for x in range(length):
        bit = ((word[x >> 6] ^ row[x >> 6]) >> np.uint64(x & 63)) & np.uint64(1)
        total += 1 - 2 * np.int64(bit)
        high = max(high, total)
        low = min(low, total)
    return high - low


@njit(cache=True, boundscheck=False)
def _largest(rows, count):
    best = 0
    for t in range(1, count):
        word = rows[0] ^ rows[t]
        for u in range(t + 1, count):
            if count - u <= best:
                break
            best = max(best, _range(word, rows[u], count - u, best + 1))
    return best


@njit(cache=True, boundscheck=False)
def _attaining(rows, count, best):
    found = [(0, 0)]
    for t in range(1, count):
        word = rows[0] ^ rows[t]
        for u in range(t + 1, count):
            if count - u < best:
                break
            if _range(word, rows[u], count - u, best) == best:
                found.append((t, u))
    return found[1:]
