"""The largest complete sum over products of shifts of f."""

from fractions import Fraction

from verifier.errors import CaseError
from verifier.kernels.lags import largest_lag
from verifier.records import Measurement
from verifier.registry import quantity
from verifier.structures.require import character_of
from verifier.structures.subject import Subject


@quantity(
    "shifted_sum",
    definition="max over D of l distinct shifts of abs(sum_x chi(f(x+d_1) ... f(x+d_l)))",
    source="Weil1948",
    needs="character",
    symbol=r"T_{{0}}(f)",
    arguments=("order",),
    orders=(2,),
    witness=("d_1", "d_2"),
    maximum=lambda sizes, _: Fraction(sizes.p),
)
def shifted_sum(subject: Subject, order: int) -> Measurement:
    r"""Return the largest complete sum over products of shifts, with the least pair of shifts.

    .. math:: \max_{d_1 < d_2} \Bigl|\sum_{x \in \mathbb F_p} \chi(f(x + d_1) f(x + d_2))\Bigr|

    Parameters
    ----------
    subject
        With a character over F_p.
    order
        The number of shifts, 2.

    Returns
    -------
    Measurement
        value: integer in 0..p. witness: (0, d) with the least d, as only differences matter.

    Raises
    ------
    CaseError
        If the order is another.

    Notes
    -----
    Cost: one autocorrelation of p entries.
    """
    if order != 2:
        raise CaseError(f"shifted_sum({order}) is not supported; known orders: 2")
    found = largest_lag(character_of(subject).autocorrelation)
    return Measurement(found.value, None if found.witness is None else (0, *found.witness))
