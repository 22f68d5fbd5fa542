"""The tables of the case, as computed, and where they differ from what was printed."""

from collections.abc import Mapping, Sequence
from typing import Any

from verifier.appendix.facts import Certificate
from verifier.appendix.polynomials import polynomial
from verifier.appendix.values import DECIMAL, GROUP, RATIONAL, cell
from verifier.appendix.verdicts import verdict
from verifier.case.case import Case, Table
from verifier.typography.escape import Latex, tex
from verifier.typography.maths import head

MOST = 500
DIFFERENCES = 50
NARROW, WIDEST = 5, 8


def case_tables(
    case: Case,
    summary: Mapping[str, Any],
    certificates: Sequence[Certificate],
    heads: Mapping[str, Sequence[Latex]],
    *,
    all_rows: bool,
) -> list[dict[str, object]]:
    """Return the tables of the case, each with its heads, rows and differences.

    Parameters
    ----------
    heads
        For each table, what stands above its columns where the case gives no heads.
    all_rows
        Whether rows beyond the first 500 are printed too.
    """
    judged = {table["name"]: table for table in summary["tables"]}
    return [
        _table(table, judged[table.name], certificates, heads[table.name], all_rows=all_rows)
        for table in case.tables
    ]


def _table(
    table: Table,
    judged: Mapping[str, Any],
    certificates: Sequence[Certificate],
    fallback: Sequence[Latex],
    *,
    all_rows: bool,
) -> dict[str, object]:
    kept = certificates if all_rows else certificates[:MOST]
    columns = min(len(table.columns), WIDEST)
    heads_shown = [head(text) for text in table.heads] or list(fallback)
    return {
        "name": table.name,
        "heads": heads_shown[:WIDEST],
        "rows": [
            [_cell(text, columns) for text in found["tables"][table.name][:WIDEST]]
            for found in kept
        ],
        "omitted": len(certificates) - len(kept),
        "verdict": verdict(judged["verdict"]),
        "expect": table.expect or "",
        "width": Latex(f"0.{98 // columns:02}"),
        "size": Latex(r"\footnotesize" if columns <= NARROW else r"\scriptsize"),
        "columns": columns,
        "hidden": len(table.columns) - columns,
        "differences": [_difference(one) for one in judged["differences"][:DIFFERENCES]],
        "more": max(0, len(judged["differences"]) - DIFFERENCES),
    }


def _cell(text: str, columns: int) -> Latex:
    if text in ("outside", "open", "true", "false"):
        return Latex(tex(text))
    if DECIMAL.fullmatch(text) or RATIONAL.fullmatch(text):
        return cell(text) if columns <= NARROW else cell(text, unbroken=GROUP)
    return polynomial(text)


def _difference(one: Mapping[str, Any]) -> Latex:
    printed = "nothing" if one["printed"] is None else cell(one["printed"]).code
    computed = "nothing" if one["computed"] is None else cell(one["computed"]).code
    return Latex(
        f"row {one['row']}, column {one['column']}: printed {printed}, computed {computed}"
    )
