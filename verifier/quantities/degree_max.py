"""The largest degree of a graph."""

from fractions import Fraction

from verifier.records import Measurement
from verifier.registry import quantity
from verifier.structures.require import graph_of
from verifier.structures.subject import Subject


@quantity(
    "degree_max",
    definition="the largest degree",
    source="common-practice",
    needs="graph",
    symbol=r"\Delta(G)",
    witness=("i",),
    maximum=lambda sizes: Fraction(sizes.n - 1),
)
def degree_max(subject: Subject) -> Measurement:
    """Return the largest degree, with the least vertex that has it."""
    degrees = graph_of(subject).degrees
    place = int(degrees.argmax())
    return Measurement(int(degrees[place]), (place,))
