r"""Polynomials as typed, set as maths that may break between terms."""

import re

from verifier.appendix.escape import Latex, tex

TOKEN = re.compile(r"\s*([0-9]+(?:\.[0-9]+)?|[A-Za-z][A-Za-z0-9_]*|[-+*/^()])")
SPELT = re.compile(r"[A-Za-z][A-Za-z0-9]*")


def polynomial(text: str) -> Latex:
    r"""Return a polynomial in the grammar of a case as LaTeX; any other text escaped.

    Examples
    --------
    >>> print(polynomial("x^12 - 2*x^3 + 7").code)
    $x^{12}-\allowbreak 2x^{3}+\allowbreak 7$
    """
    tokens = tokens_of(text)
    if tokens is None:
        return Latex(tex(text))
    return Latex(f"${''.join(_terms(tokens))}$")


def tokens_of(text: str) -> list[str] | None:
    """Return the tokens of a polynomial, or None if something else stands in `text`."""
    tokens: list[str] = []
    place, kept = 0, text.rstrip()
    while place < len(kept):
        found = TOKEN.match(kept, place)
        if found is None:
            return None
        tokens.append(found.group(1))
        place = found.end()
    return tokens if tokens and tokens.count("(") == tokens.count(")") else None


def _terms(tokens: list[str]) -> list[str]:
    made: list[str] = []
    place = 0
    while place < len(tokens):
        token = tokens[place]
        place += 1
        if token == "^":
            exponent, place = _exponent(tokens, place)
            made.append(f"^{{{exponent}}}")
        elif token == "*":
            following = tokens[place] if place < len(tokens) else ""
            made.append(r"\cdot " if following[:1].isdigit() else "")
        elif token in "+-" and made and made[-1] != "(":
            made.append(f"{token}\\allowbreak ")
        else:
            made.append(_atom(token))
    return made


def _exponent(tokens: list[str], place: int) -> tuple[str, int]:
    end = place + 1
    if tokens[place : place + 1] == ["("]:
        depth = 1
        while depth and end < len(tokens):
            depth += {"(": 1, ")": -1}.get(tokens[end], 0)
            end += 1
    if tokens[end : end + 1] == ["^"]:
        inner, after = _exponent(tokens, end + 1)
        return f"{''.join(_terms(tokens[place:end]))}^{{{inner}}}", after
    return "".join(_terms(tokens[place:end])), end


def _atom(token: str) -> str:
    if len(token) > 1 and SPELT.match(token):
        return rf"\mathit{{{token.replace('_', chr(92) + '_')}}}"
    return token
