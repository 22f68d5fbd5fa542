"""Circulant graphs."""

from verifier.registry import graph
from verifier.structures.graph import Circulant
from verifier.structures.sequence import BinarySequence


@graph(
    "circulant",
    definition="a_ij = z_((j-i) mod n), z_0 = 0, z_x = (1 + e_x)/2; symmetric only if e is",
    source="ChungGrahamWilson1989",
)
def circulant(sequence: BinarySequence) -> Circulant:
    """Return the circulant graph on as many vertices as the sequence has terms."""
    return Circulant(sequence)
