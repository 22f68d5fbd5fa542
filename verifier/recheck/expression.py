"""Expressions of a case: precedence parser, canonical text, value and truth at one instance."""

import operator
import re
from collections.abc import Iterator, Mapping
from fractions import Fraction
from functools import cmp_to_key
from math import comb, factorial
from typing import Any, NamedTuple

from . import reals
from .reals import OpenError, OutsideError, Real, RecheckError, canonical, compare, operate, sign

MOST_CHARACTERS, MOST_NODES, MOST_DEPTH = 400, 200, 40
TOKEN = re.compile(
    r"\s*(\d+(?:\.\d+)?(?![\w.])|[A-Za-z_]\w*|<=|>=|!=|[-+*/^()<>=,])", re.ASCII
)
RELATIONS = {"<": operator.lt, "<=": operator.le, "=": operator.eq}
RELATIONS |= {"!=": operator.ne, ">=": operator.ge, ">": operator.gt}
# How tightly what binds; a prefix `not` binds at 3, a prefix minus at 7.
LEVELS = {"or": 1, "and": 2, "+": 5, "-": 5, "*": 6, "/": 6, "mod": 6, "^": 8}
LEVELS |= dict.fromkeys(RELATIONS, 4)


class Tree(NamedTuple):
    """kind: number, name, call, prefix or infix; text: the literal, the name or the operator."""

    kind: str
    text: str
    parts: tuple["Tree", ...] = ()

    def walk(self) -> Iterator["Tree"]:
        """Yield this tree and all below it, in the order of the text but operators first."""
        yield self
        for part in self.parts:
            yield from part.walk()

    def expand(self, definitions: Mapping[str, "Tree"]) -> "Tree":
        """Return the tree with defined names replaced by what they stand for."""
        if self.kind == "name" and self.text in definitions:
            return definitions[self.text]
        return self._replace(parts=tuple(part.expand(definitions) for part in self.parts))

    def depth(self) -> int:
        """Return the number of nodes on the longest way down."""
        return 1 + max((part.depth() for part in self.parts), default=0)

    def write(self, level: int = 0) -> str:
        """Return the canonical text, with the fewest parentheses."""
        if self.kind in ("number", "name"):
            return self.text
        if self.kind == "call":
            return f"{self.text}({', '.join(part.write() for part in self.parts)})"
        if self.kind == "prefix":
            own = 3 if self.text == "not" else 7
            text = ("not " if own == 3 else "-") + self.parts[0].write(own)
        else:
            own = LEVELS[self.text]
            left = self.parts[0].write(own + (own in (4, 8)))
            sign = self.text if self.text in "*/^" else f" {self.text} "
            text = left + sign + self.parts[1].write(7 if own == 8 else own + 1)
        return text if own >= level else f"({text})"


def parse(text: str, definitions: Mapping[str, Tree] = {}) -> Tree:  # noqa: B006 (never changed)
    """Read an expression or condition, with the names of `definitions` replaced."""
    tokens, place = [], 0
    while text[place:].strip():
        found = TOKEN.match(text, place)
        if found is None or len(text) > MOST_CHARACTERS:
            raise RecheckError(f"the expression {text[:60]!r} cannot be read")
        tokens.append(found[1])
        place = found.end()
    tokens.append("the end")
    tokens.reverse()

    def take(*wanted: str) -> str:
        if wanted and tokens[-1] not in wanted:
            raise RecheckError(f"the expression {text[:60]!r} has {tokens[-1]!r} in a wrong place")
        return tokens.pop()

    def climb(level: int) -> Tree:
        left = prefix(level)
        while LEVELS.get(tokens[-1], 0) >= level:
            sign = take()
            right = climb(7 if sign == "^" else LEVELS[sign] + 1)
            left = Tree("infix", sign, (left, right))
            if sign in RELATIONS and tokens[-1] in RELATIONS:
                take("one relation")
        return left

    def prefix(level: int) -> Tree:
        token = take()
        if token == "-" or (token == "not" and level <= 3):
            return Tree("prefix", token, (climb(7 if token == "-" else 3),))
        if token == "(":
            inner = climb(1)
            take(")")
            return inner
        if token[0].isdigit():
            return Tree("number", token)
        if token in LEVELS or token == "not" or not token.isidentifier():
            tokens.append(token)
            take("an operand")
        if tokens[-1] != "(":
            return Tree("name", token)
        parts = []
        while take("(", ",", ")") != ")":
            parts.append(climb(1))
        return Tree("call", token, tuple(parts))

    tree = climb(1)
    take("the end")
    tree = tree.expand(definitions)
    if sum(1 for _ in tree.walk()) > MOST_NODES or tree.depth() > MOST_DEPTH:
        raise RecheckError(f"the expression {text[:60]!r} is too large")
    return tree
