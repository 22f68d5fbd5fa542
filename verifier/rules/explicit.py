"""The explicit rule: signs as they are given."""

import re
from collections.abc import Sequence

import numpy as np

from verifier.errors import CaseError
from verifier.registry import Key, rule
from verifier.structures.sequence import BinarySequence

WANTED = "signs (1 and -1, or + and -) or bits (0 and 1) were wanted"
NUMBERS = {"1": 1, "+1": 1, "-1": -1}
NUMBER, SIGN_RUN, BIT_RUN = r"[+-]?1", r"[+-]+", r"[01]+"


@rule(
    "explicit",
    definition="as given: 1 and -1, or + and -, or bits b read as (-1)^b",
    source="common-practice",
    keys={"values": Key("values", optional=True), "file": Key("file", optional=True)},
)
def explicit(
    *, values: str | Sequence[int] | None = None, content: bytes | None = None
) -> BinarySequence:
    """Return the signs of a list, a text or a file.

    Parameters
    ----------
    values
        1 and -1; or a text of numbers 1 and -1, of signs or of bits, apart by white space or
        commas.
    content
        The bytes of a file that holds such a text.

    Raises
    ------
    CaseError
        If something else stands there, with its position; or nothing, or both.
    """
    if (values is None) == (content is None):
        raise CaseError("[sequence]: one of values and file was wanted")
    if content is not None:
        return _from_text("[sequence] file", _decoded(content))
    if isinstance(values, str):
        return _from_text("[sequence] values", values)
    return _from_list(list(values or ()))


def _from_list(values: Sequence[object]) -> BinarySequence:
    for place, value in enumerate(values, 1):
        if type(value) is not int or value not in (1, -1):
            hint = "; bits are given as a text" if value == 0 else ""
            raise CaseError(
                f"[sequence] values: entry {place} is {str(value)[:20]}; 1 or -1 was wanted{hint}"
            )
    if not values:
        raise CaseError(f"[sequence] values: is empty; {WANTED}")
    return BinarySequence(np.array(values, dtype=np.int8))


def _decoded(content: bytes) -> str:
    try:
        return content.decode("utf-8")
    except UnicodeDecodeError as problem:
        place = problem.start + 1
        raise CaseError(f"[sequence] file: byte {place} is no text; {WANTED}") from problem


def _from_text(label: str, text: str) -> BinarySequence:
    """Return the signs of entries apart by white space or commas.

    Either all entries are 1, +1 or -1; or all are runs of + and -; or all are runs of 0 and 1.
    """
    entries = [entry for entry in re.split(r"[\s,]+", text) if entry]
    if not entries:
        raise CaseError(f"{label}: is empty; {WANTED}")
    shape, plus = _shape(entries)
    for place, entry in enumerate(entries, 1):
        if not re.fullmatch(shape, entry):
            raise CaseError(f"{label}: entry {place} is {entry[:20]!r}; {WANTED}")
    if shape == NUMBER:
        return BinarySequence(np.array([NUMBERS[entry] for entry in entries], dtype=np.int8))
    run = np.frombuffer("".join(entries).encode("ascii"), np.uint8)
    return BinarySequence(np.where(run == ord(plus), np.int8(1), np.int8(-1)))


def _shape(entries: Sequence[str]) -> tuple[str, str]:
    """Return the form that the first telling entry has, and the character that means +1."""
    for entry in entries:
        if re.fullmatch(SIGN_RUN, entry):
            return SIGN_RUN, "+"
        if entry == "0" or (len(entry) > 1 and re.fullmatch(BIT_RUN, entry)):
            return BIT_RUN, "0"
        if entry != "1":
            break
    return NUMBER, ""
