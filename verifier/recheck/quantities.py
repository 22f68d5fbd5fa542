"""Every quantity, as the vocabulary defines it, with its least witness, its cost and its maximum.

A function takes the instance and integer arguments and returns (value, witness or None).
"""

from collections.abc import Callable, Iterator
from decimal import MAX_EMAX, MIN_EMIN, Context, Decimal
from fractions import Fraction
from itertools import accumulate, combinations
from math import comb
from operator import mul
from typing import Any

from .reals import OpenError

Measured = tuple[int | Fraction, tuple[int, ...] | None]


def autocorrelation(values: list[int], spend: Callable[[int], None]) -> list[int]:
    """Return sum_x v_x v_(x+d mod N) for d = 0..N-1, of values in -1..1, by one exact product.

    With w_x = v_x + 1 in decimal slots that no sum overflows, the number of the w_x times that of the
    w_(N-1-x) holds the sum of w_x w_(x+d) over x, x+d in 0..N-1 in slot N-1-d, counted from either end.
    """
    n, width = len(values), len(str(4 * len(values)))
    spend(100 * n)
    slots = [str(v + 1).zfill(width) for v in values]
    exact = Context(2 * n * width, Emin=MIN_EMIN, Emax=MAX_EMAX)
    product = exact.multiply(Decimal("".join(slots)), Decimal("".join(reversed(slots))))
    text = f"{product:f}".zfill((2 * n - 1) * width)
    parts = [int(text[i * width : (i + 1) * width]) for i in range(n - 1, -1, -1)]
    shift = n + 2 * sum(values)
    return [parts[d] + (parts[n - d] if d else 0) - shift for d in range(n)]


def sums(values: Any) -> list[int]:
    """Return the partial sums, from the empty one on."""
    return list(accumulate(values, initial=0))


def widest(prefix: list[int]) -> tuple[int, int, int]:
    """Return the largest |P_j - P_i|, i <= j, with the least i, then the least j, attaining it."""
    found, ends = [], (max(prefix), min(prefix))
    for start, stop in (ends, ends[::-1]):
        i = prefix.index(start)
        found += [(i, prefix.index(stop, i))] if stop in prefix[i:] else []
    return (ends[0] - ends[1], *min(found))


