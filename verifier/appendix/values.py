r"""Printing canonical values: exact ones in full, enclosed ones with both ends.

An irrational value is given by its floor and its ceiling at 12 significant digits, and printed as
``12.345_6^7``: it lies between 12.3456 and 12.3457.
"""

import re
from collections.abc import Mapping
from fractions import Fraction
from math import ceil, floor

from verifier.records import Json
from verifier.typography.escape import Latex, tex

BREAK = "\\allowbreak "
GROUP = 3
UNBROKEN = 12
EXACT = 14  # a ratio of so many characters is printed as it is
RATIONAL = re.compile(r"-?[0-9]+(/[0-9]+)?")
DECIMAL = re.compile(r"-?[0-9]+(\.[0-9]+)?")
SHORT = 6
LONGEST = 480


def digits(text: str, unbroken: int = UNBROKEN) -> str:
    r"""Return digits (and a slash, a point, a sign) as LaTeX that may break in long runs.

    Examples
    --------
    >>> print(digits("-5/2"), digits("12345678901234"), digits("0.12345678", unbroken=6))
    $-$5/2 12\allowbreak 345\allowbreak 678\allowbreak 901\allowbreak 234 0.12\allowbreak 345\allowbreak 678
    """  # noqa: E501 a result stands on one line
    sign, rest = ("$-$", text[1:]) if text.startswith("-") else ("", text)
    broken = re.sub("[0-9]+", lambda found: run(found.group(), unbroken), rest)
    return sign + (broken.replace("/", f"/{BREAK}") if len(rest) > unbroken else broken)


def run(figures: str, unbroken: int = UNBROKEN) -> str:
    """Return a run of digits that may break, where it is long, into groups of three."""
    if len(figures) <= unbroken:
        return figures
    first = len(figures) % GROUP
    groups = [
        figures[:first],
        *(figures[at : at + GROUP] for at in range(first, len(figures), GROUP)),
    ]
    return BREAK.join(filter(None, groups))


def value(canonical: Json) -> Latex:
    """Return a canonical value of a certificate as LaTeX for running text or a cell.

    Raises
    ------
    ValueError
        If it is no canonical value.
    """
    if canonical is None:
        return Latex("--")
    if isinstance(canonical, bool):
        return Latex("true" if canonical else "false")
    if isinstance(canonical, str) and RATIONAL.fullmatch(canonical):
        return Latex(digits(canonical)) if len(canonical) <= LONGEST else _long(canonical)
    if isinstance(canonical, dict):
        return _between(*_ends(canonical))
    raise ValueError(f"{canonical!r} is no canonical value")


def short(canonical: Json) -> Latex:
    """Return a ratio at 6 significant digits, rounded outward; exact where that is short.

    Examples
    --------
    >>> print(short("2/3").code, short({"lower": "0.581411123456", "upper": "0.581411123457"}).code)
    2/3 0.58141$_{1}^{2}$
    """
    if isinstance(canonical, str) and RATIONAL.fullmatch(canonical):
        if len(canonical) <= EXACT:
            return Latex(digits(canonical))
        if len(canonical) > LONGEST:
            return _long(canonical)
        exact = Fraction(canonical)
        return _between(rounded(exact, up=False), rounded(exact, up=True))
    if isinstance(canonical, dict):
        lower, upper = _ends(canonical)
        return _between(rounded(Fraction(lower), up=False), rounded(Fraction(upper), up=True))
    return value(canonical)


def rounded(exact: Fraction, *, up: bool) -> str:
    """Return a decimal of 6 significant digits next to `exact`, from above or from below.

    Examples
    --------
    >>> rounded(Fraction(2, 3), up=False), rounded(Fraction(20000, 3), up=True)
    ('0.666666', '6666.67')
    """
    if exact == 0:
        return "0"
    bits = exact.numerator.bit_length() - exact.denominator.bit_length()
    exponent = bits * 30103 // 100000
    while abs(exact) >= Fraction(10) ** (exponent + 1):
        exponent += 1
    while abs(exact) < Fraction(10) ** exponent:
        exponent -= 1
    places = max(0, SHORT - 1 - exponent)
    scaled = exact * 10**places
    whole = ceil(scaled) if up else floor(scaled)
    return _point(whole, places)


def _point(whole: int, places: int) -> str:
    sign = "-" if whole < 0 else ""
    text = str(abs(whole)).rjust(places + 1, "0")
    return f"{sign}{text[:-places]}.{text[-places:]}" if places else f"{sign}{text}"


def _ends(canonical: Mapping[str, Json]) -> tuple[str, str]:
    lower, upper = canonical.get("lower"), canonical.get("upper")
    ends = [end for end in (lower, upper) if isinstance(end, str) and DECIMAL.fullmatch(end)]
    if len(ends) != 2:
        raise ValueError(f"{canonical!r} is no enclosure")
    return ends[0], ends[1]


def _long(rational: str) -> Latex:
    return Latex(f"(a rational number of {len(rational)} characters)")


def _between(lower: str, upper: str) -> Latex:
    if lower == upper:
        return Latex(digits(lower))
    if len(lower) == len(upper) and lower[:-1] == upper[:-1]:
        return Latex(f"{digits(lower[:-1])}$_{{{lower[-1]}}}^{{{upper[-1]}}}$")
    return Latex(f"[{digits(lower)},\\allowbreak\\ {digits(upper)}]")


def cell(text: str, unbroken: int = UNBROKEN) -> Latex:
    """Return the cell of a table: numbers as numbers, anything else as escaped text."""
    if RATIONAL.fullmatch(text) or DECIMAL.fullmatch(text):
        return Latex(digits(text, unbroken))
    return Latex(tex(text))
