"""The well-distribution measure: the largest sum over any arithmetic progression."""

from collections.abc import Callable

import numpy as np
from numpy.typing import NDArray

from verifier.kernels.windows import largest_window, prefix_sums

Progression = tuple[int, int, int]
StepRanges = Callable[[NDArray[np.int8], int], NDArray[np.int32]]


def step_ranges_plain(signs: NDArray[np.int8], step: int) -> NDArray[np.int32]:
    """Return, for each residue a < step, the largest window sum of e[a], e[a + step], ..."""
    count = len(signs)
    length = -(-count // step)
    table = np.zeros((length, step), np.int8)
    table.reshape(-1)[:count] = signs
    sums = np.cumsum(table, axis=0, dtype=np.int32)
    ranges: NDArray[np.int32] = np.maximum(sums.max(axis=0), 0) - np.minimum(sums.min(axis=0), 0)
    return ranges


def largest_progression(
    signs: NDArray[np.int8], step_ranges: StepRanges = step_ranges_plain
) -> tuple[int, Progression]:
    """Return the largest sum over a progression, and the least (b, a, t) that attains it.

    Parameters
    ----------
    signs
        N terms, 1 <= N < 2^31.
    step_ranges
        What finds the largest window sums for one step.

    Notes
    -----
    The step b is at least 1; the first step that attains the maximum is the least. Steps with
    ceil(N/b) <= the best so far are passed over, as no progression with them has more terms. Cost:
    N operations for each step up to about N/best.
    """
    count = len(signs)
    best, witness = 0, (1, 0, 1)
    for step in range(1, count + 1):
        if -(-count // step) <= best:
            break
        ranges = step_ranges(signs, step)
        value = int(ranges.max())
        if value > best:
            best, witness = value, _least(signs, step, np.flatnonzero(ranges == value))
    return best, witness


def _least(signs: NDArray[np.int8], step: int, residues: NDArray[np.intp]) -> Progression:
    """Return the least (b, a, t) with this step, among the residues that attain the maximum."""
    found: list[Progression] = []
    for residue in residues.tolist():
        _, first, end = largest_window(prefix_sums(signs[residue::step]))
        found.append((step, residue + step * first, end - first))
    return min(found)
