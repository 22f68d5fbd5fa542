"""Irreducible polynomials over F_p."""

from flint import nmod_poly

from verifier.records import Finding
from verifier.registry import predicate
from verifier.structures.require import polynomial_of
from verifier.structures.subject import Subject


@predicate(
    "irreducible",
    definition="f modulo p has degree 1 at least and no proper factor",
    source="common-practice",
    needs="polynomial",
    symbol=r"{0}\text{ is irreducible}",
    arguments=("polynomial",),
)
def irreducible(subject: Subject) -> Finding:
    """Return whether f modulo p has degree 1 at least and no proper factor."""
    p, residues = polynomial_of(subject)
    if len(residues) < 2:
        return Finding(False)  # noqa: FBT003 the one value of a Finding
    _, factors = nmod_poly(list(residues)[::-1], p).factor()
    return Finding(sum(multiplicity for _, multiplicity in factors) == 1)
