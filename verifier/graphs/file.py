"""Graphs read from a file beside the case."""

import re
from collections.abc import Callable, Mapping

import numpy as np
from numpy.typing import NDArray

from verifier.errors import CaseError
from verifier.registry import Key, graph
from verifier.structures.graph import Matrix

MOST_VERTICES = 3000
ENDINGS = {".g6": "graph6", ".s6": "sparse6", ".edges": "edge-list", ".matrix": "matrix"}
ENTRY = re.compile(r"-?[0-9]{1,2}")
VERTEX = re.compile(r"[0-9]{1,9}")


@graph(
    "file",
    definition="read from graph6, sparse6, an edge list or a matrix of integers",
    source="common-practice",
    keys={"file": Key("file"), "form": Key("text", optional=True)},
    from_sequence=False,
)
def file(*, name: str, content: bytes, form: str | None) -> tuple[Matrix, str]:
    """Return the graph of a file, and the form in which it was read.

    Parameters
    ----------
    name
        The name of the file, which tells the form unless `form` does.
    content
        Its bytes.
    form
        graph6, sparse6, edge-list or matrix.

    Raises
    ------
    CaseError
        If the file is not of that form, or has more than 3,000 vertices.

    Notes
    -----
    A matrix is taken as it stands, symmetric or not; the other forms are undirected, and count a
    repeated edge once. Cost: n^2 operations.
    """
    ending = name[name.rfind(".") :] if "." in name else ""
    chosen = form or ENDINGS.get(ending) or "nothing"
    if chosen not in _READERS:
        forms = ", ".join(_READERS)
        raise CaseError(f"[graph] form: {chosen[:40]} stands there; one of {forms} was wanted")
    return Matrix(_READERS[chosen](name, content), "file"), chosen


def _lines(name: str, content: bytes) -> list[tuple[int, str]]:
    """Return the numbered lines that hold something."""
    try:
        text = content.decode("ascii")
    except UnicodeDecodeError as problem:
        raise CaseError(f"{name}: byte {problem.start + 1} is no ASCII text") from problem
    numbered = ((number, line.strip()) for number, line in enumerate(text.splitlines(), 1))
    return [(number, line) for number, line in numbered if line]


def _check_size(name: str, n: int) -> None:
    if not 1 <= n <= MOST_VERTICES:
        raise CaseError(f"{name}: {n} vertices; 1 to {MOST_VERTICES} were wanted")


def _undirected(n: int, edges: NDArray[np.int64]) -> NDArray[np.int8]:
    entries = np.zeros((n, n), np.int8)
    entries[edges[:, 0], edges[:, 1]] = 1
    entries[edges[:, 1], edges[:, 0]] = 1
    return entries


def _edge_list(name: str, content: bytes) -> NDArray[np.int8]:
    edges: list[tuple[int, int]] = []
    for number, line in _lines(name, content):
        if line.startswith("#"):
            continue
        fields = line.split()
        if len(fields) != 2 or not all(VERTEX.fullmatch(field) for field in fields):
            shown = line[:40]
            raise CaseError(f"{name}:{number}: {shown!r} stands there; two vertices were wanted")
        edges.append((int(fields[0]), int(fields[1])))
    named = {vertex for edge in edges for vertex in edge}
    n = max(named, default=-1) + 1
    _check_size(name, n)
    missing = next((vertex for vertex in range(n) if vertex not in named), None)
    if missing is not None:
        raise CaseError(
            f"{name}: vertex {missing} is in no edge; an edge list names every vertex 0..{n - 1}, "
            "else a matrix or graph6 was wanted"
        )
    return _undirected(n, np.array(edges, np.int64))


