"""The structure of a matrix: zero one."""

from verifier.records import Finding
from verifier.registry import predicate
from verifier.structures.require import graph_of
from verifier.structures.subject import Subject


@predicate(
    "zero_one",
    definition="every entry is 0 or 1",
    source="common-practice",
    needs="any-graph",
    symbol=r"A\in\{0,1\}^{n\times n}",
    witness=("i", "j"),
)
def zero_one(subject: Subject) -> Finding:
    """Return whether every entry is 0 or 1."""
    pair = graph_of(subject).defect("zero_one")
    return Finding(pair is None, pair)
