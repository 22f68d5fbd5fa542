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
from .reals import OutsideError, Real, RecheckError, rational

ENDINGS = {"g6": "graph6", "s6": "sparse6", "edges": "edge-list", "matrix": "matrix"}
STREAM = "SHA-256 of primewise:SEED:BLOCK, least significant bit first"


class OverBudgetError(Exception):
    """The step asked for would exceed what remains of the budget."""


class Instance:
    """What the definitions give for one choice of the parameters; sequence and graph made late."""

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
        if "polynomial" in self.rule and len(parameters) == len(case.parameters):
            f = self._coefficients(case.read(self.rule["polynomial"]))
            if any(c.denominator % self.p == 0 for c in f):
                self.reason = f"{self.p} divides a denominator of f"
                return
            residues = [c.numerator * pow(c.denominator, -1, self.p) for c in f]
            self.f = arithmetic.reduced(residues, self.p)
            self.reason = "" if self.f else f"f vanishes identically modulo {self.p}"

    def integer(self, number: int | str) -> int:
        """Return an integer of the case, given as such or as an expression."""
        return integer(value(self.case.read(str(number)), self), str(number))

    def _coefficients(self, tree: ast.expr) -> list[Fraction]:  # over the rationals, constant first
        name, _ = named(tree)
        if name == "x":
            return [Fraction(0), Fraction(1)]
        if self.case.is_polynomial(name):
            return self._coefficients(parse(self.parameters[name], {}))
        if isinstance(tree, ast.UnaryOp):
            return [-c for c in self._coefficients(tree.operand)]
        if not isinstance(tree, ast.BinOp):
            return [Fraction(str(rational(value(tree, self))))]
        f, g = self._coefficients(tree.left), self._coefficients(tree.right)
        if isinstance(tree.op, ast.Add | ast.Sub):
            side = 1 if isinstance(tree.op, ast.Add) else -1
            f, g = (h + [Fraction(0)] * (len(f) + len(g) - len(h)) for h in (f, g))
            return [a + side * b for a, b in zip(f, g, strict=True)]
        if isinstance(tree.op, ast.Div):
            return [a / g[0] for a in f]
        factors = [f, g] if isinstance(tree.op, ast.Mult) else [f] * int(g[0])
        result = [Fraction(1)]
        for factor in factors:
            result = [Fraction(c) for c in arithmetic.times(result, factor)]
            if len(result) > 4096:
                raise RecheckError("a polynomial of degree above 1000")
        return result

    def look_up(self, name: str, arguments: list[ast.expr]) -> Real:
        """Return the value of a name, or of a function of f."""
        if name in self.names:
            return self.names[name]
        if name in ("N", "n"):
            return Fraction(self.order if name == "n" else self.length)
        if name == "chi":
            residue = integer(value(arguments[0], self), "chi") % self.p
            return Fraction((pow(residue, (self.p - 1) // 2, self.p) + 1) % self.p - 1)  # Euler
        if name not in ("value", "leading", "disc", "k", "r") or "polynomial" not in self.rule:
            raise RecheckError(f"this re-checker does not know {name!r}")
        if self.reason:
            raise OutsideError(self.reason)
        if name == "value":
            a = integer(value(arguments[1], self), "value")
            return Fraction(self._at(a))
        if name == "r":
            self.spend(20 * len(self.f) ** 2 * self.p.bit_length())
            common = next(arithmetic.common_with_frobenius(self.f, self.p)) if self.f[1:] else [1]
            return Fraction(len(common) - 1)
        if name == "disc":
            return Fraction(arithmetic.discriminant(self.f, self.p))
        return Fraction(self.f[-1] if name == "leading" else len(self.f) - 1)

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
        """Return chi(f(0)), ..., chi(f(p-1)); the squares are listed."""
        table = [-1] * self.p
        for x in range(self.p):
            table[x * x % self.p] = 1
        table[0] = 0
        return [table[v] for v in self.values]

    @cached_property
    def given(self) -> list[int]:
        """Return the period of an explicit sequence."""
        source = self.rule.get("values", "")
        if "file" in self.rule:
            source = self.case.files["inputs/" + self.rule["file"]].decode()
        text = source if isinstance(source, str) else " ".join(map(str, source))
        tokens = re.findall(r"[^\s,]+", text)
        joined = "".join(tokens)
        if set(tokens) <= {"1", "+1", "-1"}:
            return [int(token) for token in tokens]
        if not set(joined) <= set("+-") and not set(joined) <= set("01"):
            raise RecheckError("the explicit sequence cannot be read")
        return [1 if sign in "+0" else -1 for sign in joined]

    @cached_property
    def full(self) -> int:
        """Return the length of one full period."""
        kind = self.rule["rule"]
        if kind in ("legendre", "inverse"):
            if self.p < 3:
                raise RecheckError(f"the rule {kind} wants an odd prime p")
            return self.p
        if kind not in ("random", "explicit"):
            raise RecheckError(f"case.toml: this re-checker does not know the rule {kind!r}")
        return self.integer(self.rule["length"]) if kind == "random" else len(self.given)

    @cached_property
    def ends(self) -> tuple[int, int]:
        """Return the first and the last index."""
        first, last = self.rule.get("indices", f"0..{self.full - 1}").split("..")
        return self.integer(first), self.integer(last)

    @property
    def order(self) -> int:
        """Return n."""
        return self.graph.n if self.case.graph.get("kind") == "file" else self.length

    @property
    def length(self) -> int:
        """Return N."""
        return self.ends[1] - self.ends[0] + 1

    @cached_property
    def signs(self) -> list[int]:
        """Return e, after `indices` and `symmetrise`."""
        kind, n = self.rule["rule"], self.length
        self.spend(10 * n)
        zero = self.rule.get("at-zero", -1 if kind == "inverse" else 1)
        if kind == "legendre":
            period = [c or zero for c in self.characters]
        elif kind == "inverse":
            p = self.p
            period = [(1 if 2 * pow(v, -1, p) < p else -1) if v else zero for v in self.values]
        elif kind == "random":
            stream = arithmetic.bits(self.integer(self.rule["seed"]))
            period = [1 - 2 * bit for bit in islice(stream, self.full)]
        else:
            period = self.given
        e = [period[j % self.full] for j in range(self.ends[0], self.ends[1] + 1)]
        mirrored = (n + 1) // 2 if self.rule.get("symmetrise") == "mirror" else 1
        e[n - mirrored + 1 :] = reversed(e[1:mirrored])
        return e

    @cached_property
    def graph(self) -> Graph:
        """Return the graph."""
        kind, file = self.case.graph["kind"], self.case.graph.get("file", "")
        if kind == "file":
            return read_graph(self.case.files["inputs/" + file], self.form)
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
            texts["indices"] = "{}..{}".format(*self.ends)
        if self.f:
            text = arithmetic.polynomial_text(self.f)
            long = "sha256:" + sha256(text.encode()).hexdigest()
            texts["polynomial"] = text if len(text) <= 1000 else long
        if "polynomial" in rule:
            texts["at-zero"] = str(rule.get("at-zero", -1 if rule["rule"] == "inverse" else 1))
        if rule.get("rule") == "random":
            seed = str(self.integer(rule["seed"]))
            texts |= {"length": str(self.full), "seed": seed, "stream": STREAM}
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
