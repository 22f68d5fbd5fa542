"""The records of a case that has been read and checked; no behaviour."""

from collections.abc import Mapping
from dataclasses import dataclass

from verifier.expressions.tree import Tree


@dataclass(frozen=True)
class Condition:
    """An expression as typed, and its tree with the abbreviations of `[define]` expanded."""

    text: str
    tree: Tree
    expanded: Tree


@dataclass(frozen=True)
class Primes:
    """The primes (or prime powers) of the closed interval [first, last], = residue mod modulus."""

    name: str
    first: int
    last: int
    residue: int
    modulus: int
    powers: bool


@dataclass(frozen=True)
class Values:
    """Integers as listed."""

    name: str
    values: tuple[int, ...]


@dataclass(frozen=True)
class Polynomials:
    """Polynomials as typed, and their trees."""

    name: str
    texts: tuple[str, ...]
    trees: tuple[Tree, ...]


@dataclass(frozen=True)
class Family:
    """Polynomials over F_p of one degree: all of them (`sample` is None), or a seeded sample."""

    name: str
    degree: int
    even: bool
    monic: bool
    squarefree: bool
    sample: int | None
    seed: int


Parameter = Primes | Values | Polynomials | Family
Setting = int | str | Condition | tuple[int, ...]


@dataclass(frozen=True)
class SequenceTable:
    """`[sequence]`: the rule, its keys (by their names in the file), and the keys for all rules.

    Polynomials, integers given as expressions and the ends of `indices` are conditions.
    """

    rule: str
    settings: Mapping[str, Setting]
    indices: tuple[Condition, Condition] | None
    symmetrise: str


@dataclass(frozen=True)
class GraphTable:
    """`[graph]`: the kind and its keys."""

    kind: str
    settings: Mapping[str, Setting]


@dataclass(frozen=True)
class Claim:
    """`[[claim]]`: what it says, under which conditions, and a key of `[source]`."""

    name: str
    says: Condition
    given: tuple[Condition, ...]
    source: str | None


@dataclass(frozen=True)
class Table:
    """`[[table]]`: columns, their LaTeX heads (may be empty), and the name of the expected CSV."""

    name: str
    columns: tuple[Condition, ...]
    heads: tuple[str, ...]
    expect: str | None


@dataclass(frozen=True)
class Source:
    """`[source.KEY]`."""

    key: str
    text: str
    bibtex: str | None


@dataclass(frozen=True)
class Case:
    """A case file, read and checked.

    `text` is the file as it stands; `inputs` maps the names of the files that it reads to bytes.
    """

    name: str
    title: str
    about: str
    parameters: tuple[Parameter, ...]
    where: tuple[Condition, ...]
    define: Mapping[str, Condition]
    sequence: SequenceTable | None
    graph: GraphTable | None
    measure: tuple[Condition, ...]
    claims: tuple[Claim, ...]
    tables: tuple[Table, ...]
    sources: Mapping[str, Source]
    notation: Mapping[str, str]
    text: bytes
    inputs: Mapping[str, bytes]
