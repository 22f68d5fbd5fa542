"""Certificate lines, rebuilt."""

import ast
from contextlib import suppress
from decimal import Decimal
from fractions import Fraction
from hashlib import sha256
from typing import Any

from .arithmetic import polynomial_text
from .expression import Leaf, integer, judge, named, subtrees, value
from .instance import TAKEN, Instance
from .quantities import PREDICATES, QUANTITIES, maximum
from .reals import OpenError, OutsideError, Real, canonical, compare

Json = dict[str, Any]
STREAM = "SHA-256 of primewise:SEED:BLOCK, least significant bit first"


def definition(s: Instance) -> dict[str, str]:
    """Return what a certificate says of the definition."""
    rule, graph, texts = s.rule, s.case.graph, {}
    if rule:
        texts = {"rule": rule["rule"], "symmetrise": rule.get("symmetrise", "none")}
        texts["indices"] = f"{s.first}..{s.last}"
    if "polynomial" in rule:
        texts["at-zero"] = str(s.zero)
    if s.f:
        text = polynomial_text(s.f)
        digest = sha256(text.encode()).hexdigest()
        texts["polynomial"] = text if len(text) <= 1000 else f"sha256:{digest}"
    if rule.get("rule") == "random":
        texts |= {"length": str(s.full), "seed": str(s.seed), "stream": STREAM}
    if rule.get("rule") == "explicit":
        signs = "".join("+" if e == 1 else "-" for e in s.given)
        texts["signs"] = sha256(signs.encode()).hexdigest()
    texts |= {"graph": graph["kind"]} if graph else {}
    texts |= {"form": s.form} if "file" in graph else {}
    for file in (part["file"] for part in (rule, graph) if "file" in part):
        digest = sha256(s.case.files["inputs/" + file]).hexdigest()
        texts |= {"file": file, "file-sha256": digest}
    return texts


def known(s: Instance) -> Json:
    """Return what a certificate says is known."""
    names = ["n"] * bool(s.case.graph) + ["N"] * bool(s.rule)
    names += ["k", "r"] * ("polynomial" in s.rule) + s.case.used
    swept = ("p",) * ("p" in s.names) + ("q",) * ("q" in s.case.parameters)
    found: Json = {name: str(s.names[name]) for name in swept}
    for name in () if s.reason else names:
        found[name] = None
        with suppress(OpenError, OutsideError):
            found[name] = canonical(value(s.case.read(name), s))
    return found


def judged(s: Instance, text: str) -> tuple[str, list[Leaf], str]:
    """Return the verdict of a condition, its leaves and the reason of the verdict."""
    if s.reason:
        return "outside", [], s.reason
    verdict, leaves = judge(s.case.read(text), s)
    return verdict, leaves, next((leaf.reason for leaf in leaves if leaf.verdict == verdict), "")


def cell(s: Instance, text: str) -> str:
    """Return the text of a table cell."""
    tree = s.case.read(text)
    name, arguments = named(tree)
    name = s.rule["polynomial"].strip() if name == "f" else name
    condition = isinstance(tree, ast.Compare | ast.BoolOp) or name in PREDICATES
    if s.reason or condition or (isinstance(tree, ast.UnaryOp) and isinstance(tree.op, ast.Not)):
        verdict = judged(s, text)[0]
        return {"holds": "true", "fails": "false"}.get(verdict, verdict)
    if text.strip() == "f" or s.case.is_polynomial(name):
        return s.parameters.get(name, name)
    try:
        found = canonical(value(tree, s))
        if name == "round":
            places = integer(value(arguments[1], s), name)
            return f"{Decimal(f'{int(Fraction(str(found)) * 10**places)}e-{places}'):f}"
        return found if isinstance(found, str) else "open"
    except (OpenError, OutsideError) as error:
        return "open" if isinstance(error, OpenError) else "outside"


def claimed(s: Instance, claim: Json) -> tuple[Json, Real | None]:
    """Return the entry of a claim, and its ratio where there is one."""
    tree = s.case.read(claim["says"])
    single = isinstance(tree, ast.Compare)
    given = {text.strip(): judged(s, text) for text in claim.get("given", ())}
    stops = [("outside", f"given {g} is not met") for g, j in given.items() if j[0] == "fails"]
    stops += [(j[0], j[2]) for j in given.values() if j[0] == "outside"]
    stops += [("open", f"given {g} is not decided") for g, j in given.items() if j[0] == "open"]
    leaves: list[Leaf] = []
    if stops:
        verdict, reason = stops[0]
    else:
        verdict, leaves, reason = judged(s, claim["says"])
    shown = [leaf.document for leaf in leaves] if verdict != "outside" else []
    entry: Json = dict.fromkeys(("left", "right", "ratio", "by")) if single else {"parts": shown}
    if single and shown:
        entry = {key: shown[0][key] for key in entry}
    reason = s.hint("claims", claim["name"], "reason") if reason == TAKEN else reason
    entry |= {"reason": reason} if verdict in ("open", "outside") else {}
    met = {"holds": True, "fails": False}
    says = [{"says": text, "met": met.get(found[0])} for text, found in given.items()]
    entry |= {"given": says} if given else {}
    trivial = single and verdict == "holds" and is_trivial(s, tree)
    ratio = leaves[0].ratio if single and shown else None
    return entry | {"verdict": verdict, "trivial": trivial}, ratio


def is_trivial(s: Instance, tree: Any) -> bool:
    """Tell whether an upper bound on a single quantity is not below its trivial maximum."""
    sides, relation = [tree.left, tree.comparators[0]], type(tree.ops[0])
    if relation in (ast.Gt, ast.GtE):
        sides.reverse()
    name, arguments = named(sides[0])
    name, arguments = named(arguments[0]) if name == "abs" else (name, arguments)
    if name not in QUANTITIES or relation in (ast.Eq, ast.NotEq):
        return False
    most = maximum(name, (s.full_name(name, arguments)[1] or [0])[0], s)
    with suppress(OpenError):
        side = compare(value(sides[1], s), Fraction(most)) if most is not None else -1
        return side > 0 or (side == 0 and relation in (ast.LtE, ast.GtE))
    return False


def document(s: Instance, index: int, case_name: str) -> tuple[Json, dict[str, Real | None]]:
    """Return the certificate of an instance, and the ratios of its claims."""
    result: Json = {"case": case_name, "format": 1, "index": index, "known": known(s)}
    result |= {"parameters": s.parameters, "definition": definition(s), "claims": {}}
    result["case-sha256"] = s.case.digest
    result |= {"reason": s.reason} if s.reason else {}
    ratios = {}
    for claim in s.case.claims:
        result["claims"][claim["name"]], ratios[claim["name"]] = claimed(s, claim)
    for table in s.case.tables:
        cells = [cell(s, text) for text in table["columns"]]
        result.setdefault("tables", {})[table["name"]] = cells
    shown: Json = {}
    for node in () if s.reason else (n for tree in s.case.trees for n in subtrees(tree)):
        name, arguments = named(node)
        with suppress(OpenError, OutsideError):
            if name in QUANTITIES or name in PREDICATES:
                full, _ = s.full_name(name, arguments)
                shown[full] = None
                found = s.measure(name, arguments)
                shown[full] = found if isinstance(found, bool) else str(found)
    return result | {
        "primality": s.primality,
        "witnesses": s.witnesses,
        "quantities": shown,
    }, ratios
