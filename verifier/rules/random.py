"""The random rule: seeded fair bits."""

import numpy as np

from verifier.errors import CaseError
from verifier.exact.stream import bit_array
from verifier.registry import Key, rule
from verifier.structures.sequence import BinarySequence

LONGEST = 10**8


@rule(
    "random",
    definition="(-1)^b with b bit x of SHA-256 of `primewise:SEED:BLOCK`, 256 bits a block",
    source="FIPS180",
    keys={"length": Key("integer"), "seed": Key("integer")},
)
def random(*, length: int, seed: int) -> BinarySequence:
    """Return `length` signs from the documented stream of `seed`.

    Raises
    ------
    CaseError
        If the length is not in 1..10^8 or the seed is negative.
    """
    if not 1 <= length <= LONGEST:
        raise CaseError(f"[sequence] length = {length}; a length of 1 to {LONGEST} was wanted")
    if seed < 0:
        raise CaseError(f"[sequence] seed = {seed}; a seed >= 0 was wanted")
    return BinarySequence((1 - 2 * bit_array(seed, length).astype(np.int8)).astype(np.int8))
