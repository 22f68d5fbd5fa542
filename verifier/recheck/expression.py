"""Expressions of a case: precedence parser, canonical text, value and truth at one instance."""

import operator
import re
from collections.abc import Iterator, Mapping
from fractions import Fraction
from functools import cmp_to_key
from math import comb, factorial
from typing import Any, NamedTuple

from . import reals
from .reals import OpenError, OutsideError, Real, RecheckError, canonical, compare, operate, sign

MOST_CHARACTERS, MOST_NODES, MOST_DEPTH = 400, 200, 40
TOKEN = re.compile(r"\s*(\d+(?:\.\d+)?(?![\w.])|[A-Za-z_]\w*|<=|>=|!=|[-+*/^()<>=,])", re.ASCII)
RELATIONS = {"<": operator.lt, "<=": operator.le, "=": operator.eq}
RELATIONS |= {"!=": operator.ne, ">=": operator.ge, ">": operator.gt}
# How tightly what binds; a prefix `not` binds at 3, a prefix minus at 7.
LEVELS = {"or": 1, "and": 2, "+": 5, "-": 5, "*": 6, "/": 6, "mod": 6, "^": 8}
LEVELS |= dict.fromkeys(RELATIONS, 4)


class Tree(NamedTuple):
    """kind: number, name, call, prefix or infix; text: the literal, the name or the operator."""

    kind: str
    text: str
    parts: tuple["Tree", ...] = ()

    def walk(self) -> Iterator["Tree"]:
        """Yield this tree and all below it, in the order of the text but operators first."""
        yield self
        for part in self.parts:
            yield from part.walk()

    def expand(self, definitions: Mapping[str, "Tree"]) -> "Tree":
        """Return the tree with defined names replaced by what they stand for."""
        if self.kind == "name" and self.text in definitions:
            return definitions[self.text]
        return self._replace(parts=tuple(part.expand(definitions) for part in self.parts))

    def depth(self) -> int:
        """Return the number of nodes on the longest way down."""
        return 1 + max((part.depth() for part in self.parts), default=0)

    def write(self, level: int = 0) -> str:
        """Return the canonical text, with the fewest parentheses."""
        if self.kind in ("number", "name"):
            return self.text
        if self.kind == "call":
            return f"{self.text}({', '.join(part.write() for part in self.parts)})"
        if self.kind == "prefix":
            own = 3 if self.text == "not" else 7
            text = ("not " if own == 3 else "-") + self.parts[0].write(own)
        else:
            own = LEVELS[self.text]
            left = self.parts[0].write(own + (own in (4, 8)))
            sign = self.text if self.text in "*/^" else f" {self.text} "
            text = left + sign + self.parts[1].write(7 if own == 8 else own + 1)
        return text if own >= level else f"({text})"


def parse(text: str, definitions: Mapping[str, Tree] = {}) -> Tree:  # noqa: B006 (never changed)
    """Read an expression or condition, with the names of `definitions` replaced."""
    tokens, place = [], 0
    while text[place:].strip():
        found = TOKEN.match(text, place)
        if found is None or len(text) > MOST_CHARACTERS:
            raise RecheckError(f"the expression {text[:60]!r} cannot be read")
        tokens.append(found[1])
        place = found.end()
    tokens.append("the end")
    tokens.reverse()

    def take(*wanted: str) -> str:
        if wanted and tokens[-1] not in wanted:
            raise RecheckError(f"the expression {text[:60]!r} has {tokens[-1]!r} in a wrong place")
        return tokens.pop()

    def climb(level: int) -> Tree:
        left = prefix(level)
        while LEVELS.get(tokens[-1], 0) >= level:
            sign = take()
            right = climb(7 if sign == "^" else LEVELS[sign] + 1)
            left = Tree("infix", sign, (left, right))
            if sign in RELATIONS and tokens[-1] in RELATIONS:
                take("one relation")
        return left

    def prefix(level: int) -> Tree:
        token = take()
        if token == "-" or (token == "not" and level <= 3):
            return Tree("prefix", token, (climb(7 if token == "-" else 3),))
        if token == "(":
            inner = climb(1)
            take(")")
            return inner
        if token[0].isdigit():
            return Tree("number", token)
        if token in LEVELS or token == "not" or not token.isidentifier():
            tokens.append(token)
            take("an operand")
        if tokens[-1] != "(":
            return Tree("name", token)
        take("(")
        parts = [climb(1)]
        while take(",", ")") == ",":
            parts.append(climb(1))
        return Tree("call", token, tuple(parts))

    tree = climb(1)
    take("the end")
    tree = tree.expand(definitions)
    if sum(1 for _ in tree.walk()) > MOST_NODES or tree.depth() > MOST_DEPTH:
        raise RecheckError(f"the expression {text[:60]!r} is too large")
    return tree


def integer(x: Real, who: str) -> int:
    """Return x as an integer, wanted by the function or quantity `who`."""
    exact = reals.rational(x)
    if exact is None or exact.denominator != 1:
        raise OpenError(f"undefined: {who} wants an integer")
    return exact.numerator


