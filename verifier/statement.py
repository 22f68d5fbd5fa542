"""The case file that a `measure` command states on the command line."""

import json
import tomllib
from collections.abc import Mapping, Sequence

from verifier.errors import CaseError
from verifier.registry import RULES


def case_text(rule: str, settings: Sequence[str], quantities: Sequence[str]) -> str:
    """Return the case file that a `measure` command states."""
    sequence: dict[str, str] = {"rule": json.dumps(rule)}
    parameters: dict[str, str] = {}
    graph: dict[str, str] = {}
    for setting in settings:
        name, equals, given = setting.partition("=")
        if not equals or not name:
            raise CaseError(f"{setting!r} stands there; NAME=VALUE was wanted")
        target = sequence
        if name == "kind":
            target = graph
        elif name not in _sequence_keys(rule):
            target = parameters
        if name in target:
            raise CaseError(f"{name} is given twice")
        target[name] = _toml_value(given) if target is not parameters else _parameter(name, given)
    lines = ["format = 1", 'title = "One instance"', "[parameters]", *_lines(parameters)]
    lines += ["[sequence]", *_lines(sequence)]
    if graph:
        lines += ["[graph]", *_lines(graph)]
    lines += ["[measure]", f"quantities = {json.dumps(list(quantities))}"]
    return "\n".join(lines) + "\n"


def _sequence_keys(rule: str) -> set[str]:
    entry = RULES.find(rule)
    return {*entry.keys, "indices", "symmetrise"}


def _lines(table: Mapping[str, str]) -> list[str]:
    return [f"{json.dumps(name)} = {text}" for name, text in table.items()]


def _parameter(name: str, given: str) -> str:
    if name == "f":
        return f"{{ polynomials = [{json.dumps(given)}] }}"
    return f"{{ values = [{_toml_value(given)}] }}"


def _toml_value(given: str) -> str:
    """Return an integer as it stands, anything else as a text."""
    try:
        parsed = tomllib.loads(f"x = {given}")["x"]
    except tomllib.TOMLDecodeError:
        return json.dumps(given)
    return given if type(parsed) is int else json.dumps(given)
