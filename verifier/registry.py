"""The five kinds of named things, and the decorators that enter them.

A stage folder holds one entry a file; importing the file enters it. Preconditions are data on the
entry, so that a plan checks them before anything is computed.
"""

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from difflib import get_close_matches
from fractions import Fraction
from typing import Any, Generic, Literal, TypeVar

from verifier.errors import CaseError
from verifier.records import Cost, Finding, Measurement, Sizes

KeyKind = Literal["polynomial", "sign", "integer", "text", "values", "file"]
Need = Literal["sequence", "character", "circulant", "graph", "any-graph", "polynomial", "nothing"]
ArgumentKind = Literal["order", "place", "integer", "polynomial"]


@dataclass(frozen=True)
class Key:
    """A key of a rule or a graph kind: its kind, and its default (None: it must be given)."""

    kind: KeyKind
    default: int | None = None
    optional: bool = False


@dataclass(frozen=True)
class Rule:
    """A sequence rule: keyword arguments in, one full period of signs out."""

    name: str
    function: Callable[..., Any]
    definition: str
    source: str
    keys: Mapping[str, Key]
    odd_prime: bool


@dataclass(frozen=True)
class GraphKind:
    """A graph kind: a sequence or a file in, a graph out."""

    name: str
    function: Callable[..., Any]
    definition: str
    source: str
    keys: Mapping[str, Key]
    from_sequence: bool


@dataclass(frozen=True)
class Quantity:
    """A measured number of an instance."""

    name: str
    function: Callable[..., Measurement]
    definition: str
    source: str
    needs: Need
    symbol: str
    arguments: tuple[ArgumentKind, ...]
    orders: tuple[int, ...]
    witness: tuple[str, ...]
    maximum: Callable[..., Fraction | None] | None
    cost: Callable[..., Cost]


@dataclass(frozen=True)
class Predicate:
    """A property that an instance has or has not."""

    name: str
    function: Callable[..., Finding]
    definition: str
    source: str
    needs: Need
    symbol: str
    arguments: tuple[ArgumentKind, ...]
    witness: tuple[str, ...]


Item = TypeVar("Item", Rule, GraphKind, Quantity, Predicate)


@dataclass
class Registry(Generic[Item]):
    """The entries of one kind by name, in the order of their names."""

    kind: str
    entries: dict[str, Item] = field(default_factory=dict)

    def enter(self, entry: Item) -> None:
        """Enter `entry` under its name.

        Raises
        ------
        CaseError
            If the name is taken: two files claim one name.
        """
        if entry.name in self.entries:
            raise CaseError(f"{self.kind} {entry.name} is registered twice")
        self.entries[entry.name] = entry

    def find(self, name: str) -> Item:
        """Return the entry called `name`.

        Raises
        ------
        CaseError
            If there is none: the message names the nearest.
        """
        if name not in self.entries:
            raise CaseError(f"{self.kind} {name!r} is unknown; {nearest(name, self.entries)}")
        return self.entries[name]


def nearest(name: str, known: Any) -> str:  # noqa: ANN401 any iterable of text
    """Return `the nearest is X`, or the whole list where nothing is near.

    Examples
    --------
    >>> nearest("legendree", ["legendre", "inverse"])
    'the nearest is legendre'
    """
    names = sorted(known)
    near = get_close_matches(name, names, n=1, cutoff=0.5)
    return f"the nearest is {near[0]}" if near else f"known: {', '.join(names)}"


RULES: Registry[Rule] = Registry("rule")
GRAPHS: Registry[GraphKind] = Registry("graph kind")
QUANTITIES: Registry[Quantity] = Registry("quantity")
PREDICATES: Registry[Predicate] = Registry("predicate")


def rule(
    name: str, *, definition: str, source: str, keys: Mapping[str, Key], odd_prime: bool = False
) -> Callable[[Callable[..., Any]], Callable[..., Any]]:
    """Enter the decorated function as a sequence rule."""

    def enter(function: Callable[..., Any]) -> Callable[..., Any]:
        RULES.enter(Rule(name, function, definition, source, dict(keys), odd_prime))
        return function

    return enter


def graph(
    name: str,
    *,
    definition: str,
    source: str,
    keys: Mapping[str, Key] | None = None,
    from_sequence: bool = True,
) -> Callable[[Callable[..., Any]], Callable[..., Any]]:
    """Enter the decorated function as a graph kind."""

    def enter(function: Callable[..., Any]) -> Callable[..., Any]:
        GRAPHS.enter(GraphKind(name, function, definition, source, dict(keys or {}), from_sequence))
        return function

    return enter


def _linear(sizes: Sizes, *_: int) -> Cost:
    largest = max(sizes.n, sizes.N, sizes.p)
    return Cost(20 * largest, 32 * largest)


def quantity(  # noqa: PLR0913 an entry has that many facts, all by keyword
    name: str,
    *,
    definition: str,
    source: str,
    needs: Need,
    symbol: str,
    arguments: tuple[ArgumentKind, ...] = (),
    orders: tuple[int, ...] = (),
    witness: tuple[str, ...] = (),
    maximum: Callable[..., Fraction | None] | None = None,
    cost: Callable[..., Cost] = _linear,
) -> Callable[[Callable[..., Measurement]], Callable[..., Measurement]]:
    """Enter the decorated function as a quantity.

    Parameters
    ----------
    name
        As in a case file.
    definition, source
        One sentence in plain text; where it comes from.
    needs
        What an instance must have for it.
    symbol
        LaTeX, with ``{0}``, ``{1}`` for the arguments.
    arguments, orders
        The kind of each argument; the values an `order` may take.
    witness
        Names of the components of the witness; a trailing ``...`` repeats the one before it.
    maximum
        The trivial maximum from `Sizes` and the arguments, where the vocabulary states one.
    cost
        The cost from `Sizes` and the arguments.
    """

    def enter(function: Callable[..., Measurement]) -> Callable[..., Measurement]:
        QUANTITIES.enter(
            Quantity(
                name,
                function,
                definition,
                source,
                needs,
                symbol,
                arguments,
                orders,
                witness,
                maximum,
                cost,
            )
        )
        return function

    return enter


def predicate(  # noqa: PLR0913 an entry has that many facts, all by keyword
    name: str,
    *,
    definition: str,
    source: str,
    needs: Need,
    symbol: str,
    arguments: tuple[ArgumentKind, ...] = (),
    witness: tuple[str, ...] = (),
) -> Callable[[Callable[..., Finding]], Callable[..., Finding]]:
    """Enter the decorated function as a predicate; the parameters are those of `quantity`."""

    def enter(function: Callable[..., Finding]) -> Callable[..., Finding]:
        PREDICATES.enter(
            Predicate(name, function, definition, source, needs, symbol, arguments, witness)
        )
        return function

    return enter
