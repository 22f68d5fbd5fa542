"""Compiled parts that kernels on packed words share; importing this file imports numba."""

import numpy as np
from verifier.kernels.compiled import compiled
from numpy.typing import NDArray


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
