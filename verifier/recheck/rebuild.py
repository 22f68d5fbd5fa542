"""Certificate lines, tables and summary, rebuilt; of a given line only hints are read.

Hints are the factorisations of Pratt's proofs and, where the budget or a limit of the maker forbids a
value, that value with its witness: such names are listed in `skipped`.
"""

import ast
import csv
import io
import re
from contextlib import suppress
from fractions import Fraction
from functools import cached_property
from typing import Any

from . import arithmetic, quantities
from .case import Case
from .expression import Leaf, integer, judge, named, subtrees, value
from .instance import Instance, OverBudgetError
from .reals import OpenError, OutsideError, Real, RecheckError, canonical, compare, decimals, floor

STRUCTURE = ("zero_one", "zero_diagonal", "symmetric")
PREDICATES = ("squarefree", "even", "odd", "irreducible", "prime", "regular", *STRUCTURE)
ORDER = ("fails", "open", "holds", "outside")


class Row(Instance):
    """One instance with what is measured and judged there; `line` gives hints alone."""

    def __init__(self, case: Case, parameters: dict[str, str], line: dict[str, Any]) -> None:
        super().__init__(case, parameters)
        self.line = line
        self.skipped: list[str] = []
        self.measured: dict[str, Any] = {}  # name -> value, or the error that stands for it
        self.witnesses: dict[str, list[str]] = {}
        self.primality: dict[str, Any] = {}

    def hint(self, *keys: str) -> Any:
        """Return what the given line says somewhere, None where it does not."""
        found: Any = self.line
        for key in keys:
            found = found.get(key) if isinstance(found, dict) else None
        return found

    def look_up(self, name: str, arguments: list[ast.expr]) -> Real:
        """Return the value of a name, function of f, or quantity."""
        if name not in quantities.GRAPH and name not in quantities.OTHERS:
            return super().look_up(name, arguments)
        return Fraction(self.measure(name, arguments))

    def predicate(self, name: str, arguments: list[ast.expr]) -> bool:
        """Return the truth of a predicate."""
        return bool(self.measure(name, arguments))

    def called(self, name: str, arguments: list[ast.expr]) -> tuple[int, ...]:
        """Return the integer arguments of a quantity or predicate."""
        read = (lambda x, _: floor(x)) if name == "window_sum" else integer
        if name in PREDICATES and [named(a)[0] for a in arguments] == ["f"]:
            return ()
        found = tuple(read(value(argument, self), name) for argument in arguments)
        if name in quantities.ORDERS and found[0] not in quantities.ORDERS[name]:
            raise RecheckError(f"this re-checker does not know {name}({found[0]})")
        return found

    def measure(self, name: str, arguments: list[ast.expr]) -> Any:
        """Measure once, or take the value from the line and list it."""
        numbers = self.called(name, arguments)
        inside = ",".join(map(str, numbers)) or "f" * len(arguments)
        full = f"{name}({inside})" if inside else name
        if full not in self.measured:
            witness = None
            try:
                self.measured[full], witness = self._measured(name, numbers)
                if self.line.get("quantities", {}).get(full, "") is None:
                    raise OverBudgetError
            except (OpenError, OutsideError) as error:
                self.measured[full] = error
            except OverBudgetError:
                self.skipped.append(full)
                text, witness = self.hint("quantities", full), self.hint("witnesses", full)
                number = isinstance(text, str) and re.fullmatch(r"-?\d+(/\d+)?", text)
                self.measured[full] = Fraction(text) if number else text
                if not number and not isinstance(text, bool):
                    self.measured[full] = OpenError("limit: ")
            if witness is not None:
                self.witnesses[full] = list(map(str, witness))
        if isinstance(self.measured[full], Exception):
            raise self.measured[full]
        return self.measured[full]

    def _measured(self, name: str, numbers: tuple[int, ...]) -> tuple[Any, Any]:
        if self.reason:
            raise OutsideError(self.reason)
        if name == "prime":
            a = str(numbers[0])
            prime = arithmetic.is_prime(numbers[0])
            if prime and numbers[0] > 2:
                self.primality[a] = arithmetic.pratt(numbers[0], self.hint("primality", a))
            return prime, None
        if name in STRUCTURE:
            defect = self.graph.defects.get(name)
            return defect is None, defect and defect[0]
        if name in quantities.OTHERS:
            return quantities.OTHERS[name](self, *numbers)
        if name in quantities.GRAPH or name == "regular":
            for predicate in STRUCTURE:
                if predicate in self.graph.defects:
                    raise OutsideError(self.graph.defects[predicate][1])
            if name in quantities.GRAPH:
                return quantities.GRAPH[name](self, *numbers)
            other = [j for j, d in enumerate(self.graph.degrees) if d != self.graph.degrees[0]]
            return not other, (0, other[0]) if other else None
        if name in ("even", "odd"):
            return not any(self.f[name == "even" :: 2]), None
        test = {"squarefree": arithmetic.squarefree, "irreducible": arithmetic.irreducible}.get(
            name
        )
        if test is None:
            raise RecheckError(f"this re-checker does not know {name!r}")
        self.spend(20 * len(self.f) ** 3 * self.p.bit_length())
        return test(self.f, self.p), None

    @cached_property
    def statistics(self) -> dict[str, quantities.Measured]:
        """Return the quantities of pairs of vertices, computed together."""
        return quantities.pair_statistics(self)

    def known(self) -> dict[str, Any]:
        """Return what a certificate says is known."""
        names = ["p"] if self.p else []
        names += ["q"] if "q" in self.case.parameters else []
        if not self.reason:
            names += ["n"] if self.case.graph else []
            names += ["N"] if self.case.sequence else []
            names += ["k", "r"] if "polynomial" in self.case.sequence else []
        found: dict[str, Any] = {}
        for name in names + ([] if self.reason else self.case.used):
            try:
                tree = self.case.definitions.get(name) or self.case.read(name)
                found[name] = canonical(value(tree, self))
            except (OpenError, OutsideError):
                found[name] = None
            except OverBudgetError:
                self.skipped.append(name)
                found[name] = self.hint("known", name)
        return found

    def cell(self, text: str) -> str:
        """Return the text of a table cell."""
        tree = self.case.read(text)
        name, arguments = named(tree)
        try:
            if self.reason:
                return "outside"
            if name == "f":
                name = self.rule["polynomial"].strip()
                if not self.case.is_polynomial(name):
                    return name
            if self.case.is_polynomial(name):
                return self.parameters[name]
            if (
                isinstance(tree, ast.Compare | ast.BoolOp)
                or name in PREDICATES
                or (isinstance(tree, ast.UnaryOp) and isinstance(tree.op, ast.Not))
            ):
                verdict = judge(tree, self, [])
                return {"holds": "true", "fails": "false"}.get(verdict, verdict)
            found = value(tree, self)
            if name == "round":
                return decimals(
                    Fraction(str(canonical(found))), integer(value(arguments[1], self), name)
                )
            text = canonical(found)
            return text if isinstance(text, str) else "open"
        except OpenError:
            return "open"
        except OutsideError:
            return "outside"

    def claim(self, claim: dict[str, Any]) -> tuple[dict[str, Any], Real | None]:
        """Return the entry of a claim, and its ratio where there is one."""
        tree = self.case.read(claim["says"])
        single = isinstance(tree, ast.Compare)
        entry: dict[str, Any] = (
            dict.fromkeys(("left", "right", "ratio", "by")) if single else {"parts": []}
        )
        entry["trivial"] = False
        reasons = {"outside": [self.reason] if self.reason else [], "open": []}
        unmet = []
        entry |= {"given": []} if claim.get("given") else {}
        for text in claim.get("given", ()):
            leaves: list[Leaf] = []
            verdict = "outside" if self.reason else judge(self.case.read(text), self, leaves)
            met = {"holds": True, "fails": False}.get(verdict)
            entry["given"].append({"says": text.strip(), "met": met})
            if met is False:
                unmet.append(f"given {text.strip()} is not met")
            if verdict == "outside":
                reasons["outside"] += [
                    leaf.reason for leaf in leaves if leaf.document["verdict"] == verdict
                ]
            if verdict == "open":
                reasons["open"].append(f"given {text.strip()} is not decided")
        reasons["outside"] = unmet + reasons["outside"]
        ratio = None
        if not reasons["outside"] and not reasons["open"]:
            leaves = []
            verdict = judge(tree, self, leaves)
            if verdict in reasons:
                reasons[verdict] = [
                    leaf.reason for leaf in leaves if leaf.document["verdict"] == verdict
                ]
            if verdict != "outside" and single:
                entry |= leaves[0].document
                ratio = leaves[0].ratio
                del entry["says"]
                entry["trivial"] = verdict == "holds" and self._is_trivial(tree)
            elif verdict != "outside":
                entry["parts"] = [leaf.document for leaf in leaves]
        else:
            verdict = "outside" if reasons["outside"] else "open"
        entry["verdict"] = verdict
        if verdict in reasons:
            entry["reason"] = reasons[verdict][0]
            if entry["reason"] == "limit: ":
                said = self.hint("claims", claim["name"], "reason")
                entry["reason"] = said if str(said).startswith("limit: ") else "limit: "
        return entry, ratio

    def _is_trivial(self, tree: Any) -> bool:
        """Tell whether an upper bound on a single quantity is not below its trivial maximum."""
        sides, relation = [tree.left, tree.comparators[0]], type(tree.ops[0])
        if relation in (ast.Gt, ast.GtE):
            sides.reverse()
        elif relation not in (ast.Lt, ast.LtE):
            return False
        name, arguments = named(sides[0])
        if name == "abs":
            name, arguments = named(arguments[0])
        if name not in quantities.GRAPH and name not in quantities.OTHERS:
            return False
        n = self.graph.n if self.case.graph else 0
        most = quantities.maximum(
            name, self.called(name, arguments), self.length if self.rule else 0, n, self.p
        )
        try:
            side = compare(value(sides[1], self), most) if most is not None else -1
        except OpenError:
            return False
        return side > 0 or (side == 0 and relation in (ast.LtE, ast.GtE))

    def document(self, index: int, case_name: str):
        """Return the certificate and the ratios of the claims."""
        result: dict[str, Any] = {
            "case": case_name,
            "format": 1,
            "index": index,
            "parameters": self.parameters,
            "definition": self.definition(),
            "known": self.known(),
            "claims": {},
        }
        if self.p:
            self.primality[str(self.p)] = arithmetic.pratt(
                self.p, self.hint("primality", str(self.p))
            )
        if self.case.tables:
            result["tables"] = {
                table["name"]: [self.cell(text) for text in table["columns"]]
                for table in self.case.tables
            }
        ratios = {}
        for claim in self.case.claims:
            result["claims"][claim["name"]], ratios[claim["name"]] = self.claim(claim)
        if self.reason:
            result["reason"] = self.reason
        else:
            for name in STRUCTURE if self.case.graph else ():
                with suppress(OpenError, OutsideError):
                    self.measure(name, [])
            for tree in self.case.trees:
                for node in subtrees(tree):
                    name, arguments = named(node)
                    if name in PREDICATES or name in quantities.GRAPH or name in quantities.OTHERS:
                        with suppress(OpenError, OutsideError):
                            self.measure(name, arguments)
        shown = {
            name: None
            if isinstance(found, Exception)
            else found
            if isinstance(found, bool)
            else str(found)
            for name, found in self.measured.items()
        }
        result |= {"primality": self.primality, "quantities": shown, "witnesses": self.witnesses}
        return result, ratios


