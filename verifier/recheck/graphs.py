"""Graphs as rows of bits (one Python integer a vertex), and the readers of graph files."""

import re
from collections.abc import Iterable, Iterator

from .reals import RecheckError

Defect = tuple[tuple[int, int], str]


class Graph:
    """A matrix: the first row of a circulant, or rows of bits; with what keeps it from a graph."""

    def __init__(self, n: int, kind: str, row: list[int], rows: list[int]) -> None:
        self.n, self.kind, self.row, self.rows = n, kind, row, rows
        self.degrees = [sum(row)] * n if row else [bits.bit_count() for bits in rows]
        self.defects: dict[str, Defect] = {}  # predicate -> least pair that shows it false, in words
        loop = next((i for i, bits in enumerate(rows) if bits >> i & 1), -1)
        if loop >= 0:
            self.note("zero_diagonal", loop, loop, f"not zero on the diagonal: a({loop},{loop}) = 1")

    def note(self, predicate: str, i: int, j: int, words: str) -> None:
        """Record that a predicate is false, by the entry (i, j)."""
        self.defects[predicate] = ((i, j), words)


def unsymmetric(graph: Graph, what: str, i: int, j: int, entries: tuple[int, int]) -> None:
    """Record that a_ij and a_ji differ."""
    a, b = entries
    words = f"the {what} is not symmetric: a({i},{j}) = {a} and a({j},{i}) = {b}"
    graph.note("symmetric", i, j, words)


def circulant(signs: list[int]) -> Graph:
    """Return the circulant with z_0 = 0 and z_x = (1 + e_x)/2."""
    z, n = [0] + [(1 + e) // 2 for e in signs[1:]], len(signs)
    graph = Graph(n, "circulant", z, [])
    d = next((d for d in range(1, n) if z[d] != z[n - d]), 0)
    if d:
        unsymmetric(graph, "row", 0, d, (z[d], z[n - d]))
    return graph


def cayley_sum(signs: list[int]) -> Graph:
    """Return the graph with a_ij = (1 + e_(i+j mod n))/2 off the diagonal."""
    n = len(signs)
    twice = sum(1 << x for x in range(2 * n) if signs[x % n] == 1)
    rows = [(twice >> i) % (1 << n) & ~(1 << i) for i in range(n)]
    return Graph(n, "cayley-sum", [], rows)


def _matrix(text: str) -> Graph:
    lines = [re.split(r"[\s,]+", line.strip().strip(",")) for line in text.splitlines() if line.strip()]
    entries = [
        tuple(map(int, row[0] if len(row) == 1 and set(row[0]) <= set("01") else row)) for row in lines
    ]
    n = len(entries)
    if any(len(row) != n for row in entries):
        raise RecheckError("the matrix is not square")
    bits = [sum(1 << j for j, a in enumerate(row) if a) for row in entries]
    graph = Graph(n, "file", [], bits)
    for i, row in enumerate(entries):
        if "zero_one" not in graph.defects and not set(row) <= {0, 1}:
            j = next(j for j, a in enumerate(row) if a not in (0, 1))
            graph.note("zero_one", i, j, f"an entry is not 0 or 1: a({i},{j}) = {row[j]}")
        if "zero_diagonal" not in graph.defects or row[i] == ...:
            pass
    return graph
