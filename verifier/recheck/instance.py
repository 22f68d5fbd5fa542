"""One instance: f modulo p, its sequence and graph, and what is measured of them.

Of the certificate line only hints are read: the factorisations in proofs of primality and, where
the budget forbids a value, this value with its witness; such values are listed in `skipped`.
"""

import ast
import re
from collections.abc import Sequence
from fractions import Fraction
from functools import cached_property
from itertools import islice
from math import isqrt
from typing import Any

from . import arithmetic
from .expression import integer, named, value
from .graphs import Graph, make_graph, read_graph
from .quantities import DEFINED, FIELD, GRAPH, ORDERS, STRUCTURE, pair_statistics
from .reals import ONE, ZERO, OpenError, OutsideError, Real, RecheckError, floor, rational

ENDINGS = {"g6": "graph6", "s6": "sparse6", "edges": "edge-list", "matrix": "matrix"}
TAKEN = "as the line says"  # the reason of what was not measured


class OverBudgetError(Exception):
    """The step asked for would exceed what remains of the budget."""


def read_signs(text: str) -> list[int]:
    """Read the signs of an explicit sequence: 1 and -1, + and -, or bits b for (-1)^b."""
    tokens = re.findall(r"[^\s,]+", text)
    joined = "".join(tokens)
    if set(tokens) <= {"1", "+1", "-1"}:
        return [int(token) for token in tokens]
    if not set(joined) <= set("+-") and not set(joined) <= set("01"):
        raise RecheckError("the explicit sequence cannot be read")
    return [1 if sign in "+0" else -1 for sign in joined]


