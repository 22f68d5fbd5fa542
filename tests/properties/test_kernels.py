"""Laws that every kernel obeys, on words drawn by hypothesis."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from verifier.kernels.autocorrelation import (
    differing_places,
    patched_autocorrelation,
    periodic_autocorrelation,
)
from verifier.kernels.correlation_plain import correlation_plain
from verifier.kernels.correlation_three import correlation_three
from verifier.kernels.correlation_two import correlation_two, lag_bounds
from verifier.kernels.lag_ranges import least_window
from verifier.kernels.packed import packed_from
from verifier.kernels.pairs import matrix_pairs
from verifier.kernels.pairs_tiled import matrix_pairs_tiled
from verifier.kernels.progressions import largest_progression
from verifier.kernels.progressions_long import step_ranges
from verifier.kernels.quadratic_character import character_values
from verifier.structures.graph import Circulant
from verifier.structures.sequence import BinarySequence

DRAWN = np.random.default_rng(3)


def rows(entries, most=80):
    return st.lists(st.sampled_from(entries), min_size=1, max_size=most).map(
        lambda row: np.array(row, np.int8)
    )


def naive(row):
    row = row.astype(int)
    return [int(np.dot(row, np.roll(row, -t))) for t in range(len(row))]


@given(rows([-1, 0, 1]) | rows([-1, 1]) | rows([0, 1]) | rows([0]) | rows([1]))
def test_autocorrelation_is_its_definition(row):
    assert periodic_autocorrelation(row).tolist() == naive(row)
    mirrored = np.concatenate([row, row[::-1]])
    assert periodic_autocorrelation(mirrored).tolist() == naive(mirrored)
    about_zero = np.concatenate([row, row[:0:-1]])
    assert periodic_autocorrelation(about_zero).tolist() == naive(about_zero)


@given(rows([-1, 0, 1], 40), st.data())
def test_a_patch_is_the_autocorrelation_of_the_patched_row(row, data):
    changed = row.copy()
    for place in data.draw(st.lists(st.integers(0, len(row) - 1), max_size=5)):
        changed[place] = data.draw(st.sampled_from([-1, 0, 1]))
    known = periodic_autocorrelation(row)
    assert patched_autocorrelation(row, known, changed).tolist() == naive(changed)
    assert known.tolist() == naive(row)


def test_many_differences_are_no_patch():
    row = np.ones(40, np.int8)
    assert differing_places(row, -row) is None
    assert differing_places(row, row[:39]) is None
    assert differing_places(row, row).tolist() == []


@pytest.mark.parametrize("n", [255, 256, 257, 511, 513, 32768, 40000, 70001, 140001])
@pytest.mark.parametrize("zeros", [0, 3, 40])
def test_digits_of_every_width_carry_nothing(n, zeros):
    """The widths change between these lengths; dense rows reach the largest sums."""
    row = np.ones(n, np.int8)
    row[DRAWN.integers(0, n, 5)] = -1
    row[DRAWN.integers(0, n, zeros)] = 0
    found = periodic_autocorrelation(row)
    wide = row.astype(np.int64)
    for t in (0, 1, 2, n // 3, n // 2, n - 1):
        assert int(found[t]) == int(np.dot(wide, np.roll(wide, -t)))
    assert int(found.sum()) == int(wide.sum()) ** 2
    assert np.array_equal(found[1:], found[:0:-1])


@given(rows([-1, 1], 60))
def test_the_sum_of_an_autocorrelation_is_a_square(row):
    found = periodic_autocorrelation(row)
    assert int(found.sum()) == int(row.sum(dtype=int)) ** 2
    assert int(found[0]) == len(row)


@given(rows([-1, 1], 150), st.sampled_from([2, 3]))
def test_correlation_is_invariant(row, order):
    value, _ = correlation_plain(row, order)
    assert correlation_plain(row[::-1].copy(), order)[0] == value
    assert correlation_plain(-row, order)[0] == value
    alternating = row * np.resize(np.array([1, -1], np.int8), len(row))
    if order == 2:
        assert correlation_plain(alternating, order)[0] == _alternated(row)
    assert correlation_plain(row[:-1], order)[0] <= value


def _alternated(row):
    """Return C_2 of the alternated word: its products at a lag all change by one sign."""
    return correlation_plain(row, 2)[0]


@given(rows([-1, 1], 200), st.integers(1, 5))
def test_compiled_correlations_are_the_plain_ones(row, repeats):
    row = np.resize(row, max(3, min(200, repeats * len(row))))
    for order, kernel in ((2, correlation_two), (3, correlation_three)):
        if order == 3 and len(row) > 120:
            row = row[:120]
        value, lags = kernel(row)
        plain, every = correlation_plain(row, order)
        assert value == plain
        assert least_window(row, lags) == least_window(row, every)


def test_bounds_of_lags_hold_where_sums_turn_inside_words():
    """Words whose products at one lag fall inside a word and rise in the tail, or the reverse."""
    for turn in (0, 16, 32, 63, 64):
        for tail in (0, 1, 31, 33, 63):
            for lag in (1, 5, 64, 70):
                products = [-1] * turn + [1] * (64 - turn) + [-1, 1] * 32 + [1] * tail
                row = [1] * lag
                for x, sign in enumerate(products):
                    row.append(row[x] * sign)
                signs = np.array(row, np.int8)
                words = [packed_from(signs, shift, len(row) // 64 + 2) for shift in range(64)]
                bound = lag_bounds(words, lag % 64, len(row))[lag // 64]
                sums = np.cumsum([0, *products])
                assert bound >= int(sums.max() - sums.min())


@given(rows([-1, 1], 300))
def test_compiled_progressions_are_the_plain_ones(row):
    value, (b, a, t) = largest_progression(row)
    assert largest_progression(row, step_ranges) == (value, (b, a, t))
    assert abs(int(row[a : a + (t - 1) * b + 1 : b].sum(dtype=int))) == value
    assert largest_progression(row[::-1].copy())[0] == value


@given(st.integers(1, 70), st.integers(0, 2**32), st.floats(0, 1))
def test_pairs_of_a_matrix_are_their_definition(n, seed, density):
    upper = np.triu(np.random.default_rng(seed).random((n, n)) < density, 1).astype(np.int8)
    entries = upper | upper.T
    degrees = entries.sum(axis=1, dtype=np.int64)
    common = entries.astype(np.int64) @ entries
    agreements = common + (1 - entries.astype(np.int64)) @ (1 - entries)
    pairs = [(int(common[i, j]), (i, j)) for i in range(n) for j in range(i + 1, n)]
    least = min(pairs, default=(0, None))
    most = min(((-c, at) for c, at in pairs), default=(0, None))
    expected = (
        int(np.abs(2 * agreements - n).sum()),
        int(np.abs(4 * common - n).sum()),
        *least,
        -most[0],
        most[1],
        int((common**2).sum()),
    )
    assert matrix_pairs(entries, degrees) == expected
    if n > 1:
        assert matrix_pairs_tiled(entries, degrees) == expected
    assert expected[6] == int(np.trace(common @ common))


@given(rows([-1, 1], 40))
def test_pairs_of_a_circulant_are_those_of_its_matrix(row):
    n = len(row)
    half = row[: n // 2 + 1]
    symmetric = np.array([half[min(x, n - x)] for x in range(n)], np.int8)
    circulant = Circulant(BinarySequence(symmetric))
    entries = np.array([[circulant.entry(i, j) for j in range(n)] for i in range(n)], np.int8)
    found = circulant.pairs
    assert (
        found.agreement_twice,
        found.codegree_four,
        found.codegree_min,
        found.min_pair,
        found.codegree_max,
        found.max_pair,
        found.square_sum,
    ) == matrix_pairs(entries, circulant.degrees)
    assert circulant.degrees.tolist() == entries.sum(axis=1).tolist()


@given(st.sampled_from([3, 5, 7, 31, 127, 251]), st.data())
def test_a_character_is_multiplicative(p, data):
    residues = st.integers(0, p - 1)
    f = data.draw(st.lists(residues, min_size=1, max_size=5))
    g = data.draw(st.lists(residues, min_size=1, max_size=5))
    values = character_values(p, tuple(f)) * character_values(p, tuple(g))
    both = tuple(int(c) % p for c in np.polymul(np.array(f, object), np.array(g, object)))
    assert character_values(p, both or (0,)).tolist() == values.tolist()


@given(rows([-1, 1], 50), st.integers(-100, 100), st.integers(0, 120))
def test_indices_take_the_periodic_continuation(row, first, length):
    sequence = BinarySequence(row)
    taken = sequence.with_indices(first, first + length)
    assert taken.signs.tolist() == [
        int(row[j % len(row)]) for j in range(first, first + length + 1)
    ]
    mirrored = sequence.mirrored().signs.tolist()
    N = len(row)
    for x in range(1, N):
        assert mirrored[x] == (row[x] if 2 * x <= N else row[N - x])
    assert mirrored[0] == row[0]
