"""What one instance consists of."""

from dataclasses import dataclass

from verifier.structures.character import Character
from verifier.structures.graph import Graph
from verifier.structures.sequence import BinarySequence


@dataclass(frozen=True)
class Subject:
    """What quantities and predicates are taken of; None where an instance has no such thing.

    Parameters
    ----------
    p
        The characteristic.
    polynomial
        f in least residues, highest coefficient first.
    character
        x -> chi(f(x)).
    sequence
        The signs on their indices.
    graph
        The graph.
    """

    p: int | None
    polynomial: tuple[int, ...] | None
    character: Character | None
    sequence: BinarySequence | None
    graph: Graph | None
