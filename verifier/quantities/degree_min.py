"""The smallest degree of a graph."""

from fractions import Fraction

from verifier.records import Measurement
from verifier.registry import quantity
from verifier.structures.require import graph_of
from verifier.structures.subject import Subject


@quantity(
    "degree_min",
    definition="the smallest degree",
    source="common-practice",
    needs="graph",
    symbol=r"\delta(G)",
    witness=("i",),
    maximum=lambda sizes: Fraction(sizes.n - 1),
)
def degree_min(subject: Subject) -> Measurement:
    """Return the smallest degree, with the least vertex that has it."""
    degrees = graph_of(subject).degrees
    place = int(degrees.argmin())
    return Measurement(int(degrees[place]), (place,))
