"""The certificate of one instance, from a plan and a combination of parameter values."""

from typing import Any

from verifier.case.case import Condition, Table
from verifier.case.combinations import Combination
from verifier.certificate import digest
from verifier.errors import OutsideError
from verifier.exact.canonical import canonical, rational_text
from verifier.exact.nodes import Real
from verifier.exact.primes import pratt
from verifier.expressions.evaluate import value
from verifier.instance.build import Built, build
from verifier.instance.cells import cell
from verifier.instance.claims import judge_claim, outside_entry
from verifier.instance.conditions import refuse_before_measuring
from verifier.instance.scope import WITHOUT_VALUE, InstanceScope
from verifier.plan import Plan
from verifier.records import Finding, Json, Measurement

Certified = tuple[dict[str, Any], dict[str, Real]]


def certify(plan: Plan, combination: Combination, index: int) -> Certified:
    """Build, measure and judge one instance.

    Parameters
    ----------
    plan
        What to measure.
    combination, index
        The values of the parameters, and the place of the instance in the order, from 0.

    Returns
    -------
    Certified
        The certificate, and the exact ratio of each claim that has one.
    """
    built = build(plan.case, combination)
    scope = InstanceScope(combination, built.subject)
    certificate: dict[str, Any] = {
        "case": plan.case.name,
        "case-sha256": digest(plan.case.text),
        "format": 1,
        "index": index,
        "parameters": dict(combination.texts),
        "definition": dict(built.definition),
    }
    if built.outside is not None:
        return {**certificate, **_outside(plan, combination, built.outside)}, {}
    refuse_before_measuring(plan.case, combination, scope)
    quantities, witnesses = _measured(plan, scope)
    ratios: dict[str, Real] = {}
    claims: dict[str, Any] = {}
    for claim in plan.case.claims:
        claims[claim.name], ratio = judge_claim(claim, scope)
        if ratio is not None:
            ratios[claim.name] = ratio
    certificate |= {
        "known": _known(plan, scope),
        "quantities": quantities,
        "witnesses": witnesses,
        "claims": claims,
        "primality": _primality(combination, scope),
    }
    if plan.case.tables:
        certificate["tables"] = {table.name: _row(table, scope) for table in plan.case.tables}
    return certificate, ratios


def _outside(plan: Plan, combination: Combination, reason: str) -> dict[str, Any]:
    """Return the rest of the certificate of an instance at which f has no meaning."""
    empty = InstanceScope(combination, Built.nothing(combination.p))
    found: dict[str, Any] = {
        "known": {name: str(number) for name, number in empty.known.items()},
        "quantities": {},
        "witnesses": {},
        "claims": {claim.name: outside_entry(claim, reason) for claim in plan.case.claims},
        "primality": _primality(combination, empty),
        "reason": reason,
    }
    if plan.case.tables:
        found["tables"] = {
            table.name: ["outside"] * len(table.columns) for table in plan.case.tables
        }
    return found


def _measured(plan: Plan, scope: InstanceScope) -> tuple[dict[str, Json], dict[str, Json]]:
    quantities: dict[str, Json] = {}
    witnesses: dict[str, Json] = {}
    for name, arguments in plan.measured:
        try:
            key, _ = scope.key(name, arguments)
        except WITHOUT_VALUE:
            continue
        outcome = scope.outcome(name, arguments)
        quantities[key] = _printed(outcome)
        if isinstance(outcome, Measurement | Finding) and outcome.witness is not None:
            witnesses[key] = [str(place) for place in outcome.witness]
    return quantities, witnesses


def _printed(outcome: object) -> Json:
    match outcome:
        case Measurement():
            return rational_text(outcome.value)
        case Finding():
            return outcome.value
    return None


def _known(plan: Plan, scope: InstanceScope) -> dict[str, Json]:
    found: dict[str, Json] = {name: str(number) for name, number in scope.known.items()}
    for name in plan.defined:
        found[name] = _defined(plan.case.define[name], scope)
    return found


def _defined(condition: Condition, scope: InstanceScope) -> Json:
    try:
        return dict_or_text(canonical(value(condition.expanded, scope)))
    except WITHOUT_VALUE:
        return None


def dict_or_text(found: str | dict[str, str]) -> Json:
    """Return a canonical value as JSON."""
    return dict(found) if isinstance(found, dict) else found


def _primality(combination: Combination, scope: InstanceScope) -> dict[str, Json]:
    """Return Pratt's witnesses for p, and for every a for which prime(a) was found true."""
    primes = set() if combination.p is None else {combination.p}
    for key, outcome in scope.outcomes.items():
        if key.startswith("prime(") and isinstance(outcome, Finding) and outcome.value:
            primes.add(int(key[len("prime(") : -1]))
    return {str(prime): pratt(prime) for prime in sorted(primes)}


def _row(table: Table, scope: InstanceScope) -> list[Json]:
    return [_cell(table, column, scope) for column in table.columns]


def _cell(table: Table, column: Condition, scope: InstanceScope) -> str:
    try:
        return cell(table.name, column, scope)
    except OutsideError:
        return "outside"
    except WITHOUT_VALUE:
        return "open"
