"""What an expression may speak of at one instance: sizes, quantities, predicates, the polynomial.

Everything measured is kept, value or error, so that it is computed once however often it is named.
"""

from collections.abc import Mapping, Sequence
from fractions import Fraction
from functools import cached_property

from flint import fmpz, nmod, nmod_poly

from verifier.case.combinations import Combination
from verifier.errors import (
    CaseError,
    LimitError,
    OutsideError,
    UndecidedError,
    UndefinedError,
)
from verifier.exact.decide import rational_value
from verifier.exact.nodes import Real
from verifier.exact.reals import floor
from verifier.expressions.evaluate import value
from verifier.expressions.tree import Tree
from verifier.records import Finding, Measurement, Sizes
from verifier.registry import PREDICATES, QUANTITIES, ArgumentKind, Predicate, Quantity
from verifier.structures.subject import Subject

MOST_STEPS = 10**12
STRUCTURE = ("zero_one", "zero_diagonal", "symmetric")

Outcome = Measurement | Finding | OutsideError | UndefinedError | UndecidedError | LimitError
WITHOUT_VALUE = (OutsideError, UndefinedError, UndecidedError, LimitError)


class InstanceScope:
    """The names of one instance.

    Parameters
    ----------
    combination
        The values of the parameters.
    subject
        What was built from them.
    """

    def __init__(self, combination: Combination, subject: Subject) -> None:
        self.combination = combination
        self.subject = subject
        self.outcomes: dict[str, Outcome] = {}

    @cached_property
    def known(self) -> Mapping[str, int]:
        """The sizes p, q, n, N, k, r as far as they are defined, and q only where it is swept."""
        found: dict[str, int] = {}
        if self.combination.p is not None:
            found["p"] = self.combination.p
        if "q" in self.combination.numbers:
            found["q"] = self.combination.numbers["q"]
        if self.subject.graph is not None:
            found["n"] = self.subject.graph.n
        if self.subject.sequence is not None:
            found["N"] = len(self.subject.sequence.signs)
        if self.subject.polynomial is not None:
            found["k"] = len(self.subject.polynomial) - 1
        if self.subject.character is not None:
            found["r"] = self.subject.character.zeros
        return found

    @cached_property
    def sizes(self) -> Sizes:
        """The sizes that costs and trivial maxima depend on."""
        known = self.known
        return Sizes(known.get("n", 0), known.get("N", 0), known.get("p", 0))

    @cached_property
    def defect(self) -> str | None:
        """Why the graph is no simple undirected graph, in words, or None if it is one."""
        graph = self.subject.graph
        if graph is None:
            return None
        for name in STRUCTURE:
            pair = graph.defect(name)
            if pair is not None:
                return _defect_words(name, graph.kind, pair, graph.entry)
        return None

    def name(self, name: str) -> Real:
        """Return the value of a parameter, a size, or a quantity without arguments."""
        if name in self.combination.numbers:
            return Fraction(self.combination.numbers[name])
        if name in self.known:
            return Fraction(self.known[name])
        if name == "q" and "p" in self.known:
            return Fraction(self.known["p"])
        if name in QUANTITIES.entries:
            return self.quantity(name, ())
        raise UndefinedError(f"undefined: {name}")

    def quantity(self, name: str, arguments: Sequence[Tree]) -> Real:
        """Return the exact value of a quantity."""
        outcome = self.outcome(name, arguments)
        if isinstance(outcome, Measurement):
            return Fraction(outcome.value)
        raise outcome if isinstance(outcome, Exception) else UndefinedError(f"undefined: {name}")

    def predicate(self, name: str, arguments: Sequence[Tree]) -> bool:
        """Return whether a predicate is true."""
        outcome = self.outcome(name, arguments)
        if isinstance(outcome, Finding):
            return outcome.value
        raise outcome if isinstance(outcome, Exception) else UndefinedError(f"undefined: {name}")

    def chi(self, number: int) -> int:
        """Return the quadratic character of an integer."""
        p = self._characteristic("chi")
        return int(fmpz(number % p).jacobi(fmpz(p)))

    def leading(self) -> int:
        """Return the leading coefficient of f modulo p."""
        return self._polynomial("leading")[0]

    def value(self, number: int) -> int:
        """Return f(number) modulo p."""
        p = self._characteristic("value")
        found = nmod_poly(list(self._polynomial("value"))[::-1], p)(nmod(number % p, p))
        return int(found)

    def discriminant(self) -> int:
        """Return the discriminant of f modulo p, f of degree 1 at least."""
        p = self._characteristic("disc")
        residues = self._polynomial("disc")
        degree = len(residues) - 1
        if degree < 1:
            raise UndefinedError("undefined: disc of a polynomial of degree 0")
        f = nmod_poly(list(residues)[::-1], p)
        sign = -1 if degree * (degree - 1) // 2 % 2 else 1
        derivative = f.derivative()
        if derivative.degree() < 0:
            return 0
        lost = degree - 1 - derivative.degree()  # the resultant of degrees (k, k - 1)
        resultant = int(f.resultant(derivative)) * pow(residues[0], lost, p)
        return sign * resultant * pow(residues[0], -1, p) % p

    def key(self, name: str, arguments: Sequence[Tree]) -> tuple[str, tuple[int, ...]]:
        """Return the canonical name of a quantity or predicate, and its evaluated arguments."""
        entry = _entry(name)
        kinds = entry.arguments
        if not kinds:
            return name, ()
        if kinds == ("polynomial",):
            return f"{name}(f)", ()
        found = tuple(
            self._argument(name, kind, tree) for kind, tree in zip(kinds, arguments, strict=True)
        )
        return f"{name}({','.join(map(str, found))})", found

    def outcome(self, name: str, arguments: Sequence[Tree]) -> Outcome:
        """Return what measuring a quantity or predicate gave, an error included."""
        key, values = self.key(name, arguments)
        if key not in self.outcomes:
            try:
                self.outcomes[key] = self._measure(_entry(name), values)
            except WITHOUT_VALUE as problem:
                self.outcomes[key] = problem
        return self.outcomes[key]

    def _measure(self, entry: Quantity | Predicate, values: tuple[int, ...]) -> Outcome:
        if entry.needs == "graph" and self.defect is not None:
            raise OutsideError(self.defect)
        if isinstance(entry, Quantity):
            cost = entry.cost(self.sizes, *values)
            if cost.steps > MOST_STEPS:
                raise LimitError(
                    f"limit: {entry.name} asks for {cost.steps} steps, more than {MOST_STEPS}"
                )
        return entry.function(self.subject, *values)

    def _argument(self, name: str, kind: ArgumentKind, tree: Tree) -> int:
        found = value(tree, self)
        if kind == "place":
            return int(floor(found))
        exact = rational_value(found)
        if exact is None or exact.denominator != 1:
            raise UndefinedError(f"undefined: {name} wants an integer")
        entry = _entry(name)
        if isinstance(entry, Quantity) and entry.orders and exact.numerator not in entry.orders:
            known = ", ".join(map(str, entry.orders))
            raise CaseError(f"{name}({exact}) is not supported; known orders: {known}")
        return exact.numerator

    def _characteristic(self, name: str) -> int:
        if self.combination.p is None:
            raise UndefinedError(f"undefined: {name} without a prime p")
        return self.combination.p

    def _polynomial(self, name: str) -> tuple[int, ...]:
        if self.subject.polynomial is None:
            raise UndefinedError(f"undefined: {name} without a polynomial")
        return self.subject.polynomial


def _entry(name: str) -> Quantity | Predicate:
    return QUANTITIES.entries.get(name) or PREDICATES.find(name)


def _defect_words(name: str, kind: str, pair: tuple[int, ...], entry: object) -> str:
    i, j = pair
    at = entry if callable(entry) else None
    there = at(i, j) if at else "?"
    if name == "zero_one":
        return f"an entry is not 0 or 1: a({i},{j}) = {there}"
    if name == "zero_diagonal":
        return f"not zero on the diagonal: a({i},{j}) = {there}"
    back = at(j, i) if at else "?"
    word = "row" if kind == "circulant" else "matrix"
    return f"the {word} is not symmetric: a({i},{j}) = {there} and a({j},{i}) = {back}"
