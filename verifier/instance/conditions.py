"""What is decided about a combination before anything is measured."""

from collections.abc import Iterator, Sequence

from verifier.case.case import Case, Condition
from verifier.case.combinations import Combination
from verifier.errors import CaseError, OutsideError, UndefinedError, VerifierError
from verifier.expressions.evaluate import Scope, judge, value
from verifier.expressions.names import closed_parts
from verifier.instance.build import polynomial_at
from verifier.instance.parameters import ParameterScope
from verifier.instance.scope import InstanceScope
from verifier.structures.character import Character
from verifier.structures.subject import Subject


def kept(case: Case, combination: Combination) -> bool:
    """Return whether a combination satisfies every condition of `where`.

    A combination at which f has no meaning is kept: it will be reported as outside.

    Raises
    ------
    CaseError
        If a condition cannot be decided there.
    """
    if not case.where:
        return True
    try:
        polynomial = polynomial_at(case, combination)
    except OutsideError:
        return True
    character = None
    if polynomial is not None and combination.p not in (None, 2):
        character = Character(combination.p, polynomial)
    scope = InstanceScope(combination, Subject(combination.p, polynomial, character, None, None))
    return all(_true(condition, scope) for condition in case.where)


def _true(condition: Condition, scope: InstanceScope) -> bool:
    judged = judge(condition.expanded, scope)
    if judged.verdict not in ("holds", "fails"):
        raise CaseError(f"[parameters] where: {condition.text}: {judged.reason}")
    return judged.verdict == "holds"


def refuse_undefined(
    case: Case, combination: Combination, scope: Scope, names: frozenset[str]
) -> None:
    """Refuse a claim or table whose parts in `names` alone have no value at a combination.

    Claims that a condition in these names alone puts outside are not asked.

    Parameters
    ----------
    case, combination
        The instance.
    scope
        Gives the values of the names.
    names
        Parameters and sizes: what is known without measuring anything.

    Raises
    ------
    CaseError
        Naming the first such part and where it has no value.
    """
    for label, condition in _asked(case, scope, names):
        for part in closed_parts(condition.expanded, names):
            try:
                value(part, scope)
            except UndefinedError as problem:
                where = ", ".join(f"{name} = {text}" for name, text in combination.texts.items())
                place = f" at {where}" if where else ""
                raise CaseError(f"{label}: {condition.text} is {problem}{place}") from problem
            except CaseError as problem:
                raise CaseError(f"{label}: {condition.text}: {problem}") from problem
            except VerifierError:
                continue


def refuse_before_building(case: Case, combinations: Sequence[Combination]) -> None:
    """Refuse undefined parts in parameters alone, for all combinations, before any is built."""
    for combination in combinations:
        names = frozenset({*combination.numbers, *(("p", "q") if combination.p else ())})
        refuse_undefined(case, combination, ParameterScope(combination), names)


def refuse_before_measuring(case: Case, combination: Combination, scope: InstanceScope) -> None:
    """Refuse undefined parts in parameters and sizes, before anything is measured."""
    refuse_undefined(case, combination, scope, frozenset({*combination.numbers, *scope.known}))


def _asked(case: Case, scope: Scope, names: frozenset[str]) -> Iterator[tuple[str, Condition]]:
    for claim in case.claims:
        if all(_may_hold(condition, scope, names) for condition in claim.given):
            yield f"claim {claim.name}", claim.says
            for condition in claim.given:
                yield f"claim {claim.name}: given", condition
    for table in case.tables:
        for column in table.columns:
            yield f"table {table.name}", column


def _may_hold(condition: Condition, scope: Scope, names: frozenset[str]) -> bool:
    """Return False where a condition in the names alone is false."""
    parts = closed_parts(condition.expanded, names, conditions=True)
    if condition.expanded not in parts:
        return True
    return judge(condition.expanded, scope).verdict != "fails"
