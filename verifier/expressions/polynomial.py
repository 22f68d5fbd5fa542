"""Polynomials in x: from a tree to rational coefficients, to residues, and to canonical text."""

from collections.abc import Mapping, Sequence
from fractions import Fraction

from flint import fmpq, fmpq_poly

from verifier.errors import CaseError, ExpressionError, OutsideError
from verifier.expressions.text import to_text
from verifier.expressions.tree import Binary, Name, Negative, Number, Tree

LARGEST_DEGREE = 1000
LARGEST_BITS = 100_000

Coefficients = tuple[Fraction, ...]


def coefficients(tree: Tree, names: Mapping[str, Fraction | Coefficients]) -> Coefficients:
    """Return the coefficients, highest first, without leading zeros; () for the zero polynomial.

    Parameters
    ----------
    tree
        A polynomial in x.
    names
        Numbers, and polynomials as coefficients highest first.

    Raises
    ------
    ExpressionError
        If it is no polynomial: a quotient by x, a negative or fractional power, a degree above
        1,000.

    Examples
    --------
    >>> from verifier.expressions.parse import parse
    >>> [str(c) for c in coefficients(parse("(x + 1)^2/2 - a"), {"a": Fraction(3)})]
    ['1/2', '1', '-5/2']
    """
    found = _polynomial(tree, names)
    return tuple(Fraction(int(c.p), int(c.q)) for c in reversed(found.coeffs()))


def polynomial_text(residues: Sequence[int]) -> str:
    """Return the canonical text of a polynomial with least residues, highest first.

    Examples
    --------
    >>> polynomial_text((1, 0, 3, 0, 1)), polynomial_text(())
    ('x^4 + 3*x^2 + 1', '0')
    """
    degree = len(residues) - 1
    terms = [_term(value, degree - i) for i, value in enumerate(residues) if value]
    return " + ".join(terms) or "0"


def reduce(rational: Sequence[Fraction], p: int) -> tuple[int, ...]:
    """Return the least residues modulo a prime, highest first, without leading zeros.

    Raises
    ------
    OutsideError
        If p divides a denominator.
    """
    for value in rational:
        if value.denominator % p == 0:
            raise OutsideError(f"{p} divides a denominator of f")
    residues = [value.numerator * pow(value.denominator, -1, p) % p for value in rational]
    while residues and residues[0] == 0:
        residues.pop(0)
    return tuple(residues)


def _term(value: int, exponent: int) -> str:
    if exponent == 0:
        return str(value)
    power = "x" if exponent == 1 else f"x^{exponent}"
    return power if value == 1 else f"{value}*{power}"


def _polynomial(tree: Tree, names: Mapping[str, Fraction | Coefficients]) -> fmpq_poly:
    match tree:
        case Number(value=value):
            return _constant(value)
        case Name(name="x"):
            return fmpq_poly([0, 1])
        case Name(name=name) if name in names:
            return _named(names[name])
        case Negative(operand=operand):
            return -_polynomial(operand, names)
        case Binary(operator="^"):
            return _power(tree, names)
        case Binary():
            left, right = _polynomial(tree.left, names), _polynomial(tree.right, names)
            return _combined(tree, left, right)
    raise _refusal(tree, "a polynomial in x was wanted")


def _constant(value: Fraction) -> fmpq_poly:
    return fmpq_poly([fmpq(value.numerator, value.denominator)])


def _named(found: Fraction | Coefficients) -> fmpq_poly:
    if isinstance(found, Fraction):
        return _constant(found)
    return fmpq_poly([fmpq(c.numerator, c.denominator) for c in reversed(found)])


def _combined(tree: Binary, left: fmpq_poly, right: fmpq_poly) -> fmpq_poly:
    match tree.operator:
        case "+":
            return left + right
        case "-":
            return left - right
        case "*":
            _check_degree(tree, left.degree() + right.degree())
            return _checked(tree, left * right)
        case "/":
            return _quotient(tree, left, right)
    raise _refusal(tree, f"{tree.operator} has no place in a polynomial")


def _quotient(tree: Binary, left: fmpq_poly, right: fmpq_poly) -> fmpq_poly:
    if right.degree() > 0:
        raise _refusal(tree, "a polynomial stands below /; a constant was wanted")
    if right.degree() < 0:
        raise _refusal(tree, "zero stands below /")
    return left / right[0]


def _power(tree: Binary, names: Mapping[str, Fraction | Coefficients]) -> fmpq_poly:
    base, exponent = _polynomial(tree.left, names), _polynomial(tree.right, names)
    size = exponent[0] if exponent.degree() <= 0 else None
    if size is None or size.q != 1 or size < 0:
        raise _refusal(tree, "the exponent of a polynomial is an integer from 0 to 1000")
    if size > LARGEST_DEGREE:
        raise _refusal(tree, f"a degree of at most {LARGEST_DEGREE} was wanted")
    _check_degree(tree, max(base.degree(), 0) * int(size))
    bits = max((int(c.p).bit_length() + int(c.q).bit_length() for c in base.coeffs()), default=0)
    if bits * int(size) > LARGEST_BITS:
        raise _refusal(tree, "coefficients of fewer digits were wanted")
    return base ** int(size)


def _checked(tree: Tree, found: fmpq_poly) -> fmpq_poly:
    if any(int(c.p).bit_length() > LARGEST_BITS for c in found.coeffs()):
        raise _refusal(tree, "coefficients of fewer digits were wanted")
    return found


def _check_degree(tree: Tree, degree: int) -> None:
    if degree > LARGEST_DEGREE:
        raise _refusal(tree, f"a degree of at most {LARGEST_DEGREE} was wanted")


def _refusal(tree: Tree, problem: str) -> CaseError:
    return ExpressionError(to_text(tree), 0, problem)
