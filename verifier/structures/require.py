"""Take from a subject what an entry needs; the registry's `needs` says the same beforehand."""

from verifier.errors import UndefinedError
from verifier.records import Cost, Sizes
from verifier.structures.character import Character
from verifier.structures.graph import Circulant, Graph
from verifier.structures.sequence import BinarySequence
from verifier.structures.subject import Subject

MATRIX = 3000


def sequence_of(subject: Subject) -> BinarySequence:
    """Return the sequence of a subject."""
    if subject.sequence is None:
        raise UndefinedError("undefined: no sequence")
    return subject.sequence


def character_of(subject: Subject) -> Character:
    """Return the character of a subject."""
    if subject.character is None:
        raise UndefinedError("undefined: no quadratic character")
    return subject.character


def polynomial_of(subject: Subject) -> tuple[int, tuple[int, ...]]:
    """Return p and the residues of the polynomial of a subject."""
    if subject.p is None or subject.polynomial is None:
        raise UndefinedError("undefined: no polynomial over F_p")
    return subject.p, subject.polynomial


def graph_of(subject: Subject) -> Graph:
    """Return the graph of a subject."""
    if subject.graph is None:
        raise UndefinedError("undefined: no graph")
    return subject.graph


def circulant_of(subject: Subject) -> Circulant:
    """Return the circulant graph of a subject."""
    if not isinstance(subject.graph, Circulant):
        raise UndefinedError("undefined: no circulant graph")
    return subject.graph


def pair_cost(sizes: Sizes, *_: int) -> Cost:
    """Return the cost of the statistics of all pairs; only circulants pass 3,000 vertices."""
    n = sizes.n
    if n > MATRIX:
        return Cost(200 * n, 100 * n)
    return Cost(n**3 // 128 + 20 * n, 2 * n**2)
