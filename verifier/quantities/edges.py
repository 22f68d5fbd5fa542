"""The number of edges of a graph."""

from fractions import Fraction

from verifier.records import Measurement
from verifier.registry import quantity
from verifier.structures.require import graph_of
from verifier.structures.subject import Subject


@quantity(
    "edges",
    definition="count of the edges",
    source="common-practice",
    needs="graph",
    symbol=r"e(G)",
    maximum=lambda sizes: Fraction(sizes.n * (sizes.n - 1), 2),
)
def edges(subject: Subject) -> Measurement:
    """Return half the sum of the degrees."""
    return Measurement(int(graph_of(subject).degrees.sum()) // 2)
