"""Expressions of a case: reading, canonical text, and their value or truth at one instance.

The grammar binds as Python's own once ^ = mod are spelt ** == %. So the tokens are spelt so, names
behind x_ and numbers behind n_, and Python's parser (never its evaluator) reads them; a tree with
any node that is not of the grammar is refused.
"""

import ast
import operator
import re
from collections.abc import Iterator, Mapping
from contextlib import suppress
from copy import deepcopy
from fractions import Fraction
from functools import cmp_to_key
from itertools import chain
from math import comb, factorial
from typing import Any

from . import reals
from .reals import ZERO, OpenError, OutsideError, Real, RecheckError, canonical, compare, operate

MOST_CHARACTERS, MOST_NODES = 400, 200
TOKEN = re.compile(r"\d+(?:\.\d+)?(?![\w.])|[A-Za-z]\w*|<=|>=|!=|[-+*/^()<>=,]", re.ASCII)
SPELT = {"^": "**", "=": "==", "mod": "%", "and": "and", "or": "or", "not": "not"}
GRAMMAR = (ast.Name, ast.Call, ast.BinOp, ast.UnaryOp, ast.Compare, ast.BoolOp)
SIGNS = {ast.Add: "+", ast.Sub: "-", ast.Mult: "*", ast.Div: "/", ast.Pow: "^", ast.Mod: "mod"}
UP = {ast.Lt: operator.lt, ast.LtE: operator.le}  # left/right is the ratio of these
DOWN = {ast.Gt: operator.gt, ast.GtE: operator.ge}  # and right/left of these
RELATIONS: dict[type[ast.cmpop], Any] = {**UP, **DOWN, ast.Eq: operator.eq, ast.NotEq: operator.ne}


class _Expand(ast.NodeTransformer):
    def __init__(self, definitions: Mapping[str, ast.expr]) -> None:
        self.definitions = definitions

    def visit_Name(self, node: ast.Name) -> ast.expr:
        return deepcopy(self.definitions.get(node.id[2:], node))


def parse(text: str, definitions: Mapping[str, ast.expr]) -> ast.expr:
    """Read an expression or condition, with defined names replaced by what they stand for."""
    tokens = TOKEN.findall(text)
    if (
        len(text) > MOST_CHARACTERS
        or "".join(tokens) != "".join(text.split())
        or ",)" in "".join(tokens)
    ):
        raise RecheckError(f"the expression {text[:60]!r} cannot be read")
    spelt = (
        SPELT.get(t) or (_number(t) if t[0].isdigit() else "x_" * t[0].isalpha() + t)
        for t in tokens
    )
    tree: ast.expr = _Expand(definitions).visit(ast.parse(" ".join(spelt), mode="eval").body)
    nodes = list(subtrees(tree))
    known = all(isinstance(node, GRAMMAR) and len(getattr(node, "ops", "1")) == 1 for node in nodes)
    if not known or len(nodes) > MOST_NODES:
        raise RecheckError(f"the expression {text[:60]!r} is not of the grammar or too large")
    return tree


def _number(text: str) -> str:  # a decimal is the quotient that it means
    a, b = Fraction(text).as_integer_ratio()
    return f"n_{a}" if b == 1 else f"(n_{a}/n_{b})"


def subtrees(tree: ast.AST) -> Iterator[ast.expr]:
    """Yield all expressions in a tree, but no name of a function that is called."""
    if isinstance(tree, ast.expr):
        yield tree
    for part in tree.args if isinstance(tree, ast.Call) else ast.iter_child_nodes(tree):
        yield from subtrees(part)


def write(tree: ast.expr) -> str:
    """Return the canonical text, with the fewest parentheses."""
    text = ast.unparse(tree).replace(" % ", " mod ").replace(" == ", " = ").replace(" ** ", "^")
    text = re.sub(r"\b[nx]_", "", text.replace(" * ", "*").replace(" / ", "/"))
    return re.sub(r"\^\((-[\w^]*(?:\([^()]*\))?)\)", r"^\1", text)  # a sign may open an exponent


def named(tree: ast.expr) -> tuple[str, list[ast.expr]]:
    """Return the name and the arguments of a name or call; ('', []) for any other tree."""
    if isinstance(tree, ast.Call) and isinstance(tree.func, ast.Name):
        return tree.func.id[2:], tree.args
    return (tree.id[2:], []) if isinstance(tree, ast.Name) else ("", [])


def integer(x: Real, who: str) -> int:
    """Return x as an integer, wanted by the function or quantity `who`."""
    exact = reals.rational(x)
    if exact is None or exact.denominator != 1:
        raise OpenError(f"undefined: {who} wants an integer")
    return exact.numerator


