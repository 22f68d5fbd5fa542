"""Every quantity and predicate, as vocabulary defines it, with its least witness and its cost.

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

    With w_x = v_x + 1 in decimal slots that no sum can overflow, the number of (w_x) times that of
    (w_(N-1-x)) holds sum_x w_x w_(x+d) over x, x+d in 0..N-1 in slot N-1-d.
    """
    n, width = len(values), len(str(4 * len(values)))
    spend(100 * n)
    slots = [str(v + 1).zfill(width) for v in values]
    exact = Context(2 * n * width + 1, Emin=MIN_EMIN, Emax=MAX_EMAX)
    product = exact.multiply(Decimal("".join(slots)), Decimal("".join(reversed(slots))))
    text = f"{product:f}".zfill((2 * n - 1) * width)
    parts = [int(text[i * width : (i + 1) * width]) for i in range(n - 1, -1, -1)]  # d = 0..n-1
    shift = n + 2 * sum(values)
    return [parts[d] + (parts[n - d] if d else 0) - shift for d in range(n)]


def widest(prefix: list[int]) -> tuple[int, int, int]:
    """Return the largest |P_j - P_i| over i < j with the least i, then the least j, attaining it."""
    top, bottom = max(prefix), min(prefix)
    found = []
    for start, stop in ((top, bottom), (bottom, top)):
        i = prefix.index(start)
        found += [(i, prefix.index(stop, i))] if stop in prefix[i:] else []
    return (top - bottom, *min(found))


def sums(values: Any) -> list[int]:
    """Return the partial sums, from the empty one on."""
    return list(accumulate(values, initial=0))


def _well_distribution(s: Any) -> Measured:
    e, n, best, witness = s.signs, s.length, 0, None
    for b in range(1, max(n, 2)):
        if -(-n // b) <= best:  # no progression of difference b is long enough to exceed
            break
        s.spend(4 * n)
        found = [(*widest(sums(e[a::b])), a) for a in range(b)]
        size = max(row[0] for row in found)
        if size > best:
            a, t = min((a + i * b, j - i) for top, i, j, a in found if top == size)
            best, witness = size, (b, a, t)
    return best, witness


def _correlation(s: Any, order: int) -> Measured:
    """Take each product word of fixed lags; a window of it is a pair (d_1, M)."""
    e, n = s.signs, s.length
    s.spend(4 * order * comb(n, order))
    best, witness = 0, None

    def words(word: list[int], lag: int, more: int, lags: tuple[int, ...]) -> Iterator[Any]:
        if not more:
            yield word, lags
            return
        for d in range(lag + 1, n):
            yield from words(list(map(mul, word, e[d:])), d, more - 1, (*lags, d))

    for word, lags in words(e, 0, order - 1, ()):
        prefix = sums(word)
        size = max(prefix) - min(prefix)
        if size >= best and size:
            _, i, j = widest(prefix)
            new = (i, *(i + d for d in lags), j - i)
            best, witness = size, new if size > best or witness is None else min(witness, new)
    return best, witness


def _peak(correlations: list[int]) -> Measured:
    best = max(map(abs, correlations[1:]), default=0)
    return best, next(((d,) for d, r in enumerate(correlations) if d and abs(r) == best), None)


def _shifted_sum(s: Any) -> Measured:
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
    b = next(b for b in range(a, a + p + 1) if abs(prefix[b] - prefix[a]) == best)
    return best, (a, b) if best else (0, 0)


def _window_sum(s: Any, a: int, b: int) -> Measured:
    prefix = sums(s.characters)
    low, high = (x // s.p * prefix[-1] + prefix[x % s.p] for x in (a, b))
    return high - low if b > a else 0, None


def _pairs(s: Any) -> Iterator[tuple[int, int, int, int]]:
    """Yield (i, j, common neighbours, weight) for i < j; the weights count ordered pairs i != j."""
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
    least, most = (n, -1, -1), (1, -1, -1)  # (common, i, j) and (-common, i, j)
    for i, j, common, weight in _pairs(s):
        twice += weight * abs(n - 2 * (degrees[i] + degrees[j] - 2 * common))
        four += weight * abs(4 * common - n)
        walks += weight * common**2
        cycles += weight * common * (common - 1)
        least, most = min(least, (common, i, j)), min(most, (-common, i, j))
    return {
        "agreement_sum": (Fraction(twice, 2), None),
        "codegree_sum": (Fraction(four, 4), None),
        "codegree_min": (least[0], least[1:]) if n > 1 else (0, None),
        "codegree_max": (-most[0], most[1:]) if n > 1 else (0, None),
        "closed_walks": (walks, None),
        "cycles": (cycles, None),
    }


def _density(s: Any) -> Measured:
    if s.graph.n < 2:
        raise OpenError("undefined: density of fewer than 2 vertices")
    return Fraction(sum(s.graph.degrees), s.graph.n * (s.graph.n - 1)), None


def _least(s: Any, pick: Callable[[list[int]], int]) -> Measured:
    degree = pick(s.graph.degrees)
    return degree, (s.graph.degrees.index(degree),)


def _row_out_of_phase(s: Any) -> Measured:
    return _peak(autocorrelation([2 * z - 1 for z in s.graph.row], s.spend))


GRAPH: dict[str, Callable[..., Measured]] = {  # these want an undirected graph without loops
    "edges": lambda s: (sum(s.graph.degrees) // 2, None),
    "density": _density,
    "degree_min": lambda s: _least(s, min),
    "degree_max": lambda s: _least(s, max),
} | {
    name: lambda s, *_, name=name: s.statistics[name]
    for name in [
        "agreement_sum",
        "codegree_sum",
        "codegree_min",
        "codegree_max",
        "closed_walks",
        "cycles",
    ]
}
OTHERS: dict[str, Callable[..., Measured]] = {
    "balance": lambda s: (abs(sum(s.signs)), None),
    "well_distribution": _well_distribution,
    "correlation": _correlation,
    "out_of_phase": lambda s: _peak(autocorrelation(s.signs, s.spend)),
    "row_out_of_phase": _row_out_of_phase,
    "complete_sum": lambda s: (sum(s.characters), None),
    "shifted_sum": _shifted_sum,
    "incomplete_sum": _incomplete_sum,
    "cyclic_incomplete_sum": _cyclic_incomplete_sum,
    "window_sum": _window_sum,
}
ORDERS = {"correlation": (2, 3), "shifted_sum": (2,), "closed_walks": (4,), "cycles": (4,)}


def maximum(
    name: str, arguments: tuple[int, ...], length: int | None, n: int | None, p: int | None
) -> Fraction | None:
    """Return the trivial maximum of a quantity; None where there is none."""
    if name in GRAPH:
        n = n or 0
        codegrees = n * Fraction(3 * n - 4, 4) + n * (n - 1) * Fraction(3 * n - 8, 4)
        table = {
            "edges": comb(n, 2),
            "density": 1,
            "degree_min": n - 1,
            "degree_max": n - 1,
            "agreement_sum": Fraction(n**3, 2),
            "codegree_sum": codegrees if n > 3 else None,
            "codegree_min": max(0, n - 2),
            "codegree_max": max(0, n - 2),
            "closed_walks": (n - 1) ** 4 + n - 1,
            "cycles": n * (n - 1) * (n - 2) * (n - 3),
        }
        return table[name]
    if name == "correlation":
        return max(0, length - arguments[0] + 1)
    return (
        length
        if name in ("balance", "well_distribution", "out_of_phase", "row_out_of_phase")
        else p
    )
