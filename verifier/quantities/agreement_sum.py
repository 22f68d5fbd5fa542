"""The sum of all deviations of agreements from n/2."""

from fractions import Fraction

from verifier.records import Measurement
from verifier.registry import quantity
from verifier.structures.require import graph_of, pair_cost
from verifier.structures.subject import Subject


@quantity(
    "agreement_sum",
    definition="sum over all ordered pairs (i, j), i = j included, of abs(S(i,j) - n/2), "
    "S(i,j) = #{x: a_ix = a_jx}",
    source="ChungGrahamWilson1989",
    needs="graph",
    symbol=r"\sum_{i,j}\Bigl\lvert S(i,j)-\tfrac n2\Bigr\rvert",
    maximum=lambda sizes: Fraction(sizes.n**3, 2),
    cost=pair_cost,
)
def agreement_sum(subject: Subject) -> Measurement:
    r"""Return the sum of the deviations of the agreements of rows: property P6, times n^3.

    .. math:: \sum_{i, j} \bigl|S(i, j) - n/2\bigr|, \qquad S(i, j) = \#\{x : a_{ix} = a_{jx}\}

    Returns
    -------
    Measurement
        value: multiple of 1/2 in 0..n^3/2, over all n^2 ordered pairs. witness: none.

    Notes
    -----
    Cost: one autocorrelation for a circulant, n^3/128 word operations for any other graph.
    """
    return Measurement(Fraction(graph_of(subject).pairs.agreement_twice, 2))
