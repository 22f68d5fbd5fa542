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
    """
    ending = name[name.rfind(".") :] if "." in name else ""
    chosen = form or ENDINGS.get(ending)
    if chosen not in _READERS:
        forms = ", ".join(_READERS)
        raise CaseError(f"[graph] form: {chosen or 'nothing'} stands there; one of {forms} was wanted")
    return Matrix(_READERS[chosen](name, content), "file"), chosen


def _lines(name: str, content: bytes) -> list[tuple[int, str]]:
    """Return the numbered lines that hold something, comments left out."""
    try:
        text = content.decode("ascii")
    except UnicodeDecodeError as problem:
        raise CaseError(f"{name}: byte {problem.start + 1} is no ASCII text") from problem
    numbered = ((number, line.strip()) for number, line in enumerate(text.splitlines(), 1))
    return [(number, line) for number, line in numbered if line and not line.startswith("#")]


def _check_size(name: str, n: int) -> None:
    if not 1 <= n <= MOST_VERTICES:
        raise CaseError(f"{name}: {n} vertices; 1 to {MOST_VERTICES} were wanted")


def _edge_list(name: str, content: bytes) -> NDArray[np.int8]:
    edges: list[tuple[int, int]] = []
    for number, line in _lines(name, content):
        fields = line.split()
        if len(fields) != 2 or not all(re.fullmatch(r"\d{1,9}", field) for field in fields):
            raise CaseError(f"{name}:{number}: {line[:40]!r} stands there; two vertices were wanted")
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
    entries = np.zeros((n, n), np.int8)
    for i, j in edges:
        entries[i, j] = entries[j, i] = 1
    return entries


def _matrix(name: str, content: bytes) -> NDArray[np.int8]:
    rows: list[list[int]] = []
    lines = _lines(name, content)
    _check_size(name, len(lines))
    for number, line in lines:
        fields = list(line) if re.fullmatch(r"[01]+", line) and len(lines) > 1 else _fields(line)
        if not all(re.fullmatch(r"-?\d{1,2}", field) for field in fields):
            raise CaseError(f"{name}:{number}: {line[:40]!r} stands there; entries 0 and 1 were wanted")
        if len(fields) != len(lines):
            raise CaseError(f"{name}:{number}: {len(fields)} entries; {len(lines)} were wanted")
        rows.append([int(field) for field in fields])
    return np.array(rows, dtype=np.int8)


def _fields(line: str) -> list[str]:
    return [field for field in re.split(r"[\s,]+", line) if field]


def _graph6(name: str, content: bytes) -> NDArray[np.int8]:
    return _by_networkx(name, content, "graph6")


def _sparse6(name: str, content: bytes) -> NDArray[np.int8]:
    return _by_networkx(name, content, "sparse6")


def _by_networkx(name: str, content: bytes, form: str) -> NDArray[np.int8]:
    import networkx as nx  # noqa: PLC0415 it costs 0.2 s, and most cases read no graph

    lines = [line for line in content.splitlines() if line.strip()]
    if len(lines) != 1:
        raise CaseError(f"{name}: {len(lines)} lines; one graph on one line was wanted")
    data = lines[0].strip()
    if form == "graph6" and data.startswith(b":"):
        raise CaseError(f"{name}: holds sparse6; graph6 was wanted")
    _check_size(name, _stated_size(name, data, form))
    reader = nx.from_graph6_bytes if form == "graph6" else nx.from_sparse6_bytes
    try:
        found = reader(data)
    except (nx.NetworkXError, ValueError, IndexError) as problem:
        raise CaseError(f"{name}: is no {form}: {problem}") from problem
    if found.is_multigraph():
        found = nx.Graph(found)
    n = found.number_of_nodes()
    entries = np.zeros((n, n), np.int8)
    for i, j in found.edges:
        entries[i, j] = entries[j, i] = 1
    return entries


def _stated_size(name: str, data: bytes, form: str) -> int:
    """Return the number of vertices in the head, before anything is allocated for them."""
    head = data.removeprefix(b">>graph6<<").removeprefix(b">>sparse6<<").removeprefix(b":")
    digits = [byte - 63 for byte in head[:8]]
    if not digits or any(not 0 <= digit <= 63 for digit in digits[:4]):
        raise CaseError(f"{name}: is no {form}")
    if digits[0] < 63:
        return digits[0]
    used = digits[1:4] if len(digits) > 1 and digits[1] < 63 else digits[2:8]
    size = 0
    for digit in used:
        size = size * 64 + digit
    return size


_READERS: Mapping[str, Callable[[str, bytes], NDArray[np.int8]]] = {
    "graph6": _graph6,
    "sparse6": _sparse6,
    "edge-list": _edge_list,
    "matrix": _matrix,
}
