"""From a case to what every instance must measure; computes nothing."""

from collections.abc import Iterator
from dataclasses import dataclass

from verifier.case.case import Case, Condition
from verifier.expressions.names import calls, names
from verifier.expressions.tree import Tree


@dataclass(frozen=True)
class Plan:
    """What to do at every instance.

    `measured` are the quantities and predicates to measure, by name and arguments, in the order in
    which the case names them; `defined` the abbreviations whose values are reported.
    """

    case: Case
    measured: tuple[tuple[str, tuple[Tree, ...]], ...]
    defined: tuple[str, ...]


def make_plan(case: Case, known: frozenset[str]) -> Plan:
    """Return the plan of a case.

    Parameters
    ----------
    case
        Read and checked.
    known
        The names of all quantities and predicates.
    """
    found: dict[tuple[str, tuple[Tree, ...]], None] = {}
    if case.graph is not None:
        found |= {(name, ()): None for name in ("symmetric", "zero_diagonal", "zero_one")}
    for condition in _conditions(case):
        for call in calls(condition.expanded, known):
            found[call] = None
    return Plan(case, tuple(found), _used(case))


def _conditions(case: Case) -> Iterator[Condition]:
    for claim in case.claims:
        yield claim.says
        yield from claim.given
    for table in case.tables:
        yield from table.columns
    yield from case.measure


def _used(case: Case) -> tuple[str, ...]:
    """Return the abbreviations that are used somewhere, directly or through others."""
    wanted: set[str] = set()
    for condition in _conditions(case):
        wanted |= names(condition.tree)
    for name in reversed(list(case.define)):
        if name in wanted:
            wanted |= names(case.define[name].tree)
    return tuple(name for name in case.define if name in wanted)
