"""The balance of a sequence."""

from fractions import Fraction

from verifier.records import Measurement
from verifier.registry import quantity
from verifier.structures.require import sequence_of
from verifier.structures.subject import Subject


@quantity(
    "balance",
    definition="abs(sum e_x)",
    source="common-practice",
    needs="sequence",
    symbol=r"\left\lvert\sum e_x\right\rvert",
    maximum=lambda sizes: Fraction(sizes.N),
)
def balance(subject: Subject) -> Measurement:
    """Return the absolute value of the sum of all terms.

    Returns
    -------
    Measurement
        value: integer in 0..N, of the parity of N. witness: none.

    Notes
    -----
    Cost: N additions.
    """
    return Measurement(abs(int(sequence_of(subject).signs.sum(dtype="int64"))))
