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
    """Return the sum over first <= x < end, chi(f) continued periodically; 0 where there is none.

    Parameters
    ----------
    subject
        With a character over F_p.
    first, end
        Any integers.

    Returns
    -------
    Measurement
        value: integer, negative or not. witness: none.

    Notes
    -----
    Whole periods contribute the complete sum. Cost: p additions, however long the window.
    """
    character = character_of(subject)
    if end <= first:
        return Measurement(0)
    sums = prefix_sums(character.values)
    turns_to_first, from_place = divmod(first, character.p)
    turns_to_end, to_place = divmod(end, character.p)
    whole = (turns_to_end - turns_to_first) * character.complete_sum
    return Measurement(whole + int(sums[to_place]) - int(sums[from_place]))
