"""Find the line of a key in a TOML text, with the parser itself as the oracle."""

import tomllib
from collections.abc import Sequence

Path = Sequence[str | int]


def line_of(text: str, path: Path) -> int:
    """Return the line, from 1, on which the value at `path` first appears.

    Where the path leads nowhere (a key that is missing), the line of its longest existing beginning.

    Parameters
    ----------
    text
        A valid TOML document.
    path
        Keys and list positions from the root.

    Notes
    -----
    Bisection over the prefixes that parse: about log2(lines) parses.

    Examples
    --------
    >>> line_of('a = 1\\n[b]\\nc = 2\\n', ["b", "c"])
    3
    >>> line_of('a = 1\\n[b]\\nc = 2\\n', ["b", "d"])
    2
    """
    lines = text.split("\n")
    trimmed = list(path)
    while trimmed and not _reaches(text, trimmed):
        trimmed.pop()
    if not trimmed:
        return 1
    absent, present = 0, len(lines)
    while present - absent > 1:
        middle = (absent + present) // 2
        parsed = _shortest_parsed(lines, middle)
        if _reaches(parsed, trimmed):
            present = middle
        else:
            absent = middle
    return present


def _shortest_parsed(lines: list[str], count: int) -> str:
    """Return the shortest prefix of at least `count` lines that parses."""
    for end in range(count, len(lines) + 1):
        prefix = "\n".join(lines[:end]) + "\n"
        if _parses(prefix):
            return prefix
    return ""


def _parses(text: str) -> bool:
    try:
        tomllib.loads(text)
    except tomllib.TOMLDecodeError:
        return False
    return True


def _reaches(text: str, path: Path) -> bool:
    found: object = tomllib.loads(text)
    for step in path:
        if isinstance(found, dict) and step in found:
            found = found[step]
        elif isinstance(found, list) and isinstance(step, int) and step < len(found):
            found = found[step]
        else:
            return False
    return True
