"""The largest number of common neighbours of two vertices."""

from fractions import Fraction

from verifier.records import Measurement
from verifier.registry import quantity
from verifier.structures.require import graph_of, pair_cost
from verifier.structures.subject import Subject


@quantity(
    "codegree_max",
    definition="the largest #{x: a_ix = a_jx = 1} over pairs i != j",
    source="Thomason1987",
    needs="graph",
    symbol=r"\max_{i\ne j}\operatorname{codeg}(i,j)",
    witness=("i", "j"),
    maximum=lambda sizes: Fraction(max(sizes.n - 2, 0)),
    cost=pair_cost,
)
def codegree_max(subject: Subject) -> Measurement:
    """Return the largest codegree over i != j, with the least pair that has it."""
    pairs = graph_of(subject).pairs
    return Measurement(pairs.codegree_max, pairs.max_pair)
