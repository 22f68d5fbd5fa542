"""The case: what it says, and the parameters of its instances in order."""

import ast
import tomllib
from collections.abc import Iterator, Mapping
from hashlib import sha256
from itertools import product
from typing import Any

from . import arithmetic
from .arithmetic import is_prime
from .expression import judge, named, parse, subtrees, value
from .instance import Instance, OverBudgetError
from .quantities import STRUCTURE
from .reals import RecheckError, canonical, integer_root

KEYS = {
    "case": "format title about parameters define sequence graph measure claim table source"
    " notation",
    "sweep": "primes prime-powers class values polynomials degree even monic squarefree every"
    " sample seed",
    "sequence": "rule polynomial at-zero indices symmetrise length seed values file",
    "graph": "kind file form",
    "measure": "quantities",
    "claim": "name says given source",
    "table": "name columns heads expect",
}


def known(table: Any, what: str) -> dict[str, Any]:
    """Return a table of the case after a look at its keys."""
    for key in table:
        if key not in KEYS[what].split():
            raise RecheckError(f"case.toml: this re-checker does not know the {what} key {key!r}")
    return dict(table)


class Case:
    """A case file, read; `files` holds the bytes of every file of the folder.

    `steps` is the budget that remains: about one operation on one term or machine word each.
    """

    def __init__(self, files: Mapping[str, bytes], steps: int) -> None:
        data = known(tomllib.loads(files["case.toml"].decode(), parse_float=str), "case")
        self.files, self.steps = files, steps
        self.digest = sha256(files["case.toml"]).hexdigest()
        self.parameters = dict(data.get("parameters", {}))
        self.sequence = known(data.get("sequence", {}), "sequence")
        self.graph = known(data.get("graph", {}), "graph")
        self.claims = [known(claim, "claim") for claim in data.get("claim", [])]
        self.tables = [known(table, "table") for table in data.get("table", [])]
        self.definitions: dict[str, ast.expr] = {}
        self.parsed: dict[str, ast.expr] = {}
        define = data.get("define", {})
        for name, text in define.items():
            self.definitions[name] = parse(text, self.definitions)
        self.where = [self.read(text) for text in self.parameters.pop("where", [])]
        texts = [*known(data.get("measure", {}), "measure").get("quantities", [])]
        for part in (*self.claims, *self.tables):
            texts += [*part.get("columns", [part.get("says")]), *part.get("given", [])]
        self.trees = [self.read(text) for text in (*texts, *(STRUCTURE if self.graph else ()))]
        used = {named(node)[0] for text in texts for node in subtrees(parse(text, {}))}
        for name in reversed(define):
            new = subtrees(parse(define[name], {})) if name in used else ()
            used |= {named(node)[0] for node in new}
        self.used = [name for name in define if name in used]

    def spend(self, steps: int) -> None:
        """Take so many steps from the budget, or refuse."""
        if steps > self.steps:
            raise OverBudgetError
        self.steps -= steps

    def read(self, text: str) -> ast.expr:
        """Parse a text of the case, definitions replaced."""
        if text not in self.parsed:
            self.parsed[text] = parse(text, self.definitions)
        return self.parsed[text]

    def belonging(self) -> set[str]:
        """Return the paths of the tables and of the files that the case names."""
        parts = (self.sequence, self.graph, *self.tables)
        named_files = {f"inputs/{p[key]}" for p in parts for key in ("file", "expect") if key in p}
        return named_files | {f"tables/{table['name']}.csv" for table in self.tables}

    def is_polynomial(self, name: str) -> bool:
        """Tell whether the parameter of this name is a polynomial."""
        return not {"polynomials", "degree"}.isdisjoint(self.parameters.get(name, ()))

    def instances(self, chosen: dict[str, str]) -> Iterator[dict[str, str]]:
        """Yield the parameters of all instances, the last parameter varying fastest."""
        if len(chosen) < len(self.parameters):
            name = list(self.parameters)[len(chosen)]
            for text in self._choices(known(self.parameters[name], "sweep"), chosen):
                yield from self.instances(chosen | {name: text})
        elif all(judge(tree, Instance(self, chosen))[0] != "fails" for tree in self.where):
            yield chosen

    def _choices(self, sweep: dict[str, Any], chosen: dict[str, str]) -> Iterator[str]:
        residue, modulus = sweep.get("class", (0, 1))
        for key, accept in (("primes", is_prime), ("prime-powers", _is_prime_power)):
            for n in range(sweep[key][0], sweep[key][1] + 1) if key in sweep else ():
                self.spend(20)
                if n % modulus == residue % modulus and accept(n):
                    yield str(n)
        for item in sweep.get("values", ()):
            yield str(canonical(value(parse(str(item), {}), None)))
        yield from (item.strip() for item in sweep.get("polynomials", ()))
        if "degree" in sweep:
            yield from self._generated(sweep, Instance(self, chosen))

    def _generated(self, sweep: dict[str, Any], instance: Instance) -> Iterator[str]:
        p, degree = instance.p, instance.integer(sweep["degree"])
        monic, step = bool(sweep.get("monic")), 2 if sweep.get("even") else 1
        free = degree // step + 1 - monic

        def accepted(drawn: tuple[int, ...]) -> str:
            self.spend(20 * (degree + 1) ** 2)
            f = [0] * (degree + 1)
            f[::step] = reversed((1,) * monic + drawn)
            fit = f[-1] and (not sweep.get("squarefree") or arithmetic.squarefree(f, p))
            return arithmetic.polynomial_text(f) if fit else ""

        everything = filter(None, map(accepted, product(range(p), repeat=free)))
        if sweep.get("every"):
            yield from everything
            return
        sample, width = instance.integer(sweep["sample"]), (p - 1).bit_length()
        stream = arithmetic.bits(instance.integer(sweep["seed"]))

        def coefficient() -> int:
            while (number := sum(next(stream) << j for j in range(width))) >= p:
                pass
            return number

        few = p**free <= 10**5
        most = min(sample, sum(1 for _ in everything)) if few else sample
        found, draws = {""}, 0  # "" stands for what is not accepted
        while len(found) <= most and (few or draws < 64 * sample + 4096):
            text, draws = accepted(tuple(coefficient() for _ in range(free))), draws + 1
            if text not in found:
                found.add(text)
                yield text


def _is_prime_power(q: int) -> bool:
    roots = [(integer_root(q, m), m) for m in range(1, q.bit_length())]
    return any(r**m == q and is_prime(r) for r, m in roots)
