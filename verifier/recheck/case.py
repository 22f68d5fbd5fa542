"""The case: its parameters, and one instance of it with sequence and graph, from the definitions."""

import tomllib
from collections.abc import Iterator, Mapping
from fractions import Fraction
from itertools import product
from typing import Any

from . import arithmetic
from .arithmetic import is_prime, polynomial_text
from .expression import Tree, judge, parse, value
from .reals import RecheckError, canonical, integer_root

KEYS = {
    "case": "format title about parameters define sequence graph measure claim table source notation",
    "parameter": "primes prime-powers class values polynomials degree even monic squarefree every sample seed",
    "sequence": "rule polynomial at-zero indices symmetrise length seed values file",
    "graph": "kind file form",
    "measure": "quantities",
    "claim": "name says given source",
    "table": "name columns heads expect",
}


class OverBudgetError(Exception):
    """The step asked for would exceed what remains of the budget."""


class Budget:
    """Elementary steps that remain: about one operation on one term or on one machine word each."""

    def __init__(self, steps: int) -> None:
        self.steps = steps

    def spend(self, steps: int) -> None:
        """Take so many steps from the budget."""
        if steps > self.steps:
            raise OverBudgetError
        self.steps -= steps


def known(table: Any, what: str) -> dict[str, Any]:
    """Return a table of the case after a look at its keys."""
    for key in table:
        if key not in KEYS[what].split():
            raise RecheckError(f"case.toml: this re-checker does not know the {what} key {key!r}")
    return dict(table)


class Case:
    """A case file, read; `files` holds the bytes of every file of the folder."""

    def __init__(self, files: Mapping[str, bytes], budget: Budget) -> None:
        data = known(tomllib.loads(files["case.toml"].decode(), parse_float=_refuse), "case")
        self.files, self.budget = files, budget
        self.parameters = dict(data.get("parameters", {}))
        where = self.parameters.pop("where", [])
        self.sequence = known(data["sequence"], "sequence") if "sequence" in data else None
        self.graph = known(data["graph"], "graph") if "graph" in data else None
        self.definitions: dict[str, Tree] = {}
        raw = {name: parse(text) for name, text in data.get("define", {}).items()}
        for name, tree in raw.items():
            self.definitions[name] = tree.expand(self.definitions)
        self.where = [self.read(text) for text in where]
        self.claims = [known(claim, "claim") for claim in data.get("claim", [])]
        self.tables = [known(table, "table") for table in data.get("table", [])]
        texts = [*known(data.get("measure", {}), "measure").get("quantities", [])]
        for part in (*self.claims, *self.tables):
            texts += [*part.get("columns", []), *part.get("given", [])]
            texts += [part["says"]] if "says" in part else []
        self.trees = [self.read(text) for text in texts]
        named = {node.text for text in texts for node in parse(text).walk()}
        for name in reversed(raw):
            named |= {node.text for node in raw[name].walk()} if name in named else set()
        self.used = [name for name in raw if name in named]

    def read(self, text: str) -> Tree:
        """Parse a text of the case, definitions replaced."""
        return parse(text, self.definitions)

    def is_polynomial(self, name: str) -> bool:
        """Tell whether the parameter of this name is a polynomial."""
        return not {"polynomials", "degree"}.isdisjoint(self.parameters.get(name, ()))

    def instances(self, chosen: dict[str, str]) -> Iterator[dict[str, str]]:
        """Yield the parameters of all instances in order, the last parameter varying fastest."""
        if len(chosen) < len(self.parameters):
            name = list(self.parameters)[len(chosen)]
            for text in self._choices(known(self.parameters[name], "parameter"), chosen):
                yield from self.instances(chosen | {name: text})
        elif all(judge(tree, Instance(self, chosen), []) != "fails" for tree in self.where):
            yield chosen

    def _choices(self, sweep: dict[str, Any], chosen: dict[str, str]) -> Iterator[str]:
        residue, modulus = sweep.get("class", (0, 1))
        for key, accept in (("primes", is_prime), ("prime-powers", _is_prime_power)):
            for n in range(sweep[key][0], sweep[key][1] + 1) if key in sweep else ():
                self.budget.spend(20)
                if n % modulus == residue % modulus and accept(n):
                    yield str(n)
        for item in sweep.get("values", ()):
            yield str(item) if isinstance(item, int) else str(canonical(value(parse(item), None)))
        for item in sweep.get("polynomials", ()):
            yield item.strip()
        if "degree" in sweep:
            yield from self._generated(sweep, Instance(self, chosen))

    def _generated(self, sweep: dict[str, Any], instance: "Instance") -> Iterator[str]:
        p, degree = instance.known_integer("p"), instance.integer(sweep["degree"])
        monic, step = bool(sweep.get("monic")), 2 if sweep.get("even") else 1
        free = degree // step + 1 - monic
        if degree % step:
            raise RecheckError("case.toml: an even polynomial of odd degree")

        def accepted(drawn: tuple[int, ...]) -> str | None:
            self.budget.spend(20 * (degree + 1) ** 2)
            f = [0] * (degree + 1)
            f[::step] = reversed((1,) * monic + drawn)
            if not f[-1] or (sweep.get("squarefree") and not arithmetic.squarefree(f, p)):
                return None
            return polynomial_text(f)

        everything = (accepted(drawn) for drawn in product(range(p), repeat=free))
        if sweep.get("every"):
            yield from (text for text in everything if text)
            return
        sample, width = instance.integer(sweep["sample"]), (p - 1).bit_length()
        stream = arithmetic.bits(instance.integer(sweep["seed"]))

        def coefficient() -> int:
            while (number := sum(next(stream) << j for j in range(width))) >= p:
                pass
            return number

        few = p**free <= 10**5
        most = min(sample, sum(map(bool, everything))) if few else sample
        found: dict[str, None] = {}
        draws = 0
        while len(found) < most and (few or draws < 64 * sample + 4096):
            text, draws = accepted(tuple(coefficient() for _ in range(free))), draws + 1
            if text and text not in found:
                found[text] = None
                yield text


def _refuse(text: str) -> None:
    raise RecheckError(f"case.toml: this re-checker does not know the float {text}")


def _is_prime_power(q: int) -> bool:
    return any(
        r**m == q and is_prime(r) for m in range(1, q.bit_length()) for r in [integer_root(q, m)]
    )


class Instance:
    """One instance: known names, residues of f, definition, sequence and graph (both made late)."""

    def __init__(self, case: Case, parameters: dict[str, str]) -> None:
        self.case, self.parameters, self.spend = case, parameters, case.budget.spend
        self.names = {
            name: Fraction(text)
            for name, text in parameters.items()
            if not case.is_polynomial(name)
        }
        self.rule = case.sequence or {}
        self.f: list[int] | None = None
        self.reason: str | None = None
        if "p" in self.names:
            self.names.setdefault("q", self.names["p"])
            if not is_prime(self.known_integer("p")):
                raise RecheckError(f"p = {self.names['p']} is not prime")
        if "polynomial" in self.rule and len(parameters) == len(case.parameters):
            self._reduce(self.coefficients(parse(self.rule["polynomial"])))
