"""Certificate lines, rebuilt; of a given line only hints are read.

Hints are the factorisations in proofs of primality and, where the budget or a limit of the maker
forbids a value, this value with its witness; such names are collected in `skipped`.
"""

import ast
import re
from contextlib import suppress
from decimal import Decimal
from fractions import Fraction
from functools import cached_property
from typing import Any

from . import arithmetic
from .case import STRUCTURE, Case
from .expression import Leaf, integer, judge, named, subtrees, value
from .instance import Instance, OverBudgetError
from .quantities import GRAPH, ORDERS, QUANTITIES, Measured, maximum, pair_statistics
from .reals import OpenError, OutsideError, Real, RecheckError, canonical, compare, floor

OF_F = ("squarefree", "even", "odd", "irreducible")
PREDICATES = (*OF_F, "prime", "regular", *STRUCTURE)
TAKEN = "as the line says"  # the reason of what was not measured
Json = dict[str, Any]


class Row(Instance):
    """One instance with what is measured and judged there; `line` gives hints alone."""

    def __init__(self, case: Case, parameters: dict[str, str], line: Json) -> None:
        super().__init__(case, parameters)
        self.line = line
        self.skipped: list[str] = []
        self.measured: dict[str, Any] = {}  # name -> value, or the error that stands for it
        self.witnesses: dict[str, list[str]] = {}
        self.primality: Json = {}
        if self.p:
            self.primality[str(self.p)] = arithmetic.pratt(
                self.p, self.hint("primality", str(self.p))
            )

    def hint(self, *keys: str) -> Any:
        """Return what the given line says somewhere, None where it does not."""
        found: Any = self.line
        for key in keys:
            found = found.get(key) if isinstance(found, dict) else None
        return found

    def look_up(self, name: str, arguments: list[ast.expr]) -> Real:
        """Return the value of a name, of a function of f, or of a quantity."""
        try:
            measured = name in QUANTITIES
            return (
                Fraction(self.measure(name, arguments))
                if measured
                else super().look_up(name, arguments)
            )
        except OverBudgetError:  # of names, r alone takes steps
            self.skipped += [name] if name not in self.skipped else []
            return Fraction(int(self.hint("known", name)))

    def called(self, name: str, arguments: list[ast.expr]) -> list[int]:
        """Return the integer arguments of a quantity or predicate; none for f itself."""
        if name not in (*QUANTITIES, *PREDICATES):
            raise RecheckError(f"this re-checker does not know {name!r}")
        if name in OF_F and named(arguments[0]) == ("f", []):
            return []
        read: Any = (lambda x, _: floor(x)) if name == "window_sum" else integer
        numbers = [read(value(argument, self), name) for argument in arguments]
        if name in ORDERS and numbers[0] not in ORDERS[name]:
            raise RecheckError(f"this re-checker does not know {name}({numbers[0]})")
        return numbers

    def measure(self, name: str, arguments: list[ast.expr]) -> Any:
        """Measure once, or take the value from the line and list it."""
        numbers = self.called(name, arguments)
        inside = "f" if name in OF_F else ",".join(map(str, numbers))
        full = f"{name}({inside})" if inside else name
        if full not in self.measured:
            self.measured[full], witness = self._measured(name, full, numbers)
            if witness is not None:
                self.witnesses[full] = list(map(str, witness))
        if isinstance(self.measured[full], Exception):
            raise self.measured[full]
        return self.measured[full]

    def _measured(self, name: str, full: str, numbers: list[int]) -> tuple[Any, Any]:
        try:
            return self._by_definition(name, numbers)
        except (OpenError, OutsideError) as error:
            return error, None
        except OverBudgetError:
            self.skipped.append(full)
            said = self.hint("quantities", full)
            taken = said if isinstance(said, bool) else self.taken(said)
            return taken, self.hint("witnesses", full)

    def taken(self, said: Any) -> Any:
        """Return the rational that the line says, without a check."""
        exact = isinstance(said, str) and re.fullmatch(r"-?\d+(/\d+)?", said)
        return Fraction(said) if exact else OpenError(TAKEN)

    def _by_definition(self, name: str, numbers: list[int]) -> tuple[Any, Any]:
        if self.reason:
            raise OutsideError(self.reason)
        if name == "prime":
            prime, a = arithmetic.is_prime(numbers[0]), str(numbers[0])
            if prime and a != "2":
                self.primality[a] = arithmetic.pratt(numbers[0], self.hint("primality", a))
            return prime, None
        if name in OF_F:
            self.spend(20 * len(self.f) ** 3 * self.p.bit_length())
            if name in ("even", "odd"):
                return not any(self.f[name == "even" :: 2]), None
            return getattr(arithmetic, name)(self.f, self.p), None
        if name in STRUCTURE:
            witness, _ = self.graph.defects.get(name, (None, ""))
            return witness is None, witness
        for predicate in STRUCTURE if name in GRAPH or name == "regular" else ():
            if not self.measure(predicate, []):
                taken = predicate in self.skipped
                raise OutsideError(TAKEN if taken else self.graph.defects[predicate][1])
        if name == "regular":
            degrees = self.graph.degrees
            other = next((j for j, d in enumerate(degrees) if d != degrees[0]), None)
            return other is None, other and (0, other)
        return QUANTITIES[name](self, *numbers)

    @cached_property
    def pairs(self) -> dict[str, Measured]:
        """Return the quantities of pairs of vertices, computed together."""
        return pair_statistics(self)

    def known(self) -> Json:
        """Return what a certificate says is known."""
        swept = [name for name in ("p", "q") if name in self.case.parameters]
        names = ["n"] * bool(self.case.graph) + ["N"] * bool(self.rule)
        names += ["k", "r"] * ("polynomial" in self.rule) + self.case.used
        found: Json = {}
        for name in swept + ([] if self.reason else names):
            try:
                found[name] = canonical(value(self.case.read(name), self))
            except (OpenError, OutsideError):
                found[name] = None
        return found

    def judged(self, text: str) -> tuple[str, list[Leaf], str]:
        """Return the verdict of a condition, its leaves and the reason of the verdict."""
        if self.reason:
            return "outside", [], self.reason
        verdict, leaves = judge(self.case.read(text), self)
        return verdict, leaves, next((x.reason for x in leaves if x.verdict == verdict), "")

    def cell(self, text: str) -> str:
        """Return the text of a table cell."""
        tree = self.case.read(text)
        name, arguments = named(tree)
        name = self.rule["polynomial"].strip() if name == "f" else name
        negated = isinstance(tree, ast.UnaryOp) and isinstance(tree.op, ast.Not)
        if (
            self.reason
            or negated
            or isinstance(tree, ast.Compare | ast.BoolOp)
            or name in PREDICATES
        ):
            verdict = self.judged(text)[0]
            return {"holds": "true", "fails": "false"}.get(verdict, verdict)
        if text.strip() == "f" or self.case.is_polynomial(name):
            return self.parameters.get(name, name)
        try:
            found = canonical(value(tree, self))
            if name == "round" and isinstance(found, str):
                places = integer(value(arguments[1], self), name)
                return f"{Decimal(f'{int(Fraction(found) * 10**places)}e-{places}'):f}"
            return found if isinstance(found, str) else "open"
        except (OpenError, OutsideError) as error:
            return "open" if isinstance(error, OpenError) else "outside"

    def claim(self, claim: Json) -> tuple[Json, Real | None]:
        """Return the entry of a claim, and its ratio where there is one."""
        tree = self.case.read(claim["says"])
        single = isinstance(tree, ast.Compare)
        given = {text.strip(): self.judged(text) for text in claim.get("given", ())}
        stops = [("outside", f"given {g} is not met") for g, j in given.items() if j[0] == "fails"]
        stops += [(j[0], j[2]) for j in given.values() if j[0] == "outside"]
        stops += [("open", f"given {g} is not decided") for g, j in given.items() if j[0] == "open"]
        verdict, reason = stops[0] if stops else ("", "")
        leaves: list[Leaf] = []
        if not stops:
            verdict, leaves, reason = self.judged(claim["says"])
        shown = [leaf.document for leaf in leaves] if verdict != "outside" else []
        entry: Json = (
            dict.fromkeys(("left", "right", "ratio", "by")) if single else {"parts": shown}
        )
        if single and shown:
            entry = {key: shown[0][key] for key in entry}
        reason = self.hint("claims", claim["name"], "reason") if reason == TAKEN else reason
        entry |= {"reason": reason} if verdict in ("open", "outside") else {}
        met = {"holds": True, "fails": False}
        says = [{"says": text, "met": met.get(found[0])} for text, found in given.items()]
        entry |= {"given": says} if given else {}
        trivial = single and verdict == "holds" and self._is_trivial(tree)
        return entry | {"verdict": verdict, "trivial": trivial}, leaves[
            0
        ].ratio if single and shown else None

    def _is_trivial(self, tree: Any) -> bool:
        """Tell whether an upper bound on a single quantity is not below its trivial maximum."""
        sides, relation = [tree.left, tree.comparators[0]], type(tree.ops[0])
        if relation in (ast.Gt, ast.GtE):
            sides.reverse()
        name, arguments = named(sides[0])
        name, arguments = named(arguments[0]) if name == "abs" else (name, arguments)
        if name not in QUANTITIES or relation in (ast.Eq, ast.NotEq):
            return False
        most = maximum(name, (self.called(name, arguments) or [0])[0], self)
        with suppress(OpenError):
            side = compare(value(sides[1], self), Fraction(most)) if most is not None else -1
            return side > 0 or (side == 0 and relation in (ast.LtE, ast.GtE))
        return False

    def document(self, index: int, case_name: str) -> tuple[Json, dict[str, Real | None]]:
        """Return the certificate and the ratios of the claims."""
        result: Json = {"case": case_name, "format": 1, "index": index, "known": self.known()}
        result |= {"parameters": self.parameters, "definition": self.definition(), "claims": {}}
        ratios = {}
        for claim in self.case.claims:
            result["claims"][claim["name"]], ratios[claim["name"]] = self.claim(claim)
        for table in self.case.tables:
            cells = [self.cell(text) for text in table["columns"]]
            result.setdefault("tables", {})[table["name"]] = cells
        for node in () if self.reason else (n for tree in self.case.trees for n in subtrees(tree)):
            name, arguments = named(node)
            with suppress(OpenError, OutsideError):
                if name in QUANTITIES or name in PREDICATES:
                    self.measure(name, arguments)
        result |= {"primality": self.primality, "witnesses": self.witnesses}
        result["quantities"] = {name: _shown(found) for name, found in self.measured.items()}
        return result | ({"reason": self.reason} if self.reason else {}), ratios


def _shown(found: Any) -> bool | str | None:
    if isinstance(found, bool | Exception):
        return None if isinstance(found, Exception) else found
    return str(found)
