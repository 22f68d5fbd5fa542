"""The explicit rule: signs as they are given."""

import re
from collections.abc import Sequence

import numpy as np

from verifier.errors import CaseError
from verifier.registry import Key, rule
from verifier.structures.sequence import BinarySequence

SIGNS = {"1": 1, "+1": 1, "-1": -1, "+": 1, "-": -1}
WANTED = "signs (1 and -1, or + and -) or bits (0 and 1) were wanted"


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

    Raises
    ------
    CaseError
        If something else stands there, with its position.
    """
    if content is not None:
        return _from_text("[sequence] file", _decoded(content))
    if isinstance(values, str):
        return _from_text("[sequence] values", values)
    signs = list(values or ())
    for place, sign in enumerate(signs, 1):
        if sign not in (1, -1):
            hint = "; bits are given as a text" if sign == 0 else ""
            raise CaseError(f"[sequence] values: entry {place} is {sign}; 1 or -1 was wanted{hint}")
    return _made("[sequence] values", signs)


def _decoded(content: bytes) -> str:
    try:
        return content.decode("utf-8")
    except UnicodeDecodeError as problem:
        raise CaseError(f"[sequence] file: byte {problem.start + 1} is no text; {WANTED}") from problem


def _from_text(label: str, text: str) -> BinarySequence:
    """Return the signs of tokens separated by white space or commas.

    Either every token is 1, +1 or -1; or all are runs of + and -; or all are runs of bits.
    """
    tokens = [token for token in re.split(r"[\s,]+", text) if token]
    if not tokens:
        raise CaseError(f"{label}: is empty; {WANTED}")
    bits = _are_bits(tokens)
    signs: list[int] = []
    for place, token in enumerate(tokens, 1):
        if bits and set(token) <= {"0", "1"}:
            signs.extend(1 - 2 * int(bit) for bit in token)
        elif not bits and token in SIGNS:
            signs.append(SIGNS[token])
        elif not bits and set(token) <= {"+", "-"}:
            signs.extend(SIGNS[character] for character in token)
        else:
            raise CaseError(f"{label}: entry {place} is {token[:20]!r}; {WANTED}")
    if not bits and len({token in ("1", "+1", "-1") for token in tokens}) == 2:
        raise CaseError(f"{label}: numbers and runs of signs stand side by side; {WANTED}")
    return _made(label, signs)


def _are_bits(tokens: Sequence[str]) -> bool:
    """Return whether the first token that is no sign by itself is a run of bits."""
    for token in tokens:
        if set(token) <= {"0", "1"} and (token == "0" or len(token) > 1):
            return True
        if token != "1":
            return False
    return False


def _made(label: str, signs: Sequence[int]) -> BinarySequence:
    if not signs:
        raise CaseError(f"{label}: is empty; {WANTED}")
    return BinarySequence(np.array(signs, dtype=np.int8))
