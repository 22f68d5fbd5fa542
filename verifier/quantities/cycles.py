"""The number of labelled cycles in a graph."""

from fractions import Fraction
from math import perm

from verifier.errors import CaseError
from verifier.records import Measurement
from verifier.registry import quantity
from verifier.structures.require import graph_of, pair_cost
from verifier.structures.subject import Subject


@quantity(
    "cycles",
    definition="number of labelled cycles of length l (injective maps of the cycle C_l)",
    source="ChungGrahamWilson1989",
    needs="graph",
    symbol=r"N_G(C_{{0}})",
    arguments=("order",),
    orders=(4,),
    maximum=lambda sizes, t: Fraction(perm(sizes.n, t)),
    cost=lambda sizes, _: pair_cost(sizes),
)
def cycles(subject: Subject, length: int) -> Measurement:
    """Return the number of labelled 4-cycles: tr A^4 - sum d (2 d - 1) over the degrees d.

    Parameters
    ----------
    subject
        With a graph on n vertices.
    length
        The length of the cycles, 4.

    Returns
    -------
    Measurement
        value: integer in 0..n (n - 1) (n - 2) (n - 3), 8 times the number of cycles. witness: none.

    Raises
    ------
    CaseError
        If the length is another.

    Notes
    -----
    A closed walk i, j, k, m is no cycle where i = k or j = m: 2 sum d^2 - sum d of them. Cost:
    that of the codegrees.
    """
    if length != 4:
        raise CaseError(f"cycles({length}) is not supported; known orders: 4")
    graph = graph_of(subject)
    back_and_forth = sum(d * (2 * d - 1) for d in graph.degrees.tolist())
    return Measurement(graph.pairs.square_sum - back_and_forth)
