"""Text for pdflatex: what is not LaTeX of our own goes through here, and leaves as ASCII.

Accented letters leave as accent commands, so that the result does not depend on the encoding that
a host document declares.
"""

import re
import unicodedata
from dataclasses import dataclass

SPECIAL = {
    "\\": r"\textbackslash{}",
    "{": r"\{",
    "}": r"\}",
    "$": r"\$",
    "&": r"\&",
    "#": r"\#",
    "%": r"\%",
    "_": r"\_",
    "~": r"\textasciitilde{}",
    "^": r"\textasciicircum{}",
    "<": r"\textless{}",
    ">": r"\textgreater{}",
    "|": r"\textbar{}",
    '"': r"\textquotedbl{}",
    "`": "{`}",
}
LETTERS = {
    "ß": r"\ss{}", "Æ": r"\AE{}", "æ": r"\ae{}", "Œ": r"\OE{}", "œ": r"\oe{}",
    "Ø": r"\O{}", "ø": r"\o{}", "Ł": r"\L{}", "ł": r"\l{}", "Đ": r"\DJ{}", "đ": r"\dj{}",
    "Ð": r"\DH{}", "ð": r"\dh{}", "Þ": r"\TH{}", "þ": r"\th{}", "Ŋ": r"\NG{}", "ŋ": r"\ng{}",
    "\u0131": r"\i{}", "¡": r"\textexclamdown{}", "¿": r"\textquestiondown{}", "§": r"\S{}",
    "«": r"\guillemotleft{}", "»": r"\guillemotright{}", "\u2039": r"\guilsinglleft{}",
    "\u203a": r"\guilsinglright{}", "\u2018": r"\textquoteleft{}", "\u2019": r"\textquoteright{}",
    "“": r"\textquotedblleft{}", "”": r"\textquotedblright{}", "\u201a": r"\quotesinglbase{}",
    "„": r"\quotedblbase{}", "\u2013": r"\textendash{}", "\u2014": r"\textemdash{}",
    "\u2010": "-", "\u2011": r"\mbox{-}", "…": r"\textellipsis{}",
}  # fmt: skip
ACCENTS = {
    "\u0300": "`", "\u0301": "'", "\u0302": "^", "\u0303": "~", "\u0304": "=", "\u0306": "u",
    "\u0307": ".", "\u0308": '"', "\u030a": "r", "\u030b": "H", "\u030c": "v", "\u0327": "c",
    "\u0328": "k", "\u0326": "textcommabelow",
}  # fmt: skip
UNBROKEN, PIECE = 20, 8
LIGATURES = "-,'"  # doubled, each of these turns into another character


@dataclass(frozen=True)
class Latex:
    """LaTeX that a printer of this package made; templates print it as it stands."""

    code: str

    def __str__(self) -> str:
        """Refuse: joined into ordinary text it would be escaped, or not, by accident."""
        raise TypeError("LaTeX is no text; take its code")


def plain(text: str) -> str:
    r"""Return `text` composed, on one line, without control and direction characters.

    Examples
    --------
    >>> plain(" two\n\n lines\u202e ")
    'two lines'
    """
    spaced = re.sub(r"\s+", " ", unicodedata.normalize("NFC", text))
    kept = "".join(c for c in spaced if not unicodedata.category(c).startswith("C"))
    return re.sub(" +", " ", kept).strip()


def tex(text: str) -> str:
    r"""Return `text` as LaTeX that prints it; words of more than 20 characters may break anywhere.

    Raises
    ------
    ValueError
        If a character cannot be set in T1; `unprintable` says so beforehand.

    Examples
    --------
    >>> print(tex("50% of x_1 -- Erdős"))
    50\% of x\_1 -{}- Erd\H{o}s
    """
    refused = unprintable(text)
    if refused is not None:
        raise ValueError(refused)
    return " ".join(map(_word, plain(text).split(" "))).replace("...", r"\ldots{}")


def tex_keeping_blanks(text: str) -> str:
    """Return `tex(text)` with one blank at either end where `text` has one there."""
    before = " " if text[:1].isspace() else ""
    after = " " if text[-1:].isspace() and text.strip() else ""
    return before + tex(text) + after


def unprintable(text: str) -> str | None:
    """Return what cannot be set in T1 by pdflatex, in words, or None if all of `text` can.

    Control and direction characters are dropped in print and so do not count.

    Examples
    --------
    >>> unprintable("Erdős")
    >>> unprintable("χ(x)")
    "the character 'χ' (U+03C7, GREEK SMALL LETTER CHI) cannot be printed by pdflatex"
    """
    for character in plain(text):
        if _set(character) is None:
            name = unicodedata.name(character, "unnamed")
            place = f"U+{ord(character):04X}, {name}"
            return f"the character {character!r} ({place}) cannot be printed by pdflatex"
    return None


def accented(character: str) -> tuple[str, str] | None:
    """Return the base letter and the accent command of a Latin letter, or None if it is none.

    Examples
    --------
    >>> accented("ő"), accented("o")
    (('o', 'H'), None)
    """
    parts = unicodedata.normalize("NFD", character)
    if len(parts) != 2 or not (parts[0].isascii() and parts[0].isalpha()):
        return None
    accent = ACCENTS.get(parts[1])
    return None if accent is None else (parts[0], accent)


def _word(word: str) -> str:
    made: list[str] = []
    before = ""
    for place, character in enumerate(word):
        if character == before and character in LIGATURES:
            made.append("{}")
        if len(word) > UNBROKEN and place and place % PIECE == 0:
            made.append("\\allowbreak ")
        made.append(_set(character) or "")
        before = character
    return "".join(made)


def _set(character: str) -> str | None:
    if character in SPECIAL:
        return SPECIAL[character]
    if character.isascii():
        return character
    if character in LETTERS:
        return LETTERS[character]
    pair = accented(character)
    if pair is None:
        return None
    base, accent = pair
    above = accent not in {"c", "k", "textcommabelow"}
    letter = f"\\{base}" if base in "ij" and above else base
    return f"\\{accent}{{{letter}}}"
