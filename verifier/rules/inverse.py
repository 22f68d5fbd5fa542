"""The inverse rule: where the inverse of a polynomial value lies."""

import numpy as np
from numpy.typing import NDArray

from verifier.kernels.quadratic_character import check_size, looked_up
from verifier.registry import Key, rule
from verifier.structures.character import Character
from verifier.structures.sequence import BinarySequence


@rule(
    "inverse",
    definition="+1 iff the least non-negative residue of f(x)^(-1) is < p/2; "
    "at-zero where f(x) = 0",
    source="MauduitSarkozy2005",
    keys={"polynomial": Key("polynomial"), "at-zero": Key("sign", default=-1)},
    odd_prime=True,
)
def inverse(
    *,
    p: int,
    polynomial: tuple[int, ...],
    character: Character,  # noqa: ARG001 every rule with a polynomial is given it
    at_zero: int,
) -> BinarySequence:
    """Return the signs for x = 0, ..., p - 1, p <= 10^8. Cost: about p log p operations."""
    check_size(p)
    small = np.where(_inverses(p) < (p + 1) // 2, np.int8(1), np.int8(-1))
    small[0] = at_zero
    return BinarySequence(looked_up(p, polynomial, small))


def _inverses(p: int) -> NDArray[np.int64]:
    """Return the inverses of 1, ..., p - 1 modulo p, and 0 at 0.

    By y^(p-2) with products below p^2 < 2^62 in int64.
    """
    base = np.arange(p, dtype=np.int64)
    found = np.ones(p, np.int64)
    exponent = p - 2
    while exponent:
        if exponent & 1:
            found = found * base % p
        base = base * base % p
        exponent >>= 1
    found[0] = 0
    return found
