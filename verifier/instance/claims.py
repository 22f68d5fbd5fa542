"""Judge a claim at one instance: from evaluated expressions to the entry of the certificate."""

from fractions import Fraction
from typing import Any

from verifier.case.case import Claim, Condition
from verifier.errors import CaseError, VerifierError
from verifier.exact.decide import compare
from verifier.exact.nodes import Real
from verifier.expressions.evaluate import Judged, Leaf, judge, value
from verifier.expressions.tree import Call, Name, Relation, Tree
from verifier.instance.scope import InstanceScope
from verifier.registry import QUANTITIES

MET = {"holds": True, "fails": False}
FLIPPED = {">=": "<=", ">": "<"}


def judge_claim(claim: Claim, scope: InstanceScope) -> tuple[dict[str, Any], Real | None]:
    """Return the entry of a claim, and its ratio as an exact value where it has one."""
    given = [_met(condition, scope) for condition in claim.given]
    stated: dict[str, Any] = {}
    if claim.given:
        stated["given"] = [
            {"says": condition.text, "met": met}
            for condition, (met, _) in zip(claim.given, given, strict=True)
        ]
    reason = _refusal(claim, given)
    if reason is not None:
        verdict, words = reason
        return {**_without_values(claim, verdict, words), **stated}, None
    judged = judge(claim.says.expanded, scope)
    if judged.verdict == "outside":
        return {**_without_values(claim, "outside", judged.reason), **stated}, None
    entry: dict[str, Any] = {
        "verdict": judged.verdict,
        "trivial": judged.verdict == "holds" and _is_trivial(claim.says.expanded, scope),
        **stated,
    }
    if judged.reason is not None:
        entry["reason"] = judged.reason
    if isinstance(claim.says.expanded, Relation):
        return entry | _sides(judged.leaves[0]), judged.leaves[0].exact_ratio
    entry["parts"] = [_part(leaf) for leaf in judged.leaves]
    return entry, None


def outside_entry(claim: Claim, reason: str) -> dict[str, Any]:
    """Return the entry of a claim at an instance that is outside as a whole."""
    entry = _without_values(claim, "outside", reason)
    if claim.given:
        entry["given"] = [{"says": condition.text, "met": None} for condition in claim.given]
    return entry


def _met(condition: Condition, scope: InstanceScope) -> tuple[bool | None, Judged]:
    judged = judge(condition.expanded, scope)
    return MET.get(judged.verdict), judged


def _refusal(
    claim: Claim, given: list[tuple[bool | None, Judged]]
) -> tuple[str, str | None] | None:
    """Return the verdict and reason that the conditions alone decide, or None if all are met."""
    for condition, (met, _) in zip(claim.given, given, strict=True):
        if met is False:
            return "outside", f"given {condition.text} is not met"
    for _, judged in given:
        if judged.verdict == "outside":
            return "outside", judged.reason
    for condition, (met, _) in zip(claim.given, given, strict=True):
        if met is None:
            return "open", f"given {condition.text} is not decided"
    return None


def _without_values(claim: Claim, verdict: str, reason: str | None) -> dict[str, Any]:
    entry: dict[str, Any] = {"verdict": verdict, "trivial": False, "reason": reason}
    if isinstance(claim.says.expanded, Relation):
        return entry | {"left": None, "right": None, "ratio": None, "by": None}
    return entry | {"parts": []}


def _sides(leaf: Leaf) -> dict[str, Any]:
    return {"left": leaf.left, "right": leaf.right, "ratio": leaf.ratio, "by": leaf.by}


def _part(leaf: Leaf) -> dict[str, Any]:
    found: dict[str, Any] = {"says": leaf.says, "verdict": leaf.verdict}
    return found | _sides(leaf) if leaf.relation else found


def _is_trivial(tree: Tree, scope: InstanceScope) -> bool:
    """Return whether a relation bounds a quantity by no less than its trivial maximum."""
    if not isinstance(tree, Relation):
        return False
    operator, small, large = tree.operator, tree.left, tree.right
    if operator in FLIPPED:
        operator, small, large = FLIPPED[operator], large, small
    named = _quantity(small)
    if operator not in ("<", "<=") or named is None:
        return False
    entry = QUANTITIES.entries[named[0]]
    if entry.maximum is None:
        return False
    try:
        _, values = scope.key(*named)
        most = entry.maximum(scope.sizes, *values)
        over = 0 if most is None else compare(value(large, scope), Fraction(most))
    except CaseError:
        raise
    except VerifierError:
        return False
    return most is not None and (over > 0 or (over == 0 and operator == "<="))


def _quantity(tree: Tree) -> tuple[str, tuple[Tree, ...]] | None:
    """Return name and arguments where `tree` is a quantity, or abs of one."""
    if isinstance(tree, Call) and tree.name == "abs":
        tree = tree.arguments[0]
    if isinstance(tree, Name) and tree.name in QUANTITIES.entries:
        return tree.name, ()
    if isinstance(tree, Call) and tree.name in QUANTITIES.entries:
        return tree.name, tuple(tree.arguments)
    return None
