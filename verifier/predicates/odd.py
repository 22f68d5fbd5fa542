"""Odd polynomials over F_p."""

from verifier.records import Finding
from verifier.registry import predicate
from verifier.structures.require import polynomial_of
from verifier.structures.subject import Subject


@predicate(
    "odd",
    definition="every coefficient of f modulo p at even degrees is 0",
    source="common-practice",
    needs="polynomial",
    symbol=r"{0}\text{ is odd}",
    arguments=("polynomial",),
)
def odd(subject: Subject) -> Finding:
    """Return whether every coefficient of f modulo p at even degrees is 0."""
    _, residues = polynomial_of(subject)
    return Finding(not any(residues[::-1][0::2]))
