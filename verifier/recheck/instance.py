"""One instance: its known names, the residues of f, its sequence and its graph."""

import ast
import re
from fractions import Fraction
from functools import cached_property
from hashlib import sha256
from itertools import islice
from typing import Any

from . import arithmetic
from .expression import integer, named, parse, value
from .graphs import Graph, make_graph, read_graph
from .reals import ONE, ZERO, OutsideError, Real, RecheckError, rational

ENDINGS = {"g6": "graph6", "s6": "sparse6", "edges": "edge-list", "matrix": "matrix"}
STREAM = "SHA-256 of primewise:SEED:BLOCK, least significant bit first"


class OverBudgetError(Exception):
    """The step asked for would exceed what remains of the budget."""


def read_signs(source: Any) -> list[int]:
    """Read the signs of an explicit sequence: 1 and -1, + and -, or bits b for (-1)^b."""
    text = source if isinstance(source, str) else " ".join(map(str, source))
    tokens = re.findall(r"[^\s,]+", text)
    joined = "".join(tokens)
    if set(tokens) <= {"1", "+1", "-1"}:
        return [int(token) for token in tokens]
    if not set(joined) <= set("+-") and not set(joined) <= set("01"):
        raise RecheckError("the explicit sequence cannot be read")
    return [1 if sign in "+0" else -1 for sign in joined]


