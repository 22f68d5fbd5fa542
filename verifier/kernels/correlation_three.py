"""The correlation measure of order 3, on products of packed rows; bounds as for order 2."""

import numpy as np
from numpy.typing import NDArray

from verifier.kernels.compiled import compiled
from verifier.kernels.packed import ones, packed_from, packed_range


def correlation_three(signs: NDArray[np.int8]) -> tuple[int, list[tuple[int, ...]]]:
    """Return the largest window sum over all pairs of lags, and the pair with the least witness.

    Parameters
    ----------
    signs
        N terms, 3 <= N < 2^31.

    Notes
    -----
    Cost: about N^3/384 word operations and N^2/8 bytes.
    """
    count = len(signs)
    words = -(-count // 64)
    rows = np.array([packed_from(signs, place, words) for place in range(count)])
    best, t, u = _largest(rows, count)
    return int(best), [(int(t), int(u))]


@compiled
def _bound(word: NDArray[np.uint64], row: NDArray[np.uint64], length: int) -> np.int64:
    total = high = low = np.int64(0)
    for j in range(length >> 6):
        total += 32 - np.int64(ones(word[j] ^ row[j]))
        high = max(high, total)
        low = min(low, total)
    return np.int64(2 * (high - low) + 2 * max(32, length & 63))


@compiled
def _first_extreme(word: NDArray[np.uint64], row: NDArray[np.uint64], length: int) -> int:
    """Return the first place where a partial sum is the largest or the least of all."""
    total = high = low = np.int64(0)
    high_place = low_place = 0
    for x in range(length):
        bit = ((word[x >> 6] ^ row[x >> 6]) >> np.uint64(x & 63)) & np.uint64(1)
        total += np.int64(1) - 2 * np.int64(bit)
        if total > high:
            high, high_place = total, x + 1
        if total < low:
            low, low_place = total, x + 1
    return min(high_place, low_place)


@compiled
def _largest(rows: NDArray[np.uint64], count: int) -> tuple[np.int64, int, int]:
    """Return the largest range, and the least pair of lags among those with the earliest window."""
    best = np.int64(0)
    first = best_t = best_u = 0
    for t in range(1, count):
        word = rows[0] ^ rows[t]
        for u in range(t + 1, count):
            wanted = best if first > 0 else best + 1  # a tie matters while a window may be earlier
            if count - u < wanted:
                break
            if _bound(word, rows[u], count - u) < wanted:
                continue
            value = packed_range(word, rows[u], count - u)
            if value < wanted:
                continue
            place = _first_extreme(word, rows[u], count - u)
            if value > best or place < first:
                best, first, best_t, best_u = value, place, t, u
    return best, best_t, best_u
