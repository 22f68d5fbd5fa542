"""From a combination of parameter values to the subject that is measured."""

from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction
from typing import Any

from verifier.case.case import Case, Condition, Setting
from verifier.case.combinations import Combination
from verifier.certificate import digest
from verifier.errors import CaseError, ExpressionError, OutsideError
from verifier.exact.decide import rational_value
from verifier.expressions.evaluate import value
from verifier.expressions.polynomial import coefficients, polynomial_text, reduce
from verifier.instance.parameters import ParameterScope
from verifier.registry import GRAPHS, RULES
from verifier.structures.character import Character
from verifier.structures.sequence import BinarySequence
from verifier.structures.subject import Subject

LONGEST_POLYNOMIAL = 1000
LONGEST_SEQUENCE = 10**8
STREAM = "SHA-256 of primewise:SEED:BLOCK, least significant bit first"


@dataclass(frozen=True)
class Built:
    """The subject of an instance and its definition in texts, as the certificate states it.

    `outside` is the reason why there is no subject, where f has no meaning modulo p.
    """

    subject: Subject
    definition: Mapping[str, str]
    outside: str | None = None

    @staticmethod
    def nothing(p: int | None) -> Subject:
        """Return the subject of an instance at which nothing could be built."""
        return Subject(p, None, None, None, None)


def build(case: Case, combination: Combination) -> Built:
    """Build the sequence and the graph of one combination.

    Raises
    ------
    CaseError
        If a setting has no meaning there: a rule that wants an odd prime at p = 2, an empty range
        of indices, a file that is malformed; or f = 0 modulo a p that is listed by values.
    """
    _refuse_settings(case, combination)
    try:
        polynomial = polynomial_at(case, combination)
    except OutsideError as problem:
        if combination.listed:
            raise CaseError(f"{_place(combination)}: {problem}") from problem
        definition = _conventions(case, combination, None)
        _note_indices(case, combination, combination.p or 0, definition)
        return Built(Built.nothing(combination.p), definition, str(problem))
    character = None
    if polynomial is not None and combination.p is not None:
        character = Character(combination.p, polynomial)
    definition = _conventions(case, combination, polynomial)
    sequence = _sequence(case, combination, polynomial, character, definition)
    graph = _graph(case, sequence, definition)
    return Built(Subject(combination.p, polynomial, character, sequence, graph), definition)


def _refuse_settings(case: Case, combination: Combination) -> None:
    if case.sequence is None:
        return
    rule = RULES.find(case.sequence.rule)
    if rule.odd_prime and combination.p == 2:
        raise CaseError(f"p = 2 stands in the range; the rule {rule.name} wants an odd prime")
    order = combination.numbers.get("q", combination.p)
    if rule.odd_prime and order != combination.p:
        raise CaseError(f"q = {order} is no prime; the rule {rule.name} works over F_p alone")


def _place(combination: Combination) -> str:
    return ", ".join(f"{name} = {text}" for name, text in combination.texts.items())


def polynomial_at(case: Case, combination: Combination) -> tuple[int, ...] | None:
    """Return the residues of the sequence's polynomial, or None where there is none.

    Raises
    ------
    OutsideError
        If it has no meaning modulo p: it vanishes identically, or p divides a denominator.
    """
    setting = case.sequence.settings.get("polynomial") if case.sequence else None
    if not isinstance(setting, Condition) or combination.p is None:
        return None
    numbers = {name: Fraction(number) for name, number in combination.numbers.items()}
    try:
        rational = coefficients(setting.tree, {**numbers, **combination.polynomials})
    except ExpressionError as problem:
        raise CaseError(f"[sequence] polynomial: {setting.text}: {problem}") from problem
    residues = reduce(rational, combination.p)
    if not residues:
        raise OutsideError(f"f vanishes identically modulo {combination.p}")
    return residues


