"""Every quantity, predicate and function of f, as the vocabulary defines it.

Each takes the instance `s` and integers, and returns a value, or (value, least witness or None).
"""

from collections.abc import Callable, Iterator
from decimal import MAX_EMAX, MIN_EMIN, Context, Decimal
from fractions import Fraction
from itertools import accumulate, combinations
from math import comb
from operator import mul
from typing import Any

from . import arithmetic
from .reals import OpenError

Witnessed = tuple[Any, tuple[int, ...] | None]


def autocorrelation(values: list[int], spend: Callable[[int], None]) -> list[int]:
    """Return sum_x v_x v_(x+d mod N) for d = 0..N-1, of values in -1..1, by one exact product.

    With w_x = v_x + 1 in decimal slots that no sum overflows, the number of the w_x times that of
    the w_(N-1-x) holds, in slot N-1-d from either end, the sum of w_x w_(x+d) over x, x+d < N.
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


def well_distribution(s: Any) -> Witnessed:
    """Return the largest sum along a progression; the witness is (b, a, t)."""
    e, n, best, witness = s.signs, s.length, 0, None
    for b in range(1, max(n, 2)):
        if -(-n // b) <= best:  # no progression of this difference has more terms
            break
        s.spend(4 * n)
        found = [(*widest(sums(e[a::b])), a) for a in range(b)]
        if max(found)[0] > best:
            best = max(found)[0]
            witness = (b, *min((a + i * b, j - i) for size, i, j, a in found if size == best))
    return best, witness


def correlation(s: Any, order: int) -> Witnessed:
    """Take the word of products for all fixed lags; a window of it is a pair (d_1, M)."""
    e, best, witness = s.signs, 0, None
    s.spend(4 * order * comb(s.length, order))

    def words(word: Any, lags: tuple[int, ...]) -> Iterator[Any]:
        if len(lags) == order:
            yield sums(word), lags
            return
        kept: Any = list if len(lags) + 1 < order else iter
        for d in range(lags[-1] + 1, len(e)):
            yield from words(kept(map(mul, word, e[d:])), (*lags, d))

    for prefix, lags in words(e, (0,)):
        size = max(prefix) - min(prefix)
        if size >= max(best, 1):
            _, i, j = widest(prefix)
            new = (*(i + d for d in lags), j - i)
            best, witness = size, min(witness, new) if witness and size == best else new
    return best, witness


def peak(correlations: list[int]) -> Witnessed:
    """Return the largest absolute value out of phase and the least shift that has it."""
    best = max(map(abs, correlations[1:]), default=0)
    return best, next(((d,) for d, r in enumerate(correlations) if d and abs(r) == best), None)


def shifted_sum(s: Any, _order: int) -> Witnessed:
    """Take the shifts (0, d): the sum depends on the difference alone."""
    best, witness = peak(autocorrelation(s.characters, s.spend))
    return best, witness and (0, *witness)


def cyclic_incomplete_sum(s: Any) -> Witnessed:
    """Take all windows of at most p terms that begin at A < p."""
    s.spend(4 * s.p**2)
    p, prefix = s.p, sums(s.characters * 2)
    windows = (prefix[a : a + p + 1] for a in range(p))
    reach = [max(max(window) - window[0], window[0] - min(window)) for window in windows]
    best, a = max(reach), reach.index(max(reach))
    return best, (a, next(b for b in range(a, a + p + 1) if abs(prefix[b] - prefix[a]) == best))


def window_sum(s: Any, a: int, b: int) -> int:
    """Return the sum over a <= x < b, continued periodically."""
    prefix = sums(s.characters)
    low, high = (x // s.p * prefix[-1] + prefix[x % s.p] for x in (a, b))
    return high - low if b > a else 0


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


def pair_statistics(s: Any) -> dict[str, Any]:
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
    found = {"agreement_sum": Fraction(twice, 2), "codegree_sum": Fraction(four, 4)}
    extremes = {"codegree_min": (least[0], least[1:]), "codegree_max": (-most[0], most[1:])}
    found |= {"closed_walks": Fraction(walks), "cycles": Fraction(cycles)}
    return found | (extremes if n > 1 else dict.fromkeys(extremes, 0))


def density(s: Any) -> Fraction:
    """Return the edges over n(n-1)/2."""
    if s.graph.n < 2:
        raise OpenError("undefined: density of fewer than 2 vertices")
    return Fraction(sum(s.graph.degrees), s.graph.n * (s.graph.n - 1))


def extreme(s: Any, pick: Callable[[list[int]], int]) -> Witnessed:
    """Return the least or the largest degree."""
    degree = pick(s.graph.degrees)
    return degree, (s.graph.degrees.index(degree),)


def regular(s: Any) -> Witnessed:
    """Compare all degrees with that of vertex 0."""
    other = next((j for j, d in enumerate(s.graph.degrees) if d != s.graph.degrees[0]), None)
    return other is None, None if other is None else (0, other)


def lacks(s: Any, defect: str) -> Witnessed:
    """Tell whether the matrix lacks a defect; the witness is the pair that shows it."""
    witness, _ = s.graph.defects.get(defect, (None, ""))
    return witness is None, witness


SEQUENCE: dict[str, Callable[..., Any]] = {
    "balance": lambda s: abs(sum(s.signs)),
    "well_distribution": well_distribution,
    "correlation": correlation,
    "out_of_phase": lambda s: peak(autocorrelation(s.signs, s.spend)),
    "row_out_of_phase": lambda s: peak(autocorrelation([2 * z - 1 for z in s.graph.row], s.spend)),
}
CHARACTER: dict[str, Callable[..., Any]] = {
    "complete_sum": lambda s: sum(s.characters),
    "shifted_sum": shifted_sum,
    "incomplete_sum": lambda s: ((found := widest(sums(s.characters)))[0], found[1:]),
    "cyclic_incomplete_sum": cyclic_incomplete_sum,
    "window_sum": window_sum,
}
GRAPH: dict[str, Callable[..., Any]] = {  # these want an undirected graph without loops
    "edges": lambda s: sum(s.graph.degrees) // 2,
    "density": density,
    "degree_min": lambda s: extreme(s, min),
    "degree_max": lambda s: extreme(s, max),
    "agreement_sum": lambda s: s.pairs["agreement_sum"],
    "codegree_sum": lambda s: s.pairs["codegree_sum"],
    "codegree_min": lambda s: s.pairs["codegree_min"],
    "codegree_max": lambda s: s.pairs["codegree_max"],
    "closed_walks": lambda s, _: s.pairs["closed_walks"],
    "cycles": lambda s, _: s.pairs["cycles"],
}
STRUCTURE: dict[str, Callable[..., Any]] = {
    "zero_one": lambda s: lacks(s, "zero_one"),
    "zero_diagonal": lambda s: lacks(s, "zero_diagonal"),
    "symmetric": lambda s: lacks(s, "symmetric"),
}
PREDICATES: dict[str, Callable[..., Any]] = STRUCTURE | {
    "regular": regular,
    "squarefree": lambda s: arithmetic.squarefree(s.f, s.p),
    "irreducible": lambda s: arithmetic.irreducible(s.f, s.p),
    "even": lambda s: not any(s.f[1::2]),
    "odd": lambda s: not any(s.f[::2]),
    "prime": lambda s, a: s.proved_prime(a),
}
QUANTITIES = SEQUENCE | CHARACTER | GRAPH
FIELD: dict[str, Callable[..., Any]] = {"n": lambda s: s.order, "N": lambda s: s.length}
FIELD["chi"] = lambda s, a: (pow(a, (s.p - 1) // 2, s.p) + 1) % s.p - 1  # Euler's criterion
DEFINED = (
    QUANTITIES
    | PREDICATES
    | FIELD
    | {
        "k": lambda s: len(s.f) - 1,
        "r": lambda s: s.values.count(0),
        "leading": lambda s: s.f[-1],
        "value": lambda s, a: s.at(a),
        "disc": lambda s: arithmetic.discriminant(s.f, s.p),
    }
)
ORDERS = {"correlation": (2, 3), "shifted_sum": (2,), "closed_walks": (4,), "cycles": (4,)}


def maximum(name: str, order: int, s: Any) -> Any:
    """Return the trivial maximum of a quantity at an instance, None where there is none."""
    if name in CHARACTER:
        return s.p
    if name in SEQUENCE:
        return max(0, s.length - order + 1) if name == "correlation" else s.length
    n = s.order
    codegrees = n * Fraction(3 * n - 4, 4) + n * (n - 1) * Fraction(3 * n - 8, 4)
    table: dict[str, Any] = {"edges": comb(n, 2), "density": 1, "cycles": 24 * comb(n, 4)}
    table |= {"closed_walks": (n - 1) ** 4 + n - 1, "codegree_sum": codegrees if n > 3 else None}
    table |= {"agreement_sum": Fraction(n**3, 2)}
    return table.get(name, n - 1 if name.startswith("degree") else max(0, n - 2))
