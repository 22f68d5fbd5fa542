"""Read an expression from text by operator precedence; nothing is ever executed.

Loosest first: or, and, not, one relation, + -, * / mod, unary minus, ^ (right).
"""

import re
from fractions import Fraction
from typing import NoReturn

from verifier.errors import ExpressionError
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
    children,
)

LONGEST = 400
MOST_NODES = 200
DEEPEST = 40
LARGEST_EXPONENT = 64

RELATIONS = ("<=", ">=", "!=", "<", ">", "=")
WORDS = ("or", "and", "not", "mod")
HINTS = {  # what looks like an operator elsewhere, and what is wanted here
    "==": "'==' stands there; equality is written =",
    "**": "'**' stands there; a power is written ^",
    "&&": "'&&' stands there; write and",
    "||": "'||' stands there; write or",
    "<>": "'<>' stands there; write !=",
    "=<": "'=<' stands there; write <=",
    "=>": "'=>' stands there; write >=",
    "#": "'#' stands there; an expression has no comments",
}
TOKEN = re.compile(
    r"(?P<space>\s+)|(?P<number>\d+(?:\.\d+)?)|(?P<name>[A-Za-z][A-Za-z0-9_]*)"
    r"|(?P<quoted>'[^']*')|(?P<operator><=|>=|!=|[-+*/^()<>=,])"
)

Token = tuple[str, str, int]  # kind, text, column


def parse(text: str) -> Tree:
    """Return the tree of an expression or condition.

    Parameters
    ----------
    text
        At most 400 characters of ASCII, 200 nodes, depth 40.

    Raises
    ------
    ExpressionError
        If the text cannot be read in exactly one honest way: the message says what was wanted.

    Examples
    --------
    >>> from verifier.expressions.text import to_text
    >>> to_text(parse("-2^-n*(p+1) <= 0.5"))
    '-2^-n*(p + 1) <= 1/2'
    """
    if len(text) > LONGEST:
        _refuse(text, LONGEST, f"{len(text)} characters stand there; {LONGEST} at most were wanted")
    for column, character in enumerate(text):
        if not character.isascii():
            _refuse(text, column, f"{character!r} is no ASCII character")
    return _Parser(text, _tokens(text)).whole()


def check_exponents(tree: Tree, text: str) -> None:
    """Refuse constant exponents above 64, such as towers of powers.

    Raises
    ------
    ExpressionError
        At the exponent.
    """
    if isinstance(tree, Binary) and tree.operator == "^":
        size = _constant(tree.right)
        if size is not None and abs(size) > LARGEST_EXPONENT:
            _refuse(
                text,
                tree.right.column,
                f"a constant exponent of at most {LARGEST_EXPONENT} was wanted",
            )
    for part in children(tree):
        check_exponents(part, text)


def check_size(tree: Tree, text: str) -> None:
    """Refuse a tree of more than 200 nodes or depth 40, as after expanding abbreviations.

    A chain such as a + b + c + d is no deeper than its terms.

    Raises
    ------
    ExpressionError
        At the root: no single part is to blame.
    """
    count = 0
    waiting = [(tree, 1)]
    while waiting:
        node, depth = waiting.pop()
        count += 1
        if count > MOST_NODES:
            _refuse(text, 0, f"more than {MOST_NODES} parts stand there, abbreviations expanded")
        if depth > DEEPEST:
            _refuse(text, 0, f"a depth of more than {DEEPEST} stands there, abbreviations expanded")
        chained = isinstance(node, And | Or) or (isinstance(node, Binary) and node.operator != "^")
        waiting += [
            (part, depth if chained and place == 0 else depth + 1)
            for place, part in enumerate(children(node))
        ]


def _constant(tree: Tree) -> Fraction | None:
    """Return the value of a constant exponent as far as it is easily known; inf-like ones as 65."""
    match tree:
        case Number(value=value):
            return value
        case Negative(operand=operand):
            inner = _constant(operand)
            return None if inner is None else -inner
        case Binary(operator=operator, left=left, right=right):
            a, b = _constant(left), _constant(right)
            return None if a is None or b is None else _combined(operator, a, b)
    return None


def _combined(operator: str, a: Fraction, b: Fraction) -> Fraction | None:
    match operator:
        case "+":
            return a + b
        case "-":
            return a - b
        case "*":
            return a * b
        case "/":
            return a / b if b else None
        case "mod":
            return a % b if b > 0 else None
    if b.denominator != 1 or abs(b) > LARGEST_EXPONENT or (a == 0 and b < 0):
        return Fraction(LARGEST_EXPONENT + 1)
    return a ** int(b)


def _refuse(text: str, column: int, problem: str) -> NoReturn:
    raise ExpressionError(text, column, problem)


def _tokens(text: str) -> list[Token]:
    found: list[Token] = []
    column = 0
    while column < len(text):
        for wrong, hint in HINTS.items():
            if text.startswith(wrong, column):
                _refuse(text, column, hint)
        match = TOKEN.match(text, column)
        if match is None:
            _refuse(text, column, _unread(text, column))
        kind = match.lastgroup or ""
        if kind == "number":
            _check_number(text, match.end())
        if kind != "space":
            token = match.group()
            found.append(("operator" if token in WORDS else kind, token, column))
        column = match.end()
    found.append(("end", "the end", len(text)))
    return found


