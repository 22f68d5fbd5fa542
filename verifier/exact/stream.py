"""The documented stream of bits from which samples and random sequences are drawn.

Bit i is bit (i mod 256), least significant first, of SHA-256 (FIPS 180-4) of the text
`primewise:SEED:BLOCK`, BLOCK = floor(i/256), the digest read as a big-endian number.
"""

import hashlib
from collections.abc import Iterator
from itertools import count

import numpy as np
from numpy.typing import NDArray

BLOCK = 256


def bits(seed: int) -> Iterator[int]:
    """Yield the bits of the stream of `seed`, without end."""
    for block in count():
        number = _number(seed, block)
        for place in range(BLOCK):
            yield number >> place & 1


def bit_array(seed: int, length: int) -> NDArray[np.uint8]:
    """Return the first `length` bits as 0 and 1."""
    blocks = -(-length // BLOCK)
    data = b"".join(_number(seed, block).to_bytes(BLOCK // 8, "little") for block in range(blocks))
    unpacked = np.unpackbits(np.frombuffer(data, np.uint8), bitorder="little")
    return unpacked[:length]


def _number(seed: int, block: int) -> int:
    text = f"primewise:{seed}:{block}"
    return int.from_bytes(hashlib.sha256(text.encode("ascii")).digest(), "big")