def _whole(name: str, *xs: Real) -> Real:
    ns = [integer(x, name) for x in xs]
    if name == "mod" and ns[1] <= 0:
        raise OpenError("undefined: mod wants a positive modulus")
    if name != "mod" and min(ns) < 0:
        raise OpenError(f"undefined: {name} wants 0 <= {'n' if ns[0] < 0 else 'k'}")
    if name != "mod" and min(ns[-1], abs(ns[0] - ns[-1]) or ns[0]) > 10**5:
        raise RecheckError("a value of more than 10^6 bits")
    known: Any = {"mod": operator.mod, "binomial": comb, "factorial": factorial}[name]
    return Fraction(known(*ns))


def negative(x: Real) -> Real:
    """Return -x."""
    return operate("-", ZERO, x)


FUNCTIONS: dict[str, Any] = {
    "sqrt": lambda x: reals.root(x, 2),
    "log": lambda x: reals.function("log", x),
    "exp": lambda x: reals.function("exp", x),
    "floor": lambda x: Fraction(reals.floor(x)),
    "ceil": lambda x: Fraction(-reals.floor(negative(x))),
    "abs": lambda x: x if reals.sign(x) >= 0 else negative(x),
    "min": lambda x, y, *more: min(x, y, *more, key=cmp_to_key(compare)),
    "max": lambda x, y, *more: max(x, y, *more, key=cmp_to_key(compare)),
    "binomial": lambda n, k: _whole("binomial", n, k),
    "factorial": lambda n: _whole("factorial", n),
    "round": lambda x, d: reals.rounded(x, integer(d, "round")),
    "mod": lambda a, m: _whole("mod", a, m),
    "^": reals.power,
}


def value(tree: ast.expr, scope: Any) -> Real:
    """Return the value of an expression; `scope` knows names, quantities and the polynomial."""
    name, arguments = named(tree)
    if isinstance(tree, ast.Name) and tree.id.startswith("n_"):
        return Fraction(name)
    if name and name not in FUNCTIONS:
        known: Real = reals.PI if name == "pi" else scope.look_up(name, arguments)
        return known
    if isinstance(tree, ast.UnaryOp) and isinstance(tree.op, ast.USub):
        return negative(value(tree.operand, scope))
    if isinstance(tree, ast.BinOp):
        name, arguments = SIGNS[type(tree.op)], [tree.left, tree.right]
    if not name:
        raise RecheckError(f"{write(tree)} stands where a number is wanted")
    values = [value(argument, scope) for argument in arguments]
    result: Real = operate(name, *values) if name in "+-*/" else FUNCTIONS[name](*values)
    return result


class Leaf:
    """One relation or predicate of a condition, judged."""

    def __init__(self, tree: ast.expr, scope: Any) -> None:
        self.verdict, self.reason = "open", ""
        self.ratio: Real | None = None
        self.document: dict[str, Any] = {}
        try:
            if isinstance(tree, ast.Compare):
                self.document = dict.fromkeys(("left", "right", "ratio", "by"))
                self._relation(tree, scope)
            else:
                self.verdict = "holds" if scope.measure(*named(tree)) else "fails"
        except (OpenError, OutsideError) as error:
            self.verdict = "open" if isinstance(error, OpenError) else "outside"
            self.reason = str(error)
        self.document |= {"says": write(tree), "verdict": self.verdict}

    def _relation(self, tree: ast.Compare, scope: Any) -> None:
        left, right = value(tree.left, scope), value(tree.comparators[0], scope)
        shown, kind = {"left": canonical(left), "right": canonical(right)}, type(tree.ops[0])
        self.document |= shown
        with suppress(OpenError):
            if kind in UP | DOWN and min(map(reals.sign, (left, right))) > 0:
                ratio = operate("/", *((left, right) if kind in UP else (right, left)))
                self.document["ratio"], self.ratio = canonical(ratio), ratio
        self.verdict = "holds" if RELATIONS[kind](compare(left, right), 0) else "fails"
        exact = all(isinstance(text, str) for text in shown.values())
        surd = reals.algebraic(left) and reals.algebraic(right)
        self.document["by"] = "rational" if exact else "surd" if surd else "enclosure"


def judge(tree: ast.expr, scope: Any) -> tuple[str, list[Leaf]]:
    """Return holds, fails or open in Kleene's logic, or outside; and the leaves in order."""
    if isinstance(tree, ast.UnaryOp) and isinstance(tree.op, ast.Not):
        verdict, leaves = judge(tree.operand, scope)
        return {"holds": "fails", "fails": "holds"}.get(verdict, verdict), leaves
    if not isinstance(tree, ast.BoolOp):
        leaf = Leaf(tree, scope)
        return leaf.verdict, [leaf]
    parts = [judge(part, scope) for part in tree.values]
    order = [
        "outside",
        "fails",
        "open",
        "holds",
    ]  # `and` is the least of its parts, `or` the greatest
    if isinstance(tree.op, ast.Or):
        order[1:] = reversed(order[1:])
    return min((p[0] for p in parts), key=order.index), list(chain(*(p[1] for p in parts)))
