"""Evaluate an expression exactly in the scope of an instance; judge a condition."""

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from math import comb, factorial
from typing import Protocol

from verifier.errors import (
    CaseError,
    LimitError,
    OutsideError,
    UndecidedError,
    UndefinedError,
)
from verifier.exact import reals
from verifier.exact.canonical import Canonical, canonical
from verifier.exact.decide import compare, rational_value, settled, sign, way
from verifier.exact.nodes import Real
from verifier.expressions.text import to_text
from verifier.expressions.tree import (
    And,
    Binary,
    Call,
    Name,
    Negative,
    Not,
    Number,
    Or,
    Relation,
    Tree,
)

LARGEST_BINOMIAL = 1 << 16


class Scope(Protocol):
    """What the names of an expression stand for; any method may raise what has no value."""

    def name(self, name: str) -> Real:
        """Return the value of a name that is no function."""
        ...

    def quantity(self, name: str, arguments: Sequence[Tree]) -> Real:
        """Return the value of a quantity with arguments."""
        ...

    def predicate(self, name: str, arguments: Sequence[Tree]) -> bool:
        """Return whether a predicate is true."""
        ...

    def chi(self, number: int) -> int:
        """Return the quadratic character modulo p."""
        ...

    def leading(self) -> int:
        """Return the leading coefficient of f modulo p."""
        ...

    def value(self, number: int) -> int:
        """Return f(number) modulo p."""
        ...

    def discriminant(self) -> int:
        """Return the discriminant of f modulo p."""
        ...


@dataclass(frozen=True)
class Leaf:
    """A relation or predicate of a condition, judged.

    `relation` tells which. The sides and `ratio` are canonical, None where there is no value;
    `exact_ratio` is the ratio as an exact number.
    """

    says: str
    verdict: str
    relation: bool
    left: Canonical | None = None
    right: Canonical | None = None
    ratio: Canonical | None = None
    by: str | None = None
    reason: str | None = None
    exact_ratio: Real | None = None


@dataclass(frozen=True)
class Judged:
    """A condition, judged: its leaves in the order of the text, the verdict, and why it is open."""

    leaves: tuple[Leaf, ...]
    verdict: str
    reason: str | None


def value(tree: Tree, scope: Scope) -> Real:
    """Return the exact value of an expression.

    Raises
    ------
    UndefinedError, UndecidedError, OutsideError, LimitError
        If it has none there.
    CaseError
        If a value of more than 10^6 bits arises.
    """
    match tree:
        case Number(value=number):
            return number
        case Name(name="pi"):
            return reals.PI
        case Name(name=name):
            return scope.name(name)
        case Negative(operand=operand):
            return reals.negate(value(operand, scope))
        case Binary(operator=operator, left=left, right=right):
            return _BINARY[operator](value(left, scope), value(right, scope))
        case Call(name=name, arguments=arguments):
            return _call(name, arguments, scope)
    raise CaseError(f"{to_text(tree)}: a condition stands there; a number was wanted")


def judge(tree: Tree, scope: Scope) -> Judged:
    """Return the verdict of a condition: holds, fails, open, or outside where a leaf is outside.

    Every leaf is judged; `and`, `or` and `not` are those of three-valued logic.
    """
    leaves: list[Leaf] = []
    verdict = _judge(tree, scope, leaves)
    for leaf in leaves:
        if leaf.verdict == "outside":
            return Judged(tuple(leaves), "outside", leaf.reason)
    if verdict != "open":
        return Judged(tuple(leaves), verdict, None)
    reason = next(leaf.reason for leaf in leaves if leaf.verdict == "open")
    return Judged(tuple(leaves), "open", reason)


_BINARY: Mapping[str, Callable[[Real, Real], Real]] = {
    "+": reals.add,
    "-": reals.subtract,
    "*": reals.multiply,
    "/": reals.divide,
    "^": reals.power,
    "mod": reals.modulo,
}
_ONE: Mapping[str, Callable[[Real], Real]] = {
    "sqrt": lambda x: reals.root(x, 2),
    "log": reals.log,
    "exp": reals.exp,
    "abs": reals.absolute,
    "floor": reals.floor,
    "ceil": reals.ceiling,
}
_MANY: Mapping[str, Callable[[Real, Real], Real]] = {
    "min": reals.minimum,
    "max": reals.maximum,
}


def _call(name: str, arguments: Sequence[Tree], scope: Scope) -> Real:
    if name in _ONE:
        return _ONE[name](value(arguments[0], scope))
    if name in _MANY:
        found = [value(argument, scope) for argument in arguments]
        least = found[0]
        for other in found[1:]:
            least = _MANY[name](least, other)
        return least
    if name == "round":
        digits = _integer(arguments[1], scope, "round")
        return reals.rounded(value(arguments[0], scope), digits)
    if name in _WHOLE:
        return Fraction(_of_integers(name, arguments, scope))
    return scope.quantity(name, arguments)


