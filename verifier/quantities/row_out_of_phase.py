"""The largest out-of-phase periodic autocorrelation of the row of a circulant."""

from fractions import Fraction

from verifier.kernels.lags import largest_lag
from verifier.records import Measurement
from verifier.registry import quantity
from verifier.structures.require import circulant_of
from verifier.structures.subject import Subject


@quantity(
    "row_out_of_phase",
    definition="max over d != 0 of abs(sum_x s_x s_(x+d mod n)) of the signed row s of a circulant",
    source="Golomb1967",
    needs="circulant",
    symbol=r"\max_{d\ne0}\lvert R(d)\rvert",
    witness=("d",),
    maximum=lambda sizes: Fraction(sizes.N),
)
def row_out_of_phase(subject: Subject) -> Measurement:
    r"""Return the largest absolute autocorrelation of the signed row off 0, with the least d.

    .. math:: \max_{d \ne 0} \Bigl|\sum_x s_x s_{(x + d) \bmod n}\Bigr|, \qquad s_0 = -1

    Returns
    -------
    Measurement
        value: integer in 0..n, 0 where n = 1. witness: d in 1..n - 1, none where n = 1.

    Notes
    -----
    The row need not be symmetric. Cost: one exact product of two numbers of n digits, or less
    where the row is close to a character that has its autocorrelation already.
    """
    return largest_lag(circulant_of(subject).autocorrelation)
