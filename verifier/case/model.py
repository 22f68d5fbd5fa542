"""The keys of a case file, as pydantic models: shapes only, no meaning.

Rules and graph kinds bring their own keys, so `[sequence]` and `[graph]` stay open here and are
checked against the registries.
"""

from typing import Annotated, Any, Literal

from pydantic import BaseModel, ConfigDict, Field, StringConstraints

PLAIN = r"^[A-Za-z0-9][A-Za-z0-9_-]*$"
IDENTIFIER = r"^[A-Za-z][A-Za-z0-9_]*$"

PlainName = Annotated[str, StringConstraints(pattern=PLAIN, max_length=64)]
Text = Annotated[str, StringConstraints(max_length=20_000)]
Expression = Annotated[str, StringConstraints(max_length=20_000)]


def _hyphened(name: str) -> str:
    return name.rstrip("_").replace("_", "-")


class Strict(BaseModel):
    """A table whose unknown keys and wrong types are errors."""

    model_config = ConfigDict(
        extra="forbid",
        strict=True,
        frozen=True,
        alias_generator=_hyphened,
        hide_input_in_errors=True,
    )


class PrimesTable(Strict):
    """`{ primes = [5, 401], class = [1, 4] }`."""

    primes: Annotated[list[int | float], Field(min_length=2, max_length=2)]
    class_: Annotated[list[int], Field(min_length=2, max_length=2)] | None = None


class PrimePowersTable(Strict):
    """`{ prime-powers = [5, 125], class = [1, 4] }`."""

    prime_powers: Annotated[list[int | float], Field(min_length=2, max_length=2)]
    class_: Annotated[list[int], Field(min_length=2, max_length=2)] | None = None


class ValuesTable(Strict):
    """`{ values = [2, 3] }`."""

    values: Annotated[list[int], Field(min_length=1, max_length=100_000)]


class PolynomialsTable(Strict):
    """`{ polynomials = ["x^4 + 3"] }`."""

    polynomials: Annotated[list[Expression], Field(min_length=1, max_length=100_000)]


class FamilyTable(Strict):
    """`{ degree = 4, even = true, monic = true, squarefree = true, sample = 25, seed = 7 }`."""

    degree: Annotated[int, Field(ge=0, le=1000)]
    even: bool = False
    monic: bool = False
    squarefree: bool = False
    every: Literal[True] | None = None
    sample: Annotated[int, Field(ge=1, le=100_000)] | None = None
    seed: Annotated[int, Field(ge=0)] | None = None


PARAMETER_TABLES: dict[str, type[Strict]] = {
    "primes": PrimesTable,
    "prime-powers": PrimePowersTable,
    "values": ValuesTable,
    "polynomials": PolynomialsTable,
    "degree": FamilyTable,
}


class MeasureTable(Strict):
    """`[measure]`."""

    quantities: Annotated[list[Expression], Field(min_length=1, max_length=1000)]


class ClaimTable(Strict):
    """`[[claim]]`."""

    name: PlainName
    says: Expression
    given: list[Expression] = []
    source: str | None = None


class TableTable(Strict):
    """`[[table]]`."""

    name: PlainName
    columns: Annotated[list[Expression], Field(min_length=1, max_length=100)]
    heads: list[Text] = []
    expect: str | None = None


class LeastTable(Strict):
    """`[[least]]`."""

    name: PlainName
    says: Expression
    given: list[Expression] = []


class ChooseTable(Strict):
    """`[[choose]]`."""

    name: PlainName
    says: Expression
    size: Annotated[int, Field(ge=1)]
    given: list[Expression] = []


class ProfileTable(Strict):
    """`[profile]`."""

    properties: (
        Literal["all"] | Annotated[list[Annotated[int, Field(ge=1, le=7)]], Field(min_length=1)]
    )


class SourceTable(Strict):
    """`[source.KEY]`."""

    text: Text
    bibtex: Text | None = None


class CaseFile(Strict):
    """A whole case file."""

    format: Literal[1]
    title: Annotated[str, StringConstraints(min_length=1, max_length=300)]
    about: Text = ""
    parameters: dict[str, Any] = {}
    define: dict[str, Expression] = {}
    sequence: dict[str, Any] | None = None
    graph: dict[str, Any] | None = None
    measure: MeasureTable | None = None
    claim: list[ClaimTable] = []
    table: list[TableTable] = []
    least: list[LeastTable] = []
    choose: list[ChooseTable] = []
    profile: ProfileTable | None = None
    source: dict[PlainName, SourceTable] = {}
    notation: dict[str, Text] = {}
