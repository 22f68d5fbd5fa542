"""Expressions of a case: reading, canonical text, and their value or truth at one instance.

The grammar binds as Python's own does once ^ = mod are spelt ** == %. So the tokens of an expression
are spelt so, its names and numbers behind x_ and n_, and Python's parser (never its evaluator) reads
them; every node of the tree that is not of the grammar is refused.
"""

import ast
import operator
import re
from collections.abc import Iterator, Mapping
from contextlib import suppress
from fractions import Fraction
from functools import cmp_to_key
from math import comb, factorial
from typing import Any, NamedTuple

from . import reals
from .reals import (
    ZERO,
    OpenError,
    OutsideError,
    Real,
    RecheckError,
    canonical,
    compare,
    operate,
)

MOST_CHARACTERS, MOST_NODES, MOST_DEPTH = 400, 200, 40
TOKEN = re.compile(r"\d+(?:\.\d+)?(?![\w.])|[A-Za-z]\w*|<=|>=|!=|[-+*/^()<>=,]", re.ASCII)
SPELT = {"^": "**", "=": "==", "mod": "%", "and": "and", "or": "or", "not": "not"}
GRAMMAR = (ast.Name, ast.Call, ast.BinOp, ast.UnaryOp, ast.Compare, ast.BoolOp)
SIGNS = {ast.Add: "+", ast.Sub: "-", ast.Mult: "*", ast.Div: "/", ast.Pow: "^", ast.Mod: "mod"}
RELATIONS = {ast.Lt: operator.lt, ast.LtE: operator.le, ast.Eq: operator.eq}
RELATIONS |= {ast.NotEq: operator.ne, ast.GtE: operator.ge, ast.Gt: operator.gt}


class _Expand(ast.NodeTransformer):
    def __init__(self, definitions: Mapping[str, ast.expr]) -> None:
        self.definitions = definitions

    def visit_Name(self, node: ast.Name) -> ast.expr:
        return self.definitions.get(node.id[2:], node)


def parse(text: str, definitions: Mapping[str, ast.expr]) -> ast.expr:
    """Read an expression or condition, with defined names replaced by what they stand for."""
    tokens = TOKEN.findall(text)
    spelt = (
        SPELT.get(t)
        or (f"n_{t.replace('.', '_')}" if t[0].isdigit() else "x_" * t[0].isalpha() + t)
        for t in tokens
    )
    if len(text) > MOST_CHARACTERS or "".join(tokens) != "".join(text.split()):
        raise RecheckError(f"the expression {text[:60]!r} cannot be read")
    tree = ast.parse(" ".join(spelt), mode="eval").body
    tree = _Expand(definitions).visit(tree)
    nodes = list(subtrees(tree))
    known = all(isinstance(node, GRAMMAR) and len(getattr(node, "ops", "1")) == 1 for node in nodes)
    if not known or ",)" in "".join(tokens) or len(nodes) > MOST_NODES or depth(tree) > MOST_DEPTH:
        raise RecheckError(f"the expression {text[:60]!r} is not of the grammar or too large")
    return tree


def subtrees(tree: ast.AST) -> Iterator[ast.expr]:
    """Yield all expressions in a tree, but no name of a function that is called."""
    if isinstance(tree, ast.expr):
        yield tree
    for part in tree.args if isinstance(tree, ast.Call) else ast.iter_child_nodes(tree):
        yield from subtrees(part)


def depth(tree: ast.AST) -> int:
    """Return the number of expressions on the longest way down."""
    below = max(map(depth, ast.iter_child_nodes(tree)), default=0)
    return below + isinstance(tree, ast.expr)


def write(tree: ast.expr) -> str:
    """Return the canonical text, with the fewest parentheses."""
    text = ast.unparse(tree).replace(" % ", " mod ").replace(" == ", " = ").replace(" ** ", "^")
    text = re.sub(r"\bn_(\d+)_(\d+)", r"\1.\2", text.replace(" * ", "*").replace(" / ", "/"))
    return re.sub(r"\b[nx]_", "", text)


