"""Sum graphs of a sequence over the integers modulo n."""

import numpy as np

from verifier.errors import CaseError
from verifier.registry import graph
from verifier.structures.graph import Matrix
from verifier.structures.sequence import BinarySequence

MOST_VERTICES = 3000


@graph(
    "cayley-sum",
    definition="a_ij = (1 + e_((i+j) mod n))/2 for i != j, 0 on the diagonal",
    source="ChungGrahamWilson1989",
)
def cayley_sum(sequence: BinarySequence) -> Matrix:
    """Return the sum graph on as many vertices as the sequence has terms, 3,000 at most.

    Raises
    ------
    CaseError
        If there are more.
    """
    n = len(sequence.signs)
    if n > MOST_VERTICES:
        raise CaseError(f"[graph]: {n} vertices; cayley-sum is supported to {MOST_VERTICES}")
    bits = (sequence.signs == 1).astype(np.int8)
    places = np.arange(n)
    entries = bits[(places[:, None] + places) % n]
    np.fill_diagonal(entries, 0)
    return Matrix(entries, "cayley-sum")
