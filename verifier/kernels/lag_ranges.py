"""The range of partial sums of a word: the largest sum over any window, and where it lies."""

import numpy as np
from numpy.typing import NDArray

from verifier.kernels.windows import largest_window, prefix_sums


def least_windows(
    signs: NDArray[np.int8], lags: list[tuple[int, ...]], best: int
) -> tuple[int, ...]:
    """Return the lexicographically least (d_1, ..., d_l, M) whose sum is `best` in absolute value.

    Parameters
    ----------
    signs
        N terms.
    lags
        Every tuple (t_2, ..., t_l) of lags at which the largest window has the value `best`.
    best
        That value.
    """
    found: list[tuple[int, ...]] = []
    for lag in lags:
        value, first, end = largest_window(prefix_sums(product_word(signs, lag)))
        if value == best:
            found.append((first, *(first + t for t in lag), end - first))
    return min(found)


def product_word(signs: NDArray[np.int8], lag: tuple[int, ...]) -> NDArray[np.int8]:
    """Return e[x] e[x + t_2] ... e[x + t_l] for all x where every place exists."""
    length = len(signs) - lag[-1]
    word = signs[:length].copy()
    for t in lag:
        word *= signs[t : t + length]
    return word
