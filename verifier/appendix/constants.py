"""Constant bounds: nested roots simplified by sympy, and the simplification proved before print."""

from typing import Any

import sympy

from verifier.expressions.tree import Binary, Call, Negative, Number, Relation, Tree
from verifier.typography.escape import Latex

Expression = Any  # sympy ships no types
MOST_ROOTS = 3
POWER = 16
BITS = 256


def constant_remark(tree: Tree) -> Latex | None:
    r"""Return `a = b` as LaTeX where a side of a relation is a constant with roots that simplifies.

    Only algebraic constants are tried. Equality is proved: the difference is zero by the minimal
    polynomial of an algebraic number, not by digits.

    Examples
    --------
    >>> from verifier.expressions.parse import parse
    >>> constant_remark(parse("n <= sqrt(3 + 2*sqrt(2))")).code
    '\\sqrt{2 \\sqrt{2} + 3}=1 + \\sqrt{2}'
    """
    if not isinstance(tree, Relation):
        return None
    for side in (tree.left, tree.right):
        given = _value(side)
        if given is None or given.is_Rational or not _small(given):
            continue
        simpler = sympy.radsimp(sympy.sqrtdenest(given))
        if simpler.count_ops() < given.count_ops() and _equal(given, simpler):
            return Latex(f"{sympy.latex(given)}={sympy.latex(simpler)}")
    return None


def _small(expression: Expression) -> bool:
    """Return whether the expression is cheap: few roots, short numbers."""
    roots = [power for power in expression.atoms(sympy.Pow) if not power.exp.is_Integer]
    numbers = expression.atoms(sympy.Rational)
    return len(roots) <= MOST_ROOTS and all(
        max(abs(int(number.p)), int(number.q)).bit_length() <= BITS for number in numbers
    )


def _equal(left: Expression, right: Expression) -> bool:
    x = sympy.Symbol("x")
    return bool(sympy.minimal_polynomial(left - right, x) == x)


def _value(tree: Tree) -> Expression | None:
    """Return an algebraic constant in integers, + - * / ^ and sqrt, or None for anything else."""
    match tree:
        case Number(value=value):
            return sympy.Rational(value.numerator, value.denominator)
        case Negative(operand=operand):
            inner = _value(operand)
            return None if inner is None else -inner
        case Call(name="sqrt", arguments=(inside,)):
            inner = _value(inside)
            return None if inner is None or inner.is_negative else sympy.sqrt(inner)
        case Binary():
            return _binary(tree)
        case _:
            return None


def _binary(tree: Binary) -> Expression | None:
    left, right = _value(tree.left), _value(tree.right)
    if left is None or right is None:
        return None
    match tree.operator:
        case "+":
            return left + right
        case "-":
            return left - right
        case "*":
            return left * right
        case "/" if right != 0:
            return left / right
        case "^" if right.is_Integer and abs(right) <= POWER and (left != 0 or right > 0):
            return left**right
        case _:
            return None
