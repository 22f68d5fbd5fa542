"""Squarefree polynomials over F_p."""

from flint import nmod_poly

from verifier.records import Finding
from verifier.registry import predicate
from verifier.structures.require import polynomial_of
from verifier.structures.subject import Subject


@predicate(
    "squarefree",
    definition="f modulo p has no repeated factor; a nonzero constant has none",
    source="common-practice",
    needs="polynomial",
    symbol=r"{0}\text{ is squarefree}",
    arguments=("polynomial",),
)
def squarefree(subject: Subject) -> Finding:
    """Return whether f modulo p has no repeated factor; a nonzero constant has none."""
    p, residues = polynomial_of(subject)
    f = nmod_poly(list(residues)[::-1], p)
    return Finding(f.gcd(f.derivative()).degree() == 0)