def table_text(case: Case, table: dict[str, Any], documents: list[dict[str, Any]]) -> str:
    """Return the text of tables/NAME.csv."""
    out = io.StringIO()
    csv.writer(out, lineterminator="\n").writerows(
        [table["columns"], *[document["tables"][table["name"]] for document in documents]]
    )
    return out.getvalue()


def summary(
    case: Case, name: str, documents: list[dict[str, Any]], ratios: list[dict[str, Real | None]]
) -> dict[str, Any]:
    """Return summary.json."""
    fields = ("parameters", "known", "quantities", "witnesses", "claims", "reason")
    instances = [
        {key: document[key] for key in fields if key in document} for document in documents
    ]
    claims = [_claim(case, claim["name"], documents, ratios) for claim in case.claims]
    tables = [_table(case, table, documents) for table in case.tables]
    verdicts = [part["verdict"] for part in (*claims, *tables)]
    verdict = min(verdicts, key=ORDER.index, default="holds")
    return {
        "format": 1,
        "case": name,
        "verdict": verdict,
        "instances": instances,
        "claims": claims,
        "tables": tables,
    }


def _claim(case, name, documents, ratios):
    entries = [document["claims"][name] for document in documents]
    verdicts = [entry["verdict"] for entry in entries]
    tightest, best = None, None
    for document, ratio in zip(documents, ratios, strict=True):
        if ratio[name] is not None and (best is None or _larger(ratio[name], best)):
            best = ratio[name]
            tightest = {"parameters": document["parameters"], "ratio": canonical(best)}
    failing = [
        document["parameters"]
        for document, verdict in zip(documents, verdicts, strict=True)
        if verdict == "fails"
    ]
    swept = next((key for key in ("p", "q") if key in case.parameters), None)
    start = None
    if swept:
        at = [
            (Fraction(document["parameters"][swept]), verdict)
            for document, verdict in zip(documents, verdicts, strict=True)
        ]
        bad = max((p for p, verdict in at if verdict in ("fails", "open")), default=0)
        good = [p for p, verdict in at if verdict == "holds" and p > bad]
        start = str(min(good)) if good else None
    failures = {
        "count": len(failing),
        "first": failing[0] if failing else None,
        "last": failing[-1] if failing else None,
        "holds_from": start,
    }
    counts = {verdict: verdicts.count(verdict) for verdict in ORDER}
    return {
        "name": name,
        "verdict": min(verdicts, key=ORDER.index, default="outside"),
        **counts,
        "trivial": sum(entry["trivial"] for entry in entries),
        "tightest": tightest,
        "failures": failures,
    }


def _larger(x, y):
    try:
        return compare(x, y) > 0
    except OpenError:
        return False


def _table(case, table, documents):
    computed = [document["tables"][table["name"]] for document in documents]
    printed = computed
    if "expect" in table:
        text = case.files["inputs/" + table["expect"]].decode()
        printed = [row for row in csv.reader(io.StringIO(text)) if row][1:]
    differences = []
    for i in range(max(len(printed), len(computed))):
        rows = [source[i] if i < len(source) else [] for source in (printed, computed)]
        for j in range(max(map(len, rows))):
            old, new = (row[j] if j < len(row) else None for row in rows)
            if old != new:
                differences.append({"row": i + 1, "column": j + 1, "printed": old, "computed": new})
    openness = any(cell == "open" for row in computed for cell in row)
    return {
        "name": table["name"],
        "verdict": "fails" if differences else "open" if openness else "holds",
        "differences": differences,
    }
