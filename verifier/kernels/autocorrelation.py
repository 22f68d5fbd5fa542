"""The exact periodic autocorrelation of a row of small integers, by one integer product.

The entries are packed as the digits of a large number, so far apart that no sum of products can
carry; the product of the number with that of the reversed row holds all lags at once.
"""

import numpy as np
from flint import fmpz
from numpy.typing import NDArray

LARGEST = 10**8
FEW = 16  # places that may differ for a patch to be cheaper than a product


def periodic_autocorrelation(values: NDArray[np.int8]) -> NDArray[np.int64]:
    """Return R with R[t] = sum over x of v[x] v[(x + t) mod n].

    Parameters
    ----------
    values
        n entries from {-1, 0, 1}, 1 <= n <= 10^8.

    Returns
    -------
    ndarray
        n exact integers, R[0] first.

    Notes
    -----
    With u = v + 1 in {0, 1, 2} every packed sum is at most 4 n < 2^29 for n <= 10^8, so four bytes a
    digit never carry, and R[t] = U[t] - 2 sum(v) - n fits int64. A row that is its own mirror
    image about 0, v[-x] = v[x], needs one squaring. Cost: one product of w n bytes, w <= 4.
    """
    n = len(values)
    shifted = (values + 1).astype(np.uint8)
    total = int(values.sum(dtype=np.int64))
    width = _width(int((shifted.astype(np.int64) ** 2).sum()))
    first = _packed(shifted, width)
    if bool(np.array_equal(shifted[1:], shifted[:0:-1])):
        # v[x + t] = v[-x - t]: the correlation is the convolution of the row with itself
        folded = _folded(first * first, n, width)
    else:
        product = first * _packed(shifted[::-1], width)
        # digit n - 1 + t of the product holds lag t, digit t - 1 the wrapped part of it
        folded = np.roll(_folded(product, n, width), 1)
    return folded - (2 * total + n)


def patched_autocorrelation(
    values: NDArray[np.int8], known: NDArray[np.int64], changed: NDArray[np.int8]
) -> NDArray[np.int64] | None:
    """Return the autocorrelation of `changed` from that of `values`, or None if they differ much.

    Parameters
    ----------
    values, known
        A row and its periodic autocorrelation.
    changed
        A row of the same length that differs in few places.

    Notes
    -----
    With c = v + d, R_c[t] = R_v[t] + sum d[x] (v[x+t] + v[x-t]) + sum d[x] d[x+t]; the sums run
    over the places where d is not 0. Cost: n operations for each of them.
    """
    places = np.flatnonzero(changed != values)
    if len(places) > FEW:
        return None
    n = len(values)
    found = known.copy()
    difference = changed.astype(np.int64) - values
    forward = np.concatenate([values, values]).astype(np.int64)
    backward = forward[::-1]
    for place in places.tolist():
        step = int(difference[place])
        found += step * forward[place : place + n]
        found += step * backward[n - 1 - place : 2 * n - 1 - place]
        for other in places.tolist():
            found[(other - place) % n] += step * int(difference[other])
    return found


def _width(largest: int) -> int:
    """Return how many bytes hold `largest`."""
    return -(-largest.bit_length() // 8) or 1


def _packed(digits: NDArray[np.uint8], width: int) -> fmpz:
    spread = np.zeros((len(digits), width), np.uint8)
    spread[:, 0] = digits
    return fmpz(int.from_bytes(spread.tobytes(), "little"))


def _folded(product: fmpz, n: int, width: int) -> NDArray[np.int64]:
    """Return the digits of a product of two rows, added up modulo n."""
    data = np.frombuffer(int(product).to_bytes(2 * n * width, "little"), np.uint8)
    digits = data.reshape(2 * n, width)
    found = np.zeros(n, np.int64)
    for place in range(width):
        column = digits[:, place].astype(np.int64) << (8 * place)
        found += column[:n]
        found += column[n:]
    return found
