"""The structure of a matrix: zero diagonal."""

from verifier.records import Finding
from verifier.registry import predicate
from verifier.structures.require import graph_of
from verifier.structures.subject import Subject


@predicate(
    "zero_diagonal",
    definition="a_ii = 0 for all i",
    source="common-practice",
    needs="any-graph",
    symbol=r"\operatorname{diag}A=0",
    witness=("i", "j"),
)
def zero_diagonal(subject: Subject) -> Finding:
    """Return whether a_ii = 0 for all i."""
    pair = graph_of(subject).defect("zero_diagonal")
    return Finding(pair is None, pair)
