"""Exact real numbers: a rational, or a node that says how an irrational one was made."""

from fractions import Fraction
from functools import cached_property
from typing import Any, Literal

from flint import arb, ctx, fmpq

Operation = Literal["add", "multiply", "divide", "power", "root", "pi", "log", "exp"]


class Node:
    """A real number made by one operation from others; equal when made in the same way.

    Parameters
    ----------
    op
        The operation; `power` has an integer exponent and `root` an integer index as its second
        argument.
    args
        What it was applied to.
    """

    def __init__(self, op: Operation, *args: "Real | int") -> None:
        self.op = op
        self.args = args
        self.rational: tuple[Fraction | None] | None = None  # what `decide` found, once asked
        self._balls: dict[int, arb] = {}

    def __eq__(self, other: object) -> bool:
        if self is other:
            return True
        return (
            isinstance(other, Node)
            and hash(self) == hash(other)
            and (self.op, self.args) == (other.op, other.args)
        )

    def __hash__(self) -> int:
        return self._hash

    def __reduce__(self) -> tuple[Any, ...]:
        return Node, (self.op, *self.args)

    def __repr__(self) -> str:
        return f"Node{(self.op, *self.args)}"

    @cached_property
    def _hash(self) -> int:
        return hash((self.op, self.args))

    @cached_property
    def algebraic(self) -> bool:
        """Whether no pi, log or exp stands below."""
        if self.op in ("pi", "log", "exp"):
            return False
        return all(part.algebraic for part in self.args if isinstance(part, Node))

    @cached_property
    def roots(self) -> frozenset["Node"]:
        """The distinct roots in the making, this one included."""
        below = [part.roots for part in self.args if isinstance(part, Node)]
        own = {self} if self.op == "root" else set()
        return frozenset(own).union(*below)

    @cached_property
    def degree(self) -> int:
        """A bound for the algebraic degree: the product of the indices of the distinct roots."""
        product = 1
        for node in self.roots:
            product *= _index(node)
        return product

    @cached_property
    def bounds(self) -> tuple[int, int]:
        """Bits of u and l with x = U/L, U and L algebraic integers, |U| <= u and |L| <= l.

        The rules of Burnikel, Funke, Mehlhorn, Schirra and Schmitt (2001), rounded up to bits.
        """
        if self.op in ("power", "root"):
            base, size = self.args
            u, low = bounds(_real(base))
            return _power_bounds(u, low, size) if self.op == "power" else _root_bounds(u, low, size)
        (u1, l1), (u2, l2) = (bounds(_real(part)) for part in self.args)
        if self.op == "add":
            return max(u1 + l2, l1 + u2) + 1, l1 + l2
        if self.op == "multiply":
            return u1 + u2, l1 + l2
        return u1 + l2, l1 + u2

    @cached_property
    def separation(self) -> int:
        """Bits s such that the number is 0 or at least 2^-s in absolute value."""
        u, low = self.bounds
        return (self.degree - 1) * u + low

    def ball(self, bits: int) -> arb:
        """Return a ball that holds the number, computed with `bits` bits."""
        if bits not in self._balls:
            with ctx.workprec(bits):
                self._balls[bits] = self._ball(bits)
        return self._balls[bits]

    def _ball(self, bits: int) -> arb:
        if self.op == "pi":
            return arb.pi()
        first = ball(_real(self.args[0]), bits)
        if self.op == "log":
            return first.log()
        if self.op == "exp":
            return first.exp()
        if self.op == "power":
            return first ** int(_whole(self.args[1]))
        if self.op == "root":
            index = int(_whole(self.args[1]))
            return first.sqrt() if index == 2 else first.root(index)
        second = ball(_real(self.args[1]), bits)
        if self.op == "add":
            return first + second
        return first * second if self.op == "multiply" else first / second


Real = Fraction | Node


def ball(x: Real, bits: int) -> arb:
    """Return a ball that holds `x`, computed with `bits` bits."""
    if isinstance(x, Node):
        return x.ball(bits)
    with ctx.workprec(bits):
        return arb(fmpq(x.numerator, x.denominator))


def bounds(x: Real) -> tuple[int, int]:
    """Return the bits of numerator and denominator bounds, as in `Node.bounds`."""
    if isinstance(x, Node):
        return x.bounds
    return abs(x.numerator).bit_length(), (x.denominator - 1).bit_length()


def is_algebraic(x: Real) -> bool:
    """Return whether no pi, log or exp stands in the making of `x`."""
    return x.algebraic if isinstance(x, Node) else True


def _power_bounds(u: int, low: int, size: object) -> tuple[int, int]:
    exponent = _whole(size)
    if exponent < 0:
        return -exponent * low, -exponent * u
    return exponent * u, exponent * low


def _root_bounds(u: int, low: int, size: object) -> tuple[int, int]:
    index = _whole(size)
    if u >= low:
        return -(-(u + (index - 1) * low) // index), low
    return u, -(-((index - 1) * u + low) // index)


def _index(node: Node) -> int:
    return _whole(node.args[1])


def _whole(part: object) -> int:
    if isinstance(part, int):
        return part
    raise TypeError(f"an integer was wanted, not {part!r}")


def _real(part: object) -> Real:
    if isinstance(part, Node | Fraction):
        return part
    raise TypeError(f"a real number was wanted, not {part!r}")
