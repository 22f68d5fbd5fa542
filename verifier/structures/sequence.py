"""A finite sequence of signs."""

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from verifier.kernels.autocorrelation import (
    differing_places,
    patched_autocorrelation,
    periodic_autocorrelation,
)
from verifier.structures.character import Character


@dataclass(frozen=True)
class BinarySequence:
    """N terms, each +1 or -1.

    Parameters
    ----------
    signs
        The terms, read-only.
    character
        The character with which the terms agree in all but a few places, if there is one.
    """

    signs: NDArray[np.int8]
    character: Character | None = None

    def __post_init__(self) -> None:
        self.signs.flags.writeable = False

    @cached_property
    def autocorrelation(self) -> NDArray[np.int64]:
        """The periodic autocorrelation of the terms."""
        return self.near_autocorrelation(self.signs)

    def near_autocorrelation(self, row: NDArray[np.int8]) -> NDArray[np.int64]:
        """Return the periodic autocorrelation of a row that may differ from the terms in places.

        Cost: one product, or less where the row is close to the character's values.
        """
        if self.character is None or differing_places(self.character.values, row) is None:
            return periodic_autocorrelation(row)
        values, known = self.character.values, self.character.autocorrelation
        return patched_autocorrelation(values, known, row)

    def with_indices(self, first: int, last: int) -> "BinarySequence":
        """Return the terms at the places first, ..., last of the periodic continuation."""
        places = np.arange(first, last + 1, dtype=np.int64) % len(self.signs)
        return BinarySequence(self.signs[places])

    def mirrored(self) -> "BinarySequence":
        """Return the terms with e[N - x] := e[x] for 1 <= x < N/2."""
        signs = self.signs.copy()
        half = (len(signs) - 1) // 2
        signs[len(signs) - half :] = signs[1 : half + 1][::-1]
        return BinarySequence(signs, self.character)
