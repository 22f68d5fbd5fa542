r"""Polynomials as typed, set as maths that may break between terms."""

import re

from verifier.appendix.values import run
from verifier.typography.escape import Latex, tex

TOKEN = re.compile(r"\s*([0-9]+(?:\.[0-9]+)?|[A-Za-z][A-Za-z0-9_]*|[-+*/^()])")
SPELT = re.compile(r"[A-Za-z][A-Za-z0-9]*")


def polynomial(text: str) -> Latex:
    r"""Return a polynomial in the grammar of a case as LaTeX; any other text escaped.

    Examples
    --------
    >>> print(polynomial("x^12 - 2*x^3 + 7").code)
    $x^{12}-\allowbreak 2x^{3}+\allowbreak 7$
    """
    lexemes = lexemes_of(text)
    if lexemes is None:
        return Latex(tex(text))
    return Latex(f"${''.join(_terms(lexemes))}$")


def lexemes_of(text: str) -> list[str] | None:
    """Return the lexemes of a polynomial, or None if something else stands in `text`."""
    lexemes: list[str] = []
    place, kept = 0, text.rstrip()
    while place < len(kept):
        found = TOKEN.match(kept, place)
        if found is None:
            return None
        lexemes.append(found.group(1))
        place = found.end()
    return lexemes if lexemes and lexemes.count("(") == lexemes.count(")") else None


def _terms(lexemes: list[str]) -> list[str]:
    made: list[str] = []
    place = 0
    while place < len(lexemes):
        lexeme = lexemes[place]
        place += 1
        if lexeme == "^":
            exponent, place = _exponent(lexemes, place)
            made.append(f"^{{{exponent}}}")
        elif lexeme == "*":
            following = lexemes[place] if place < len(lexemes) else ""
            made.append(r"\cdot " if following[:1].isdigit() else "")
        elif lexeme in "+-" and made and made[-1] != "(":
            made.append(f"{lexeme}\\allowbreak ")
        else:
            made.append(_atom(lexeme))
    return made


def _exponent(lexemes: list[str], place: int) -> tuple[str, int]:
    end = place + 1
    if lexemes[place : place + 1] == ["("]:
        depth = 1
        while depth and end < len(lexemes):
            depth += {"(": 1, ")": -1}.get(lexemes[end], 0)
            end += 1
    if lexemes[end : end + 1] == ["^"]:
        inner, after = _exponent(lexemes, end + 1)
        return f"{''.join(_terms(lexemes[place:end]))}^{{{inner}}}", after
    return "".join(_terms(lexemes[place:end])), end


def _atom(lexeme: str) -> str:
    if len(lexeme) > 1 and SPELT.match(lexeme):
        return rf"\mathit{{{lexeme.replace('_', chr(92) + '_')}}}"
    return run(lexeme) if lexeme.isdigit() else lexeme
