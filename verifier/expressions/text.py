"""Print an expression as canonical text, with no more parentheses than it needs."""

from fractions import Fraction

from verifier.expressions.tree import (
    And,
    Binary,
    Call,
    Name,
    Negative,
    Not,
    Number,
    Or,
    Quoted,
    Relation,
    Tree,
)

OR, AND, NOT, RELATION, SUM, PRODUCT, UNARY, POWER, ATOM = range(9)
LEVELS = {"+": SUM, "-": SUM, "*": PRODUCT, "/": PRODUCT, "mod": PRODUCT, "^": POWER}


def to_text(tree: Tree) -> str:
    """Return the canonical text of a tree; parsing it gives an equal value."""
    return _printed(tree)[0]


def _printed(tree: Tree) -> tuple[str, int]:  # noqa: C901, PLR0911 one line a node
    """Return the text and how tightly it binds."""
    match tree:
        case Number(value=value):
            return _number(value)
        case Name(name=name):
            return name, ATOM
        case Quoted(text=text):
            return f"'{text}'", ATOM
        case Call(name=name, arguments=arguments):
            return f"{name}({', '.join(map(to_text, arguments))})", ATOM
        case Negative(operand=operand):
            return f"-{_inside(operand, UNARY)}", UNARY
        case Binary():
            return _binary(tree)
        case Relation(operator=operator, left=left, right=right):
            return f"{_inside(left, SUM)} {operator} {_inside(right, SUM)}", RELATION
        case Not(operand=operand):
            return f"not {_inside(operand, NOT)}", NOT
        case And(left=left, right=right):
            return f"{_inside(left, AND)} and {_inside(right, NOT)}", AND
        case Or(left=left, right=right):
            return f"{_inside(left, OR)} or {_inside(right, AND)}", OR


def _number(value: Fraction) -> tuple[str, int]:
    if value.denominator == 1:
        return str(value.numerator), ATOM
    return f"{value.numerator}/{value.denominator}", PRODUCT


def _binary(tree: Binary) -> tuple[str, int]:
    level = LEVELS[tree.operator]
    if tree.operator == "^":
        exponent, tight = _printed(tree.right)
        if tight < UNARY or (tight == UNARY and not isinstance(tree.right, Negative)):
            exponent = f"({exponent})"
        return f"{_inside(tree.left, ATOM)}^{exponent}", POWER
    spaced = f" {tree.operator} " if level == SUM or tree.operator == "mod" else tree.operator
    return f"{_inside(tree.left, level)}{spaced}{_inside(tree.right, level + 1)}", level


def _inside(tree: Tree, least: int) -> str:
    text, level = _printed(tree)
    return text if level >= least else f"({text})"
