"""The Legendre rule: the quadratic character of a polynomial."""

import numpy as np

from verifier.registry import Key, rule
from verifier.structures.character import Character
from verifier.structures.sequence import BinarySequence


@rule(
    "legendre",
    definition="chi(f(x)), and at-zero where f(x) = 0",
    source="GoubinMauduitSarkozy2004",
    keys={"polynomial": Key("polynomial"), "at-zero": Key("sign", default=1)},
    odd_prime=True,
)
def legendre(
    *,
    p: int,  # noqa: ARG001 every rule with a polynomial is given p
    polynomial: tuple[int, ...],  # noqa: ARG001 and its residues
    character: Character,
    at_zero: int,
) -> BinarySequence:
    """Return the signs for x = 0, ..., p - 1. Cost: p operations beyond those of the character."""
    values = character.values
    return BinarySequence(np.where(values == 0, np.int8(at_zero), values), character)