def _modulo(a: Real, m: Real) -> Real:
    dividend, modulus = integer(a, "mod"), integer(m, "mod")
    if modulus <= 0:
        raise OpenError("undefined: mod wants a positive modulus")
    return Fraction(dividend % modulus)


def _binomial(a: Real, b: Real) -> Real:
    n, k = integer(a, "binomial"), integer(b, "binomial")
    if n < 0 or k < 0:
        raise OpenError(f"undefined: binomial wants 0 <= {'k' if k < 0 else 'n'}")
    if min(k, n - k) > reals.VALUE_BITS:
        raise RecheckError("a value of more than 10^6 bits")
    return Fraction(comb(n, k))


def _factorial(a: Real) -> Real:
    n = integer(a, "factorial")
    if n < 0:
        raise OpenError("undefined: factorial wants 0 <= n")
    if n > 10**5:
        raise RecheckError("a value of more than 10^6 bits")
    return Fraction(factorial(n))


ORDER = cmp_to_key(compare)
ZERO = Fraction(0)
FUNCTIONS: dict[str, Any] = {
    "sqrt": lambda x: reals.root(x, 2),
    "log": reals.log,
    "exp": reals.exp,
    "floor": lambda x: Fraction(reals.floor(x)),
    "ceil": lambda x: Fraction(-reals.floor(operate("-", ZERO, x))),
    "abs": lambda x: x if sign(x) >= 0 else operate("-", ZERO, x),
    "min": lambda *xs: min(xs, key=ORDER),
    "max": lambda *xs: max(xs, key=ORDER),
    "binomial": _binomial,
    "factorial": _factorial,
    "round": lambda x, d: reals.rounded(x, integer(d, "round")),
    "mod": _modulo,
    "^": reals.power,
    "-": lambda x: operate("-", ZERO, x),
}


def value(tree: Tree, scope: Any) -> Real:
    """Return the value of an expression; `scope` knows names, quantities and the polynomial."""
    if tree.kind == "number":
        return Fraction(tree.text)
    if tree.kind == "name" or (tree.kind == "call" and tree.text not in FUNCTIONS):
        known: Real = reals.PI if tree == ("name", "pi", ()) else scope.look_up(tree)
        return known
    if tree.text in RELATIONS or tree.text in ("and", "or", "not"):
        raise RecheckError(f"the condition {tree.write()} stands where a number is wanted")
    parts = [value(part, scope) for part in tree.parts]
    if tree.kind == "infix" and tree.text in "+-*/":
        return operate(tree.text, *parts)
    result: Real = FUNCTIONS[tree.text](*parts)
    return result


class Leaf(NamedTuple):
    """One relation or predicate of a condition, judged."""

    document: dict[str, Any]
    reason: str | None = None
    ratio: Real | None = None


def judge(tree: Tree, scope: Any, leaves: list[Leaf]) -> str:
    """Return holds, fails or open in Kleene's logic, or outside; append the leaves, left to right."""
    if tree.text in ("and", "or", "not") and tree.kind != "name":
        verdicts = [judge(part, scope, leaves) for part in tree.parts]
        if "outside" in verdicts:
            return "outside"
        if tree.text == "not":
            return {"holds": "fails", "fails": "holds", "open": "open"}[verdicts[0]]
        order = ["fails", "open", "holds"]  # `and` is the least of its parts, `or` the greatest
        return (min if tree.text == "and" else max)(verdicts, key=order.index)
    leaf = _relation(tree, scope) if tree.text in RELATIONS else _predicate(tree, scope)
    leaves.append(leaf)
    return str(leaf.document["verdict"])


def _predicate(tree: Tree, scope: Any) -> Leaf:
    says = {"says": tree.write()}
    try:
        return Leaf(says | {"verdict": "holds" if scope.predicate(tree) else "fails"})
    except (OpenError, OutsideError) as error:
        outside = isinstance(error, OutsideError)
        return Leaf(says | {"verdict": "outside" if outside else "open"}, str(error))


def _relation(tree: Tree, scope: Any) -> Leaf:
    document: dict[str, Any] = dict.fromkeys(("left", "right", "ratio", "by"))
    document |= {"says": tree.write(), "verdict": "open"}
    try:
        left, right = [value(part, scope) for part in tree.parts]
        shown = {"left": canonical(left), "right": canonical(right)}
    except (OpenError, OutsideError) as error:
        if isinstance(error, OutsideError):
            document["verdict"] = "outside"
        return Leaf(document, str(error))
    ratio, reason = None, None
    try:
        if tree.text not in ("=", "!=") and sign(left) > 0 and sign(right) > 0:
            ratio = operate("/", *((left, right) if "<" in tree.text else (right, left)))
            document["ratio"] = canonical(ratio)
    except OpenError:
        ratio = None
    try:
        holds = RELATIONS[tree.text](compare(left, right), 0)
        decided = {"verdict": "holds" if holds else "fails", "by": reals.way(left, right)}
    except OpenError as error:
        decided, reason = {}, str(error)
    return Leaf(document | shown | decided, reason, ratio)
