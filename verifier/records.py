"""Frozen records that pass between stages; no behaviour."""

from dataclasses import dataclass
from fractions import Fraction

Json = None | bool | int | str | list["Json"] | dict[str, "Json"]


@dataclass(frozen=True)
class Measurement:
    """The exact value of a quantity, and where a maximum is attained.

    Parameters
    ----------
    value
        The exact value.
    witness
        The least tuple that attains a maximum or a minimum; None where the quantity is none, or is
        one over nothing.
    """

    value: int | Fraction
    witness: tuple[int, ...] | None = None


@dataclass(frozen=True)
class Finding:
    """The truth of a predicate, with the least witness against it where there is one."""

    value: bool
    witness: tuple[int, ...] | None = None


@dataclass(frozen=True)
class Sizes:
    """What trivial maxima and costs depend on: vertices, terms, characteristic (0: none)."""

    n: int
    N: int
    p: int


@dataclass(frozen=True)
class Cost:
    """Elementary steps and bytes of a computation, from a deterministic model and not a clock."""

    steps: int
    bytes: int