class Instance:
    """What the definitions give for one choice of parameters; what is large is made when used."""

    def __init__(self, case: Any, parameters: dict[str, str]) -> None:
        self.case, self.parameters, self.spend = case, parameters, case.spend
        self.rule, self.reason, self.p = case.sequence, "", 0
        numbers = [name for name in parameters if not case.is_polynomial(name)]
        self.names = {name: Fraction(parameters[name]) for name in numbers}
        self.f: list[int] = []  # the constant first; empty where there is none
        if "p" in self.names:
            self.p = self.integer("p")
            self.names.setdefault("q", self.names["p"])
            if not arithmetic.is_prime(self.p):
                raise RecheckError(f"p = {self.p} is not prime")
        if self.rule and len(parameters) == len(case.parameters):
            self._begin(self.rule)

    def _begin(self, rule: dict[str, Any]) -> None:
        if rule["rule"] not in ("legendre", "inverse", "random", "explicit"):
            raise RecheckError(
                f"case.toml: this re-checker does not know the rule {rule['rule']!r}"
            )
        if "polynomial" in rule:
            f, p = self._coefficients(self.case.read(rule["polynomial"])), self.p
            divided = any(c.denominator % p == 0 for c in f)
            self.f = (
                []
                if divided
                else arithmetic.reduced([c.numerator * pow(c.denominator, -1, p) for c in f], p)
            )
            if not self.f:
                self.reason = (
                    f"{p} divides a denominator of f"
                    if divided
                    else f"f vanishes identically modulo {p}"
                )
        self.zero = rule.get("at-zero", -1 if rule["rule"] == "inverse" else 1)
        self.seed = self.integer(rule.get("seed", 0))
        self.given = read_signs(
            self.case.files["inputs/" + rule["file"]].decode()
            if "file" in rule
            else rule.get("values", "")
        )
        self.full = {
            "explicit": len(self.given),
            "random": self.integer(rule.get("length", 0)),
        }.get(rule["rule"], self.p)
        first, last = rule.get("indices", f"0..{self.full - 1}").split("..")
        self.first, self.last = self.integer(first), self.integer(last)
        self.length = self.last - self.first + 1

    def integer(self, number: int | str) -> int:
        """Return an integer of the case, given as such or as an expression."""
        return integer(value(self.case.read(str(number)), self), str(number))

    def _coefficients(self, tree: ast.expr) -> list[Fraction]:  # over the rationals, constant first
        name, _ = named(tree)
        if name == "x" or self.case.is_polynomial(name):
            return (
                [ZERO, ONE] if name == "x" else self._coefficients(parse(self.parameters[name], {}))
            )
        if isinstance(tree, ast.UnaryOp):
            return [-c for c in self._coefficients(tree.operand)]
        if not isinstance(tree, ast.BinOp):
            return [Fraction(str(rational(value(tree, self))))]
        f, g = self._coefficients(tree.left), self._coefficients(tree.right)
        if isinstance(tree.op, ast.Add | ast.Sub):
            side = 1 if isinstance(tree.op, ast.Add) else -1
            f, g = (h + [ZERO] * (max(len(f), len(g)) - len(h)) for h in (f, g))
            return [a + side * b for a, b in zip(f, g, strict=True)]
        if isinstance(tree.op, ast.Mult | ast.Div):
            return arithmetic.times(f, g if isinstance(tree.op, ast.Mult) else [1 / g[0]])
        result = [ONE]
        for _ in range(int(g[0])):
            result = arithmetic.times(result, f)
            if len(result) > 1001:
                raise RecheckError("a polynomial of degree above 1000")
        return result

    def look_up(self, name: str, arguments: list[ast.expr]) -> Real:
        """Return the value of a name, or of a function of f."""
        if name in self.names:
            return self.names[name]
        if name in ("N", "n"):
            return Fraction(self.order if name == "n" else self.length)
        if name not in ("chi", "value", "leading", "disc", "k", "r"):
            raise RecheckError(f"this re-checker does not know {name!r}")
        a = integer(value(arguments[-1], self), name) % self.p if name in ("chi", "value") else 0
        if name == "chi":  # by Euler's criterion
            return Fraction((pow(a, (self.p - 1) // 2, self.p) + 1) % self.p - 1)
        if self.reason:
            raise OutsideError(self.reason)
        if name == "r":
            return Fraction(self.values.count(0))
        if name == "disc":
            return Fraction(arithmetic.discriminant(self.f, self.p))
        last = self.f[-1] if name == "leading" else len(self.f) - 1
        return Fraction(self._at(a) if name == "value" else last)

    def _at(self, x: int) -> int:
        result = 0
        for c in reversed(self.f):
            result = (result * x + c) % self.p
        return result

    @cached_property
    def values(self) -> list[int]:
        """Return f(0), ..., f(p-1) modulo p."""
        self.spend(5 * self.p * (len(self.f) + 1))
        return list(map(self._at, range(self.p)))

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
    def order(self) -> int:
        """Return n."""
        return self.graph.n if self.case.graph["kind"] == "file" else self.length

    @cached_property
    def graph(self) -> Graph:
        """Return the graph."""
        kind, file = self.case.graph["kind"], self.case.graph.get("file", "")
        if kind == "file":
            return read_graph(self.case.files["inputs/" + file], self.form)
        if kind == "cayley-sum" and self.length > 3000:
            raise OverBudgetError  # as for the maker of the certificate
        self.spend(self.length * (1 if kind == "circulant" else 10 * self.length))
        return make_graph(kind, self.signs)

    @property
    def form(self) -> str:
        """Return the form of the graph file."""
        graph = self.case.graph
        return str(graph.get("form") or ENDINGS[graph["file"].rsplit(".", 1)[1]])

    def definition(self) -> dict[str, str]:
        """Return what a certificate says of the definition."""
        rule, graph, texts = self.rule, self.case.graph, {}
        if rule:
            texts = {"rule": rule["rule"], "symmetrise": rule.get("symmetrise", "none")}
            texts["indices"] = f"{self.first}..{self.last}"
        if self.f:
            text = arithmetic.polynomial_text(self.f)
            digest = sha256(text.encode()).hexdigest()
            texts["polynomial"] = text if len(text) <= 1000 else f"sha256:{digest}"
        if "polynomial" in rule:
            texts["at-zero"] = str(self.zero)
        if rule.get("rule") == "random":
            texts |= {"length": str(self.full), "seed": str(self.seed), "stream": STREAM}
        if rule.get("rule") == "explicit":
            signs = "".join("+" if e == 1 else "-" for e in self.given)
            texts["signs"] = sha256(signs.encode()).hexdigest()
        if graph:
            texts["graph"] = graph["kind"]
        for part in (rule, graph):
            if "file" in part:
                content = self.case.files["inputs/" + part["file"]]
                texts |= {"file": part["file"], "file-sha256": sha256(content).hexdigest()}
        return texts | ({"form": self.form} if "file" in graph else {})
