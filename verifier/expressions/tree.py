"""The nodes of an expression; `column` is where a part stands in the text and does not compare."""

from dataclasses import dataclass, field
from fractions import Fraction


@dataclass(frozen=True)
class Number:
    """An integer or a decimal, exact."""

    value: Fraction
    column: int = field(default=0, compare=False)


@dataclass(frozen=True)
class Name:
    """A parameter, an abbreviation, `pi`, `x`, or a quantity or predicate without arguments."""

    name: str
    column: int = field(default=0, compare=False)


@dataclass(frozen=True)
class Quoted:
    """A text in single quotes."""

    text: str
    column: int = field(default=0, compare=False)


@dataclass(frozen=True)
class Call:
    """A function, quantity or predicate with arguments."""

    name: str
    arguments: tuple["Tree", ...]
    column: int = field(default=0, compare=False)


@dataclass(frozen=True)
class Negative:
    """Unary minus."""

    operand: "Tree"
    column: int = field(default=0, compare=False)


@dataclass(frozen=True)
class Binary:
    """One of + - * / mod ^."""

    operator: str
    left: "Tree"
    right: "Tree"
    column: int = field(default=0, compare=False)


@dataclass(frozen=True)
class Relation:
    """One of <= < = != >= >."""

    operator: str
    left: "Tree"
    right: "Tree"
    column: int = field(default=0, compare=False)


@dataclass(frozen=True)
class Not:
    """A negated condition."""

    operand: "Tree"
    column: int = field(default=0, compare=False)


@dataclass(frozen=True)
class And:
    """Two conditions, both."""

    left: "Tree"
    right: "Tree"
    column: int = field(default=0, compare=False)


@dataclass(frozen=True)
class Or:
    """Two conditions, one at least."""

    left: "Tree"
    right: "Tree"
    column: int = field(default=0, compare=False)


Tree = Number | Name | Quoted | Call | Negative | Binary | Relation | Not | And | Or


def children(tree: Tree) -> tuple[Tree, ...]:
    """Return the parts of a node, left to right."""
    match tree:
        case Call(arguments=arguments):
            return arguments
        case Negative(operand=operand) | Not(operand=operand):
            return (operand,)
        case Binary() | Relation() | And() | Or():
            return (tree.left, tree.right)
    return ()
