"""The largest out-of-phase periodic autocorrelation of a sequence."""

from fractions import Fraction

from verifier.kernels.lags import largest_lag
from verifier.records import Measurement
from verifier.registry import quantity
from verifier.structures.require import sequence_of
from verifier.structures.subject import Subject


@quantity(
    "out_of_phase",
    definition="max over d != 0 of abs(sum_x e_x e_(x+d mod N)) of the sequence as it stands",
    source="Golomb1967",
    needs="sequence",
    symbol=r"\max_{d\ne0}\lvert R_e(d)\rvert",
    witness=("d",),
    maximum=lambda sizes: Fraction(sizes.N),
)
def out_of_phase(subject: Subject) -> Measurement:
    r"""Return the largest absolute periodic autocorrelation off 0, with the least d.

    .. math:: \max_{d \ne 0} \Bigl|\sum_x e_x e_{(x + d) \bmod N}\Bigr|

    Returns
    -------
    Measurement
        value: integer in 0..N, 0 where N = 1. witness: d in 1..N - 1, none where N = 1.

    Notes
    -----
    Cost: one exact product of two numbers of N digits.
    """
    return largest_lag(sequence_of(subject).autocorrelation)
