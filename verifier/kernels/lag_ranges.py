"""The largest sum over any window of a product word, and where it lies."""

from collections.abc import Iterable

import numpy as np
from numpy.typing import NDArray

from verifier.kernels.windows import largest_window, prefix_sums


def least_window(signs: NDArray[np.int8], lags: Iterable[tuple[int, ...]]) -> tuple[int, ...]:
    """Return the least (d_1, ..., d_l, M) in lexicographic order that attains the measure.

    Parameters
    ----------
    signs
        N terms.
    lags
        Ascending tuples (t_2, ..., t_l) of lags: all those whose largest window attains the
        measure, or the one among them with the least witness.
    """
    found: tuple[int, ...] = ()
    for lag in lags:
        _, first, end = largest_window(prefix_sums(product_word(signs, lag)))
        if not found or first < found[0]:
            found = (first, *(first + t for t in lag), end - first)
        if first == 0:
            break
    return found


def product_word(signs: NDArray[np.int8], lag: tuple[int, ...]) -> NDArray[np.int8]:
    """Return e[x] e[x + t_2] ... e[x + t_l] for all x where every place exists."""
    length = len(signs) - (lag[-1] if lag else 0)
    word = signs[:length].copy()
    for t in lag:
        word *= signs[t : t + length]
    return word
