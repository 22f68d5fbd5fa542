"""The text of one cell of a table."""

from verifier.case.case import Condition
from verifier.errors import CaseError
from verifier.exact.canonical import rational_text
from verifier.exact.decide import rational_value
from verifier.exact.reals import rounded
from verifier.expressions.evaluate import judge, value
from verifier.expressions.names import is_condition
from verifier.expressions.tree import Call, Name
from verifier.instance.scope import InstanceScope
from verifier.registry import PREDICATES

TRUTH = {"holds": "true", "fails": "false"}


def cell(table: str, column: Condition, scope: InstanceScope) -> str:
    """Return the exact text of a column at one instance.

    Parameters
    ----------
    table
        The name of the table, for messages.
    column
        An expression, a condition, or the bare name of a polynomial parameter.
    scope
        The instance.

    Raises
    ------
    CaseError
        If the value is not rational: a cell that is not exact must be rounded.
    """
    tree = column.expanded
    if isinstance(tree, Name) and tree.name in scope.combination.polynomials:
        return scope.combination.texts[tree.name]
    if is_condition(tree, frozenset(PREDICATES.entries)):
        judged = judge(tree, scope)
        return TRUTH.get(judged.verdict, judged.verdict)
    if isinstance(tree, Call) and tree.name == "round":
        return _decimals(tree, scope)
    found = rational_value(value(tree, scope))
    if found is None:
        where = ", ".join(f"{name} = {text}" for name, text in scope.combination.texts.items())
        raise CaseError(
            f"table {table}: column {column.text} is irrational at {where}; "
            f"round({column.text}, DIGITS) was wanted"
        )
    return rational_text(found)


def _decimals(tree: Call, scope: InstanceScope) -> str:
    """Return `round(x, d)` with exactly d decimals."""
    digits = rational_value(value(tree.arguments[1], scope))
    places = int(digits) if digits is not None else 0
    scaled = rounded(value(tree.arguments[0], scope), places) * 10 ** max(places, 0)
    whole = abs(scaled.numerator)
    sign = "-" if scaled < 0 else ""
    if places <= 0:
        return f"{sign}{whole}"
    text = str(whole).rjust(places + 1, "0")
    return f"{sign}{text[:-places]}.{text[-places:]}"
