"""The quadratic character of a polynomial over F_p, as a function of x."""

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from verifier.kernels.autocorrelation import periodic_autocorrelation
from verifier.kernels.quadratic_character import character_values


@dataclass(frozen=True)
class Character:
    """x -> chi(f(x)), 0 at the zeros of f.

    Parameters
    ----------
    p
        An odd prime below 2^31.
    polynomial
        f in least residues, highest coefficient first, not 0.
    """

    p: int
    polynomial: tuple[int, ...]

    @cached_property
    def values(self) -> NDArray[np.int8]:
        """chi(f(0)), ..., chi(f(p - 1))."""
        return character_values(self.p, self.polynomial)

    @cached_property
    def zeros(self) -> int:
        """How many x in F_p have f(x) = 0."""
        return self.p - int(np.count_nonzero(self.values))

    @cached_property
    def complete_sum(self) -> int:
        """The sum of chi(f(x)) over F_p."""
        return int(self.values.sum(dtype=np.int64))

    @cached_property
    def autocorrelation(self) -> NDArray[np.int64]:
        """The periodic autocorrelation of the values."""
        return periodic_autocorrelation(self.values)
