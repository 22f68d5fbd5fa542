"""Read `[parameters]`: raw tables to records, problems noted."""

from collections.abc import Callable, Mapping
from typing import Any

from pydantic import ValidationError

from verifier.case.case import Family, Parameter, Polynomials, Primes, Values
from verifier.case.check import Names, check_polynomial
from verifier.case.model import PARAMETER_TABLES
from verifier.case.positions import Path as KeyPath
from verifier.case.section import Section
from verifier.case.shapes import shape_problems
from verifier.errors import CaseError, ExpressionError
from verifier.exact.primes import is_prime, prime_powers_between, primes_between
from verifier.expressions.parse import parse

LARGEST_RANGE = 10**8


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


_MAKERS: Mapping[str, Callable[[Section, str, Any], Parameter]] = {
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
