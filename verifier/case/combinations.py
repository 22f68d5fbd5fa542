"""The combinations of parameter values of a case, in their fixed order."""

from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass, replace
from fractions import Fraction
from itertools import islice, product

from flint import nmod_poly

from verifier.case.case import Case, Family, Parameter, Polynomials, Primes, Values
from verifier.errors import CaseError, ExpressionError
from verifier.exact.primes import prime_powers_between, primes_between
from verifier.exact.stream import bits
from verifier.expressions.polynomial import coefficients, polynomial_text

ENUMERATED = 100_000  # families up to this size are counted; beyond it, draws are limited

Coefficients = tuple[Fraction, ...]


@dataclass(frozen=True)
class Combination:
    """One value for every parameter.

    `texts` is what is printed, in file order; `numbers` the values of numeric parameters;
    `polynomials` rational coefficients, highest first; `listed` whether p stands in a list of
    values, so that a bad p is an error of the input.
    """

    texts: Mapping[str, str]
    numbers: Mapping[str, int]
    polynomials: Mapping[str, Coefficients]
    p: int | None
    listed: bool


Keep = Callable[[Combination], bool]


def combinations(case: Case, keep: Keep) -> list[Combination]:
    """Return every combination that `keep` keeps, the last parameter varying fastest.

    Raises
    ------
    CaseError
        If none is left: an empty check would hold without testing anything.
    """
    found = [
        made for made in _extend(case, 0, Combination({}, {}, {}, None, listed=False)) if keep(made)
    ]
    if not found:
        raise CaseError("[parameters] where: no combination satisfies every condition")
    return found


def _extend(case: Case, position: int, made: Combination) -> Iterator[Combination]:
    if position == len(case.parameters):
        yield _with_listed(case, made)
        return
    parameter = case.parameters[position]
    for step in _values(parameter, made):
        yield from _extend(case, position + 1, step)


def _values(parameter: Parameter, made: Combination) -> Iterator[Combination]:
    match parameter:
        case Primes():
            yield from _primes(parameter, made)
        case Values():
            for number in parameter.values:
                yield _with_number(made, parameter.name, number, number, listed=True)
        case Polynomials():
            for text in parameter.texts:
                yield replace(made, texts={**made.texts, parameter.name: text})
        case Family():
            yield from _family(parameter, made)


def _primes(parameter: Primes, made: Combination) -> Iterator[Combination]:
    if parameter.powers:
        for order, characteristic in prime_powers_between(parameter.first, parameter.last):
            if order % parameter.modulus == parameter.residue:
                yield _with_number(made, parameter.name, order, characteristic, listed=False)
        return
    residue = (parameter.residue, parameter.modulus)
    for prime in primes_between(parameter.first, parameter.last, residue):
        yield _with_number(made, parameter.name, prime, prime, listed=False)


def _with_number(
    made: Combination, name: str, number: int, characteristic: int, *, listed: bool
) -> Combination:
    step = replace(
        made, texts={**made.texts, name: str(number)}, numbers={**made.numbers, name: number}
    )
    if name not in ("p", "q"):
        return step
    return replace(step, p=characteristic, listed=listed)


def _with_listed(case: Case, made: Combination) -> Combination:
    """Return the combination with the coefficients of its listed polynomials.

    They may speak of every numeric parameter, also of those below them in the file.
    """
    names = {name: Fraction(number) for name, number in made.numbers.items()}
    found = dict(made.polynomials)
    for parameter in case.parameters:
        if isinstance(parameter, Polynomials):
            tree = parameter.trees[parameter.texts.index(made.texts[parameter.name])]
            try:
                found[parameter.name] = coefficients(tree, names)
            except ExpressionError as problem:
                text = made.texts[parameter.name]
                raise CaseError(f"[parameters] {parameter.name}: {text}: {problem}") from problem
    return replace(made, polynomials=found)


def _family(family: Family, made: Combination) -> Iterator[Combination]:
    if made.p is None:
        raise CaseError(
            f"[parameters] {family.name}: a family is drawn over F_p; p must stand above it"
        )
    for residues in family_members(family, made.p):
        yield replace(
            made,
            texts={**made.texts, family.name: polynomial_text(residues)},
            polynomials={**made.polynomials, family.name: tuple(map(Fraction, residues))},
        )


def family_members(family: Family, p: int) -> Iterator[tuple[int, ...]]:
    """Yield the polynomials of a family over F_p as least residues, highest coefficient first.

    Parameters
    ----------
    family
        Its degree, which coefficients are free, and whether a sample of it is wanted.
    p
        A prime.
    """
    if family.sample is None:
        yield from _every(family, p)
    else:
        yield from islice(_drawn(family, p), family.sample)


def _free(family: Family) -> list[int]:
    """Return the exponents whose coefficients are free, highest first."""
    step = 2 if family.even else 1
    exponents = list(range(family.degree, -1, -step))
    return exponents[1:] if family.monic else exponents


def _member(family: Family, p: int, drawn: tuple[int, ...]) -> tuple[int, ...] | None:
    """Return the residues with the free coefficients `drawn`, or None where it is no member."""
    residues = [0] * (family.degree + 1)
    residues[0] = 1
    for exponent, value in zip(_free(family), drawn, strict=True):
        residues[family.degree - exponent] = value
    if residues[0] == 0 or (family.squarefree and not _squarefree(residues, p)):
        return None
    return tuple(residues)


def _squarefree(residues: list[int], p: int) -> bool:
    polynomial = nmod_poly(residues[::-1], p)
    return bool(polynomial.gcd(polynomial.derivative()).degree() == 0)


def _every(family: Family, p: int) -> Iterator[tuple[int, ...]]:
    for drawn in product(range(p), repeat=len(_free(family))):
        member = _member(family, p, drawn)
        if member is not None:
            yield member


def _drawn(family: Family, p: int) -> Iterator[tuple[int, ...]]:
    """Yield members in the order of the seeded stream, none twice, until none is left."""
    stream = bits(family.seed)
    width = (p - 1).bit_length()
    count = len(_free(family))
    existing = sum(1 for _ in _every(family, p)) if p**count <= ENUMERATED else None
    limit = None if existing is not None else 64 * (family.sample or 0) + 4096
    seen: set[tuple[int, ...]] = set()
    draws = 0
    while len(seen) != existing and draws != limit:
        draws += 1
        member = _member(family, p, tuple(_residue(stream, width, p) for _ in range(count)))
        if member is not None and member not in seen:
            seen.add(member)
            yield member


def _residue(stream: Iterator[int], width: int, p: int) -> int:
    while True:
        value = sum(next(stream) << place for place in range(width))
        if value < p:
            return value
