"""What an expression may speak of before anything is built: parameters alone."""

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction

from flint import fmpz

from verifier.case.combinations import Combination
from verifier.errors import UndefinedError
from verifier.exact.nodes import Real
from verifier.expressions.tree import Tree


@dataclass(frozen=True)
class ParameterScope:
    """Gives the values of parameters, p and q; has no quantities."""

    combination: Combination

    def name(self, name: str) -> Real:
        """Return the value of a parameter."""
        if name in self.combination.numbers:
            return Fraction(self.combination.numbers[name])
        if name in ("p", "q") and self.combination.p is not None:
            return Fraction(self.combination.p)
        raise UndefinedError(f"undefined: {name}")

    def quantity(self, name: str, _: Sequence[Tree]) -> Real:
        """Refuse: nothing is measured here."""
        raise UndefinedError(f"undefined: {name}")

    def predicate(self, name: str, _: Sequence[Tree]) -> bool:
        """Refuse: nothing is measured here."""
        raise UndefinedError(f"undefined: {name}")

    def chi(self, number: int) -> int:
        """Return the quadratic character of an integer."""
        if self.combination.p is None:
            raise UndefinedError("undefined: chi")
        return int(fmpz(number % self.combination.p).jacobi(fmpz(self.combination.p)))

    def leading(self) -> int:
        """Refuse: no polynomial is known here."""
        raise UndefinedError("undefined: leading")

    def value(self, _: int) -> int:
        """Refuse: no polynomial is known here."""
        raise UndefinedError("undefined: value")

    def discriminant(self) -> int:
        """Refuse: no polynomial is known here."""
        raise UndefinedError("undefined: disc")
