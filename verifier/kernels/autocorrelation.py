"""The exact periodic autocorrelation of a row of small integers, by one integer product.

The entries are packed as the digits of a large number, so far apart that no sum of products can
carry; the product of the number with that of the reversed row holds all lags at once. A row that
is its own mirror image needs one squaring.
"""

import numpy as np
from flint import fmpz
from numpy.typing import NDArray

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
    A row without 0 is packed as bits b, v = 2 b - 1, R = 4 U - 4 sum(b) + n; any other as digits
    u = v + 1 in {0, 1, 2}, R = U - 2 sum(v) - n, or else its few zeros are filled for a shorter
    digit and patched back. U is the autocorrelation of the digits, U[t] <= U[0] <= 4 n < 2^29, so
    that nothing overflows int64 and a digit takes 4 bytes at most. Cost: one product of two
    numbers of n digits.
    """
    n = len(values)
    zeros = np.flatnonzero(values == 0)
    if len(zeros) == 0:
        bits = (values > 0).view(np.uint8)
        return (_digit_autocorrelation(bits) << 2) + (n - 4 * int(np.count_nonzero(bits)))
    plus = int(np.count_nonzero(values > 0))
    if len(zeros) <= FEW and _width(plus + len(zeros)) < _width(4 * plus + len(zeros)):
        filled = np.where(values == 0, np.int8(1), values)
        return _patched(filled, periodic_autocorrelation(filled), values, zeros)
    total = int(values.sum(dtype=np.int64))
    return _digit_autocorrelation((values + 1).view(np.uint8)) - (2 * total + n)


def differing_places(row: NDArray[np.int8], other: NDArray[np.int8]) -> NDArray[np.intp] | None:
    """Return where two rows differ, or None if their lengths do or they do in many places."""
    if len(row) != len(other):
        return None
    places = np.flatnonzero(row != other)
    return places if len(places) <= FEW else None


def patched_autocorrelation(
    values: NDArray[np.int8], known: NDArray[np.int64], changed: NDArray[np.int8]
) -> NDArray[np.int64]:
    """Return the autocorrelation of `changed` from that of `values`.

    Parameters
    ----------
    values, known
        A row and its periodic autocorrelation.
    changed
        A row of the same length that differs in few places.

    Notes
    -----
    With c = v + d, R_c[t] = R_v[t] + sum d[x] (v[x+t] + v[x-t]) + sum d[x] d[x+t]; the sums run
    over the places where d is not 0. Cost: 2 n operations for each of them.
    """
    return _patched(values, known, changed, np.flatnonzero(changed != values))


def _patched(
    values: NDArray[np.int8],
    known: NDArray[np.int64],
    changed: NDArray[np.int8],
    places: NDArray[np.intp],
) -> NDArray[np.int64]:
    n = len(values)
    found = known.copy()
    steps = [int(changed[x]) - int(values[x]) for x in places]
    forward = np.concatenate([values, values])
    backward = forward[::-1]
    for place, step in zip(places.tolist(), steps, strict=True):
        both = forward[place : place + n] + backward[n - 1 - place : 2 * n - 1 - place]
        found += both * np.int8(step)  # |both| <= 2 and |step| <= 2 stay within int8
        for other, other_step in zip(places.tolist(), steps, strict=True):
            found[(other - place) % n] += step * other_step
    return found


def _digit_autocorrelation(digits: NDArray[np.uint8]) -> NDArray[np.int64]:
    """Return U with U[t] = sum over x of u[x] u[(x + t) mod n], u[x] in {0, 1, 2}."""
    n = len(digits)
    largest = int(np.count_nonzero(digits)) + 3 * int(np.count_nonzero(digits == 2))
    width = _width(largest)
    first = _packed(digits, width)
    if bool(np.array_equal(digits[1:], digits[:0:-1])):
        # u[x] = u[-x]: the convolution of the row with itself holds lag t at t
        return _folded(first * first, n, width)
    if bool(np.array_equal(digits, digits[::-1])):
        # u[x] = u[n - 1 - x]: it holds lag t at n - 1 + t
        return np.roll(_folded(first * first, n, width), 1)
    # with the reversed row, digit n - 1 + t holds lag t and digit t - 1 the wrapped part of it
    return np.roll(_folded(first * _packed(digits[::-1], width), n, width), 1)


def _width(largest: int) -> int:
    """Return how many bytes hold `largest`."""
    return -(-largest.bit_length() // 8) or 1


def _packed(digits: NDArray[np.uint8], width: int) -> fmpz:
    spread = np.zeros(len(digits) * width, np.uint8)
    spread[::width] = digits
    return fmpz(int.from_bytes(spread.tobytes(), "little"))


def _folded(product: fmpz, n: int, width: int) -> NDArray[np.int64]:
    """Return the digits of a product of two rows, added up modulo n; their sums fit 32 bits."""
    data = np.frombuffer(int(product).to_bytes(2 * n * width, "little"), np.uint8)
    if width == 3:
        wide = np.zeros((2 * n, 4), np.uint8)
        wide[:, :3] = data.reshape(2 * n, 3)
        digits = wide.reshape(-1).view("<u4")
    else:
        digits = data.view(f"<u{width}")
    found = digits[:n].astype(np.int64)
    found += digits[n:]
    return found