class Instance:
    """What the definitions give for one choice of parameters; what is large is made when used."""

    def __init__(self, case: Any, parameters: dict[str, str], line: Any = None) -> None:
        self.case, self.parameters, self.line, self.spend = case, parameters, line, case.spend
        self.rule, self.reason, self.p, self.f = case.sequence, "", 0, list[int]()
        self.skipped: list[str] = []
        self.measured: dict[str, Any] = {}  # name -> value, or the error that stands for it
        self.witnesses: dict[str, list[str]] = {}
        self.primality: dict[str, Any] = {}
        numbers = [name for name in parameters if not case.is_polynomial(name)]
        self.names = {name: Fraction(parameters[name]) for name in numbers}
        if "q" in self.names:  # p is the characteristic: the least factor of a prime power
            q = self.integer("q")
            least = next((d for d in range(2, isqrt(q) + 1) if q % d == 0), q)
            self.names.setdefault("p", Fraction(least))
        if "p" in self.names:
            self.p = self.integer("p")
            self.names.setdefault("q", self.names["p"])
            if not self.proved_prime(self.p):
                raise RecheckError(f"p = {self.p} is not prime")
        if self.rule and len(parameters) == len(case.parameters):
            self._begin(self.rule["rule"], self.rule)

    def _begin(self, kind: str, rule: dict[str, Any]) -> None:
        if kind not in ("legendre", "inverse", "random", "explicit"):
            raise RecheckError(f"case.toml: this re-checker does not know the rule {kind!r}")
        if "polynomial" in rule:
            f, p = self._coefficients(self.case.read(rule["polynomial"])), self.p
            if any(c.denominator % p == 0 for c in f):
                self.reason = f"{p} divides a denominator of f"
            else:
                self.f = arithmetic.reduced([c.numerator * pow(c.denominator, -1, p) for c in f], p)
                self.reason = "" if self.f else f"f vanishes identically modulo {p}"
        values = rule.get("values", "")
        if "file" in rule:
            values = self.case.files["inputs/" + rule["file"]].decode()
        self.given = read_signs(values if isinstance(values, str) else " ".join(map(str, values)))
        self.zero = rule.get("at-zero", -1 if kind == "inverse" else 1)
        self.seed, length = self.integer(rule.get("seed", 0)), self.integer(rule.get("length", 0))
        self.full = {"random": length, "explicit": len(self.given)}.get(kind, self.p)
        ends = rule.get("indices", f"0..{self.full - 1}").split("..")
        self.first, self.last = map(self.integer, ends)
        self.length = self.last - self.first + 1

    def integer(self, number: int | str) -> int:
        """Return an integer of the case, given as such or as an expression."""
        return integer(value(self.case.read(str(number)), self), str(number))

    def _coefficients(self, tree: ast.expr) -> Sequence[Fraction]:
        """Return the coefficients of a polynomial over the rationals, the constant first."""
        name, _ = named(tree)
        if self.case.is_polynomial(name):
            return self._coefficients(self.case.read(self.parameters[name]))
        if isinstance(tree, ast.UnaryOp):
            return arithmetic.times(self._coefficients(tree.operand), [-ONE])
        if not isinstance(tree, ast.BinOp):
            return [ZERO, ONE] if name == "x" else [Fraction(str(rational(value(tree, self))))]
        f, g = self._coefficients(tree.left), self._coefficients(tree.right)
        if isinstance(tree.op, ast.Add | ast.Sub):
            side = 1 if isinstance(tree.op, ast.Add) else -1
            f, g = ([*h, *[ZERO] * (max(len(f), len(g)) - len(h))] for h in (f, g))
            return [a + side * b for a, b in zip(f, g, strict=True)]
        if isinstance(tree.op, ast.Mult | ast.Div):
            return arithmetic.times(f, g if isinstance(tree.op, ast.Mult) else [1 / g[0]])
        result: Sequence[Fraction] = [ONE]
        for _ in range(int(g[0])):
            result = arithmetic.times(result, f)
            if len(result) > 1001:
                raise RecheckError("a polynomial of degree above 1000")
        return result

    def at(self, x: int) -> int:
        """Return f(x) modulo p."""
        result = 0
        for c in reversed(self.f):
            result = (result * x + c) % self.p
        return result

    @cached_property
    def values(self) -> list[int]:
        """Return f(0), ..., f(p-1) modulo p."""
        self.spend(5 * self.p * (len(self.f) + 1))
        return list(map(self.at, range(self.p)))

    @cached_property
    def characters(self) -> list[int]:
        """Return chi(f(0)), ..., chi(f(p-1)), from the list of all squares."""
        squares = {x * x % self.p for x in range(self.p)}
        return [(1 if v in squares else -1) if v else 0 for v in self.values]

    @cached_property
    def signs(self) -> list[int]:
        """Return e, after `indices` and `symmetrise`."""
        self.spend(10 * self.length)
        kind, p, n, period = self.rule["rule"], self.p, self.length, self.given
        if kind == "legendre":
            period = [c or self.zero for c in self.characters]
        elif kind == "inverse":
            period = [(1 if 2 * pow(v, -1, p) < p else -1) if v else self.zero for v in self.values]
        elif kind == "random":
            period = [1 - 2 * bit for bit in islice(arithmetic.bits(self.seed), self.full)]
        e = [period[j % self.full] for j in range(self.first, self.last + 1)]
        half = (n + 1) // 2 if self.rule.get("symmetrise") == "mirror" else 1
        e[n - half + 1 :] = reversed(e[1:half])
        return e

    @property
    def form(self) -> str:
        """Return the form of the graph file."""
        graph = self.case.graph
        return str(graph.get("form") or ENDINGS[graph["file"].rsplit(".", 1)[1]])

    @cached_property
    def graph(self) -> Graph:
        """Return the graph; Cayley sum graphs above 3000 vertices are beyond the maker's limit."""
        kind = self.case.graph["kind"]
        if kind == "file":
            return read_graph(self.case.files["inputs/" + self.case.graph["file"]], self.form)
        if kind == "cayley-sum" and self.length > 3000:
            raise OverBudgetError
        self.spend(self.length * (1 if kind == "circulant" else 10 * self.length))
        return make_graph(kind, self.signs)

    @property
    def order(self) -> int:
        """Return n."""
        return self.graph.n if self.case.graph["kind"] == "file" else self.length

    @cached_property
    def pairs(self) -> dict[str, Any]:
        """Return the quantities of pairs of vertices, computed together."""
        return pair_statistics(self)

    def hint(self, *keys: str) -> Any:
        """Return what the certificate line says somewhere, None where it does not."""
        found = self.line
        for key in keys:
            found = found.get(key) if isinstance(found, dict) else None
        return found

    def proved_prime(self, n: int) -> bool:
        """Tell whether n is prime, and note the proof."""
        prime = arithmetic.is_prime(n)
        if prime and (n > 2 or n == self.p) and self.line is not None:
            self.primality[str(n)] = arithmetic.pratt(n, self.hint("primality", str(n)))
        return prime

    def look_up(self, name: str, arguments: list[ast.expr]) -> Real:
        """Return the value of a name, of a function of f, or of a quantity."""
        return self.names[name] if name in self.names else Fraction(self.measure(name, arguments))

    def full_name(self, name: str, arguments: list[ast.expr]) -> tuple[str, list[int]]:
        """Return a name with its arguments evaluated, and those that are integers."""
        if name not in DEFINED:
            raise RecheckError(f"this re-checker does not know {name!r}")
        read: Any = (lambda x, _: floor(x)) if name == "window_sum" else integer
        of_f = [argument for argument in arguments[:1] if named(argument) == ("f", [])]
        numbers = [read(value(argument, self), name) for argument in arguments[len(of_f) :]]
        if name in ORDERS and numbers[0] not in ORDERS[name]:
            raise RecheckError(f"this re-checker does not know {name}({numbers[0]})")
        inside = ",".join(["f"] * len(of_f) + list(map(str, numbers)))
        return f"{name}({inside})" if inside else name, numbers

    def measure(self, name: str, arguments: list[ast.expr]) -> Any:
        """Measure once, or take the value from the line and list it."""
        full, numbers = self.full_name(name, arguments)
        if full not in self.measured:
            try:
                found = self._by_definition(name, numbers)
            except (OpenError, OutsideError) as error:
                found = error
            except OverBudgetError:
                self.skipped.append(full)
                said = self.hint("known" if name == "r" else "quantities", full)
                exact = isinstance(said, str) and re.fullmatch(r"-?\d+(/\d+)?", said)
                found = Fraction(said) if exact else said
                found = OpenError(TAKEN) if found is None else (found, self.hint("witnesses", full))
            self.measured[full], witness = found if isinstance(found, tuple) else (found, None)
            if witness is not None:
                self.witnesses[full] = list(map(str, witness))
        if isinstance(self.measured[full], Exception):
            raise self.measured[full]
        return self.measured[full]

    def _by_definition(self, name: str, numbers: list[int]) -> Any:
        if self.reason and name not in FIELD:
            raise OutsideError(self.reason)
        for predicate in STRUCTURE if name in GRAPH or name == "regular" else ():
            if not self.measure(predicate, []):
                taken = predicate in self.skipped
                raise OutsideError(TAKEN if taken else self.graph.defects[predicate][1])
        return DEFINED[name](self, *numbers)
