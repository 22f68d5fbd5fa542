"""Regular graphs."""

import numpy as np

from verifier.records import Finding
from verifier.registry import predicate
from verifier.structures.require import graph_of
from verifier.structures.subject import Subject


@predicate(
    "regular",
    definition="all degrees are equal",
    source="common-practice",
    needs="graph",
    symbol=r"G\text{ is regular}",
    witness=("i", "j"),
)
def regular(subject: Subject) -> Finding:
    """Return whether all degrees are equal."""
    degrees = graph_of(subject).degrees
    other = np.flatnonzero(degrees != degrees[0])
    return Finding(len(other) == 0, (0, int(other[0])) if len(other) else None)
