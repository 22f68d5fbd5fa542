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
        what = "row" if kind == "circulant" else "matrix"
        columns = (
            list(zip(*rows, strict=True))
            if kind != "circulant"
            else [[*rows[0][:1], *rows[0][:0:-1]]]
        )
        for i, (row, column) in enumerate(zip(rows, columns, strict=True)):
            for j in range(n) if set(row) - {0, 1} else ():
                if row[j] not in (0, 1):
                    self._note("zero_one", i, j, f"an entry is not 0 or 1: a({i},{j}) = {row[j]}")
            if row[i]:
                self._note(
                    "zero_diagonal", i, i, f"not zero on the diagonal: a({i},{i}) = {row[i]}"
                )
            if tuple(row) != tuple(column):
                j = next(j for j in range(n) if row[j] != column[j])
                pair = f"a({i},{j}) = {row[j]} and a({j},{i}) = {column[j]}"
                self._note("symmetric", i, j, f"the {what} is not symmetric: {pair}")
        bits = [] if self.defects else ["".join(map(str, row)) for row in rows]
        self.bits = [int(row, 2) for row in bits]
        self.degrees = [row.bit_count() for row in self.bits] * (n // len(rows))

    def _note(self, predicate: str, i: int, j: int, words: str) -> None:
        self.defects.setdefault(predicate, ((i, j), words))


def make_graph(kind: str, signs: list[int]) -> Graph:
    """Return the circulant or Cayley sum graph of a sequence."""
    n, z = len(signs), [(1 + e) // 2 for e in signs]
    if kind == "circulant":
        return Graph(kind, n, [[0, *z[1:]]])
    if kind != "cayley-sum":
        raise RecheckError(f"this re-checker does not know the graph kind {kind!r}")
    return Graph(
        kind,
        n,
        [bytes(z[i:] + z[:i])[:i] + b"\0" + bytes(z[i:] + z[:i])[i + 1 :] for i in range(n)],
    )


def read_graph(content: bytes, form: str) -> Graph:
    """Read graph6, sparse6 (B. McKay, formats.txt of nauty), an edge list or a matrix."""
    text = content.decode().strip()
    if form == "matrix":
        lines = [re.findall(r"[^\s,]+", line) for line in text.splitlines() if line.strip()]
        cells = [
            line[0] if len(line) == 1 and not set(line[0]) - {"0", "1"} else line for line in lines
        ]
        return Graph("file", len(cells), [[int(cell) for cell in row] for row in cells])
    if form == "edge-list":
        lines = [
            line.split() for line in text.splitlines() if line.strip() and line.strip()[0] != "#"
        ]
        pairs = [(int(i), int(j)) for i, j in lines]
        n = len({i for pair in pairs for i in pair})
        return _undirected(n, pairs)
    text = text.removeprefix(f">>{form}<<").removeprefix(":")
    data = [ord(letter) - 63 for letter in text]
    start, length = (0, 1) if data[0] < 63 else (1, 3) if data[1] < 63 else (2, 6)
    bits = "".join(f"{number:06b}" for number in data)
    n = int(bits[6 * start : 6 * (start + length)], 2)
    bits = bits[6 * (start + length) :]
    if set(data) - set(range(64)) or n > 3000:
        raise RecheckError("a graph file cannot be read or has more than 3000 vertices")
    if form == "graph6":
        pairs = [(i, j) for j in range(n) for i in range(j)]
        if len(bits) != -(-len(pairs) // 6) * 6:
            raise RecheckError("a graph6 file of wrong length")
        return _undirected(n, [pair for pair, bit in zip(pairs, bits, strict=False) if bit == "1"])
    k, v, pairs = (n - 1).bit_length(), 0, []
    for place in range(0, len(bits) - k, k + 1):
        v, x = v + (bits[place] == "1"), int(bits[place + 1 : place + 1 + k] or "0", 2)
        if max(v, x) >= n:
            break
        if x <= v:
            pairs.append((x, v))
        v = max(x, v)
    return _undirected(n, pairs)


def _undirected(n: int, pairs: Iterable[tuple[int, int]]) -> Graph:
    rows = [bytearray(n) for _ in range(n)]
    for i, j in pairs:
        rows[i][j] = rows[j][i] = 1
    return Graph("file", n, rows)
