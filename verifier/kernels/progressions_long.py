"""Ranges of partial sums along progressions, compiled for long sequences."""

import numpy as np
from numpy.typing import NDArray

from verifier.kernels.compiled import compiled

TILE = 4096


@compiled
def step_ranges(signs: NDArray[np.int8], step: int) -> NDArray[np.int32]:
    """Return, for each residue a < step, the largest window sum of e[a], e[a + step], ...

    Parameters
    ----------
    signs
        N terms, N < 2^31, so that sums fit int32.
    step
        The difference, 1 <= step <= N.

    Notes
    -----
    Residues are taken in tiles, so that the running state stays in the cache. Cost: N operations.
    """
    count = signs.shape[0]
    found = np.zeros(step, np.int32)
    sums = np.zeros(TILE, np.int32)
    high = np.zeros(TILE, np.int32)
    low = np.zeros(TILE, np.int32)
    for tile in range(0, step, TILE):
        width = min(TILE, step - tile)
        sums[:] = 0
        high[:] = 0
        low[:] = 0
        for start in range(tile, count, step):
            terms = signs[start : min(start + width, count)]
            for i in range(terms.shape[0]):
                total = sums[i] + np.int32(terms[i])
                sums[i] = total
                high[i] = max(high[i], total)
                low[i] = min(low[i], total)
        found[tile : tile + width] = high[:width] - low[:width]
    return found
