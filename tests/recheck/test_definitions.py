"""The re-checker's quantities against the definitions written out, and its readers of graphs."""

import itertools
import math
import random

import networkx
import pytest

from verifier.recheck import quantities
from verifier.recheck.graphs import make_graph, read_graph
from verifier.recheck.instance import read_signs
from verifier.recheck.reals import RecheckError

DRAW = random.Random(5)
WORDS = [[1], [-1, 1], [1] * 6, [1, -1] * 5] + [
    [DRAW.choice((1, -1)) for _ in range(n)] for n in (3, 5, 8, 12, 13)
]


class Subject:
    """What the functions of quantities.py look at."""

    def __init__(self, e, graph=None):
        self.signs = self.characters = e
        self.length = self.p = len(e)
        self.graph = graph

    def spend(self, _steps):
        pass


def largest(rows):
    """Return the largest absolute sum and its least witness; 0 and None for no rows."""
    return max(
        ((abs(v), w) for v, w in rows), key=lambda r: (r[0], [-x for x in r[1]]), default=(0, None)
    )


@pytest.mark.parametrize("e", WORDS)
def test_sequence_quantities(e):
    s, n = Subject(e), len(e)
    progressions = (
        (sum(e[a + j * b] for j in range(t)), (b, a, t))
        for b in range(1, n + 1) for a in range(n) for t in range(1, n + 1) if a + (t - 1) * b < n
    )  # fmt: skip
    assert quantities.well_distribution(s) == largest(progressions)
    for order in (1, 2, 3):
        rows = (
            (sum(math.prod(e[x + d] for d in lags) for x in range(m)), (*lags, m))
            for lags in itertools.combinations(range(n), order) for m in range(1, n - lags[-1] + 1)
        )  # fmt: skip
        assert quantities.correlation(s, order) == largest(rows)
    shifts = [sum(e[x] * e[(x + d) % n] for x in range(n)) for d in range(n)]
    assert quantities.autocorrelation(e, s.spend) == shifts
    assert quantities.DEFINED["out_of_phase"](s) == largest(
        (r, (d,)) for d, r in enumerate(shifts) if d
    )


@pytest.mark.parametrize("e", WORDS[1:])
def test_character_sums(e):
    s, n = Subject([0, *e[1:]]), len(e)
    e = s.characters
    windows = ((sum(e[a:b]), (a, b)) for a in range(n + 1) for b in range(a, n + 1))
    assert quantities.DEFINED["incomplete_sum"](s) == largest(windows)
    cyclic = (
        (sum(e[x % n] for x in range(a, b)), (a, b)) for a in range(n) for b in range(a, a + n + 1)
    )
    assert quantities.cyclic_incomplete_sum(s) == largest(cyclic)
    for a, b in itertools.product(range(-n, 2 * n + 2), repeat=2):
        assert quantities.window_sum(s, a, b) == sum(e[x % n] for x in range(a, b))


def pair_quantities(a):
    """Compute from the matrix, by the definitions."""
    n = len(a)
    degree = [sum(row) for row in a]
    common = [[sum(x & y for x, y in zip(r, t, strict=True)) for t in a] for r in a]
    agree = [[sum(x == y for x, y in zip(r, t, strict=True)) for t in a] for r in a]
    cycles = sum(
        a[i][j] * a[j][k] * a[k][m] * a[m][i] for i, j, k, m in itertools.permutations(range(n), 4)
    )
    pairs = list(itertools.combinations(range(n), 2))
    low = min(((common[i][j], (i, j)) for i, j in pairs), default=0)
    high = max(((common[i][j], (-i, -j)) for i, j in pairs), default=0)
    return {
        "agreement_sum": sum(abs(2 * v - n) for row in agree for v in row) / 2,
        "codegree_sum": sum(abs(4 * v - n) for row in common for v in row) / 4,
        "codegree_min": low,
        "codegree_max": (high[0], (-high[1][0], -high[1][1])) if high else 0,
        "closed_walks": sum(v * v for row in common for v in row),
        "cycles": cycles,
    }, degree  # fmt: skip


GRAPHS = [networkx.gnp_random_graph(n, 0.5, seed=n) for n in (1, 2, 5, 9, 12)]


