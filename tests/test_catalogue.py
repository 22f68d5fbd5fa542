"""The rules of the house for everything that is registered; nothing is listed by hand."""

import inspect
import re

import pytest

from verifier import catalogue
from verifier.appendix.bibliography import published
from verifier.registry import GRAPHS, PREDICATES, QUANTITIES, RULES

catalogue.load()
ENTRIES = [
    (kind, entry)
    for kind, registry in (
        ("rules", RULES),
        ("graphs", GRAPHS),
        ("quantities", QUANTITIES),
        ("predicates", PREDICATES),
    )
    for entry in registry.entries.values()
]
IDS = [f"{kind}:{entry.name}" for kind, entry in ENTRIES]


@pytest.mark.parametrize(("kind", "entry"), ENTRIES, ids=IDS)
def test_an_entry_keeps_the_rules(kind, entry):
    module = inspect.getmodule(entry.function)
    assert module.__name__ == f"verifier.{kind}.{entry.name.replace('-', '_')}"
    assert entry.source == "common-practice" or entry.source in published()
    assert entry.definition
    assert not entry.definition.endswith(".")
    assert inspect.getdoc(entry.function).startswith("Return ")


@pytest.mark.parametrize(("kind", "entry"), ENTRIES, ids=IDS)
def test_the_rechecker_knows_it(kind, entry):
    """By its name as a whole word in the re-checker's source; the forgeries test the meaning."""
    from pathlib import Path

    import verifier.recheck as recheck

    source = "".join(path.read_text() for path in Path(recheck.__file__).parent.glob("*.py"))
    assert re.search(rf"\b{re.escape(entry.name)}\b", source)


def test_names_are_those_of_one_vocabulary():
    names = [name for registry in (QUANTITIES, PREDICATES) for name in registry.entries]
    assert len(names) == len(set(names))
