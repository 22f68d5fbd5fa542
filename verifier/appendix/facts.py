"""What certificates say about a case as a whole: the ground on which sketches are chosen."""

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from verifier.case.case import Case

Certificate = Mapping[str, Any]


def exponents(polynomial: str) -> frozenset[int] | None:
    """Return the exponents of a reduced polynomial in canonical text, or None if it is a digest.

    Examples
    --------
    >>> sorted(exponents("x^4 + 3*x + 1"))
    [0, 1, 4]
    """
    if polynomial.startswith("sha256:"):
        return None
    if polynomial == "0":
        return frozenset()
    found: set[int] = set()
    for term in polynomial.split(" + "):
        _, x, power = term.rpartition("x")
        found.add(int(power.removeprefix("^") or 1) if x else 0)
    return frozenset(found)


def in_order(document: Mapping[str, Any], case: Case) -> dict[str, Any]:
    """Return a document with parameters in the order of the case, all other keys sorted.

    Files sort all keys, runs keep what they did first: what is printed depends on neither.
    """
    rank = {parameter.name: place for place, parameter in enumerate(case.parameters)}

    def ordered(value: Any, key: str) -> Any:  # noqa: ANN401 any JSON
        if isinstance(value, list):
            return [ordered(item, "") for item in value]
        if not isinstance(value, Mapping):
            return value
        by_rank = key in ("parameters", "first", "last")
        names = sorted(value, key=lambda name: (rank.get(name, 0) if by_rank else 0, name))
        return {name: ordered(value[name], name) for name in names}

    return {name: ordered(document[name], name) for name in sorted(document)}


def base(name: str) -> str:
    """Return the name of a quantity without its arguments.

    Examples
    --------
    >>> base("correlation(2)")
    'correlation'
    """
    return name.partition("(")[0]


@dataclass(frozen=True)
class Facts:
    """The certificates of one case, asked together.

    Parameters
    ----------
    certificates
        One an instance, in instance order; whole-instance outsiders included.
    """

    certificates: Sequence[Certificate]

    @property
    def total(self) -> int:
        """The number of instances."""
        return len(self.certificates)

    @property
    def built(self) -> list[Certificate]:
        """The instances whose sequence exists."""
        return [found for found in self.certificates if "reason" not in found]

    def measured(self) -> list[str]:
        """Return the names of all quantities and predicates in the certificates, sorted."""
        return sorted({name for found in self.certificates for name in found["quantities"]})

    def uses(self, *names: str) -> bool:
        """Return whether any of the quantities stands in a certificate, whatever its arguments."""
        return bool({base(name) for name in self.measured()} & set(names))

    def all_of(self, key: str, value: str) -> bool:
        """Return whether the definition says `value` for `key` at every built instance."""
        built = self.built
        return bool(built) and all(found["definition"].get(key) == value for found in built)

    def full_period(self) -> bool:
        """Return whether every built sequence is e_0, ..., e_(p-1)."""
        return bool(self.built) and all(
            found["definition"].get("indices") == f"0..{int(found['known'].get('p', 0)) - 1}"
            for found in self.built
        )

    def within_period(self) -> bool:
        """Return whether every built sequence has at most p terms."""
        return bool(self.built) and all(
            "p" in found["known"] and int(found["known"]["N"]) <= int(found["known"]["p"])
            for found in self.built
        )

    def where(self, test: Callable[[Certificate], bool]) -> list[Certificate]:
        """Return the built instances that pass `test`."""
        return [found for found in self.built if test(found)]


def is_even(found: Certificate) -> bool:
    """Return whether f is even modulo p at an instance."""
    powers = _powers(found)
    if powers is None:
        return found["quantities"].get("even(f)") is True
    return all(power % 2 == 0 for power in powers)


def is_odd_symmetric(found: Certificate) -> bool:
    """Return whether f is odd modulo p and p = 1 mod 4 at an instance of the rule legendre."""
    if found["definition"].get("rule") != "legendre" or int(found["known"].get("p", 0)) % 4 != 1:
        return False
    powers = _powers(found)
    if powers is None:
        return found["quantities"].get("odd(f)") is True
    return bool(powers) and all(power % 2 for power in powers)


def is_symmetric(found: Certificate) -> bool:
    """Return whether the matrix was found symmetric at an instance."""
    return found["quantities"].get("symmetric") is True


def _powers(found: Certificate) -> frozenset[int] | None:
    polynomial = found["definition"].get("polynomial")
    return None if polynomial is None else exponents(polynomial)
