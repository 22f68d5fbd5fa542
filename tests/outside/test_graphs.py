"""Graph quantities against networkx, naive counts and closed forms of the literature."""

from fractions import Fraction
from itertools import permutations

import networkx as nx
import numpy as np
import pytest
from sympy import primerange

from verifier import catalogue
from verifier.errors import CaseError, UndefinedError
from verifier.graphs.cayley_sum import cayley_sum
from verifier.graphs.circulant import circulant
from verifier.predicates.regular import regular
from verifier.predicates.symmetric import symmetric
from verifier.predicates.zero_diagonal import zero_diagonal
from verifier.predicates.zero_one import zero_one
from verifier.quantities.agreement_sum import agreement_sum
from verifier.quantities.closed_walks import closed_walks
from verifier.quantities.codegree_max import codegree_max
from verifier.quantities.codegree_min import codegree_min
from verifier.quantities.codegree_sum import codegree_sum
from verifier.quantities.cycles import cycles
from verifier.quantities.degree_max import degree_max
from verifier.quantities.degree_min import degree_min
from verifier.quantities.density import density
from verifier.quantities.edges import edges
from verifier.records import Sizes
from verifier.registry import QUANTITIES
from verifier.rules.legendre import legendre
from verifier.structures.character import Character
from verifier.structures.graph import Matrix, _sum_of_squares
from verifier.structures.sequence import BinarySequence
from verifier.structures.subject import Subject

DRAWN = np.random.default_rng(5)


def of_graph(graph):
    return Subject(None, None, None, None, graph)


def of_networkx(graph):
    order = range(len(graph))
    return of_graph(Matrix(nx.to_numpy_array(graph, nodelist=order).astype(np.int8), "file"))


def paley(p, polynomial=(1, 0)):
    character = Character(p, polynomial)
    sequence = legendre(p=p, polynomial=polynomial, character=character, at_zero=1)
    return Subject(p, polynomial, character, sequence, circulant(sequence))


