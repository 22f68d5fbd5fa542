"""The complete character sum of f."""

from fractions import Fraction

from verifier.records import Measurement
from verifier.registry import quantity
from verifier.structures.require import character_of
from verifier.structures.subject import Subject


@quantity(
    "complete_sum",
    definition="sum over F_p of chi(f(x)), signed",
    source="Weil1948",
    needs="character",
    symbol=r"\sum_{x\in\mathbb F_p}\chi(f(x))",
    maximum=lambda sizes: Fraction(sizes.p),
)
def complete_sum(subject: Subject) -> Measurement:
    r"""Return the sum of chi(f(x)) over F_p.

    .. math:: \sum_{x \in \mathbb F_p} \chi(f(x))

    Returns
    -------
    Measurement
        value: integer in -p..p. witness: none.

    Notes
    -----
    Cost: p additions.
    """
    return Measurement(character_of(subject).complete_sum)