@pytest.mark.parametrize("known", GRAPHS, ids=len)
def test_graphs_read_and_measured(known):
    n = len(known)
    a = [[int(known.has_edge(i, j)) for j in range(n)] for i in range(n)]
    texts = {
        "graph6": networkx.to_graph6_bytes(known),
        "sparse6": networkx.to_sparse6_bytes(known),
        "matrix": "\n".join(" ".join(map(str, row)) for row in a).encode(),
    }
    expected, degrees = pair_quantities(a)
    for form, content in texts.items():
        graph = read_graph(content, form)
        assert (graph.n, graph.degrees, graph.defects) == (n, degrees, {}), form
        assert quantities.pair_statistics(Subject([], graph)) == expected, form


@pytest.mark.parametrize("n", [62, 63, 70])
def test_the_two_headers_of_graph6(n):
    known = networkx.gnp_random_graph(n, 0.3, seed=n)
    for content, form in (
        (networkx.to_graph6_bytes(known, header=False), "graph6"),
        (networkx.to_sparse6_bytes(known, header=False), "sparse6"),
    ):
        assert read_graph(content, form).degrees == [d for _, d in sorted(known.degree())]


@pytest.mark.parametrize("n", [1, 2, 3, 8, 11])
def test_circulant_and_sum_graph(n):
    half = [DRAW.choice((1, -1)) for _ in range(n)]
    e = [half[min(x, n - x)] for x in range(n)]
    z = [(1 + v) // 2 for v in e]
    for kind, entry in (
        ("circulant", lambda i, j: z[(j - i) % n]),
        ("cayley-sum", lambda i, j: z[(i + j) % n]),
    ):
        a = [[entry(i, j) if i != j else 0 for j in range(n)] for i in range(n)]
        graph = make_graph(kind, e)
        assert (graph.n, graph.defects) == (n, {})
        expected, degrees = pair_quantities(a)
        assert graph.degrees == degrees
        assert quantities.pair_statistics(Subject(e, graph)) == expected


@pytest.mark.parametrize(
    ("content", "form", "defects"),
    [
        (b"0 1\n0 0\n", "matrix", {"symmetric": ((0, 1), "the matrix is not symmetric: a(0,1) = 1 and a(1,0) = 0")}),
        (b"00\n01\n", "matrix", {"zero_diagonal": ((1, 1), "not zero on the diagonal: a(1,1) = 1")}),
        (b"0,2\n2,0", "matrix", {"zero_one": ((0, 1), "an entry is not 0 or 1: a(0,1) = 2")}),
        (b"# loop\n0 0\n0 1\n\n1 0\n", "edge-list", {"zero_diagonal": ((0, 0), "not zero on the diagonal: a(0,0) = 1")}),
    ],
)  # fmt: skip
def test_what_spoils_a_graph(content, form, defects):
    assert read_graph(content, form).defects == defects


def test_the_row_that_is_not_symmetric():
    words = "the row is not symmetric: a(0,1) = 1 and a(1,0) = 0"
    assert make_graph("circulant", [1, 1, 1, -1, -1]).defects == {"symmetric": ((0, 1), words)}


@pytest.mark.parametrize(
    ("content", "form"),
    [(b"0 1 5\n", "edge-list"), (b"0 3\n", "edge-list"), (b"0 1\n1\n", "matrix"), (b"x\n", "matrix"),
     (b"0 -1\n", "edge-list"), (b"D\x01", "graph6"), (b"\xff", "graph6"), (b"", "matrix")],
)  # fmt: skip
def test_graph_files_refused(content, form):
    with pytest.raises((RecheckError, ValueError, IndexError)):
        read_graph(content, form)


@pytest.mark.parametrize(
    ("text", "signs"),
    [("1 -1, +1", [1, -1, 1]), ("++-", [1, 1, -1]), ("+ -\n+", [1, -1, 1]), ("0110", [1, -1, -1, 1]),
     ("1 1 1", [1, 1, 1]), ("1 0", [-1, 1]), ("11", [-1, -1])],
)  # fmt: skip
def test_signs_read(text, signs):
    assert read_signs(text) == signs


def test_signs_refused():
    with pytest.raises(RecheckError):
        read_signs("+ 0")