def symmetric_word(n):
    half = DRAWN.choice([1, -1], n // 2 + 1)
    return BinarySequence(np.array([half[min(x, n - x)] for x in range(n)], np.int8))


def naive(graph):
    """Return every quantity by definition, from adjacency as networkx sees it."""
    n = len(graph)
    a = [[int(graph.has_edge(i, j)) for j in range(n)] for i in range(n)]
    common = [[sum(a[i][x] & a[j][x] for x in range(n)) for j in range(n)] for i in range(n)]
    agree = [[sum(a[i][x] == a[j][x] for x in range(n)) for j in range(n)] for i in range(n)]
    pairs = [(i, j) for i in range(n) for j in range(i + 1, n)]
    degrees = [graph.degree(i) for i in range(n)]
    least = min((common[i][j] for i, j in pairs), default=0)
    most = max((common[i][j] for i, j in pairs), default=0)
    return {
        "edges": (graph.number_of_edges(), None),
        "density": (Fraction(2 * graph.number_of_edges(), n * (n - 1)) if n > 1 else None, None),
        "degree_min": (min(degrees), (degrees.index(min(degrees)),)),
        "degree_max": (max(degrees), (degrees.index(max(degrees)),)),
        "agreement_sum": (sum(abs(s - Fraction(n, 2)) for row in agree for s in row), None),
        "codegree_sum": (sum(abs(c - Fraction(n, 4)) for row in common for c in row), None),
        "codegree_min": (least, next((p for p in pairs if common[p[0]][p[1]] == least), None)),
        "codegree_max": (most, next((p for p in pairs if common[p[0]][p[1]] == most), None)),
        "closed_walks": (sum(c * c for row in common for c in row), None),
        "cycles": (
            sum(a[i][j] & a[j][k] & a[k][m] & a[m][i] for i, j, k, m in permutations(range(n), 4)),
            None,
        ),
    }


def measured(subject):
    without_order = (
        edges, degree_min, degree_max, agreement_sum, codegree_sum, codegree_min, codegree_max,
    )  # fmt: skip
    found = {one.__name__: one(subject) for one in without_order}
    found |= {one.__name__: one(subject, 4) for one in (closed_walks, cycles)}
    if subject.graph.n > 1:
        found["density"] = density(subject)
    return {name: (one.value, one.witness) for name, one in found.items()}


def expected(graph):
    found = naive(graph)
    return found if len(graph) > 1 else {k: v for k, v in found.items() if k != "density"}


SMALL = {
    "one vertex": nx.empty_graph(1),
    "two apart": nx.empty_graph(2),
    "an edge": nx.complete_graph(2),
    "three apart": nx.empty_graph(3),
    "a path": nx.path_graph(4),
    "a star": nx.star_graph(5),
    "complete": nx.complete_graph(7),
    "bipartite": nx.complete_bipartite_graph(3, 4),
    "Petersen": nx.petersen_graph(),
    "wheel": nx.wheel_graph(8),
    **{f"random {seed}": nx.gnp_random_graph(9 + seed, 0.5, seed=seed) for seed in range(4)},
}


@pytest.mark.parametrize("graph", SMALL.values(), ids=SMALL)
def test_a_matrix_graph_is_measured_as_defined(graph):
    assert measured(of_networkx(graph)) == expected(graph)


@pytest.mark.parametrize("n", [1, 2, 3, 4, 5, 8, 11, 12])
def test_a_circulant_is_measured_as_the_graph_of_networkx(n):
    sequence = symmetric_word(n)
    graph = circulant(sequence)
    other = nx.circulant_graph(n, [x for x in range(1, n) if sequence.signs[x] == 1])
    assert nx.utils.graphs_equal(graph.to_networkx(), other)
    assert measured(of_graph(graph)) == expected(other)
    assert regular(of_graph(graph)).value


@pytest.mark.parametrize("n", [1, 2, 5, 8, 11])
def test_a_sum_graph_is_its_definition(n):
    word = DRAWN.choice([1, -1], n)
    graph = cayley_sum(BinarySequence(word.astype(np.int8)))
    other = nx.empty_graph(n)
    other.add_edges_from((i, j) for i in range(n) for j in range(i) if word[(i + j) % n] == 1)
    assert measured(of_graph(graph)) == expected(other)
    assert nx.utils.graphs_equal(graph.to_networkx(), other)
    assert symmetric(of_graph(graph)).value
    assert zero_diagonal(of_graph(graph)).value


@pytest.mark.parametrize("n", [60, 1300])
def test_a_larger_graph_against_a_matrix_product(n):
    graph = nx.gnp_random_graph(n, 0.4, seed=n)
    a = nx.to_numpy_array(graph).astype(np.int64)
    common = (a.astype(float) @ a).astype(np.int64)
    subject = of_networkx(graph)
    degrees = a.sum(axis=1)
    agreements = n - degrees[:, None] - degrees + 2 * common
    assert agreement_sum(subject).value == Fraction(int(np.abs(2 * agreements - n).sum()), 2)
    assert codegree_sum(subject).value == Fraction(int(np.abs(4 * common - n).sum()), 4)
    assert closed_walks(subject, 4).value == int((common**2).sum())
    off = common + np.where(np.eye(n, dtype=bool), 10**6, 0)
    least = codegree_min(subject)
    assert least.value == off.min()
    assert least.witness == tuple(int(x) for x in np.argwhere(off == off.min())[0])
    off = common - np.where(np.eye(n, dtype=bool), 10**6, 0)
    most = codegree_max(subject)
    assert most.value == off.max()
    assert most.witness == tuple(int(x) for x in np.argwhere(off == off.max())[0])


def test_common_neighbours_and_triangles_as_networkx_counts_them():
    graph = nx.gnp_random_graph(40, 0.5, seed=2)
    subject = of_networkx(graph)
    counts = {
        (i, j): len(list(nx.common_neighbors(graph, i, j))) for i in range(40) for j in range(i)
    }
    assert codegree_min(subject).value == min(counts.values())
    assert codegree_max(subject).value == max(counts.values())
    over_edges = sum(counts[max(e), min(e)] for e in graph.edges)
    assert over_edges == sum(nx.triangles(graph).values())
    squares = sum(c * c for c in counts.values()) * 2 + sum(d * d for _, d in graph.degree)
    assert closed_walks(subject, 4).value == squares


PALEY = [p for p in primerange(5, 240) if p % 4 == 1]


@pytest.mark.parametrize("p", PALEY)
def test_paley_graphs_are_strongly_regular(p):
    """Brouwer and Haemers, Spectra of Graphs: srg(p, (p-1)/2, (p-5)/4, (p-1)/4)."""
    subject = paley(p)
    graph = subject.graph.to_networkx()
    assert nx.is_strongly_regular(graph) if p < 60 else True
    assert degree_min(subject).value == degree_max(subject).value == (p - 1) // 2
    assert codegree_min(subject).value == (p - 5) // 4
    assert codegree_max(subject).value == (p - 1) // 4
    for i, j in [(0, x) for x in range(1, min(p, 30))]:
        wanted = (p - 5) // 4 if graph.has_edge(i, j) else (p - 1) // 4
        assert len(list(nx.common_neighbors(graph, i, j))) == wanted


@pytest.mark.parametrize("p", PALEY)
def test_closed_forms_of_paley_graphs(p):
    """From the parameters srg(p, (p-1)/2, (p-5)/4, (p-1)/4) and the eigenvalues (-1 +- sqrt p)/2.

    Of p (p - 1)/2 ordered pairs the codegree is (p-5)/4, of as many (p-1)/4, and of p pairs i = i
    it is (p-1)/2; S = p - 2 (p-1)/2 + 2 codeg. The trace of A^4 is the sum of the fourth powers.
    """
    subject = paley(p)
    assert agreement_sum(subject).value == Fraction(p * (3 * p - 2), 2)
    assert codegree_sum(subject).value == Fraction(p * (4 * p - 5), 4)
    assert cycles(subject, 4).value == p * (p - 1) * (p - 5) ** 2 // 16
    degree = (p - 1) // 2
    fourth_powers = (p - 1) * Fraction(p * p + 6 * p + 1, 16)
    assert closed_walks(subject, 4).value == degree**4 + fourth_powers
    assert density(subject).value == Fraction(1, 2)


def test_the_labelled_four_cycles_of_small_paley_graphs():
    found = {p: cycles(paley(p), 4).value for p in (13, 17, 29, 37, 101)}
    assert found == {13: 624, 17: 2448, 29: 29232, 37: 85248, 101: 5817600}


def test_paley_17_has_no_four_of_either_kind():
    """Greenwood and Gleason 1955 (from memory): R(4, 4) > 17; and it is self-complementary."""
    graph = paley(17).graph.to_networkx()
    assert max(len(clique) for clique in nx.find_cliques(graph)) == 3
    assert max(len(clique) for clique in nx.find_cliques(nx.complement(graph))) == 3
    assert nx.is_isomorphic(graph, nx.complement(graph))


def test_triangles_of_paley_graphs():
    """Brouwer and Haemers: p (p-1)/4 edges, each in (p-5)/4 triangles, hence p(p-1)(p-5)/48."""
    for p in (5, 13, 17, 29, 37):
        graph = paley(p).graph.to_networkx()
        assert sum(nx.triangles(graph).values()) // 3 == p * (p - 1) * (p - 5) // 48


@pytest.mark.parametrize(
    "f", [(1, 0, 0, 0, 3), (1, 0, 2), (1, 0, 0, 0, 0, 0, 1), (1, *[0] * 27, 2), (1, *[0] * 29, -1)]
)
def test_an_even_polynomial_gives_what_its_matrix_gives(f):
    """The last has 30 zeros at p = 31."""
    for p in (7, 13, 29, 31):
        f = (*f[:-1], f[-1] % p)
        subject = paley(p, f)
        matrix = nx.to_numpy_array(subject.graph.to_networkx()).astype(np.int8)
        assert subject.graph.defect("symmetric") is None
        assert measured(subject) == measured(of_graph(Matrix(matrix, "file")))


@pytest.mark.parametrize("p", [32771, 70001, 1000033])
def test_a_large_circulant_by_single_lags(p):
    """S and the codegree of chosen pairs, counted in the row; the sums bracket them."""
    subject = paley(p, (1, 0, 0, 0, 3))
    row = (subject.graph.signed_row == 1).astype(np.int64)
    lags = subject.graph.autocorrelation
    signs = 2 * row - 1
    for d in (0, 1, 2, 3, p // 2, p - 1):
        assert int(lags[d]) == int(np.dot(signs, np.roll(signs, -d)))
    degree = int(row.sum())
    assert degree_min(subject).value == degree_max(subject).value == degree
    assert int(lags.sum()) == int(signs.sum()) ** 2
    least = codegree_min(subject)
    assert least.value == int(np.dot(row, np.roll(row, -least.witness[1])))
    codegrees = (lags + p + 2 * int(signs.sum())) // 4
    assert sum(int(c) for c in codegrees.tolist()) == degree**2
    squares = p * sum(c * c for c in codegrees.tolist())
    assert closed_walks(subject, 4).value == squares


@pytest.mark.parametrize("n", [1, 2, 3, 4, 5])
def test_no_graph_exceeds_the_trivial_maxima(n):
    """All graphs on n vertices; the complete one attains every maximum but the agreement sum's."""
    catalogue.load()
    sizes = Sizes(n, 0, 0)
    arguments = {"closed_walks": (4,), "cycles": (4,)}
    maxima = {
        name: QUANTITIES.find(name).maximum(sizes, *arguments.get(name, ()))
        for name in expected(nx.empty_graph(n))
    }
    pairs = [(i, j) for i in range(n) for j in range(i)]
    for chosen in range(1 << len(pairs)):
        graph = nx.empty_graph(n)
        graph.add_edges_from(e for place, e in enumerate(pairs) if chosen >> place & 1)
        for name, (value, _) in measured(of_networkx(graph)).items():
            assert maxima[name] is None or value <= maxima[name]
    for name, (value, _) in measured(of_networkx(nx.complete_graph(n))).items():
        assert name == "agreement_sum" or maxima[name] in (None, value)
    assert (maxima["codegree_sum"] is None) == (n < 4)


def test_sums_of_large_squares():
    numbers = np.array([2**31 - 1, 0, 12345, 2**31 - 1, 2**31 - 2] * 40, np.int64)
    assert _sum_of_squares(numbers) == sum(int(x) ** 2 for x in numbers)


def test_structure_of_matrices():
    of = lambda rows: of_graph(Matrix(np.array(rows, np.int8), "file"))  # noqa: E731
    good = of([[0, 1], [1, 0]])
    assert zero_one(good).value
    assert zero_diagonal(good).value
    assert symmetric(good).value
    found = symmetric(of([[0, 1, 0], [1, 0, 1], [1, 1, 0]]))
    assert (found.value, found.witness) == (False, (0, 2))
    found = zero_diagonal(of([[0, 1, 0], [1, 1, 1], [0, 1, 1]]))
    assert (found.value, found.witness) == (False, (1, 1))
    found = zero_one(of([[0, 1, 0], [1, 0, 2], [0, -1, 0]]))
    assert (found.value, found.witness) == (False, (1, 2))
    found = regular(of_networkx(nx.path_graph(4)))
    assert (found.value, found.witness) == (False, (0, 1))
    assert regular(of_networkx(nx.cycle_graph(5))).value


def test_an_unsymmetric_circulant_names_its_pair():
    subject = paley(7)
    found = symmetric(subject)
    assert (found.value, found.witness) == (False, (0, 1))
    entry = subject.graph.entry
    assert entry(0, 1) != entry(1, 0)
    assert zero_one(subject).value
    assert zero_diagonal(subject).value


def test_the_density_of_one_vertex_is_undefined():
    with pytest.raises(UndefinedError, match="density of fewer than 2 vertices"):
        density(of_networkx(nx.empty_graph(1)))


def test_unknown_orders_are_refused():
    subject = of_networkx(nx.cycle_graph(5))
    with pytest.raises(CaseError, match="known orders: 4"):
        cycles(subject, 6)
    with pytest.raises(CaseError, match="known orders: 4"):
        closed_walks(subject, 2)


def test_too_many_vertices_for_a_sum_graph():
    with pytest.raises(CaseError, match="3001 vertices"):
        cayley_sum(BinarySequence(np.ones(3001, np.int8)))
