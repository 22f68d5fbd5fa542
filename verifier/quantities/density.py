"""The edge density of a graph."""

from fractions import Fraction

from verifier.errors import UndefinedError
from verifier.records import Measurement
from verifier.registry import quantity
from verifier.structures.require import graph_of
from verifier.structures.subject import Subject


@quantity(
    "density",
    definition="edges / (n(n-1)/2)",
    source="common-practice",
    needs="graph",
    symbol=r"d(G)",
    maximum=lambda _: Fraction(1),
)
def density(subject: Subject) -> Measurement:
    """Return edges/(n(n-1)/2), a rational in 0..1."""
    graph = graph_of(subject)
    if graph.n < 2:
        raise UndefinedError("undefined: density of fewer than 2 vertices")
    return Measurement(Fraction(int(graph.degrees.sum()), graph.n * (graph.n - 1)))
