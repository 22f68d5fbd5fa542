"""Print an expression as LaTeX for maths mode."""

from collections.abc import Mapping
from fractions import Fraction

from verifier.expressions.text import to_text
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
RELATIONS = {"<=": r"\le", "<": "<", "=": "=", "!=": r"\ne", ">=": r"\ge", ">": ">"}
FENCES = {
    "floor": (r"\lfloor ", r"\rfloor"),
    "ceil": (r"\lceil ", r"\rceil"),
    "abs": (r"\lvert ", r"\rvert"),
    "sqrt": (r"\sqrt{", "}"),
}
OPERATORS = {"min": r"\min", "max": r"\max", "log": r"\log", "exp": r"\exp", "chi": r"\chi"}
WORDS = {
    "leading": r"\operatorname{lc}",
    "disc": r"\operatorname{disc}",
    "round": r"\operatorname{round}",
}


def to_latex(tree: Tree, notation: Mapping[str, str], symbols: Mapping[str, str]) -> str:
    r"""Return a tree as LaTeX.

    Parameters
    ----------
    tree
        An expression or condition.
    notation
        LaTeX for canonical texts such as `agreement_sum`, `correlation(2)` or a name.
    symbols
        LaTeX for quantities and predicates by name, ``{0}``, ``{1}`` for their arguments.

    Examples
    --------
    >>> from verifier.expressions.parse import parse
    >>> print(to_latex(parse("(a + 1)/2*sqrt(p)^3 <= floor(x)"), {}, {}))
    \frac{a + 1}{2} \sqrt{p}^{3} \le \lfloor x\rfloor
    """
    return _Printer(notation, symbols).printed(tree)[0]


class _Printer:
    """Prints with one notation; every piece comes with how tightly it binds."""

    def __init__(self, notation: Mapping[str, str], symbols: Mapping[str, str]) -> None:
        self.notation = notation
        self.symbols = symbols

    def printed(self, tree: Tree) -> tuple[str, int]:  # noqa: PLR0911 one line a node
        if isinstance(tree, Name | Call):
            return self._mention(tree)
        match tree:
            case Number(value=value):
                return _number(value)
            case Quoted(text=text):
                return rf"\mathtt{{{_plain(text)}}}", ATOM
            case Negative(operand=operand):
                return f"-{self._inside(operand, UNARY)}", UNARY
            case Binary():
                return self._binary(tree)
            case Relation(operator=operator, left=left, right=right):
                sides = self._inside(left, SUM), self._inside(right, SUM)
                return f"{sides[0]} {RELATIONS[operator]} {sides[1]}", RELATION
            case Not(operand=operand):
                return rf"\text{{not }} {self._inside(operand, NOT)}", NOT
            case And(left=left, right=right):
                return rf"{self._inside(left, AND)} \text{{ and }} {self._inside(right, NOT)}", AND
            case Or(left=left, right=right):
                return rf"{self._inside(left, OR)} \text{{ or }} {self._inside(right, AND)}", OR

    def _inside(self, tree: Tree, least: int) -> str:
        text, level = self.printed(tree)
        return text if level >= least else rf"\left({text}\right)"

    def _whole(self, tree: Tree) -> str:
        return self.printed(tree)[0]

    def _mention(self, tree: Name | Call) -> tuple[str, int]:
        canonical = to_text(tree)
        if canonical in self.notation:
            return f"{{{self.notation[canonical]}}}", ATOM
        arguments = tree.arguments if isinstance(tree, Call) else ()
        if tree.name in self.symbols:
            made = self.symbols[tree.name]
            for place, argument in enumerate(arguments):
                made = made.replace(f"{{{place}}}", f"{{{self._whole(argument)}}}")
            return f"{{{made}}}", ATOM
        return self._function(tree, arguments) if isinstance(tree, Call) else _name(tree.name)

    def _function(self, tree: Call, arguments: tuple[Tree, ...]) -> tuple[str, int]:
        name = tree.name
        inner = ", ".join(self._whole(argument) for argument in arguments)
        if name in FENCES:
            opened, closed = FENCES[name]
            return f"{opened}{inner}{closed}", ATOM
        if name == "binomial":
            above, below = (self._whole(argument) for argument in arguments)
            return rf"\binom{{{above}}}{{{below}}}", ATOM
        if name == "factorial":
            return f"{self._inside(arguments[0], ATOM)}!", POWER
        if name == "value":
            return rf"f\left({self._whole(arguments[1])}\right)", ATOM
        word = OPERATORS.get(name) or WORDS.get(name) or rf"\operatorname{{{_plain(name)}}}"
        return rf"{word}\left({inner}\right)", ATOM

    def _binary(self, tree: Binary) -> tuple[str, int]:
        left, right = tree.left, tree.right
        match tree.operator:
            case "+" | "-":
                return (
                    f"{self._inside(left, SUM)} {tree.operator} {self._inside(right, PRODUCT)}",
                    SUM,
                )
            case "/":
                return rf"\frac{{{self._whole(left)}}}{{{self._whole(right)}}}", POWER
            case "^":
                return f"{self._inside(left, ATOM)}^{{{self._whole(right)}}}", POWER
            case "mod":
                return rf"{self._inside(left, PRODUCT)} \bmod {self._inside(right, UNARY)}", PRODUCT
        return self._product(left, right), PRODUCT

    def _product(self, left: Tree, right: Tree) -> str:
        first, second = self._inside(left, PRODUCT), self._inside(right, POWER)
        dotted = second[:1].isdigit() or second.startswith((r"\frac", "-"))
        return rf"{first} \cdot {second}" if dotted else f"{first} {second}"


def _number(value: Fraction) -> tuple[str, int]:
    if value.denominator == 1:
        return str(value.numerator), ATOM
    return rf"\frac{{{value.numerator}}}{{{value.denominator}}}", POWER


def _name(name: str) -> tuple[str, int]:
    if name == "pi":
        return r"\pi", ATOM
    if len(name) == 1:
        return name, ATOM
    head, _, tail = name.partition("_")
    if len(head) == 1 and tail:
        return rf"{head}_{{\mathrm{{{_plain(tail)}}}}}", ATOM
    return rf"\mathrm{{{_plain(name)}}}", ATOM


def _plain(text: str) -> str:
    return text.replace("_", r"\_")
