"""Parameters and their ranges, in words and formulas; and the place of one instance."""

from collections.abc import Mapping

from verifier.appendix.polynomials import polynomial
from verifier.appendix.values import RATIONAL, digits
from verifier.case.case import Family, Parameter, Polynomials, Primes, Values
from verifier.expressions.latex import to_latex
from verifier.expressions.tree import Name
from verifier.typography.escape import Latex

LISTED = 24
LONGEST = 200  # as part of the place of an instance; the certificate has it in full


def name_latex(name: str) -> str:
    r"""Return the name of a parameter as maths.

    Examples
    --------
    >>> print(name_latex("p"), name_latex("a_1"))
    p a_{\mathrm{1}}
    """
    return to_latex(Name(name), {}, {})


def parameter_sentence(parameter: Parameter) -> Latex:
    """Return what a parameter runs over, without a full stop."""
    name = f"${name_latex(parameter.name)}$"
    match parameter:
        case Primes():
            return Latex(f"{name} runs over {_primes(parameter)}")
        case Values(values=values):
            return Latex(f"{name} runs over {_values(values)}")
        case Polynomials(texts=texts):
            shown = ", ".join(polynomial(text).code for text in texts[:LISTED])
            tail = f", and so on: {len(texts)} listed polynomials" if len(texts) > LISTED else ""
            return Latex(f"{name} is {'one of ' if len(texts) > 1 else ''}{shown}{tail}")
        case Family():
            return Latex(f"{name} runs over {_family(parameter)}")


def _primes(primes: Primes) -> str:
    letter = name_latex(primes.name)
    kind = "prime powers" if primes.powers else "primes"
    size = f"${primes.first}\\le {letter}\\le {primes.last}$"
    if primes.modulus == 1:
        return f"the {kind} with {size}"
    residue = f"${letter}\\equiv {primes.residue} \\pmod{{{primes.modulus}}}$"
    return f"the {kind} with {size} and {residue}"


def _values(values: tuple[int, ...]) -> str:
    shown = ", ".join(f"${value}$" for value in values[:LISTED])
    if len(values) <= LISTED:
        return shown
    return f"{len(values)} listed integers from ${min(values)}$ to ${max(values)}$"


def _family(family: Family) -> str:
    words = [
        word
        for word, there in (
            ("monic", family.monic),
            ("even", family.even),
            ("squarefree", family.squarefree),
        )
        if there
    ]
    kind = f"{' '.join([*words, 'polynomials'])} of degree ${family.degree}$ over $\\mathbf{{F}}_p$"
    if family.sample is None:
        return f"all {kind}"
    return (
        f"a sample, for each $p$, of {family.sample} {kind}, drawn without repetition from the "
        f"seeded stream of seed {family.seed}"
    )


def place(parameters: Mapping[str, str]) -> Latex:
    r"""Return the parameters of one instance as `p = 29, f = x^4 + 3`.

    Examples
    --------
    >>> print(place({"p": "29", "f": "x^4 + 3"}).code)
    $p=29$, $f=x^{4}+\allowbreak 3$
    """
    if not parameters:
        return Latex("the one instance")
    return Latex(", ".join(_equation(name, text) for name, text in parameters.items()))


def _equation(name: str, text: str) -> str:
    if RATIONAL.fullmatch(text):
        shown = digits(text)
        return f"${name_latex(name)}={text}$" if shown == text else f"${name_latex(name)}=${shown}"
    if len(text) > LONGEST:
        return f"${name_latex(name)}$ of {len(text)} characters"
    shown = polynomial(text).code
    if shown.startswith("$"):
        return f"${name_latex(name)}={shown.removeprefix('$')}"
    return f"${name_latex(name)}=$ {shown}"


def places(instances: list[Mapping[str, str]], most: int = 3) -> str:
    """Return LaTeX naming up to `most` instances and counting the rest."""
    shown = "; ".join(place(parameters).code for parameters in instances[:most])
    more = len(instances) - most
    return f"{shown}; and {more} more" if more > 0 else shown
