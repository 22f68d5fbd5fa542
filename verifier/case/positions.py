"""Find the line of a key in a TOML text, with the parser itself as the oracle."""

import re
import tomllib
from collections.abc import Sequence

Path = Sequence[str | int]

MOST_PARSED = 20_000_000  # characters; a value that spans very many lines would cost more


def line_of(text: str, path: Path) -> int:
    r"""Return the line, from 1, on which the value at `path` first appears.

    Where the path leads nowhere (a missing key), the line of its longest existing beginning.

    Parameters
    ----------
    text
        A valid TOML document.
    path
        Keys and list positions from the root.

    Notes
    -----
    Bisection over the prefixes that parse: about log2(lines) parses. Where a value spans so many
    lines that this is dear, the first line that begins with the key is returned.

    Examples
    --------
    >>> line_of("a = 1\n[b]\nc = 2\n", ["b", "c"])
    3
    >>> line_of("a = 1\n[b]\nc = 2\n", ["b", "d"])
    2
    """
    trimmed = list(path)
    while trimmed and not _reaches(tomllib.loads(text), trimmed):
        trimmed.pop()
    if not trimmed:
        return 1
    search = _Search(text)
    absent, present = 0, len(search.lines)
    while present - absent > 1:
        middle = (absent + present) // 2
        document = search.shortest_document(middle)
        if document is None:
            return _first_mention(search.lines, trimmed)
        if _reaches(document, trimmed):
            present = middle
        else:
            absent = middle
    return present


class _Search:
    """Parses prefixes of one text, within a budget of characters."""

    def __init__(self, text: str) -> None:
        self.lines = text.split("\n")
        self.parsed = 0

    def shortest_document(self, count: int) -> object:
        """Return what the shortest parsing prefix of at least `count` lines holds, or None."""
        for end in range(count, len(self.lines) + 1):
            prefix = "\n".join(self.lines[:end]) + "\n"
            self.parsed += len(prefix)
            if self.parsed > MOST_PARSED:
                return None
            try:
                return tomllib.loads(prefix)
            except tomllib.TOMLDecodeError:
                continue
        return None


def _first_mention(lines: Sequence[str], path: Path) -> int:
    keys = [step for step in path if isinstance(step, str)]
    pattern = re.compile(rf"\s*[\"']?{re.escape(keys[-1])}[\"']?\s*=")
    return next((number for number, line in enumerate(lines, 1) if pattern.match(line)), 1)


def _reaches(document: object, path: Path) -> bool:
    found = document
    for step in path:
        if isinstance(found, list):
            found = dict(enumerate(found))
        if not isinstance(found, dict) or step not in found:
            return False
        found = found[step]
    return True