def _conventions(
    case: Case, combination: Combination, polynomial: tuple[int, ...] | None
) -> dict[str, str]:
    """Return what the case file fixes about the construction, in texts."""
    found: dict[str, str] = {}
    if case.sequence is not None:
        found["rule"] = case.sequence.rule
        found["symmetrise"] = case.sequence.symmetrise
        if polynomial is not None:
            found["polynomial"] = _shortened(polynomial_text(polynomial))
        for name, key in RULES.find(case.sequence.rule).keys.items():
            setting = case.sequence.settings.get(name)
            if setting is not None and key.kind in ("sign", "integer"):
                found[name] = str(_integer(setting, combination, f"[sequence] {name}"))
        if "seed" in found:
            found["stream"] = STREAM
        _note_file(case, case.sequence.settings, found)
    if case.graph is not None:
        found["graph"] = case.graph.kind
        _note_file(case, case.graph.settings, found)
        form = case.graph.settings.get("form")
        if isinstance(form, str):
            found["form"] = form
    return found


def _note_file(case: Case, settings: Mapping[str, Setting], found: dict[str, str]) -> None:
    name = settings.get("file")
    if isinstance(name, str):
        found["file"] = name
        found["file-sha256"] = digest(case.inputs[name])


def _shortened(text: str) -> str:
    if len(text) <= LONGEST_POLYNOMIAL:
        return text
    return f"sha256:{digest(text.encode())}"


def _integer(setting: Setting, combination: Combination, label: str) -> int:
    """Return an integer setting, evaluated where it is an expression."""
    if isinstance(setting, int):
        return setting
    if not isinstance(setting, Condition):
        raise CaseError(f"{label}: an integer was wanted")
    found = rational_value(value(setting.expanded, ParameterScope(combination)))
    if found is None or found.denominator != 1:
        raise CaseError(f"{label} = {setting.text} at {_place(combination)}; an integer was wanted")
    return int(found)


def _sequence(
    case: Case,
    combination: Combination,
    polynomial: tuple[int, ...] | None,
    character: Character | None,
    definition: dict[str, str],
) -> BinarySequence | None:
    if case.sequence is None:
        return None
    rule = RULES.find(case.sequence.rule)
    arguments: dict[str, Any] = {}
    if "polynomial" in rule.keys:
        arguments |= {"p": combination.p, "polynomial": polynomial, "character": character}
    for name, key in rule.keys.items():
        setting = case.sequence.settings.get(name)
        if setting is None or key.kind == "polynomial":
            continue
        label = f"[sequence] {name}"
        if key.kind == "file":
            arguments["content"] = case.inputs[str(setting)]
        elif key.kind in ("sign", "integer"):
            arguments[name.replace("-", "_")] = _integer(setting, combination, label)
        else:
            arguments[name.replace("-", "_")] = setting
    period: BinarySequence = rule.function(**arguments)
    if rule.name == "explicit":
        definition["signs"] = digest(_sign_text(period))
    return _cut(case, combination, period, definition)


def _sign_text(period: BinarySequence) -> bytes:
    return bytes(43 if sign == 1 else 45 for sign in period.signs.tolist())


def _cut(
    case: Case, combination: Combination, period: BinarySequence, definition: dict[str, str]
) -> BinarySequence:
    """Return the sequence on its indices, symmetrised where the case asks."""
    length = len(period.signs)
    first, last = _note_indices(case, combination, length, definition)
    found = period if (first, last) == (0, length - 1) else period.with_indices(first, last)
    return found.mirrored() if case.sequence and case.sequence.symmetrise == "mirror" else found


def _note_indices(
    case: Case, combination: Combination, length: int, definition: dict[str, str]
) -> tuple[int, int]:
    """Return the first and the last index, a full period unless the case says otherwise."""
    first, last = 0, length - 1
    if case.sequence is not None and case.sequence.indices is not None:
        first, last = (
            _integer(end, combination, "[sequence] indices") for end in case.sequence.indices
        )
    if not 0 <= last - first < LONGEST_SEQUENCE:
        raise CaseError(
            f'[sequence] indices = "{first}..{last}" at {_place(combination)}; a range of 1 to '
            f"{LONGEST_SEQUENCE} places was wanted"
        )
    definition["indices"] = f"{first}..{last}"
    return first, last


def _graph(case: Case, sequence: BinarySequence | None, definition: dict[str, str]) -> Any:  # noqa: ANN401 any of the graph structures
    if case.graph is None:
        return None
    kind = GRAPHS.find(case.graph.kind)
    if kind.from_sequence:
        return kind.function(sequence)
    name = str(case.graph.settings["file"])
    graph, form = kind.function(
        name=name, content=case.inputs[name], form=case.graph.settings.get("form")
    )
    definition["form"] = form
    return graph
