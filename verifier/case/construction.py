"""Read `[sequence]` and `[graph]`: keys checked against the registries, problems noted."""

from collections.abc import Callable, Mapping
from typing import Any

from verifier.case.case import Condition, GraphTable, SequenceTable, Setting
from verifier.case.check import Names, check_polynomial, check_setting
from verifier.case.positions import Path as KeyPath
from verifier.case.section import Section
from verifier.errors import CaseError, ExpressionError
from verifier.expressions.parse import parse
from verifier.registry import GRAPHS, RULES, Key, nearest

FOR_ALL_RULES = ("rule", "indices", "symmetrise")


def read_sequence(
    section: Section, raw: Mapping[str, Any] | None, names: Names
) -> SequenceTable | None:
    """Return `[sequence]` with its keys checked against the rule."""
    if raw is None:
        return None
    label = "[sequence]"
    name = raw.get("rule")
    if not isinstance(name, str):
        section.problems.add(["sequence", "rule"], f"{label} rule: a text was wanted")
        return None
    try:
        rule = RULES.find(name)
    except CaseError as problem:
        section.problems.add(["sequence", "rule"], f"{label} rule: {problem}")
        return None
    settings = _settings(section, "sequence", raw, rule.keys, names)
    if rule.name == "explicit" and ("values" in raw) == ("file" in raw):
        section.problems.add(["sequence"], f"{label}: one of values and file was wanted")
    if ("polynomial" in rule.keys or rule.odd_prime) and not names.has_prime:
        section.problems.add(
            ["sequence", "rule"],
            f"{label}: the rule {name} works over F_p; p in [parameters] was wanted",
        )
    indices = _indices(section, raw.get("indices"), names)
    symmetrise = raw.get("symmetrise", "none")
    if symmetrise not in ("none", "mirror"):
        section.problems.add(
            ["sequence", "symmetrise"],
            f'{label} symmetrise: {symmetrise!r} stands there; "none" or "mirror" was wanted',
        )
    _swept_f(section, raw, names)
    return SequenceTable(rule.name, settings, indices, str(symmetrise))


def _swept_f(section: Section, raw: Mapping[str, Any], names: Names) -> None:
    """Refuse two meanings of f: it always names the polynomial of the sequence."""
    if "f" in names.polynomials and str(raw.get("polynomial", "")).strip() != "f":
        section.problems.add(
            ["sequence", "polynomial"],
            '[sequence]: f is swept and always names the sequence\'s polynomial; polynomial = "f" '
            "was wanted",
        )


def read_graph(
    section: Section, raw: Mapping[str, Any] | None, sequence: SequenceTable | None, names: Names
) -> GraphTable | None:
    """Return `[graph]` with its keys checked against the kind."""
    if raw is None:
        return None
    name = raw.get("kind")
    if not isinstance(name, str):
        section.problems.add(["graph", "kind"], "[graph] kind: a text was wanted")
        return None
    try:
        kind = GRAPHS.find(name)
    except CaseError as problem:
        section.problems.add(["graph", "kind"], f"[graph] kind: {problem}")
        return None
    if kind.from_sequence and sequence is None and not section.problems.found:
        section.problems.add(
            ["graph", "kind"],
            f"[graph]: the kind {name} is made from a sequence; [sequence] was wanted",
        )
    return GraphTable(kind.name, _settings(section, "graph", raw, kind.keys, names))


def _settings(
    section: Section, table: str, raw: Mapping[str, Any], keys: Mapping[str, Key], names: Names
) -> dict[str, Setting]:
    """Return the values of a rule's or graph kind's own keys, defaults filled in."""
    shared = FOR_ALL_RULES if table == "sequence" else ("kind",)
    for name in raw:
        if name not in keys and name not in shared:
            near = nearest(name, [*keys, *shared])
            section.problems.add(
                [table, name], f"[{table}] {name}: this key is unknown here; {near}"
            )
    found: dict[str, Setting] = {}
    for name, key in keys.items():
        if name in raw:
            value = _setting(section, [table, name], f"[{table}] {name}", raw[name], key, names)
            if value is not None:
                found[name] = value
        elif key.default is not None:
            found[name] = key.default
        elif not key.optional:
            section.problems.add([table, name], f"[{table}]: the key {name} is missing")
    return found


def _setting(
    section: Section, path: KeyPath, label: str, value: object, key: Key, names: Names
) -> Setting | None:
    try:
        return _READERS[key.kind](section, path, label, value, names)
    except ExpressionError as problem:
        section.problems.add_expression(path, label, problem)
    except CaseError as problem:
        section.problems.add(path, f"{label}: {problem}")
    return None


def _read_polynomial(_: Section, __: KeyPath, ___: str, value: object, names: Names) -> Condition:
    text = _text(value, "a polynomial in x as a text")
    tree = parse(text)
    check_polynomial(tree, names, text, among_polynomials=True)
    names.has_polynomial = True
    return Condition(text, tree, tree)


def _read_sign(_: Section, __: KeyPath, ___: str, value: object, ____: Names) -> int:
    if isinstance(value, bool) or value not in (1, -1) or not isinstance(value, int):
        raise CaseError(f"{value!r} stands there; 1 or -1 was wanted")
    return value


def _read_integer(_: Section, __: KeyPath, ___: str, value: object, names: Names) -> Setting:
    if isinstance(value, int) and not isinstance(value, bool):
        return value
    return _integer_expression(_text(value, "an integer or an expression in parameters"), names)


def _integer_expression(text: str, names: Names) -> Condition:
    tree = parse(text)
    check_setting(tree, names, text)
    return Condition(text, tree, tree)


def _read_values(_: Section, __: KeyPath, ___: str, value: object, ____: Names) -> Setting:
    if isinstance(value, str):
        return value
    if isinstance(value, list) and all(type(sign) is int for sign in value):
        return tuple(value)
    raise CaseError("a list of 1 and -1, or a text of signs or bits, was wanted")


def _read_text(_: Section, __: KeyPath, ___: str, value: object, ____: Names) -> str:
    return _text(value, "a text")


def _read_file(section: Section, path: KeyPath, label: str, value: object, _: Names) -> str:
    name = _text(value, "the name of a file beside the case file")
    section.read_input(path, label, name)
    return name


def _text(value: object, wanted: str) -> str:
    if not isinstance(value, str):
        raise CaseError(f"{str(value)[:60]!r} stands there; {wanted} was wanted")
    return value.strip()


_READERS: Mapping[str, Callable[[Section, KeyPath, str, object, Names], Setting]] = {
    "polynomial": _read_polynomial,
    "sign": _read_sign,
    "integer": _read_integer,
    "values": _read_values,
    "text": _read_text,
    "file": _read_file,
}


def _indices(section: Section, value: object, names: Names) -> tuple[Condition, Condition] | None:
    if value is None:
        return None
    path: KeyPath = ["sequence", "indices"]
    label = "[sequence] indices"
    ends = value.split("..") if isinstance(value, str) else []
    if len(ends) != 2:
        section.problems.add(
            path, f'{label}: {value!r} stands there; a range as "0..p-1" was wanted'
        )
        return None
    try:
        return _integer_expression(ends[0].strip(), names), _integer_expression(
            ends[1].strip(), names
        )
    except ExpressionError as problem:
        section.problems.add_expression(path, label, problem)
        return None
