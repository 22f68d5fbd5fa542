"""The terminal's short text about one run, from the summary alone."""

from collections.abc import Callable, Iterator, Mapping
from itertools import takewhile
from typing import Any

Emphasis = Callable[[str], str]

FAILING = "\N{BLACK SQUARE}"
OPEN = "\N{WHITE SQUARE}"
MARKS = {"fails": FAILING, "open": OPEN}

CAUTIONS = (
    "A finite check is no proof beyond its range.",
    "Theorems that are cited are cited, not proved here.",
    "Small correlation is no evidence of cryptographic strength.",
)


def report_text(
    title: str, says: Mapping[str, str], summary: Mapping[str, Any], emphasise: Emphasis
) -> str:
    """Return the report of a run.

    Parameters
    ----------
    title
        The title of the case.
    says
        What each claim says, by its name.
    summary
        As in `summary.json`.
    emphasise
        Gives a piece of text the one accent, or returns it as it is.
    """
    return "\n".join(_lines(title, says, summary, emphasise))


def _lines(
    title: str, says: Mapping[str, str], summary: Mapping[str, Any], emphasise: Emphasis
) -> Iterator[str]:
    count = len(summary["instances"])
    plural = "instance" if count == 1 else "instances"
    yield f"{summary['case']}: {title} ({count} {plural}): {_accent(summary['verdict'], emphasise)}"
    width = max((len(part["name"]) for part in (*summary["claims"], *summary["tables"])), default=0)
    for claim in summary["claims"]:
        yield f"  {claim['name']:<{width}}  {_claim(claim, emphasise)}"
    for table in summary["tables"]:
        yield f"  {table['name']:<{width}}  {_table(table, emphasise)}"
    for claim in summary["claims"]:
        yield from _failures(claim, says[claim["name"]], summary, emphasise)
    for table in summary["tables"]:
        yield from (_difference(table["name"], cell) for cell in table["differences"][:10])


def _accent(verdict: str, emphasise: Emphasis) -> str:
    mark = MARKS.get(verdict)
    return emphasise(f"{mark} {verdict}") if mark else verdict


def _claim(claim: Mapping[str, Any], emphasise: Emphasis) -> str:
    pieces = [_accent(claim["verdict"], emphasise)]
    counts = [
        f"{claim[word]} {word}" for word in ("holds", "fails", "open", "outside") if claim[word]
    ]
    pieces.append(", ".join(counts))
    if claim["tightest"] is not None:
        pieces.append(
            f"tightest {number(claim['tightest']['ratio'])} "
            f"at {place(claim['tightest']['parameters'])}"
        )
    if claim["trivial"]:
        pieces.append(
            f"{claim['trivial']} say nothing: the bound does not beat the trivial maximum"
        )
    if claim["verdict"] == "outside":
        pieces.append("warning: no instance meets the conditions, so nothing was tested")
    return "  ".join(pieces)


def _table(table: Mapping[str, Any], emphasise: Emphasis) -> str:
    differing = len(table["differences"])
    tail = f"{differing} cells differ" if differing else "table computed"
    return f"{_accent(table['verdict'], emphasise)}  {tail}"


def _failures(
    claim: Mapping[str, Any], says: str, summary: Mapping[str, Any], emphasise: Emphasis
) -> Iterator[str]:
    failures = claim["failures"]
    if failures["count"]:
        first, last = place(failures["first"]), place(failures["last"])
        beyond = failures["holds_from"]
        tail = f"; holds from {beyond} on within this range" if beyond else ""
        count = failures["count"]
        where = f"at {first}" if count == 1 else f"at {count} instances, first {first}, last {last}"
        yield f"  {emphasise(FAILING)} {claim['name']} fails {where}{tail}"
        yield from _witness(claim["name"], says, summary, "fails")
    if claim["open"]:
        plural = "instance" if claim["open"] == 1 else "instances"
        yield f"  {emphasise(OPEN)} {claim['name']} is open at {claim['open']} {plural}"
        yield from _witness(claim["name"], says, summary, "open")


def _witness(name: str, says: str, summary: Mapping[str, Any], verdict: str) -> Iterator[str]:
    """Yield the first instance with a verdict, and where its maxima are attained."""
    for instance in summary["instances"]:
        judged = instance["claims"][name]
        if judged["verdict"] != verdict:
            continue
        yield f"      at {place(instance['parameters'])}: {sentence(judged)}"
        for quantity, witness in instance["witnesses"].items():
            if quantity.partition("(")[0] not in says:
                continue
            yield f"      {quantity} is attained at ({', '.join(witness)})"
        return


def sentence(judged: Mapping[str, Any]) -> str:
    """Return why a claim has its verdict at an instance."""
    if "reason" in judged:
        return str(judged["reason"])
    if judged.get("left") is not None:
        return f"left side {number(judged['left'])}, right side {number(judged['right'])}"
    parts = [part["says"] for part in judged.get("parts", []) if part["verdict"] != "holds"]
    return f"not so: {', '.join(parts)}" if parts else "not so"


def _difference(name: str, cell: Mapping[str, Any]) -> str:
    return (
        f"      {name}, row {cell['row']}, column {cell['column']}: "
        f"printed {cell['printed']}, computed {cell['computed']}"
    )


def place(parameters: Mapping[str, str]) -> str:
    """Return `p = 29, f = x^4 + 3`."""
    return ", ".join(f"{name} = {text}" for name, text in parameters.items()) or "the one instance"


def number(value: str | Mapping[str, str] | bool | None) -> str:  # noqa: FBT001 a JSON value
    """Return a canonical value for reading: an enclosure by the digits that its ends share.

    Examples
    --------
    >>> number({"lower": "1.41421356237", "upper": "1.41421356238"})
    '1.4142135623...'
    """
    if isinstance(value, Mapping):
        pairs = zip(*value.values(), strict=False)
        shared = "".join(pair[0] for pair in takewhile(lambda pair: pair[0] == pair[1], pairs))
        return f"{shared}..." if "." in shared else "..".join(value.values())
    if isinstance(value, bool):
        return "true" if value else "false"
    return "none" if value is None else value