def _well_distribution(s: Any) -> Measured:
    e, n, best, witness = s.signs, s.length, 0, None
    for b in range(1, max(n, 2)):
        if -(-n // b) <= best:  # no progression of this difference has more terms
            break
        s.spend(4 * n)
        found = [(*widest(sums(e[a::b])), a) for a in range(b)]
        if max(found)[0] > best:
            best = max(found)[0]
            a, t = min((a + i * b, j - i) for size, i, j, a in found if size == best)
            witness = (b, a, t)
    return best, witness


def _correlation(s: Any, order: int) -> Measured:
    """Take the word of products for all fixed lags; a window of it is a pair (d_1, M)."""
    e, n, best, witness = s.signs, s.length, 0, None
    s.spend(4 * order * comb(n, order))

    def words(word: list[int], lags: tuple[int, ...]) -> Iterator[Any]:
        if len(lags) == order:
            yield word, lags
        for d in range(lags[-1] + 1, n) if len(lags) < order else ():
            yield from words(list(map(mul, word, e[d:])), (*lags, d))

    for word, lags in words(e, (0,)):
        prefix = sums(word)
        size = max(prefix) - min(prefix)
        if size >= max(best, 1):
            _, i, j = widest(prefix)
            new = (*(i + d for d in lags), j - i)
            witness = min(witness, new) if witness and size == best else new
            best = size
    return best, witness


def _peak(correlations: list[int]) -> Measured:
    best = max(map(abs, correlations[1:]), default=0)
    return best, next(((d,) for d, r in enumerate(correlations) if d and abs(r) == best), None)


def _shifted_sum(s: Any, _order: int) -> Measured:
    best, witness = _peak(autocorrelation(s.characters, s.spend))
    return best, witness and (0, *witness)


def _incomplete_sum(s: Any) -> Measured:
    best, i, j = widest(sums(s.characters))
    return best, (i, j) if best else (0, 0)


def _cyclic_incomplete_sum(s: Any) -> Measured:
    s.spend(4 * s.p**2)
    p, prefix = s.p, sums(s.characters * 2)
    windows = (prefix[a : a + p + 1] for a in range(p))
    reach = [max(max(window) - window[0], window[0] - min(window)) for window in windows]
    best, a = max(reach), reach.index(max(reach))
    return best, (a, next(b for b in range(a, a + p + 1) if abs(prefix[b] - prefix[a]) == best))


def _window_sum(s: Any, a: int, b: int) -> Measured:
    prefix = sums(s.characters)
    low, high = (x // s.p * prefix[-1] + prefix[x % s.p] for x in (a, b))
    return high - low if b > a else 0, None


def _pairs(s: Any) -> Iterator[tuple[int, int, int, int]]:
    """Yield i < j, their common neighbours and a weight; the weights count ordered pairs i != j."""
    graph = s.graph
    if graph.kind == "circulant":
        common = autocorrelation(list(graph.row), s.spend)
        yield from ((0, d, common[d], graph.n) for d in range(1, graph.n))
        return
    s.spend(graph.n**2 * (graph.n // 64 + 50))
    for (i, a), (j, b) in combinations(enumerate(graph.bits), 2):
        yield i, j, (a & b).bit_count(), 2


def pair_statistics(s: Any) -> dict[str, Measured]:
    """Return all quantities of pairs of vertices in one pass; S(i,j) = n - d_i - d_j + 2 common."""
    n, degrees = s.graph.n, s.graph.degrees
    twice, four = n * n, sum(abs(4 * d - n) for d in degrees)  # the pairs i = j
    walks, cycles = sum(d * d for d in degrees), 0
    least, most = (n, -1, -1), (1, -1, -1)  # common, i, j, and -common, i, j
    for i, j, common, weight in _pairs(s):
        twice += weight * abs(n - 2 * (degrees[i] + degrees[j] - 2 * common))
        four += weight * abs(4 * common - n)
        walks += weight * common**2
        cycles += weight * common * (common - 1)
        least, most = min(least, (common, i, j)), min(most, (-common, i, j))
    sums_of_pairs = (Fraction(twice, 2), Fraction(four, 4), walks, cycles)
    names = ("agreement_sum", "codegree_sum", "closed_walks", "cycles")
    found: dict[str, Measured] = {
        name: (x, None) for name, x in zip(names, sums_of_pairs, strict=True)
    }
    found["codegree_min"] = (least[0], least[1:]) if n > 1 else (0, None)
    found["codegree_max"] = (-most[0], most[1:]) if n > 1 else (0, None)
    return found


def _density(s: Any) -> Measured:
    if s.graph.n < 2:
        raise OpenError("undefined: density of fewer than 2 vertices")
    return Fraction(sum(s.graph.degrees), s.graph.n * (s.graph.n - 1)), None


def _extreme(s: Any, pick: Callable[[list[int]], int]) -> Measured:
    degree = pick(s.graph.degrees)
    return degree, (s.graph.degrees.index(degree),)


def _codegree_sum(n: int) -> Fraction | None:
    return n * Fraction(3 * n - 4, 4) + n * (n - 1) * Fraction(3 * n - 8, 4) if n > 3 else None


# name -> function and trivial maximum; those of GRAPH want an undirected graph without loops
GRAPH: dict[str, tuple[Callable[..., Measured], Callable[..., Any]]] = {
    "edges": (lambda s: (sum(s.graph.degrees) // 2, None), lambda n: comb(n, 2)),
    "density": (_density, lambda n: 1),
    "degree_min": (lambda s: _extreme(s, min), lambda n: n - 1),
    "degree_max": (lambda s: _extreme(s, max), lambda n: n - 1),
    "agreement_sum": (lambda s: s.pairs["agreement_sum"], lambda n: Fraction(n**3, 2)),
    "codegree_sum": (lambda s: s.pairs["codegree_sum"], _codegree_sum),
    "codegree_min": (lambda s: s.pairs["codegree_min"], lambda n: max(0, n - 2)),
    "codegree_max": (lambda s: s.pairs["codegree_max"], lambda n: max(0, n - 2)),
    "closed_walks": (lambda s, _: s.pairs["closed_walks"], lambda n: (n - 1) ** 4 + n - 1),
    "cycles": (lambda s, _: s.pairs["cycles"], lambda n: 24 * comb(n, 4)),
}
SEQUENCE: dict[str, Callable[..., Measured]] = {  # the maximum is N, of a correlation N - l + 1
    "balance": lambda s: (abs(sum(s.signs)), None),
    "well_distribution": _well_distribution,
    "correlation": _correlation,
    "out_of_phase": lambda s: _peak(autocorrelation(s.signs, s.spend)),
    "row_out_of_phase": lambda s: _peak(autocorrelation([2 * z - 1 for z in s.graph.row], s.spend)),
}
CHARACTER: dict[str, Callable[..., Measured]] = {  # the maximum is p
    "complete_sum": lambda s: (sum(s.characters), None),
    "shifted_sum": _shifted_sum,
    "incomplete_sum": _incomplete_sum,
    "cyclic_incomplete_sum": _cyclic_incomplete_sum,
    "window_sum": _window_sum,
}
QUANTITIES = {**SEQUENCE, **CHARACTER, **{name: pair[0] for name, pair in GRAPH.items()}}
ORDERS = {"correlation": (2, 3), "shifted_sum": (2,), "closed_walks": (4,), "cycles": (4,)}


def maximum(name: str, order: int, s: Any) -> Any:
    """Return the trivial maximum of a quantity at an instance, None where there is none."""
    if name in GRAPH:
        return GRAPH[name][1](s.order)
    if name in CHARACTER:
        return s.p
    return max(0, s.length - order + 1) if name == "correlation" else s.length
