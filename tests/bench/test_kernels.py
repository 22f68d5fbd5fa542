"""Ratios of the kernels to plain numpy programs; results must be equal, seconds are only printed."""

from time import perf_counter

import numpy as np
import pytest

from verifier.kernels.autocorrelation import periodic_autocorrelation
from verifier.kernels.correlation_three import correlation_three
from verifier.kernels.correlation_two import correlation_two
from verifier.kernels.pairs_tiled import matrix_pairs_tiled
from verifier.kernels.progressions import largest_progression
from verifier.kernels.progressions_long import step_ranges
from verifier.quantities.agreement_sum import agreement_sum
from verifier.quantities.codegree_sum import codegree_sum
from verifier.quantities.shifted_sum import shifted_sum
from verifier.rules.legendre import legendre
from verifier.structures.character import Character
from verifier.structures.graph import Circulant
from verifier.structures.subject import Subject

pytestmark = pytest.mark.bench
DRAWN = np.random.default_rng(11)
QUARTIC = (1, 0, 0, 0, 3)


def best_of(times, program, *arguments):
    program(*arguments)
    found, fastest = None, float("inf")
    for _ in range(times):
        start = perf_counter()
        found = program(*arguments)
        fastest = min(fastest, perf_counter() - start)
    return found, fastest


def say(label, fast, slow):
    print(f"\n{label}: {1000 * fast:.2f} ms, plain {1000 * slow:.2f} ms, ratio {slow / fast:.2f}")


def signs(n):
    return DRAWN.choice(np.array([1, -1], np.int8), n)


def by_transform(row):
    n = len(row)
    size = 1 << (2 * n - 1).bit_length()
    spectrum = np.fft.rfft(row.astype(float), size)
    lags = np.rint(np.fft.irfft(spectrum * spectrum.conj(), size)).astype(np.int64)
    found = lags[:n].copy()
    found[1:] += lags[size - n + 1 :]
    return found


@pytest.mark.parametrize("n", [1009, 10007, 100003, 1000003])
@pytest.mark.parametrize("mirrored", [False, True], ids=["any", "mirrored"])
def test_autocorrelation_against_a_float_transform(n, mirrored):
    row = signs(n)
    if mirrored:
        row[n // 2 + 1 :] = row[1 : n - n // 2][::-1]
    found, fast = best_of(5, periodic_autocorrelation, row)
    other, slow = best_of(5, by_transform, row)
    assert np.array_equal(found, other)
    say(f"autocorrelation, n = {n}", fast, slow)


def cumulative_correlation(word):
    best = 0
    for lag in range(1, len(word)):
        if len(word) - lag <= best:
            break
        sums = np.cumsum(word[: len(word) - lag] * word[lag:], dtype=np.int32)
        best = max(best, max(0, int(sums.max())) - min(0, int(sums.min())))
    return best


@pytest.mark.parametrize("n", [10_000, 100_000])
def test_correlation_two_against_cumulative_sums(n):
    word = signs(n)
    (value, _), fast = best_of(3, correlation_two, word)
    other, slow = best_of(1, cumulative_correlation, word) if n < 50_000 else _once(word)
    assert value == other
    say(f"correlation(2), N = {n}", fast, slow)


def _once(word):
    start = perf_counter()
    return cumulative_correlation(word), perf_counter() - start


def test_correlation_three_against_cumulative_sums():
    word = signs(400)
    (value, _), fast = best_of(3, correlation_three, word)

    def plain():
        best = 0
        for t in range(1, len(word)):
            pair = word[: len(word) - t] * word[t:]
            for u in range(t + 1, len(word)):
                if len(word) - u <= best:
                    break
                sums = np.cumsum(pair[: len(word) - u] * word[u:], dtype=np.int32)
                best = max(best, max(0, int(sums.max())) - min(0, int(sums.min())))
        return best

    start = perf_counter()
    assert plain() == value
    say("correlation(3), N = 400", fast, perf_counter() - start)


def test_well_distribution_against_every_step():
    word = signs(10_000)
    (value, _), fast = best_of(3, largest_progression, word, step_ranges)

    def plain():
        best = 0
        for b in range(1, len(word) + 1):
            table = np.zeros((-(-len(word) // b), b), np.int8)
            table.reshape(-1)[: len(word)] = word
            sums = np.cumsum(table, axis=0, dtype=np.int32)
            ranges = np.maximum(sums.max(axis=0), 0) - np.minimum(sums.min(axis=0), 0)
            best = max(best, int(ranges.max()))
        return best

    start = perf_counter()
    assert plain() == value
    say("well_distribution, N = 10000", fast, perf_counter() - start)


@pytest.mark.parametrize("n", [1200, 2000, 3000])
def test_pairs_against_a_matrix_product(n):
    upper = np.triu(DRAWN.integers(0, 2, (n, n), dtype=np.int8), 1)
    entries = upper | upper.T
    degrees = entries.sum(axis=1, dtype=np.int64)

    def plain():
        floats = entries.astype(np.float32)
        common = (floats @ floats).astype(np.int64)
        agreed = np.abs(n - 2 * degrees[:, None] - 2 * degrees + 4 * common)
        return int(agreed.sum()), int(np.abs(4 * common - n).sum()), int((common**2).sum())

    found, fast = best_of(3, matrix_pairs_tiled, entries, degrees)
    other, slow = best_of(2, plain)
    assert (found[0], found[1], found[-1]) == other
    say(f"pairs, n = {n}", fast, slow)


@pytest.mark.parametrize("p", [401, 1999, 10007, 100003, 1000033])
def test_one_instance_against_one_autocorrelation(p):
    """Here the ratio is that of a whole instance to one exact autocorrelation of its row."""

    def instance():
        character = Character(p, QUARTIC)
        sequence = legendre(p=p, polynomial=QUARTIC, character=character, at_zero=1)
        subject = Subject(p, QUARTIC, character, sequence, Circulant(sequence))
        return agreement_sum(subject), codegree_sum(subject), shifted_sum(subject, 2)

    row = Character(p, QUARTIC).values
    _, whole = best_of(3, instance)
    _, one = best_of(3, periodic_autocorrelation, row)
    print(f"\ninstance, p = {p}: {1000 * whole:.2f} ms, {whole / one:.2f} autocorrelations")
