"""From balls to rational intervals."""

from fractions import Fraction

from flint import arb


def ends(found: arb) -> tuple[Fraction, Fraction]:
    """Return rational ends of a finite ball, exactly those of the ball.

    Raises
    ------
    OverflowError
        If the ball is not finite.
    """
    if not found.is_finite():
        raise OverflowError("an infinite enclosure")
    middle, radius = _dyadic(found.mid()), _dyadic(found.rad())
    return middle - radius, middle + radius


def _dyadic(exact: arb) -> Fraction:
    mantissa, exponent = exact.man_exp()
    power = int(exponent)
    whole = int(mantissa)
    return Fraction(whole << power) if power >= 0 else Fraction(whole, 1 << -power)


def simplest_between(low: Fraction, high: Fraction, largest: int) -> Fraction | None:
    """Return the fraction of least denominator in the closed interval, by continued fractions.

    Parameters
    ----------
    low, high
        The ends, low <= high.
    largest
        Denominators above this are not wanted: None is returned instead.

    Examples
    --------
    >>> str(simplest_between(Fraction(314, 100), Fraction(315, 100), 50))
    '22/7'
    >>> simplest_between(Fraction(314, 100), Fraction(315, 100), 5)
    """
    a, b, c, d = low.numerator, low.denominator, high.numerator, high.denominator
    last, before = (1, 0), (0, 1)  # convergents of the common beginning: numerator, denominator
    while True:
        whole = -(-a // b)
        ends_here = whole * d <= c
        part = whole if ends_here else whole - 1
        last, before = (part * last[0] + before[0], part * last[1] + before[1]), last
        if last[1] > largest:
            return None
        if ends_here:
            return Fraction(*last)
        a, b, c, d = d, c - part * d, b, a - part * b
