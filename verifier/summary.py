"""From certificates to the summary: counts, the tightest instance, the failures, the verdict."""

import csv
import io
from collections.abc import Mapping, Sequence
from typing import Any

from verifier.case.case import Case, Table
from verifier.case.rows import read_rows

WORST_FIRST = ("fails", "open", "holds", "outside")
FROM_CERTIFICATE = ("parameters", "known", "quantities", "witnesses", "claims", "reason")

Certificate = Mapping[str, Any]


def summarise(
    case: Case, certificates: Sequence[Certificate], tightest: Mapping[str, int]
) -> dict[str, Any]:
    """Return the summary of a run.

    Parameters
    ----------
    case
        The case that was run.
    certificates
        One an instance, in instance order.
    tightest
        For each claim that has a ratio somewhere, the index of the instance with the largest.
    """
    claims = [
        _claim_summary(claim.name, certificates, tightest.get(claim.name)) for claim in case.claims
    ]
    tables = [_table_summary(case, table, certificates) for table in case.tables]
    return {
        "format": 1,
        "case": case.name,
        "verdict": worst([part["verdict"] for part in (*claims, *tables)] or ["holds"]),
        "instances": [
            {key: found[key] for key in FROM_CERTIFICATE if key in found} for found in certificates
        ],
        "claims": claims,
        "tables": tables,
    }


def worst(verdicts: Sequence[str]) -> str:
    """Return the worst of some verdicts, in the order fails, open, holds, outside.

    Examples
    --------
    >>> worst(["outside", "holds", "open"])
    'open'
    """
    return min(verdicts, key=WORST_FIRST.index)


def table_rows(table: Table, certificates: Sequence[Certificate]) -> list[list[str]]:
    """Return the header and one row an instance, as texts."""
    header = [column.text for column in table.columns]
    return [header, *(list(found["tables"][table.name]) for found in certificates)]


def table_text(table: Table, certificates: Sequence[Certificate]) -> str:
    """Return a table as CSV with line feeds."""
    written = io.StringIO()
    csv.writer(written, lineterminator="\n").writerows(table_rows(table, certificates))
    return written.getvalue()


def _claim_summary(
    name: str, certificates: Sequence[Certificate], tightest: int | None
) -> dict[str, Any]:
    judged = [found["claims"][name] for found in certificates]
    counts = {verdict: sum(one["verdict"] == verdict for one in judged) for verdict in WORST_FIRST}
    failing = [
        found["parameters"]
        for found, one in zip(certificates, judged, strict=True)
        if one["verdict"] == "fails"
    ]
    return {
        "name": name,
        "verdict": worst([one["verdict"] for one in judged]),
        **counts,
        "trivial": sum(one["trivial"] for one in judged),
        "tightest": _tightest(certificates, name, tightest),
        "failures": {
            "count": len(failing),
            "first": failing[0] if failing else None,
            "last": failing[-1] if failing else None,
            "holds_from": _holds_from(certificates, name),
        },
    }


def _tightest(
    certificates: Sequence[Certificate], name: str, index: int | None
) -> dict[str, Any] | None:
    if index is None:
        return None
    found = certificates[index]
    return {"parameters": found["parameters"], "ratio": found["claims"][name]["ratio"]}


def _holds_from(certificates: Sequence[Certificate], name: str) -> str | None:
    """Return the least swept p (or q) where the claim holds, with no failing or open one beyond."""
    swept = [key for key in ("p", "q") if key in certificates[0]["parameters"]]
    if not swept:
        return None
    by_size = [
        (int(found["parameters"][swept[0]]), found["claims"][name]["verdict"])
        for found in certificates
    ]
    bad = max((size for size, verdict in by_size if verdict in ("fails", "open")), default=0)
    good = [size for size, verdict in by_size if verdict == "holds" and size > bad]
    return str(min(good)) if good else None


def _table_summary(case: Case, table: Table, certificates: Sequence[Certificate]) -> dict[str, Any]:
    computed = table_rows(table, certificates)[1:]
    differences: list[dict[str, Any]] = []
    if table.expect is not None:
        printed = read_rows(case.inputs[table.expect])
        differences = _differences(printed, computed)
    unsettled = any(cell == "open" for row in computed for cell in row)
    verdict = "fails" if differences else "open" if unsettled else "holds"
    return {"name": table.name, "verdict": verdict, "differences": differences}


def _differences(printed: list[list[str]], computed: list[list[str]]) -> list[dict[str, Any]]:
    """Return every cell that differs, counted from 1; None where one is missing."""
    found: list[dict[str, Any]] = []
    for row in range(max(len(printed), len(computed))):
        left = printed[row] if row < len(printed) else []
        right = computed[row] if row < len(computed) else []
        for column in range(max(len(left), len(right))):
            cells = [side[column] if column < len(side) else None for side in (left, right)]
            if cells[0] != cells[1]:
                found.append(
                    {
                        "row": row + 1,
                        "column": column + 1,
                        "printed": cells[0],
                        "computed": cells[1],
                    }
                )
    return found
