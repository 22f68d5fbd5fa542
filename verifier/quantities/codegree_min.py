"""The smallest number of common neighbours of two vertices."""

from fractions import Fraction

from verifier.records import Measurement
from verifier.registry import quantity
from verifier.structures.require import graph_of, pair_cost
from verifier.structures.subject import Subject


@quantity(
    "codegree_min",
    definition="the smallest #{x: a_ix = a_jx = 1} over pairs i != j",
    source="Thomason1987",
    needs="graph",
    symbol=r"\min_{i\ne j}\operatorname{codeg}(i,j)",
    witness=("i", "j"),
    maximum=lambda sizes: Fraction(max(sizes.n - 2, 0)),
    cost=pair_cost,
)
def codegree_min(subject: Subject) -> Measurement:
    """Return the smallest codegree over i != j, with the least pair that has it."""
    pairs = graph_of(subject).pairs
    return Measurement(pairs.codegree_min, pairs.min_pair)
