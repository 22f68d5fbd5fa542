"""Compiled parts that kernels on packed words share; importing this file imports numba."""

import numpy as np
from numpy.typing import NDArray

from verifier.kernels.compiled import compiled

STEPS = 1 - 2 * (np.arange(256)[:, None] >> np.arange(8) & 1)  # of a byte, bit 1 for -1
SUMS = STEPS.sum(axis=1)
HIGHS = np.maximum(np.cumsum(STEPS, axis=1).max(axis=1), 0)
LOWS = np.minimum(np.cumsum(STEPS, axis=1).min(axis=1), 0)


def packed_from(signs: NDArray[np.int8], place: int, words: int) -> NDArray[np.uint64]:
    """Return the terms from `place` on as bits, 1 for -1, lowest bit first, zeros behind."""
    packed = np.packbits(signs[place:] < 0, bitorder="little")
    padded = np.zeros(words * 8, np.uint8)
    padded[: len(packed)] = packed
    return padded.view("<u8")


@compiled
def ones(word: np.uint64) -> np.uint64:
    """Return how many bits of a word are 1; the compiler knows this form as one instruction."""
    word = word - ((word >> np.uint64(1)) & np.uint64(0x5555555555555555))
    word = (word & np.uint64(0x3333333333333333)) + (
        (word >> np.uint64(2)) & np.uint64(0x3333333333333333)
    )
    word = (word + (word >> np.uint64(4))) & np.uint64(0x0F0F0F0F0F0F0F0F)
    return (word * np.uint64(0x0101010101010101)) >> np.uint64(56)


@compiled
def packed_range(first: NDArray[np.uint64], second: NDArray[np.uint64], length: int) -> np.int64:
    """Return the range of the partial sums of a product of packed terms, from 0, byte by byte."""
    total = high = low = np.int64(0)
    for j in range((length + 63) >> 6):
        word = first[j] ^ second[j]
        left = min(64, length - 64 * j)
        for _ in range(left >> 3):
            byte = np.intp(word & np.uint64(255))
            high = max(high, total + HIGHS[byte])
            low = min(low, total + LOWS[byte])
            total += SUMS[byte]
            word >>= np.uint64(8)
        for _ in range(left & 7):
            total += np.int64(1) - 2 * np.int64(word & np.uint64(1))
            high = max(high, total)
            low = min(low, total)
            word >>= np.uint64(1)
    return high - low
