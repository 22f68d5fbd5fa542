"""The largest value of an autocorrelation off 0."""

import numpy as np
from numpy.typing import NDArray

from verifier.records import Measurement


def largest_lag(lags: NDArray[np.int64]) -> Measurement:
    """Return the largest |R[d]| over d != 0, with the least d; 0 where there is no such d."""
    if len(lags) < 2:
        return Measurement(0)
    sizes = np.abs(lags[1:])
    place = int(sizes.argmax())
    return Measurement(int(sizes[place]), (place + 1,))
