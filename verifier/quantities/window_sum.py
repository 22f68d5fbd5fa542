"""The sum of chi(f) over a given window."""

from fractions import Fraction

from verifier.kernels.windows import prefix_sums
from verifier.records import Measurement
from verifier.registry import quantity
from verifier.structures.require import character_of
from verifier.structures.subject import Subject


@quantity(
    "window_sum",
    definition="sum_(A<=x<B) chi(f(x)), signed, A and B rounded down",
    source="MauduitSarkozy1997",
    needs="character",
    symbol=r"\sum_{{0}\le x<{1}}\chi(f(x))",
    arguments=("place", "place"),
    maximum=lambda sizes, _, __: Fraction(sizes.p),
)
def window_sum(subject: Subject, first: int, end: int) -> Measurement:
    """Return the sum over first <= x < end, chi(f) continued periodically; 0 for an empty window."""
    character = character_of(subject)
    if end <= first:
        return Measurement(0)
    sums = prefix_sums(character.values)
    (turns, place), (turns_before, place_before) = divmod(end, character.p), divmod(first, character.p)
    whole = (turns - turns_before) * character.complete_sum
    return Measurement(whole + int(sums[place]) - int(sums[place_before]))