def named(tree: ast.expr) -> tuple[str, list[ast.expr]]:
    """Return the name and the arguments of a name or call; ('', []) for any other tree."""
    if isinstance(tree, ast.Call) and isinstance(tree.func, ast.Name) and not tree.keywords:
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
    return Fraction({"mod": operator.mod, "binomial": comb, "factorial": factorial}[name](*ns))


ORDER = cmp_to_key(compare)
FUNCTIONS: dict[str, Any] = {
    "sqrt": lambda x: reals.root(x, 2),
    "log": reals.log,
    "exp": reals.exp,
    "floor": lambda x: Fraction(reals.floor(x)),
    "ceil": lambda x: Fraction(-reals.floor(operate("-", ZERO, x))),
    "abs": lambda x: x if reals.sign(x) >= 0 else operate("-", ZERO, x),
    "min": lambda x, y, *more: min(x, y, *more, key=ORDER),
    "max": lambda x, y, *more: max(x, y, *more, key=ORDER),
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
        return Fraction(name.replace("_", "."))
    if name and name not in FUNCTIONS:
        known: Real = reals.PI if name == "pi" else scope.look_up(name, arguments)
        return known
    if isinstance(tree, ast.UnaryOp) and isinstance(tree.op, ast.USub):
        return operate("-", ZERO, value(tree.operand, scope))
    if isinstance(tree, ast.BinOp) and type(tree.op) in SIGNS:
        name, arguments = SIGNS[type(tree.op)], [tree.left, tree.right]
    if not name:
        raise RecheckError(f"{write(tree)} stands where a number is wanted")
    values = [value(argument, scope) for argument in arguments]
    result: Real = operate(name, *values) if name in "+-*/" else FUNCTIONS[name](*values)
    return result


class Leaf(NamedTuple):
    """One relation or predicate of a condition, judged."""

    document: dict[str, Any]
    reason: str | None
    ratio: Real | None = None


def judge(tree: ast.expr, scope: Any, leaves: list[Leaf]) -> str:
    """Return holds, fails or open in Kleene's logic, or outside; append the leaves in order."""
    if isinstance(tree, ast.UnaryOp):
        flipped = {"holds": "fails", "fails": "holds"}
        verdict = judge(tree.operand, scope, leaves)
        return flipped.get(verdict, verdict)
    if isinstance(tree, ast.BoolOp):  # `and` is the least of its parts, `or` the greatest
        order = (
            ["fails", "open", "holds"]
            if isinstance(tree.op, ast.And)
            else ["holds", "open", "fails"]
        )
        return min(
            (judge(part, scope, leaves) for part in tree.values), key=["outside", *order].index
        )
    relation = isinstance(tree, ast.Compare)
    document: dict[str, Any] = {"says": write(tree), "verdict": "open"}
    document |= dict.fromkeys(("left", "right", "ratio", "by")) if relation else {}
    leaf = Leaf(document, None)
    try:
        if isinstance(tree, ast.Compare):
            leaf = leaf._replace(ratio=_relation(tree, scope, document))
        else:
            document["verdict"] = "holds" if scope.predicate(*named(tree)) else "fails"
    except (OpenError, OutsideError) as error:
        document["verdict"] = "open" if isinstance(error, OpenError) else "outside"
        leaf = leaf._replace(reason=str(error))
    leaves.append(leaf)
    return str(document["verdict"])


def _relation(tree: ast.Compare, scope: Any, document: dict[str, Any]) -> Real | None:
    left, right = value(tree.left, scope), value(tree.comparators[0], scope)
    shown = {"left": canonical(left), "right": canonical(right)}
    document |= shown
    ratio, relation = None, RELATIONS[type(tree.ops[0])]
    with suppress(OpenError):
        if relation not in (operator.eq, operator.ne) and min(map(reals.sign, (left, right))) > 0:
            pair = (left, right) if relation in (operator.lt, operator.le) else (right, left)
            document["ratio"], ratio = canonical(operate("/", *pair)), operate("/", *pair)
    document["verdict"] = "holds" if relation(compare(left, right), 0) else "fails"
    rational = all(isinstance(text, str) for text in shown.values())
    surd = reals.algebraic(left) and reals.algebraic(right)
    document["by"] = "rational" if rational else "surd" if surd else "enclosure"
    return ratio
