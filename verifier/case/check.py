"""Check that an expression speaks only of what its case has, and that its parts fit together."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from typing import NoReturn

from verifier.case.case import Family, GraphTable, Parameter, Polynomials, SequenceTable
from verifier.errors import ExpressionError
from verifier.expressions.names import names as mentioned
from verifier.expressions.parse import check_exponents
from verifier.expressions.polynomial import coefficients
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
from verifier.registry import PREDICATES, QUANTITIES, Predicate, Quantity, nearest

RESERVED = frozenset({"x", "f", "c", "pi", "p", "q", "n", "N", "k", "r", "where"})
ARITY: Mapping[str, tuple[int, int | None]] = {
    "sqrt": (1, 1), "log": (1, 1), "exp": (1, 1), "floor": (1, 1), "ceil": (1, 1), "abs": (1, 1),
    "min": (2, None), "max": (2, None), "binomial": (2, 2), "factorial": (1, 1), "round": (2, 2),
    "chi": (1, 1), "leading": (1, 1), "value": (2, 2), "disc": (1, 1),
}  # fmt: skip
OF_POLYNOMIAL = frozenset({"leading", "value", "disc"})  # their first argument is f itself
IDENTIFIER_LENGTH = 40


@dataclass
class Names:
    """The names that a case has, gathered while it is read."""

    numbers: set[str] = field(default_factory=set)
    polynomials: set[str] = field(default_factory=set)
    sizes: set[str] = field(default_factory=set)
    defined: set[str] = field(default_factory=set)
    has_prime: bool = False
    has_polynomial: bool = False
    has_sequence: bool = False
    graph_kind: str | None = None

    def refusal(self, name: str) -> str | None:
        """Return why `name` cannot be given to something new, or None."""
        if name in RESERVED:
            return "this name is reserved"
        if name in ARITY or name in QUANTITIES.entries or name in PREDICATES.entries:
            return "this name is a function, quantity or predicate"
        if name in self.numbers | self.polynomials | self.defined:
            return "this name stands above already"
        good = name.isascii() and name.isidentifier() and not name.startswith("_")
        if not good or len(name) > IDENTIFIER_LENGTH or name in ("and", "or", "not", "mod"):
            return "a name of at most 40 letters, digits and _ was wanted"
        return None

    def add_parameter(self, name: str, *, polynomial: bool) -> None:
        """Enter a parameter."""
        (self.polynomials if polynomial else self.numbers).add(name)

    def add_numbers(self, parameters: Sequence[Parameter]) -> None:
        """Enter p and q, as far as the parameters define them."""
        for parameter in parameters:
            if isinstance(parameter, Polynomials | Family):
                self.polynomials.add(parameter.name)
                self.numbers.discard(parameter.name)
        if {"p", "q"} & self.numbers:
            self.has_prime = True
            self.sizes |= {"p", "q"}

    def add_sizes(self, sequence: SequenceTable | None, graph: GraphTable | None) -> None:
        """Enter n, N, k and r, as far as the construction defines them."""
        if sequence is not None:
            self.has_sequence = True
            self.sizes.add("N")
        if graph is not None:
            self.graph_kind = graph.kind
            self.sizes.add("n")
        if self.has_polynomial:
            self.sizes |= {"k", "r"}

    def known(self) -> set[str]:
        """Return every name that has a number as its value."""
        return self.numbers | self.sizes | self.defined | {"pi"}


def check_value(tree: Tree, names: Names, text: str) -> None:
    """Refuse what is no number: conditions, unknown names, wrong arguments.

    Raises
    ------
    ExpressionError
        At the column of the offending part.
    """
    check_exponents(tree, text)
    _value(tree, names, text)


def check_condition(tree: Tree, names: Names, text: str) -> None:
    """Refuse what is no relation, predicate or combination of them."""
    check_exponents(tree, text)
    _condition(tree, names, text)


def check_where(tree: Tree, names: Names, text: str) -> None:
    """Refuse what a condition on parameters cannot speak of: whatever has to be measured."""
    bare = Names(
        numbers=names.numbers,
        polynomials=names.polynomials,
        sizes=names.sizes - {"n", "N"},
        has_prime=names.has_prime,
        has_polynomial=names.has_polynomial,
    )
    check_condition(tree, bare, text)


def check_measured(tree: Tree, names: Names, text: str) -> None:
    """Accept a number, a condition, or the bare name of a swept polynomial."""
    if isinstance(tree, Name) and tree.name in names.polynomials:
        return
    check_exponents(tree, text)
    if _is_condition(tree):
        _condition(tree, names, text)
    else:
        _value(tree, names, text)


def check_reported(tree: Tree, names: Names, text: str) -> None:
    """Accept a quantity or a predicate, and nothing made of them."""
    known = {*QUANTITIES.entries, *PREDICATES.entries}
    if not isinstance(tree, Name | Call):
        _refuse(tree, text, "a quantity or predicate was wanted")
    if tree.name not in known:
        _refuse(
            tree, text, f"{tree.name!r} is no quantity or predicate; {nearest(tree.name, known)}"
        )
    check_measured(tree, names, text)


def check_setting(tree: Tree, names: Names, text: str) -> None:
    """Accept an integer expression in parameters alone, as `length` or `indices` want."""
    check_value(
        tree,
        Names(numbers=names.numbers, sizes=names.sizes & {"p", "q"}, has_prime=names.has_prime),
        text,
    )


def check_polynomial(tree: Tree, names: Names, text: str, *, among_polynomials: bool) -> None:
    """Accept a polynomial in x with rational coefficients and swept names.

    `among_polynomials` says whether it may name swept polynomials, as the sequence's may.
    """
    known = {"x", *names.numbers, *(names.polynomials if among_polynomials else ())}
    _polynomial(tree, known, text)
    if mentioned(tree) <= {"x"}:
        try:
            coefficients(tree, {})
        except ExpressionError as problem:
            raise ExpressionError(text, 0, problem.problem) from problem


def _polynomial(tree: Tree, known: set[str], text: str) -> None:
    match tree:
        case Number():
            return
        case Name(name=name):
            if name not in known:
                _refuse(tree, text, f"{name!r} is unknown in a polynomial; {nearest(name, known)}")
        case Negative(operand=operand):
            _polynomial(operand, known, text)
        case Binary(operator="+" | "-" | "*" | "/" | "^", left=left, right=right):
            _polynomial(left, known, text)
            _polynomial(right, known, text)
        case _:
            _refuse(tree, text, "a polynomial in x with + - * ^ and parentheses was wanted")


def _is_condition(tree: Tree) -> bool:
    match tree:
        case Relation() | And() | Or() | Not():
            return True
        case Name(name=name) | Call(name=name):
            return name in PREDICATES.entries
    return False


def _condition(tree: Tree, names: Names, text: str) -> None:
    match tree:
        case And(left=left, right=right) | Or(left=left, right=right):
            _condition(left, names, text)
            _condition(right, names, text)
        case Not(operand=operand):
            _condition(operand, names, text)
        case Relation(left=left, right=right):
            _value(left, names, text)
            _value(right, names, text)
        case Name(name=name) if name in PREDICATES.entries:
            _entry(tree, PREDICATES.entries[name], (), names, text)
        case Call(name=name, arguments=arguments) if name in PREDICATES.entries:
            _entry(tree, PREDICATES.entries[name], arguments, names, text)
        case Call(name=name) if name not in ARITY and name not in QUANTITIES.entries:
            _refuse(tree, text, f"{name!r} is unknown; {nearest(name, PREDICATES.entries)}")
        case Name(name=name) if name not in names.known() and name not in QUANTITIES.entries:
            known = {*names.known(), *PREDICATES.entries}
            _refuse(tree, text, f"{name!r} is unknown; {nearest(name, known)}")
        case _:
            _refuse(tree, text, "a number stands there; a relation or a predicate was wanted")


def _value(tree: Tree, names: Names, text: str) -> None:
    match tree:
        case Number():
            return
        case Name():
            _name(tree, names, text)
        case Negative(operand=operand):
            _value(operand, names, text)
        case Binary(left=left, right=right):
            _value(left, names, text)
            _value(right, names, text)
        case Call():
            _call(tree, names, text)
        case Quoted():
            _refuse(tree, text, "a quoted text stands only as the argument of induced")
        case _:
            _refuse(tree, text, "a condition stands there; a number was wanted")


def _name(tree: Name, names: Names, text: str) -> None:
    name = tree.name
    if name in names.known():
        return
    if name in QUANTITIES.entries:
        _entry(tree, QUANTITIES.entries[name], (), names, text)
    elif name in PREDICATES.entries:
        _refuse(tree, text, f"the predicate {name} stands there; a number was wanted")
    elif name in names.polynomials or (name == "f" and names.has_polynomial):
        _refuse(tree, text, f"{name} is a polynomial; a number was wanted, as value({name}, 0)")
    elif name in RESERVED:
        _refuse(tree, text, f"{name} is not defined in this case")
    else:
        known = {*names.known(), *QUANTITIES.entries, *ARITY}
        _refuse(tree, text, f"{name!r} is unknown; {nearest(name, known)}")


def _call(tree: Call, names: Names, text: str) -> None:
    name, arguments = tree.name, tree.arguments
    if name in QUANTITIES.entries:
        _entry(tree, QUANTITIES.entries[name], arguments, names, text)
        return
    if name in PREDICATES.entries:
        _refuse(tree, text, f"the predicate {name} stands there; a number was wanted")
    if name not in ARITY:
        known = {*ARITY, *QUANTITIES.entries}
        _refuse(tree, text, f"{name!r} is unknown; {nearest(name, known)}")
    least, most = ARITY[name]
    if len(arguments) < least or (most is not None and len(arguments) > most):
        wanted = str(least) if least == most else f"{least} or more"
        _refuse(tree, text, f"{name} has {len(arguments)} arguments; {wanted} were wanted")
    if (name in OF_POLYNOMIAL or name == "chi") and not names.has_prime:
        _refuse(tree, text, f"{name} works modulo p, and this case has no p")
    if name in OF_POLYNOMIAL:
        _names_f(arguments[0], names, text)
        arguments = arguments[1:]
    for argument in arguments:
        _value(argument, names, text)


def _names_f(argument: Tree, names: Names, text: str) -> None:
    if not (isinstance(argument, Name) and argument.name == "f"):
        _refuse(argument, text, "f, the polynomial of the sequence, was wanted")
    if not names.has_polynomial:
        _refuse(argument, text, "f is not defined in this case")


def _entry(
    tree: Tree, entry: Quantity | Predicate, arguments: Sequence[Tree], names: Names, text: str
) -> None:
    if len(arguments) != len(entry.arguments):
        wanted = len(entry.arguments) or "none"
        _refuse(tree, text, f"{entry.name} has {len(arguments)} arguments; {wanted} were wanted")
    lacking = _lacking(entry, names)
    if lacking is not None:
        _refuse(tree, text, f"{entry.name} speaks of {lacking}, which this case does not have")
    for kind, argument in zip(entry.arguments, arguments, strict=True):
        if kind == "polynomial":
            _names_f(argument, names, text)
            continue
        _value(argument, names, text)
        if isinstance(entry, Quantity) and isinstance(argument, Number):
            orders = entry.orders
            if kind == "order" and orders and argument.value not in orders:
                known = ", ".join(map(str, orders))
                _refuse(
                    argument, text, f"{entry.name} is not supported there; known orders: {known}"
                )


def _lacking(entry: Quantity | Predicate, names: Names) -> str | None:
    """Return what an entry needs and the case lacks, in words, or None."""
    match entry.needs:
        case "sequence" if not names.has_sequence:
            return "a sequence"
        case "character" if not (names.has_polynomial and names.has_prime):
            return "a polynomial over F_p"
        case "polynomial" if not (names.has_polynomial and names.has_prime):
            return "a polynomial over F_p"
        case "circulant" if names.graph_kind != "circulant":
            return "a circulant graph"
        case "graph" | "any-graph" if names.graph_kind is None:
            return "a graph"
    return None


def _refuse(tree: Tree, text: str, problem: str) -> NoReturn:
    raise ExpressionError(text, tree.column, problem)