def _matrix(name: str, content: bytes) -> NDArray[np.int8]:
    lines = _lines(name, content)
    n = len(lines)
    _check_size(name, n)
    entries = np.zeros((n, n), np.int8)
    for row, (number, line) in zip(entries, lines, strict=True):
        fields = list(line) if re.fullmatch(r"[01]+", line) else _fields(line)
        if len(fields) != n:
            raise CaseError(f"{name}:{number}: {len(fields)} entries; {n} were wanted")
        wrong = next((field for field in fields if not ENTRY.fullmatch(field)), None)
        if wrong is not None:
            raise CaseError(f"{name}:{number}: {wrong[:20]!r} stands there; 0 or 1 was wanted")
        row[:] = [int(field) for field in fields]
    return entries


def _fields(line: str) -> list[str]:
    return [field for field in re.split(r"[\s,]+", line) if field]


def _graph6(name: str, content: bytes) -> NDArray[np.int8]:
    """Return the graph of the upper triangle, column by column, six bits a byte, filled with 0."""
    data = _body(name, content, "graph6")
    n, head = _stated_size(name, data, "graph6")
    pairs = n * (n - 1) // 2
    if len(data) - head != -(-pairs // 6):
        raise CaseError(
            f"{name}: is no graph6: {len(data) - head} bytes stand behind the head; {n} vertices "
            f"want {-(-pairs // 6)}"
        )
    digits = np.frombuffer(data, np.uint8, offset=head) - np.uint8(63)
    bits = np.unpackbits(digits[:, None], axis=1)[:, 2:].reshape(-1)
    if bits[pairs:].any():
        raise CaseError(f"{name}: is no graph6: its last byte is not filled up with 0")
    entries = np.zeros((n, n), np.int8)
    entries[np.tril_indices(n, -1)] = bits[:pairs]
    return entries | entries.T


def _sparse6(name: str, content: bytes) -> NDArray[np.int8]:
    """Return the graph of a list of edges; repeated ones and loops are kept as entries 1."""
    import networkx as nx  # noqa: PLC0415 it costs 0.2 s, and most cases read no graph

    data = _body(name, content, "sparse6")
    n, _ = _stated_size(name, data[1:], "sparse6")
    try:
        found = nx.from_sparse6_bytes(data)
    except (nx.NetworkXError, ValueError, IndexError) as problem:
        raise CaseError(f"{name}: is no sparse6: {problem}") from problem
    edges = np.array([(i, j) for i, j, *_ in found.edges], np.int64).reshape(-1, 2)
    return _undirected(n, edges)


def _body(name: str, content: bytes, form: str) -> bytes:
    """Return the one line of a file without its optional heading, in its bytes 63..126."""
    lines = [line.strip() for line in content.splitlines() if line.strip()]
    if len(lines) != 1:
        raise CaseError(f"{name}: {len(lines)} lines; one graph on one line was wanted")
    data = lines[0].removeprefix(b">>%s<<" % form.encode("ascii"))
    if data.startswith(b":") != (form == "sparse6"):
        wanted = "a colon" if form == "sparse6" else "no colon, which is sparse6,"
        raise CaseError(f"{name}: is no {form}: {wanted} was wanted at its head")
    wrong = re.search(rb"[^?-~]", data.removeprefix(b":"))
    if wrong:
        raise CaseError(f"{name}: is no {form}: byte {wrong[0][0]} stands in it, not 63 to 126")
    return data


def _stated_size(name: str, data: bytes, form: str) -> tuple[int, int]:
    """Return the number of vertices and where the head that states it ends.

    The head is one, three or six digits of six bits; the number is checked before anything is
    allocated for it.
    """
    start, end = (0, 1) if data[:1] != b"~" else (1, 4) if data[1:2] != b"~" else (2, 8)
    head = data[start:end]
    if len(head) < end - start:
        raise CaseError(f"{name}: is no {form}: it ends before the number of vertices does")
    n = int("".join(f"{byte - 63:06b}" for byte in head), 2)
    _check_size(name, n)
    return n, end


_READERS: Mapping[str, Callable[[str, bytes], NDArray[np.int8]]] = {
    "graph6": _graph6,
    "sparse6": _sparse6,
    "edge-list": _edge_list,
    "matrix": _matrix,
}
