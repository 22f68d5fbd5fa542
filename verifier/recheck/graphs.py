"""Graphs: circulants by their row, all others by their matrix; and the readers of graph files."""

import re
from collections.abc import Iterable, Sequence

from .reals import RecheckError

Matrix = Sequence[Sequence[int]]


class Graph:
    """A matrix by its rows (of a circulant the first alone), and the pairs that spoil a graph."""

    def __init__(self, kind: str, n: int, rows: Matrix) -> None:
        self.kind, self.n, self.row = kind, n, rows[0]
        self.defects: dict[str, tuple[tuple[int, int], str]] = {}
        what, columns = "matrix", list(zip(*rows, strict=True))
        if kind == "circulant":
            what, columns = "row", [(rows[0][0], *rows[0][:0:-1])]
        for i, (row, column) in enumerate(zip(map(tuple, rows), columns, strict=True)):
            strange = [j for j in range(n) if row[j] not in (0, 1)] if set(row) - {0, 1} else []
            for j in strange[:1]:
                self._note("zero_one", i, j, f"an entry is not 0 or 1: a({i},{j}) = {row[j]}")
            if row[i]:
                self._note(
                    "zero_diagonal", i, i, f"not zero on the diagonal: a({i},{i}) = {row[i]}"
                )
            for j in [j for j in range(n) if row != column and row[j] != column[j]][:1]:
                pair = f"a({i},{j}) = {row[j]} and a({j},{i}) = {column[j]}"
                self._note("symmetric", i, j, f"the {what} is not symmetric: {pair}")
        bits = [] if self.defects else ["".join(map(str, row)) for row in rows]
        self.bits = [int(row, 2) for row in bits]
        self.degrees = [row.bit_count() for row in self.bits] * (n // len(rows))

    def _note(self, predicate: str, i: int, j: int, words: str) -> None:
        self.defects.setdefault(predicate, ((i, j), words))


def make_graph(kind: str, signs: list[int]) -> Graph:
    """Return the circulant or the Cayley sum graph of a sequence."""
    n, z = len(signs), [(1 + e) // 2 for e in signs]
    if kind not in ("circulant", "cayley-sum"):
        raise RecheckError(f"case.toml: this re-checker does not know the graph kind {kind!r}")
    if kind == "circulant":
        return Graph(kind, n, [[0, *z[1:]]])
    rows = [bytearray(z[i:] + z[:i]) for i in range(n)]
    for i in range(n):
        rows[i][i] = 0
    return Graph(kind, n, rows)


def read_graph(content: bytes, form: str) -> Graph:
    """Read graph6, sparse6 (B. McKay's description, formats.txt), an edge list or a matrix."""
    text = content.decode().strip()
    lines = [re.findall(r"[^\s,]+", line) for line in text.splitlines()]
    if form == "matrix":
        whole = [
            row[0] if len(row) == 1 and set(row[0]) <= {"0", "1"} else row for row in lines if row
        ]
        return Graph("file", len(whole), [[int(cell) for cell in row] for row in whole])
    if form == "edge-list":
        edges = [(int(i), int(j)) for i, j in (row for row in lines if row and row[0][0] != "#")]
        return _undirected(len({i for edge in edges for i in edge}), edges)
    data = [ord(letter) - 63 for letter in text.removeprefix(f">>{form}<<").removeprefix(":")]
    start, stop = (0, 1) if data[0] < 63 else (1, 4) if data[1] < 63 else (2, 8)
    if not set(data) <= set(range(64)):
        raise RecheckError("a graph file has letters that do not belong there")
    bits = "".join(f"{number:06b}" for number in data)
    n, bits = int(bits[6 * start : 6 * stop], 2), bits[6 * stop :]
    if form == "graph6":
        pairs = [(i, j) for j in range(n) for i in range(j)]
        return _undirected(n, [pair for pair, bit in zip(pairs, bits, strict=False) if bit == "1"])
    k, v, edges = (n - 1).bit_length(), 0, []
    for place in range(0, len(bits) - k, k + 1):
        v, x = v + int(bits[place]), int(bits[place + 1 : place + 1 + k] or "0", 2)
        if max(v, x) >= n:
            break
        edges += [(x, v)] if x <= v else []
        v = max(x, v)
    return _undirected(n, edges)


def _undirected(n: int, edges: Iterable[tuple[int, int]]) -> Graph:
    rows = [bytearray(n) for _ in range(n)]
    for i, j in edges:
        if not 0 <= min(i, j) <= max(i, j) < n:
            raise RecheckError(f"the vertices of an edge list must be 0..{n - 1}")
        rows[i][j] = rows[j][i] = 1
    return Graph("file", n, rows)
