"""The vocabulary as text: what a case file may say, with definitions and sources."""

from collections.abc import Iterator, Mapping
from typing import Any

from verifier import catalogue
from verifier.appendix.bibliography import published
from verifier.registry import GRAPHS, PREDICATES, QUANTITIES, RULES

LETTERS = {"order": "l", "place": "x", "integer": "a", "polynomial": "f"}


def vocabulary_lines(kinds: str | None) -> Iterator[str]:
    """Yield the vocabulary as lines: names, definitions, sources."""
    catalogue.load()
    registries: dict[str, Mapping[str, Any]] = {
        "rules": RULES.entries,
        "graphs": GRAPHS.entries,
        "quantities": QUANTITIES.entries,
        "predicates": PREDICATES.entries,
    }
    cited: set[str] = set()
    for title, entries in registries.items():
        if kinds not in (None, title):
            continue
        yield f"{title}:"
        cited |= {entry.source for entry in entries.values()}
        for name in sorted(entries):
            entry = entries[name]
            yield f"  {name}{_signature(entry)}"
            yield f"      {entry.definition}"
            yield f"      source: {entry.source}"
    yield "sources:"
    for key in sorted(cited):
        yield f"  {key}"
        yield f"      {_reference(key)}"


def _reference(key: str) -> str:
    """Return who wrote what and when, or what stands for no paper."""
    if key not in published():
        return "a notion of the trade without one published source"
    fields = published()[key].fields
    who = fields.get("author") or fields.get("institution") or fields.get("organization", "")
    where = fields.get("journal") or fields.get("booktitle") or fields.get("publisher", "")
    pieces = (who, fields.get("title", ""), where, fields.get("year", ""))
    return ", ".join(piece for piece in pieces if piece)


def _signature(entry: Any) -> str:  # noqa: ANN401 an entry of any kind
    keys = getattr(entry, "keys", None)
    if keys:
        return "  " + ", ".join(
            f"{name}" if key.default is None else f"{name} = {key.default}"
            for name, key in keys.items()
        )
    arguments = getattr(entry, "arguments", ())
    if not arguments:
        return ""
    letters = (
        "A, B" if arguments == ("place", "place") else ", ".join(LETTERS[a] for a in arguments)
    )
    orders = getattr(entry, "orders", ())
    return f"({letters})" + (f"  l = {', '.join(map(str, orders))}" if orders else "")
