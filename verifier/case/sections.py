"""Read `[parameters]`, `[sequence]` and `[graph]`: raw tables to records, problems noted."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from pathlib import Path, PurePosixPath
from typing import Any

from pydantic import ValidationError

from verifier.case.case import (
    Condition,
    Family,
    GraphTable,
    Parameter,
    Polynomials,
    Primes,
    SequenceTable,
    Setting,
    Values,
)
from verifier.case.check import Names, check_polynomial, check_setting
from verifier.case.model import PARAMETER_TABLES
from verifier.case.positions import Path as KeyPath
from verifier.case.problems import Problems
from verifier.case.shapes import shape_problems
from verifier.errors import CaseError, ExpressionError
from verifier.exact.primes import is_prime, prime_powers_between, primes_between
from verifier.expressions.parse import parse
from verifier.registry import GRAPHS, RULES, Key, nearest

LARGEST_RANGE = 10**8
LARGEST_INPUT = 64 << 20
FOR_ALL_RULES = ("rule", "indices", "symmetrise")


@dataclass
class Section:
    """What the sections share: where problems go, and the files that the case names."""

    problems: Problems
    folder: Path
    inputs: dict[str, bytes] = field(default_factory=dict)

    def read_input(self, path: KeyPath, label: str, name: str) -> None:
        """Read a file beside the case file; it may lie in no other place."""
        parts = PurePosixPath(name).parts
        if not name or "\\" in name or name.startswith("/") or {".", ".."} & set(parts):
            self.problems.add(path, f"{label}: {name!r} leaves the folder of the case file")
            return
        found = self.folder / name
        try:
            inside = found.resolve().is_relative_to(self.folder.resolve())
            if not inside or not found.is_file():
                self.problems.add(path, f"{label}: there is no file {name!r} beside the case file")
            elif found.stat().st_size > LARGEST_INPUT:
                self.problems.add(path, f"{label}: {name!r} is larger than 64 MiB")
            else:
                self.inputs[name] = found.read_bytes()
        except (OSError, ValueError) as problem:
            self.problems.add(path, f"{label}: {name!r} cannot be read: {problem}")


def read_parameters(
    section: Section, raw: Mapping[str, Any], names: Names
) -> tuple[Parameter, ...]:
    """Return the parameters in file order, and enter their names."""
    found: list[Parameter] = []
    for name, table in raw.items():
        path: KeyPath = ["parameters", name]
        if name == "where":
            if not isinstance(table, list) or not all(isinstance(text, str) for text in table):
                section.problems.add(path, "[parameters] where: a list of texts was wanted")
            continue
        refused = None if name in ("p", "q", "f") else names.refusal(name)
        if refused is not None:
            section.problems.add(path, f"[parameters] {name}: {refused}")
            continue
        parameter = _parameter(section, name, table)
        if parameter is not None:
            found.append(parameter)
        names.add_parameter(name, polynomial=_is_polynomial(name, parameter))
    _check_together(section, found, names)
    return tuple(found)


def _is_polynomial(name: str, parameter: Parameter | None) -> bool:
    return name == "f" if parameter is None else isinstance(parameter, Polynomials | Family)


def _parameter(section: Section, name: str, table: object) -> Parameter | None:
    path: KeyPath = ["parameters", name]
    label = f"[parameters] {name}"
    kinds = [key for key in PARAMETER_TABLES if isinstance(table, dict) and key in table]
    if not isinstance(table, dict) or not kinds:
        wanted = ", ".join(PARAMETER_TABLES)
        section.problems.add(path, f"{label}: a table with one of the keys {wanted} was wanted")
        return None
    model = PARAMETER_TABLES[kinds[0]]
    try:
        raw = model.model_validate(table)
    except ValidationError as failed:
        for inner, message in shape_problems(failed, model):
            section.problems.add([*path, *inner], f"{label}: {message}")
        return None
    try:
        return _MAKERS[kinds[0]](section, name, raw)
    except ExpressionError as problem:
        section.problems.add_expression(path, label, problem)
    except CaseError as problem:
        section.problems.add(path, f"{label}: {problem}")
    return None


def _interval(bounds: list[int | float], wanted: str) -> tuple[int, int]:
    low, high = bounds
    if high == float("inf"):
        raise CaseError(f"an unbounded interval is for proofs alone; {wanted} was wanted")
    if not isinstance(low, int) or not isinstance(high, int):
        raise CaseError(f"{bounds} stands there; {wanted} was wanted")
    if high > LARGEST_RANGE:
        raise CaseError(f"{high} stands there; an upper end of at most {LARGEST_RANGE} was wanted")
    return low, high


def _residue_class(found: list[int] | None) -> tuple[int, int]:
    if found is None:
        return 0, 1
    residue, modulus = found
    if not 0 <= residue < modulus:
        raise CaseError(f"class = {found} stands there; [a, m] with 0 <= a < m was wanted")
    return residue, modulus


def _make_primes(_: Section, name: str, raw: Any) -> Primes:  # noqa: ANN401 a pydantic model
    low, high = _interval(raw.primes, "[a, b] in integers")
    residue, modulus = _residue_class(raw.class_)
    made = Primes(name, low, high, residue, modulus, powers=False)
    if not primes_between(low, high, (residue, modulus)):
        raise CaseError(f"no prime = {residue} mod {modulus} lies in [{low}, {high}]")
    if name == "f":
        raise CaseError("f names a polynomial; polynomials or a family were wanted")
    return made


def _make_prime_powers(_: Section, name: str, raw: Any) -> Primes:  # noqa: ANN401 a pydantic model
    low, high = _interval(raw.prime_powers, "[a, b] in integers")
    residue, modulus = _residue_class(raw.class_)
    orders = [order for order, _ in prime_powers_between(low, high)]
    if not any(order % modulus == residue for order in orders):
        raise CaseError(f"no prime power = {residue} mod {modulus} lies in [{low}, {high}]")
    if name in ("p", "f"):
        raise CaseError(f"prime powers are the values of q, not of {name}")
    return Primes(name, low, high, residue, modulus, powers=True)


def _make_values(_: Section, name: str, raw: Any) -> Values:  # noqa: ANN401 a pydantic model
    if name == "f":
        raise CaseError("f names a polynomial; polynomials or a family were wanted")
    if len(set(raw.values)) != len(raw.values):
        raise CaseError("a value stands there twice; distinct values were wanted")
    if name == "p":
        composite = [value for value in raw.values if not is_prime(value)]
        if composite:
            raise CaseError(f"{composite[0]} stands there; a prime was wanted")
    if name == "q":
        for value in raw.values:
            if not prime_powers_between(value, value):
                raise CaseError(f"{value} stands there; a prime power was wanted")
    return Values(name, tuple(raw.values))


def _make_polynomials(
    section: Section,
    name: str,
    raw: Any,  # noqa: ANN401 a pydantic model
) -> Polynomials:
    if name in ("p", "q"):
        raise CaseError(f"{name} is a number; primes or values were wanted")
    texts = tuple(text.strip() for text in raw.polynomials)
    trees = []
    for i, text in enumerate(texts):
        path: KeyPath = ["parameters", name, "polynomials", i]
        try:
            trees.append(parse(text))
        except ExpressionError as problem:
            section.problems.add_expression(path, f"[parameters] {name}", problem)
            trees.append(parse("x"))
    if len(set(texts)) != len(texts):
        raise CaseError("a polynomial stands there twice; distinct polynomials were wanted")
    return Polynomials(name, texts, tuple(trees))


def _make_family(_: Section, name: str, raw: Any) -> Family:  # noqa: ANN401 a pydantic model
    if name in ("p", "q"):
        raise CaseError(f"{name} is a number; primes or values were wanted")
    if (raw.every is None) == (raw.sample is None):
        raise CaseError("either every = true or sample = COUNT with seed = NUMBER was wanted")
    if (raw.sample is None) != (raw.seed is None):
        raise CaseError("sample and seed stand together")
    if raw.even and raw.degree % 2:
        raise CaseError(f"no even polynomial has degree {raw.degree}; an even degree was wanted")
    return Family(name, raw.degree, raw.even, raw.monic, raw.squarefree, raw.sample, raw.seed or 0)


_MAKERS = {
    "primes": _make_primes,
    "prime-powers": _make_prime_powers,
    "values": _make_values,
    "polynomials": _make_polynomials,
    "degree": _make_family,
}


def _check_together(section: Section, found: list[Parameter], names: Names) -> None:
    """Note what single parameters cannot show: p with q, families above p, names in polynomials."""
    order = [parameter.name for parameter in found]
    if "p" in order and "q" in order:
        section.problems.add(["parameters", "q"], "[parameters]: p and q cannot both be swept")
    for position, parameter in enumerate(found):
        path: KeyPath = ["parameters", parameter.name]
        label = f"[parameters] {parameter.name}"
        if isinstance(parameter, Family) and not {"p", "q"} & set(order[:position]):
            section.problems.add(
                path, f"{label}: a family is drawn over F_p; p must stand above it"
            )
        if isinstance(parameter, Polynomials):
            for text, tree in zip(parameter.texts, parameter.trees, strict=True):
                try:
                    check_polynomial(tree, names, text, among_polynomials=False)
                except ExpressionError as problem:
                    section.problems.add_expression(path, label, problem)


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


_READERS = {
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
