"""The summary and the tables, rebuilt from the certificates."""

import csv
import io
from fractions import Fraction
from itertools import zip_longest
from typing import Any

from .case import Case
from .reals import OpenError, Real, canonical, compare

ORDER = ("fails", "open", "holds", "outside")
FIELDS = ("parameters", "known", "quantities", "witnesses", "claims", "reason")
Json = dict[str, Any]
Ratios = list[dict[str, Real | None]]


def table_text(table: Json, documents: list[Json]) -> str:
    """Return the text of tables/NAME.csv."""
    out = io.StringIO()
    rows = [document["tables"][table["name"]] for document in documents]
    csv.writer(out, lineterminator="\n").writerows([table["columns"], *rows])
    return out.getvalue()


def summary(case: Case, name: str, documents: list[Json], ratios: Ratios) -> Json:
    """Return summary.json."""
    instances = [{key: found[key] for key in FIELDS if key in found} for found in documents]
    claims = [_claim(case, claim["name"], documents, ratios) for claim in case.claims]
    tables = [_table(case, table, documents) for table in case.tables]
    verdicts = [part["verdict"] for part in (*claims, *tables)]
    result = {"format": 1, "case": name, "instances": instances, "claims": claims, "tables": tables}
    return result | {"verdict": min(verdicts, key=ORDER.index, default="holds")}


def _claim(case: Case, name: str, documents: list[Json], ratios: Ratios) -> Json:
    entries = [document["claims"][name] for document in documents]
    verdicts, best, tightest = [entry["verdict"] for entry in entries], None, None
    for document, of_claims in zip(documents, ratios, strict=True):
        ratio, parameters = of_claims[name], document["parameters"]
        if ratio is not None and (best is None or _larger(ratio, best)):
            best, tightest = ratio, {"parameters": parameters, "ratio": canonical(ratio)}
    swept = next((key for key in ("p", "q") if key in case.parameters), "")
    rows = list(zip((document["parameters"] for document in documents), verdicts, strict=True))
    failing = [parameters for parameters, verdict in rows if verdict == "fails"] or [None]
    at = [(Fraction(parameters.get(swept, 0)), verdict) for parameters, verdict in rows]
    bad = max((p for p, verdict in at if verdict in ("fails", "open")), default=0)
    good = min((p for p, verdict in at if verdict == "holds" and p > bad), default=None)
    failures = {"count": verdicts.count("fails"), "holds_from": good and str(good)}
    failures |= {"first": failing[0], "last": failing[-1]}
    result: Json = {verdict: verdicts.count(verdict) for verdict in ORDER}
    result |= {"name": name, "verdict": min(verdicts, key=ORDER.index), "failures": failures}
    return result | {"trivial": sum(entry["trivial"] for entry in entries), "tightest": tightest}


def _larger(x: Real, y: Real) -> bool:
    try:
        return compare(x, y) > 0
    except OpenError:
        return False


def _table(case: Case, table: Json, documents: list[Json]) -> Json:
    computed = [document["tables"][table["name"]] for document in documents]
    printed, differences = computed, []
    if "expect" in table:
        text = case.files["inputs/" + table["expect"]].decode()
        printed = [row for row in csv.reader(io.StringIO(text)) if row][1:]
    for i, rows in enumerate(zip_longest(printed, computed, fillvalue=()), 1):
        for j, (old, new) in enumerate(zip_longest(*rows), 1):
            if old != new:
                differences.append({"row": i, "column": j, "printed": old, "computed": new})
    undecided = any("open" in row for row in computed)
    verdict = "fails" if differences else "open" if undecided else "holds"
    return {"name": table["name"], "verdict": verdict, "differences": differences}
