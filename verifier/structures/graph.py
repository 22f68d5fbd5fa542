"""Graphs: circulant ones by their row, any others by their matrix."""

from dataclasses import dataclass
from functools import cached_property
from typing import Any, Protocol

import numpy as np
from numpy.typing import NDArray

from verifier.kernels.pairs import matrix_pairs
from verifier.structures.sequence import BinarySequence

Pair = tuple[int, int]
LARGE = 1200  # from so many vertices on, compiled code pays for its loading


@dataclass(frozen=True)
class PairStatistics:
    """What all ordered pairs of vertices say together, exact integers.

    Parameters
    ----------
    agreement_twice
        Twice the agreement sum.
    codegree_four
        Four times the codegree sum.
    codegree_min, min_pair, codegree_max, max_pair
        Over pairs i < j, with the least pair that attains them; 0 and None where there is no pair.
    square_sum
        The sum of the squares of all codegrees, i = j included: the trace of A^4.
    """

    agreement_twice: int
    codegree_four: int
    codegree_min: int
    min_pair: Pair | None
    codegree_max: int
    max_pair: Pair | None
    square_sum: int


class Graph(Protocol):
    """What quantities and predicates ask of a graph; degrees and pairs only where it is simple."""

    @property
    def n(self) -> int:
        """The number of vertices."""
        ...

    @property
    def kind(self) -> str:
        """The graph kind, as in a case file."""
        ...

    @property
    def degrees(self) -> NDArray[np.int64]:
        """The degrees, vertex by vertex."""
        ...

    @property
    def pairs(self) -> PairStatistics:
        """The statistics of all pairs."""
        ...

    def entry(self, i: int, j: int) -> int:
        """Return an entry of the matrix."""
        ...

    def defect(self, name: str) -> Pair | None:
        """Return the least (i, j) against a structure predicate, or None where it is true."""
        ...

    def to_networkx(self) -> Any:  # noqa: ANN401 the library ships no types
        """Return the graph as a networkx Graph."""
        ...


@dataclass(frozen=True)
class Circulant:
    """The circulant with row z, z[0] = 0 and z[x] = (1 + e[x])/2."""

    sequence: BinarySequence
    kind: str = "circulant"

    @property
    def n(self) -> int:
        """The number of vertices, that of the terms."""
        return len(self.sequence.signs)

    @cached_property
    def signed_row(self) -> NDArray[np.int8]:
        """s[x] = 2 z[x] - 1, so s[0] = -1."""
        row = self.sequence.signs.copy()
        row[0] = -1
        return row

    @cached_property
    def autocorrelation(self) -> NDArray[np.int64]:
        """The periodic autocorrelation of the signed row."""
        return self.sequence.near_autocorrelation(self.signed_row)

    @property
    def degree(self) -> int:
        """The common degree."""
        return (self.n + int(self.signed_row.sum(dtype=np.int64))) // 2

    @property
    def degrees(self) -> NDArray[np.int64]:
        """The degrees, all equal."""
        return np.full(self.n, self.degree, np.int64)

    @cached_property
    def pairs(self) -> PairStatistics:
        """The statistics of all pairs, from the autocorrelation R of the signed row.

        With E the sum of the row, 4 codeg(i, j) = n + 2 E + R(j - i) and
        2 S(i, j) = n + R(j - i). All sums over a row stay below 3 n^2 < 2^63, but for the squares.
        """
        n, lags = self.n, self.autocorrelation
        twice = 2 * int(self.signed_row.sum(dtype=np.int64))
        codegrees = (lags + (n + twice)) >> 2
        agreement = n * int(np.abs(lags).sum())
        spread = n * int(np.abs(lags + twice).sum())
        squares = n * _sum_of_squares(codegrees)
        if n == 1:
            return PairStatistics(agreement, spread, 0, None, 0, None, squares)
        least, most = int(codegrees[1:].min()), int(codegrees[1:].max())
        first, last = int(codegrees[1:].argmin()) + 1, int(codegrees[1:].argmax()) + 1
        return PairStatistics(agreement, spread, least, (0, first), most, (0, last), squares)

    def entry(self, i: int, j: int) -> int:
        """Return z[(j - i) mod n]."""
        return int(self.signed_row[(j - i) % self.n] + 1) // 2

    def defect(self, name: str) -> Pair | None:
        """Return (0, j) with the least j at which the row is unsymmetric, for `symmetric` alone."""
        if name != "symmetric":
            return None
        wrong = np.flatnonzero(self.signed_row[1:] != self.signed_row[:0:-1])
        return (0, int(wrong[0]) + 1) if len(wrong) else None

    def to_networkx(self) -> Any:  # noqa: ANN401 the library ships no types
        """Return the graph as a networkx Graph."""
        import networkx as nx  # noqa: PLC0415 it costs 0.2 s, and few cases hand over a graph

        half = self.signed_row[: self.n // 2 + 1]
        return nx.circulant_graph(self.n, [int(x) for x in np.flatnonzero(half == 1)])


@dataclass(frozen=True)
class Matrix:
    """A graph by its matrix of small integers.

    Parameters
    ----------
    entries
        n rows of n entries.
    kind
        The graph kind, as in a case file.
    """

    entries: NDArray[np.int8]
    kind: str

    @property
    def n(self) -> int:
        """The number of vertices."""
        return len(self.entries)

    @cached_property
    def degrees(self) -> NDArray[np.int64]:
        """The row sums."""
        sums: NDArray[np.int64] = self.entries.sum(axis=1, dtype=np.int64)
        return sums

    @cached_property
    def pairs(self) -> PairStatistics:
        """The statistics of all pairs, by counting common neighbours."""
        if self.n < LARGE:
            return PairStatistics(*matrix_pairs(self.entries, self.degrees))
        from verifier.kernels.pairs_tiled import (  # noqa: PLC0415 numba costs 0.3 s
            matrix_pairs_tiled,
        )

        return PairStatistics(*matrix_pairs_tiled(self.entries, self.degrees))

    def entry(self, i: int, j: int) -> int:
        """Return an entry of the matrix."""
        return int(self.entries[i, j])

    def defect(self, name: str) -> Pair | None:
        """Return the least (i, j) against a structure predicate, or None where it is true."""
        match name:
            case "zero_one":
                wrong = (self.entries != 0) & (self.entries != 1)
            case "zero_diagonal":
                wrong = np.diag(np.diag(self.entries) != 0)
            case _:
                wrong = self.entries != self.entries.T
        if not wrong.any():
            return None
        place = int(wrong.argmax())
        return place // self.n, place % self.n

    def to_networkx(self) -> Any:  # noqa: ANN401 the library ships no types
        """Return the graph as a networkx Graph."""
        import networkx as nx  # noqa: PLC0415 it costs 0.2 s, and few cases hand over a graph

        made = nx.empty_graph(self.n)
        made.add_edges_from(np.argwhere(np.triu(self.entries)).tolist())
        return made


def _sum_of_squares(numbers: NDArray[np.int64]) -> int:
    """Return the exact sum of squares of integers from 0 to 2^31 - 1."""
    if int(numbers.max()) ** 2 * len(numbers) < 1 << 63:
        return int(np.dot(numbers, numbers))
    return sum(_sum_of_squares(part) for part in np.array_split(numbers, 2))
