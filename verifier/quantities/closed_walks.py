"""The number of closed walks in a graph."""

from fractions import Fraction

from verifier.errors import CaseError
from verifier.records import Measurement
from verifier.registry import quantity
from verifier.structures.require import graph_of, pair_cost
from verifier.structures.subject import Subject


@quantity(
    "closed_walks",
    definition="trace of A^l",
    source="BrouwerHaemers2012",
    needs="graph",
    symbol=r"\operatorname{tr}A^{{0}}",
    arguments=("order",),
    orders=(4,),
    maximum=lambda sizes, t: Fraction((sizes.n - 1) ** t + (sizes.n - 1)),
    cost=lambda sizes, _: pair_cost(sizes),
)
def closed_walks(subject: Subject, length: int) -> Measurement:
    """Return the trace of A^4: the sum of the squares of all codegrees, i = j included.

    Parameters
    ----------
    subject
        With a graph on n vertices.
    length
        The length of the walks, 4.

    Returns
    -------
    Measurement
        value: integer in 0..(n - 1)^4 + (n - 1). witness: none.

    Raises
    ------
    CaseError
        If the length is another.

    Notes
    -----
    Cost: that of the codegrees.
    """
    if length != 4:
        raise CaseError(f"closed_walks({length}) is not supported; known orders: 4")
    return Measurement(graph_of(subject).pairs.square_sum)
