"""The summary and the tables, rebuilt from the certificates."""

import csv
import io
from fractions import Fraction
from typing import Any

from .case import Case
from .reals import OpenError, Real, canonical, compare

ORDER = ("fails", "open", "holds", "outside")
FIELDS = ("parameters", "known", "quantities", "witnesses", "claims", "reason")
Json = dict[str, Any]


def table_text(table: Json, documents: list[Json]) -> str:
    """Return the text of tables/NAME.csv."""
    out = io.StringIO()
    rows = [document["tables"][table["name"]] for document in documents]
    csv.writer(out, lineterminator="\n").writerows([table["columns"], *rows])
    return out.getvalue()


def summary(
    case: Case, name: str, documents: list[Json], ratios: list[dict[str, Real | None]]
) -> Json:
    """Return summary.json."""
    instances = [
        {key: document[key] for key in FIELDS if key in document} for document in documents
    ]
    claims = [_claim(case, claim["name"], documents, ratios) for claim in case.claims]
    tables = [_table(case, table, documents) for table in case.tables]
    verdicts = [part["verdict"] for part in (*claims, *tables)]
    verdict = min(verdicts, key=ORDER.index, default="holds")
    result = {"format": 1, "case": name, "verdict": verdict, "instances": instances}
    return result | {"claims": claims, "tables": tables}


def _claim(
    case: Case, name: str, documents: list[Json], ratios: list[dict[str, Real | None]]
) -> Json:
    judged = [(row["claims"][name]["verdict"], row["parameters"]) for row in documents]
    verdicts = [verdict for verdict, _ in judged]
    failing = [parameters for verdict, parameters in judged if verdict == "fails"]
    best, tightest = None, None
    for document, of_claims in zip(documents, ratios, strict=True):
        ratio = of_claims[name]
        if ratio is not None and (best is None or _larger(ratio, best)):
            best, tightest = (
                ratio,
                {"parameters": document["parameters"], "ratio": canonical(ratio)},
            )
    swept = next((key for key in ("p", "q") if key in case.parameters), "")
    at = [(Fraction(parameters.get(swept, 0)), verdict) for verdict, parameters in judged]
    bad = max((p for p, verdict in at if verdict in ("fails", "open")), default=0)
    good = [p for p, verdict in at if verdict == "holds" and p > bad]
    failures = {"count": len(failing), "holds_from": str(min(good)) if good else None}
    failures |= {"first": failing[0] if failing else None, "last": failing[-1] if failing else None}
    result: Json = {verdict: verdicts.count(verdict) for verdict in ORDER}
    result |= {"name": name, "verdict": min(verdicts, key=ORDER.index), "failures": failures}
    trivial = sum(document["claims"][name]["trivial"] for document in documents)
    return result | {"trivial": trivial, "tightest": tightest}


def _larger(x: Real, y: Real) -> bool:
    try:
        return compare(x, y) > 0
    except OpenError:
        return False


def _table(case: Case, table: Json, documents: list[Json]) -> Json:
    computed = [document["tables"][table["name"]] for document in documents]
    printed = computed
    if "expect" in table:
        text = case.files["inputs/" + table["expect"]].decode()
        printed = [row for row in csv.reader(io.StringIO(text)) if row][1:]
    differences = []
    for i in range(max(len(printed), len(computed))):
        old, new = (
            dict(enumerate(rows[i] if i < len(rows) else ())) for rows in (printed, computed)
        )
        for j in sorted(old.keys() | new.keys()):
            if old.get(j) != new.get(j):
                cell = {
                    "row": i + 1,
                    "column": j + 1,
                    "printed": old.get(j),
                    "computed": new.get(j),
                }
                differences.append(cell)
    undecided = any("open" in row for row in computed)
    verdict = "fails" if differences else "open" if undecided else "holds"
    return {"name": table["name"], "verdict": verdict, "differences": differences}
