"""The sum of all deviations of codegrees from n/4."""

from fractions import Fraction

from verifier.records import Measurement, Sizes
from verifier.registry import quantity
from verifier.structures.require import graph_of, pair_cost
from verifier.structures.subject import Subject


def _complete(sizes: Sizes) -> Fraction | None:
    """Return the value of the complete graph, the largest from n = 4 on."""
    n = sizes.n
    if n < 4:
        return None
    return n * (Fraction(3 * n, 4) - 1) + n * (n - 1) * (Fraction(3 * n, 4) - 2)


@quantity(
    "codegree_sum",
    definition="sum over all ordered pairs (i, j), i = j included, "
    "of abs(#{x: a_ix = a_jx = 1} - n/4)",
    source="ChungGrahamWilson1989",
    needs="graph",
    symbol=r"\sum_{i,j}\Bigl\lvert \operatorname{codeg}(i,j)-\tfrac n4\Bigr\rvert",
    maximum=_complete,
    cost=pair_cost,
)
def codegree_sum(subject: Subject) -> Measurement:
    r"""Return the sum of the deviations of the codegrees: property P7, times n^3.

    .. math:: \sum_{i, j} \bigl||N(i) \cap N(j)| - n/4\bigr|

    Returns
    -------
    Measurement
        value: multiple of 1/4, at least 0, over all n^2 ordered pairs. witness: none.

    Notes
    -----
    Cost: one autocorrelation for a circulant, n^3/128 word operations for any other graph.
    """
    return Measurement(Fraction(graph_of(subject).pairs.codegree_four, 4))
