"""Every quantity against its definition, written out naively here."""

from fractions import Fraction
from itertools import combinations, product

import numpy as np
import pytest

from verifier.kernels.correlation_plain import correlation_plain
from verifier.kernels.correlation_three import correlation_three
from verifier.kernels.correlation_two import correlation_two
from verifier.kernels.lag_ranges import least_window
from verifier.kernels.progressions import largest_progression
from verifier.kernels.progressions_long import step_ranges
from verifier.quantities.balance import balance
from verifier.quantities.complete_sum import complete_sum
from verifier.quantities.correlation import correlation
from verifier.quantities.cyclic_incomplete_sum import cyclic_incomplete_sum
from verifier.quantities.incomplete_sum import incomplete_sum
from verifier.quantities.out_of_phase import out_of_phase
from verifier.quantities.row_out_of_phase import row_out_of_phase
from verifier.quantities.shifted_sum import shifted_sum
from verifier.quantities.well_distribution import LONG, well_distribution
from verifier.quantities.window_sum import window_sum
from verifier.structures.character import Character
from verifier.structures.graph import Circulant
from verifier.structures.sequence import BinarySequence
from verifier.structures.subject import Subject

DRAWN = np.random.default_rng(1)
WORDS = {
    "one": [1],
    "minus one": [-1],
    "two": [1, -1],
    "equal pair": [-1, -1],
    "three": [1, 1, -1],
    "constant": [1] * 17,
    "negative constant": [-1] * 16,
    "alternating": [1, -1] * 8,
    "period three": [1, 1, -1] * 5,
    "period four": [1, 1, -1, -1] * 5,
    "one change": [1] * 9 + [-1] * 8,
    "Barker 13": [1, 1, 1, 1, 1, -1, -1, 1, 1, -1, 1, -1, 1],
    **{f"random {n}": DRAWN.choice([1, -1], n).tolist() for n in (4, 5, 8, 11, 16, 23, 31)},
}
LONGER = {
    f"random {n}": DRAWN.choice([1, -1], n).tolist()
    for n in (63, 64, 65, 66, 127, 128, 129, 130, 200)
}
PERIODIC = {f"periodic {n}": ([1, 1, -1, 1, -1] * n)[:n] for n in (64, 129, 190)}


def of_sequence(word):
    sequence = BinarySequence(np.array(word, np.int8))
    return Subject(None, None, None, sequence, Circulant(sequence))


def of_polynomial(p, polynomial):
    return Subject(p, polynomial, Character(p, polynomial), None, None)


def naive_correlation(word, order):
    """Mauduit and Sarkozy 1997: the maximum over all M and D, and the least (D, M)."""
    best, found = 0, None
    for shifts in combinations(range(len(word)), order):
        total = 0
        for m in range(1, len(word) - shifts[-1] + 1):
            product = 1
            for d in shifts:
                product *= word[m - 1 + d]
            total += product
            if abs(total) > best or (abs(total) == best and found and (*shifts, m) < found):
                best, found = abs(total), (*shifts, m)
    return best, found


def naive_well_distribution(word):
    best, found = 0, None
    for b in range(1, len(word) + 1):
        for a in range(len(word)):
            total = 0
            for t, place in enumerate(range(a, len(word), b), 1):
                total += word[place]
                if abs(total) > best:
                    best, found = abs(total), (b, a, t)
    return best, found


def naive_lag(row):
    n, best, found = len(row), 0, None
    for d in range(1, n):
        size = abs(sum(row[x] * row[(x + d) % n] for x in range(n)))
        if found is None or size > best:
            best, found = size, (d,)
    return best, found


def pair(measurement):
    return measurement.value, measurement.witness


@pytest.mark.parametrize("word", WORDS.values(), ids=WORDS)
def test_a_measure_of_a_sequence_is_its_definition(word):
    subject = of_sequence(word)
    assert pair(balance(subject)) == (abs(sum(word)), None)
    assert pair(well_distribution(subject)) == naive_well_distribution(word)
    assert pair(correlation(subject, 2)) == naive_correlation(word, 2)
    assert pair(correlation(subject, 3)) == naive_correlation(word, 3)
    assert pair(out_of_phase(subject)) == naive_lag(word)
    assert pair(row_out_of_phase(subject)) == naive_lag([-1, *word[1:]])


@pytest.mark.parametrize("n", range(1, 9))
def test_every_word_of_a_length(n):
    for rest in product((1, -1), repeat=n - 1):
        word = [1, *rest]
        subject = of_sequence(word)
        assert pair(well_distribution(subject)) == naive_well_distribution(word)
        for order in (2, 3):
            assert pair(correlation(subject, order)) == naive_correlation(word, order)


@pytest.mark.parametrize("word", WORDS.values(), ids=WORDS)
def test_a_compiled_kernel_is_the_definition_on_short_words(word):
    signs = np.array(word, np.int8)
    if len(word) >= 2:
        value, lags = correlation_two(signs)
        assert (value, least_window(signs, lags)) == naive_correlation(word, 2)
    if len(word) >= 3:
        value, lags = correlation_three(signs)
        assert (value, least_window(signs, lags)) == naive_correlation(word, 3)
    assert largest_progression(signs, step_ranges) == naive_well_distribution(word)


