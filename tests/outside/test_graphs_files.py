"""Graph files against the writers of networkx, and what is refused."""

import networkx as nx
import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from verifier.errors import CaseError
from verifier.graphs.file import file

WRITERS = {"graph6": nx.to_graph6_bytes, "sparse6": nx.to_sparse6_bytes}
GRAPHS = {
    "one": nx.empty_graph(1),
    "two": nx.complete_graph(2),
    "empty": nx.empty_graph(5),
    "petersen": nx.petersen_graph(),
    "complete": nx.complete_graph(8),
    **{
        f"random {n}": nx.gnp_random_graph(n, 0.3, seed=n) for n in (4, 16, 17, 62, 63, 64, 65, 100)
    },
}


def entries(name, content, form=None):
    return file(name=name, content=content, form=form)[0].entries.tolist()


@pytest.mark.parametrize("graph", GRAPHS.values(), ids=GRAPHS)
def test_every_form_gives_the_graph_of_networkx(graph):
    n = len(graph)
    matrix = nx.to_numpy_array(graph, nodelist=range(n)).astype(int).tolist()
    for form, write in WRITERS.items():
        ending = ".g6" if form == "graph6" else ".s6"
        assert entries("a" + ending, write(graph)) == matrix
        assert entries("a" + ending, write(graph, header=False)) == matrix
        assert entries("a", write(graph), form) == matrix
    digits = "\n".join("".join(map(str, row)) for row in matrix)
    spaced = "\n".join(" ".join(map(str, row)) for row in matrix)
    commas = "\r\n".join(", ".join(map(str, row)) for row in matrix) + "\n\n"
    for text in (digits, spaced, commas):
        assert entries("a.matrix", text.encode()) == matrix
    if all(degree for _, degree in graph.degree):
        lines = "# a comment\n\n" + "\n".join(f"{j}\t{i}" for i, j in graph.edges)
        assert entries("a.edges", lines.encode()) == matrix


def test_the_form_is_reported():
    assert file(name="a.edges", content=b"0 1", form=None)[1] == "edge-list"
    assert file(name="a.edges", content=b"01\n10", form="matrix")[1] == "matrix"


def test_repeated_edges_count_once_and_loops_are_seen():
    assert entries("a.edges", b"0 1\n1 0\n0 1\n1 1") == [[0, 1], [1, 1]]
    assert entries("a.s6", b":An") == nx.to_numpy_array(nx.from_sparse6_bytes(b":An")).tolist()


def test_a_matrix_stands_as_it_is():
    assert entries("a.matrix", b"0 2 -1\n1 0 0\n0 0 9") == [[0, 2, -1], [1, 0, 0], [0, 0, 9]]


REFUSED = {
    "no form": ("a.txt", None, b"0 1", "one of graph6, sparse6, edge-list, matrix was wanted"),
    "unknown form": ("a.g6", "gml", b"A_", "gml stands there"),
    "empty edges": ("a.edges", None, b"", "0 vertices"),
    "third column": ("a.edges", None, b"0 1\n0 2 5\n", "a.edges:2: '0 2 5'"),
    "a word": ("a.edges", None, b"0 1\nx 1\n", "a.edges:2"),
    "negative": ("a.edges", None, b"-1 0", "a.edges:1"),
    "underscore": ("a.edges", None, b"1_0 0", "a.edges:1"),
    "gap": ("a.edges", None, b"0 1\n3 1", "vertex 2 is in no edge"),
    "huge vertex": ("a.edges", None, b"0 1\n1 999999999", "1000000000 vertices"),
    "huger vertex": ("a.edges", None, b"0 " + b"9" * 5000, "a.edges:1"),
    "no ASCII": ("a.edges", None, "0 1\n\u0661 2".encode(), "byte 5"),
    "empty matrix": ("a.matrix", None, b"\n\n", "0 vertices"),
    "ragged": ("a.matrix", None, b"01\n1\n", "a.matrix:2: 1 entries; 2 were wanted"),
    "not square": ("a.matrix", None, b"0 1 0\n1 0 0\n", "a.matrix:1: 3 entries; 2"),
    "a letter": ("a.matrix", None, b"0 x\n1 0\n", "a.matrix:1: 'x'"),
    "a large entry": ("a.matrix", None, b"0 300\n1 0\n", "a.matrix:1: '300'"),
    "a fraction": ("a.matrix", None, b"0 0.5\n1 0\n", "a.matrix:1: '0.5'"),
    "comment in a matrix": ("a.matrix", None, b"# x\n01\n10\n", "a.matrix:1"),
    "too many rows": ("a.matrix", None, b"0\n" * 3001, "3001 vertices"),
    "empty graph6": ("a.g6", None, b"", "0 lines"),
    "two graphs": ("a.g6", None, b"A_\nA_\n", "2 lines"),
    "short graph6": ("a.g6", None, b"D", "0 bytes stand behind the head; 5 vertices want 2"),
    "long graph6": ("a.g6", None, b"A__", "2 bytes stand behind the head"),
    "unfilled graph6": ("a.g6", None, b"A~", "not filled up with 0"),
    "byte of graph6": ("a.g6", None, b"D\x01?", "byte 1 stands in it"),
    "high byte": ("a.g6", None, b"D\xff?", "byte 255 stands in it"),
    "no vertices": ("a.g6", None, b"?", "0 vertices"),
    "huge head": ("a.g6", None, b"~~~~~~~~", "68719476735 vertices"),
    "large head": ("a.g6", None, b"~~???~~~", "262143 vertices"),
    "medium head": ("a.g6", None, b"~?p?", "3136 vertices"),
    "cut head": ("a.g6", None, b"~?", "ends before"),
    "cut long head": ("a.g6", None, b"~~?", "ends before"),
    "sparse6 in graph6": ("a.g6", None, b":An", "which is sparse6"),
    "graph6 in sparse6": ("a.s6", None, b"A_", "a colon was wanted"),
    "empty sparse6": ("a.s6", None, b":", "ends before"),
    "huge sparse6": ("a.s6", None, b":~~~~~~~~", "68719476735 vertices"),
    "byte of sparse6": ("a.s6", None, b":A\x80", "byte 128 stands in it"),
}


@pytest.mark.parametrize(("name", "form", "content", "message"), REFUSED.values(), ids=REFUSED)
def test_a_malformed_file_is_an_input_error(name, form, content, message):
    with pytest.raises(CaseError) as caught:
        file(name=name, content=content, form=form)
    assert message in str(caught.value)
    assert "\n" not in str(caught.value)


@given(st.sampled_from([".g6", ".s6", ".edges", ".matrix"]), st.binary(max_size=60))
def test_no_bytes_raise_anything_else(ending, content):
    try:
        graph, _ = file(name="a" + ending, content=content, form=None)
    except CaseError:
        return
    assert graph.entries.shape == (graph.n, graph.n)


@given(st.sampled_from([".g6", ".s6"]), st.text("?@A_~:BCdn", max_size=12))
def test_likely_bytes_are_read_as_networkx_reads_them(ending, text):
    content = text.encode()
    read = nx.from_graph6_bytes if ending == ".g6" else nx.from_sparse6_bytes
    try:
        graph, _ = file(name="a" + ending, content=content, form=None)
    except CaseError:
        return
    other = nx.Graph(read(content.strip()))
    assert graph.entries.tolist() == nx.to_numpy_array(other).astype(np.int8).tolist()
