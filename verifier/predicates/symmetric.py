"""The structure of a matrix: symmetric."""

from verifier.records import Finding
from verifier.registry import predicate
from verifier.structures.require import graph_of
from verifier.structures.subject import Subject


@predicate(
    "symmetric",
    definition="a_ij = a_ji for all i, j",
    source="common-practice",
    needs="any-graph",
    symbol=r"A=A^{\mathsf T}",
    witness=("i", "j"),
)
def symmetric(subject: Subject) -> Finding:
    """Return whether a_ij = a_ji for all i, j."""
    pair = graph_of(subject).defect("symmetric")
    return Finding(pair is None, pair)