@pytest.mark.parametrize("word", [*LONGER.values(), *PERIODIC.values()], ids=[*LONGER, *PERIODIC])
def test_a_compiled_kernel_is_the_plain_one_about_the_ends_of_words(word):
    signs = np.array(word, np.int8)
    for order, kernel in ((2, correlation_two), (3, correlation_three)):
        value, lags = kernel(signs)
        plain, every = correlation_plain(signs, order)
        assert value == plain
        assert set(lags) <= set(every)
        assert least_window(signs, lags) == least_window(signs, every)
    assert pair(correlation(of_sequence(word), 2)) == naive_correlation(word, 2)


@pytest.mark.parametrize("n", [2001, 4999])
def test_a_compiled_correlation_is_the_cumulative_sum_loop(n):
    signs = DRAWN.choice(np.array([1, -1], np.int8), n)
    best = 0
    for lag in range(1, n):
        sums = np.cumsum(signs[: n - lag] * signs[lag:], dtype=np.int64)
        best = max(best, max(0, int(sums.max())) - min(0, int(sums.min())))
    found = correlation(of_sequence(signs.tolist()), 2)
    first, second, length = found.witness
    products = signs[first : first + length].astype(int) * signs[second : second + length]
    assert found.value == best == abs(int(products.sum()))


def test_a_compiled_progression_is_the_plain_one():
    for n in (3000, 9001):
        signs = DRAWN.choice(np.array([1, -1], np.int8), n)
        assert largest_progression(signs, step_ranges) == largest_progression(signs)
    ramp = np.ones(5000, np.int8)
    assert largest_progression(ramp, step_ranges) == (5000, (1, 0, 5000))


def test_a_long_word_is_compiled_on_the_way():
    signs = DRAWN.choice(np.array([1, -1], np.int8), LONG + 1)
    found = well_distribution(of_sequence(signs.tolist()))
    assert pair(found) == largest_progression(signs)


def test_many_ties_cost_no_more():
    """A word of order 3 measure 1 is attained at every pair of lags."""
    alternating = [1, -1] * 500
    assert pair(correlation(of_sequence(alternating), 3)) == (1, (0, 1, 2, 1))


def legendre_symbol(a, p):
    """Euler's criterion."""
    power = pow(a, (p - 1) // 2, p)
    return -1 if power == p - 1 else power


def naive_values(p, polynomial):
    values = []
    for x in range(p):
        value = 0
        for coefficient in polynomial:
            value = value * x + coefficient
        values.append(legendre_symbol(value % p, p))
    return values


POLYNOMIALS = [
    (3, (1, 0)),
    (3, (2,)),
    (3, (1, 0, 2, 0)),  # x^3 - x vanishes everywhere
    (5, (1, 0, 0, 0, 3)),
    (5, (1, 0, 0)),
    (7, (1, 0, 6, 0)),
    (11, (1, 2, 0, 5)),
    (13, (1, 0, 0, 0, 3)),
    (17, (1, 0, 12, 0, 12, 0, 1)),
    (19, (5, 1)),
    (23, (1, 0, 4)),
    (31, (3, 1, 4, 1, 5)),
]


@pytest.mark.parametrize(("p", "polynomial"), POLYNOMIALS)
def test_a_character_sum_is_its_definition(p, polynomial):
    values = naive_values(p, polynomial)
    subject = of_polynomial(p, polynomial)
    assert subject.character.values.tolist() == values
    assert subject.character.zeros == values.count(0)
    assert pair(complete_sum(subject)) == (sum(values), None)

    best, found = -1, None
    for d_1, d_2 in combinations(range(p), 2):
        size = abs(sum(values[(x + d_1) % p] * values[(x + d_2) % p] for x in range(p)))
        if size > best:
            best, found = size, (d_1, d_2)
    assert pair(shifted_sum(subject, 2)) == (best, found)

    windows = [(a, b) for a in range(p + 1) for b in range(a, p + 1)]
    sums = {w: abs(sum(values[w[0] : w[1]])) for w in windows}
    best = max(sums.values())
    assert pair(incomplete_sum(subject)) == (best, min(w for w in windows if sums[w] == best))

    windows = [(a, b) for a in range(p) for b in range(a, a + p + 1)]
    twice = values + values
    sums = {w: abs(sum(twice[w[0] : w[1]])) for w in windows}
    best = max(sums.values())
    assert pair(cyclic_incomplete_sum(subject)) == (
        best,
        min(w for w in windows if sums[w] == best),
    )


@pytest.mark.parametrize(("p", "polynomial"), [(5, (1, 0)), (7, (1, 0, 1)), (7, (1, 0, 0, 3))])
def test_a_window_sum_runs_on_periodically(p, polynomial):
    values = naive_values(p, polynomial)
    subject = of_polynomial(p, polynomial)
    for first in range(-2 * p, 2 * p):
        for end in range(first - 2, first + 3 * p):
            expected = sum(values[x % p] for x in range(first, end))
            assert window_sum(subject, first, end).value == expected


def test_a_far_window_costs_no_more():
    subject = of_polynomial(7, (1, 0, 1))
    whole = complete_sum(subject).value
    assert window_sum(subject, 0, 7 * 10**30).value == whole * 10**30


def test_values_are_exact_and_plain():
    subject = of_sequence(WORDS["random 31"])
    for measure in (balance, well_distribution, out_of_phase, row_out_of_phase):
        found = measure(subject)
        assert type(found.value) in (int, Fraction)
        assert all(type(place) is int for place in found.witness or ())
    found = correlation(subject, 2)
    assert all(type(number) is int for number in (found.value, *found.witness))