def _unread(text: str, column: int) -> str:
    character = text[column]
    if character == ".":
        return "digits stand on both sides of a decimal point, as in 0.5"
    if character == "'":
        return "a quoted text has no end"
    return f"{character!r} cannot stand in an expression"


def _check_number(text: str, end: int) -> None:
    after = text[end : end + 1]
    if after == ".":
        _refuse(text, end, "digits stand on both sides of a decimal point, as in 1.0")
    if after == "_":
        _refuse(text, end, "a number is written without _")
    if after.isalpha():
        _refuse(
            text, end, "a letter follows a number; write * for a product, digits in full for 1e3"
        )
    if after == "(":
        _refuse(text, end, "a parenthesis follows a number; write * for a product")


class _Parser:
    """Reads the tokens of one text once, left to right."""

    def __init__(self, text: str, tokens: list[Token]) -> None:
        self.text = text
        self.tokens = tokens
        self.position = 0
        self.nodes = 0
        self.depth = 0

    def whole(self) -> Tree:
        tree = self._or()
        if self._kind() != "end":
            self._refuse(f"{self._shown()} stands there; an operator or the end was wanted")
        check_size(tree, self.text)
        return tree

    def _kind(self) -> str:
        return self.tokens[self.position][0]

    def _next(self, *operators: str) -> bool:
        kind, text, _ = self.tokens[self.position]
        return kind == "operator" and text in operators

    def _take(self) -> Token:
        token = self.tokens[self.position]
        self.position += 1
        return token

    def _shown(self) -> str:
        kind, text, _ = self.tokens[self.position]
        return text if kind == "end" else repr(text)

    def _refuse(self, problem: str) -> NoReturn:
        _refuse(self.text, self.tokens[self.position][2], problem)

    def _deeper(self) -> None:
        self.depth += 1
        if self.depth > DEEPEST:
            self._refuse(f"a depth of more than {DEEPEST} stands there")

    def _or(self) -> Tree:
        left = self._and()
        while self._next("or"):
            column = self._take()[2]
            left = Or(left, self._and(), column)
        return left

    def _and(self) -> Tree:
        left = self._not()
        while self._next("and"):
            column = self._take()[2]
            left = And(left, self._not(), column)
        return left

    def _not(self) -> Tree:
        if not self._next("not"):
            return self._relation()
        self._deeper()
        column = self._take()[2]
        tree = Not(self._not(), column)
        self.depth -= 1
        return tree

    def _relation(self) -> Tree:
        left = self._sum()
        if not self._next(*RELATIONS):
            return left
        _, operator, column = self._take()
        right = self._sum()
        if self._next(*RELATIONS):
            self._refuse("a second relation stands there; write a < b and b < c")
        return Relation(operator, left, right, column)

    def _sum(self) -> Tree:
        left = self._product()
        while self._next("+", "-"):
            _, operator, column = self._take()
            left = Binary(operator, left, self._product(), column)
        return left

    def _product(self) -> Tree:
        left = self._unary()
        while self._next("*", "/", "mod"):
            _, operator, column = self._take()
            left = Binary(operator, left, self._unary(), column)
        return left

    def _unary(self) -> Tree:
        if not self._next("-"):
            return self._power()
        self._deeper()
        column = self._take()[2]
        tree = Negative(self._unary(), column)
        self.depth -= 1
        return tree

    def _power(self) -> Tree:
        base = self._atom()
        if not self._next("^"):
            return base
        self._deeper()
        column = self._take()[2]
        tree = Binary("^", base, self._unary_power(), column)
        self.depth -= 1
        return tree

    def _unary_power(self) -> Tree:
        if not self._next("-"):
            return self._power()
        column = self._take()[2]
        if self._next("-"):
            self._refuse("a second sign stands there; one was wanted")
        return Negative(self._power(), column)

    def _atom(self) -> Tree:
        kind, text, column = self.tokens[self.position]
        if kind == "number":
            self._take()
            return Number(Fraction(text), column)
        if kind == "name":
            self._take()
            return self._call(text, column) if self._next("(") else Name(text, column)
        if self._next("("):
            self._deeper()
            self._take()
            inner = self._or()
            self._close()
            self.depth -= 1
            return inner
        return self._refuse(f"{self._shown()} stands there; a number, a name or ( was wanted")

    def _call(self, name: str, column: int) -> Tree:
        self._deeper()
        self._take()
        arguments = [self._argument(name)]
        while self._next(","):
            self._take()
            arguments.append(self._argument(name))
        self._close()
        self.depth -= 1
        return Call(name, tuple(arguments), column)

    def _argument(self, name: str) -> Tree:
        kind, text, column = self.tokens[self.position]
        if kind != "quoted":
            return self._or()
        if name != "induced":
            self._refuse("a quoted text stands only as the argument of induced")
        self._take()
        return Quoted(text[1:-1], column)

    def _close(self) -> None:
        if not self._next(")"):
            self._refuse(f"{self._shown()} stands there; ) was wanted")
        self._take()
