"""Questions about the names in an expression, and the replacement of abbreviations."""

from collections.abc import Mapping, Set
from dataclasses import replace
from functools import lru_cache

from verifier.expressions.parse import check_size
from verifier.expressions.text import to_text
from verifier.expressions.tree import (
    And,
    Binary,
    Call,
    Name,
    Negative,
    Not,
    Or,
    Relation,
    Tree,
    children,
)

Mention = tuple[str, tuple[Tree, ...]]


def names(tree: Tree) -> set[str]:
    """Return every name in a tree, functions included."""
    own = {tree.name} if isinstance(tree, Name | Call) else set()
    return own.union(*(names(part) for part in children(tree)))


def calls(tree: Tree, known: Set[str]) -> list[Mention]:
    """Return name and arguments of every mention of a `known` name, in the order of the text."""
    found: list[Mention] = []
    if isinstance(tree, Name | Call) and tree.name in known:
        found.append((tree.name, children(tree)))
    for part in children(tree):
        found += calls(part, known)
    return found


def expand(tree: Tree, definitions: Mapping[str, Tree], text: str = "") -> Tree:
    """Return the tree with the names of `definitions` replaced.

    Raises
    ------
    ExpressionError
        If the result is larger than an expression may be.
    """
    if not definitions:
        return tree
    expanded = _expanded(tree, definitions)
    check_size(expanded, text or to_text(tree))
    return expanded


def _expanded(tree: Tree, definitions: Mapping[str, Tree]) -> Tree:
    match tree:
        case Name(name=name) if name in definitions:
            return definitions[name]
        case Call(arguments=arguments):
            return replace(tree, arguments=tuple(_expanded(a, definitions) for a in arguments))
        case Negative(operand=operand) | Not(operand=operand):
            return replace(tree, operand=_expanded(operand, definitions))
        case Binary() | Relation() | And() | Or():
            left, right = _expanded(tree.left, definitions), _expanded(tree.right, definitions)
            return replace(tree, left=left, right=right)
    return tree


def is_condition(tree: Tree, predicates: Set[str]) -> bool:
    """Return whether a tree is a relation, a predicate, or a combination of them."""
    if isinstance(tree, Name | Call):
        return tree.name in predicates
    return isinstance(tree, Relation | Not | And | Or)


@lru_cache(maxsize=4096)
def closed_parts(
    tree: Tree, known: frozenset[str], *, conditions: bool = False
) -> tuple[Tree, ...]:
    """Return the largest parts that speak of `known` names and functions of numbers alone.

    Parameters
    ----------
    tree
        An expression or condition.
    known
        The names that count as known.
    conditions
        Whether a whole condition counts as a part; otherwise its sides do.
    """
    whole = conditions or not isinstance(tree, Relation | Not | And | Or)
    if whole and _closed(tree, known):
        return (tree,)
    return tuple(
        found
        for part in children(tree)
        for found in closed_parts(part, known, conditions=conditions)
    )


FUNCTIONS = frozenset(
    {
        *("sqrt", "log", "exp", "floor", "ceil", "abs", "min", "max", "round"),
        *("binomial", "factorial", "chi"),
    }
)


def _closed(tree: Tree, known: Set[str]) -> bool:
    return names(tree) <= {*known, *FUNCTIONS, "pi"}