_WHOLE = frozenset({"factorial", "binomial", "chi", "leading", "value", "disc"})


def _of_integers(name: str, arguments: Sequence[Tree], scope: Scope) -> Fraction | int:
    """Return the value of a function of integers, or of the polynomial f at one."""
    match name:
        case "factorial":
            return _factorial(_integer(arguments[0], scope, name))
        case "binomial":
            top, below = (_integer(argument, scope, name) for argument in arguments)
            return _binomial(top, below)
        case "chi":
            return scope.chi(_integer(arguments[0], scope, name))
        case "value":
            return scope.value(_integer(arguments[1], scope, name))
        case "leading":
            return scope.leading()
    return scope.discriminant()


def _integer(tree: Tree, scope: Scope, name: str) -> int:
    exact = rational_value(value(tree, scope))
    if exact is None or exact.denominator != 1:
        raise UndefinedError(f"undefined: {name} wants an integer")
    return exact.numerator


def _factorial(number: int) -> Fraction:
    if number < 0:
        raise UndefinedError("undefined: factorial wants 0 <= n")
    if number > LARGEST_BINOMIAL:
        raise CaseError("a value of more than 10^6 bits")
    return Fraction(factorial(number))


def _binomial(top: int, below: int) -> Fraction:
    if below < 0 or top < 0:
        raise UndefinedError(f"undefined: binomial wants 0 <= {'n' if top < 0 else 'k'}")
    if min(below, top - below) * max(top.bit_length(), 1) > 10**6:
        raise CaseError("a value of more than 10^6 bits")
    return Fraction(comb(top, below))


def _judge(tree: Tree, scope: Scope, leaves: list[Leaf]) -> str:
    match tree:
        case And(left=left, right=right):
            parts = (_judge(left, scope, leaves), _judge(right, scope, leaves))
            return _conjunction(parts)
        case Or(left=left, right=right):
            parts = (_judge(left, scope, leaves), _judge(right, scope, leaves))
            return _negation(_conjunction([_negation(part) for part in parts]))
        case Not(operand=operand):
            return _negation(_judge(operand, scope, leaves))
        case Relation():
            leaf = _relation(tree, scope)
        case _:
            leaf = _predicate(tree, scope)
    leaves.append(leaf)
    return leaf.verdict if leaf.verdict != "outside" else "open"


def _conjunction(parts: Sequence[str]) -> str:
    if "fails" in parts:
        return "fails"
    return "open" if "open" in parts else "holds"


def _negation(verdict: str) -> str:
    return {"holds": "fails", "fails": "holds"}.get(verdict, verdict)


def _predicate(tree: Tree, scope: Scope) -> Leaf:
    says = to_text(tree)
    name, arguments = (tree.name, tree.arguments) if isinstance(tree, Call) else (says, ())
    try:
        verdict = "holds" if scope.predicate(name, arguments) else "fails"
    except OutsideError as problem:
        return Leaf(says, "outside", relation=False, reason=str(problem))
    except (UndefinedError, UndecidedError, LimitError) as problem:
        return Leaf(says, "open", relation=False, reason=str(problem))
    return Leaf(says, verdict, relation=False)


def _relation(tree: Relation, scope: Scope) -> Leaf:
    says = to_text(tree)
    try:
        left = settled(value(tree.left, scope))
        right = settled(value(tree.right, scope))
        shown = canonical(left), canonical(right)
    except OutsideError as problem:
        return Leaf(says, "outside", relation=True, reason=str(problem))
    except (UndefinedError, UndecidedError, LimitError) as problem:
        return Leaf(says, "open", relation=True, reason=str(problem))
    ratio, printed = _ratio(tree.operator, left, right)
    leaf = Leaf(says, "open", True, *shown, printed, None, None, ratio)  # noqa: FBT003
    try:
        verdict = "holds" if _true(tree.operator, compare(left, right)) else "fails"
    except UndecidedError as problem:
        return replace(leaf, reason=str(problem))
    return replace(leaf, verdict=verdict, by=way(left, right))


def _true(operator: str, order: int) -> bool:
    return {
        "<=": order <= 0,
        "<": order < 0,
        "=": order == 0,
        "!=": order != 0,
        ">=": order >= 0,
        ">": order > 0,
    }[operator]


def _ratio(operator: str, left: Real, right: Real) -> tuple[Real | None, Canonical | None]:
    """Return the ratio of two positive sides, exact and printed, where it is settled."""
    if operator in ("=", "!="):
        return None, None
    if operator in (">=", ">"):
        left, right = right, left
    try:
        if sign(left) > 0 and sign(right) > 0:
            ratio = reals.divide(left, right)
            return ratio, canonical(ratio)
    except UndecidedError:
        return None, None
    return None, None
