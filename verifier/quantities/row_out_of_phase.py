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
    """Return the largest absolute autocorrelation of the signed row off 0, with the least d."""
    return largest_lag(circulant_of(subject).autocorrelation)
