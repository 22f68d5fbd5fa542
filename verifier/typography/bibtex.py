"""Reading BibTeX entries as data: accents decoded, every other command refused."""

import re
import unicodedata
from collections.abc import Mapping
from dataclasses import dataclass

from verifier.typography.escape import ACCENTS, unprintable

KINDS = (
    "article book booklet inbook incollection inproceedings manual mastersthesis misc phdthesis "
    "proceedings techreport unpublished"
)
MARKS = {command: mark for mark, command in ACCENTS.items()}
SPELT = {
    "ss": "ß", "ae": "æ", "AE": "Æ", "oe": "œ", "OE": "Œ", "o": "ø", "O": "Ø", "l": "ł", "L": "Ł",
    "aa": "å", "AA": "Å", "i": "i", "j": "j", "dj": "đ", "DJ": "Đ", "th": "þ", "TH": "Þ",
    "&": "&", "%": "%", "#": "#", "_": "_", "$": "$", " ": " ",
}  # fmt: skip
EN, EM = "\u2013", "\u2014"
START = re.compile(r"@\s*([A-Za-z]+)\s*\{\s*([A-Za-z0-9][A-Za-z0-9:._+-]*)\s*,")
FIELD = re.compile(r"\s*([A-Za-z][A-Za-z-]*)\s*=\s*")
ACCENT = re.compile(
    r"\\(?:([`'^~=.\"])\s*|([uvHcrk])(?:\s+|(?=\{)))(?:\{\s*(\\?[A-Za-z])\s*\}|(\\[ij](?![A-Za-z])|[A-Za-z]))"
)
COMMAND = re.compile(r"\\([A-Za-z]+|.)(?:\s+|\{\})?", re.DOTALL)


@dataclass(frozen=True)
class Entry:
    """One entry: its kind, its key, and its fields as plain text without braces."""

    kind: str
    key: str
    fields: Mapping[str, str]


def read_bibtex(text: str) -> tuple[Entry, ...]:
    """Return the entries of BibTeX text; text between entries is no entry and skipped.

    Raises
    ------
    ValueError
        If an entry is not of the form @kind{key, field = {value}, ...}, its kind is unknown, or a
        value holds a command other than an accent.
    """
    entries: list[Entry] = []
    place = text.find("@")
    while place >= 0:
        entry, place = _entry(text, place)
        entries.append(entry)
        place = text.find("@", place)
    return tuple(entries)


def check_bibtex(text: str) -> str | None:
    r"""Return why `text` is not one printable BibTeX entry, or None if it is.

    Examples
    --------
    >>> check_bibtex("@misc{a, title = {On x}, year = 2001}")
    >>> check_bibtex("@misc{a, title = {\\input{x}}}")
    'the command \\input is not allowed in a bibliography entry'
    """
    try:
        entries = read_bibtex(text)
    except ValueError as problem:
        return str(problem)
    if len(entries) != 1:
        return f"{len(entries)} entries stand there; one entry @kind{{key, ...}} was wanted"
    for value in entries[0].fields.values():
        problem_here = unprintable(value)
        if problem_here is not None:
            return problem_here
    return None


def _entry(text: str, place: int) -> tuple[Entry, int]:
    start = START.match(text, place)
    if start is None:
        raise ValueError(f"{_shown(text, place)} opens no entry; @kind{{key, ...}} was wanted")
    kind, key = start.group(1).lower(), start.group(2)
    if kind not in KINDS.split():
        raise ValueError(f"the kind @{kind} is unknown; known: {', '.join(KINDS.split())}")
    fields: dict[str, str] = {}
    place = start.end()
    while True:
        place = _blanks(text, place)
        if text[place : place + 1] == "}":
            return Entry(kind, key, fields), place + 1
        found = FIELD.match(text, place)
        if found is None:
            raise ValueError(
                f"entry {key}: {_shown(text, place)} is no field; name = {{value}} was wanted"
            )
        raw, place = _value(text, found.end(), key)
        fields[found.group(1).lower()] = _one_name(raw) if _is_whole(raw) else decoded(raw)
        place = _blanks(text, place)
        if text[place : place + 1] == ",":
            place += 1
        elif text[place : place + 1] != "}":
            raise ValueError(f"entry {key}: a comma is missing before {_shown(text, place)}")


def _value(text: str, place: int, key: str) -> tuple[str, int]:
    opening = text[place : place + 1]
    if opening.isdigit():
        number = re.compile("[0-9]+").match(text, place)
        return (number.group(), number.end()) if number else ("", place)
    if opening not in ("{", '"'):
        raise ValueError(f"entry {key}: {_shown(text, place)} is no value; {{...}} was wanted")
    depth, end = 0, place + 1
    while end < len(text):
        character = text[end]
        if depth == 0 and character == ("}" if opening == "{" else '"'):
            return text[place + 1 : end], end + 1
        depth += {"{": 1, "}": -1}.get(character, 0)
        end += 2 if character == "\\" else 1
    raise ValueError(f"entry {key}: a value is not closed")


def decoded(value: str) -> str:
    r"""Return a BibTeX value as plain text: accents composed, braces dropped, dashes kept.

    Raises
    ------
    ValueError
        If it holds maths or a command that is no accent.

    Examples
    --------
    >>> decoded("Erd{\\H o}s and {R{\\'e}nyi}")
    'Erdős and Rényi'
    """
    composed = ACCENT.sub(_composed, value)
    spelt = COMMAND.sub(_spelt, composed)
    if "\0" in spelt or re.search(r"(?<!\x01)\$", spelt):
        raise ValueError("maths is not allowed in a bibliography entry")
    kept = re.sub(r"[{}]", "", spelt).replace("\x01", "").replace("~", " ")
    kept = kept.replace("---", EM).replace("--", EN)
    return unicodedata.normalize("NFC", " ".join(kept.split()))


def _is_whole(raw: str) -> bool:
    return re.fullmatch(r"\s*\{[^{}]*\}\s*", raw) is not None


def _one_name(raw: str) -> str:
    """Return a value in braces of its own: a hard space keeps `and` from separating authors."""
    return decoded(raw).replace(" and ", "\u00a0and\u00a0")


def _composed(found: re.Match[str]) -> str:
    mark = MARKS[found.group(1) or found.group(2)]
    return (found.group(3) or found.group(4)).lstrip("\\") + mark


def _spelt(found: re.Match[str]) -> str:
    name = found.group(1)
    if name not in SPELT:
        raise ValueError(f"the command \\{name} is not allowed in a bibliography entry")
    return ("\x01" if name == "$" else "") + SPELT[name]


def _blanks(text: str, place: int) -> int:
    while text[place : place + 1].isspace():
        place += 1
    return place


def _shown(text: str, place: int) -> str:
    return repr(text[place : place + 20])
