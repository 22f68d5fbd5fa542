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


def simplest_between(low: Fraction, high: Fraction) -> Fraction:
    """Return the fraction of least denominator in the closed interval, by continued fractions.

    Examples
    --------
    >>> str(simplest_between(Fraction(314, 100), Fraction(315, 100)))
    '22/7'
    """
    whole = -((-low.numerator) // low.denominator)
    if whole <= high:
        return Fraction(whole)
    below = whole - 1
    inner = simplest_between(1 / (high - below), 1 / (low - below))
    return below + 1 / inner
