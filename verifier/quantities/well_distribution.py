"""The well-distribution measure of a sequence."""

from fractions import Fraction
from math import isqrt


from verifier.kernels.progressions import largest_progression
from verifier.records import Cost, Measurement
from verifier.registry import quantity
from verifier.structures.require import sequence_of
from verifier.structures.subject import Subject


@quantity(
    "well_distribution",
    definition="max over a, b, t of abs(sum_(j=0..t-1) e_(a+jb)), all indices in 0..N-1, b >= 1",
    source="MauduitSarkozy1997",
    needs="sequence",
    symbol=r"W(E)",
    witness=("b", "a", "t"),
    maximum=lambda sizes: Fraction(sizes.N),
    cost=lambda sizes: Cost(4 * sizes.N * isqrt(sizes.N), 40 * sizes.N),
)
def well_distribution(subject: Subject) -> Measurement:
    """Return the largest sum over an arithmetic progression, with the least (b, a, t)."""
    value, witness = largest_progression(sequence_of(subject).signs)
    return Measurement(value, witness)
