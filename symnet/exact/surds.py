"""Roots in closed form: rational ones and those of quadratic factors with rational coefficients.

A rational factor of degree 1 or 2 of a primitive polynomial has a leading coefficient that divides a_n, so a_n
times the root, or a_n times the sum and the product of two roots, is an integer (Gauss). Once the roots are known
to the length of a_n, the nearest integer is the only candidate, and exact division decides. So the search is
complete, and costs far less than factoring the polynomial.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from fractions import Fraction
from typing import Final

from symnet.exact import dense
from symnet.exact.dense import Integers
from symnet.exact.discs import gap, images, refine
from symnet.exact.newton import Newton, Point

__all__ = ["Surd", "closed_forms"]

_CLOSED_FORM_BITS: Final = 3000  # of the leading coefficient; beyond that closed forms are unreadable anyway

_CERTAIN: Final = (
    40  # bits after the point that must be zero in an integer: one in 10^12 of those tried is none
)


@dataclass(frozen=True, slots=True)
class Surd:
    """``rational + sign*sqrt(radicand)``, exact; a negative radicand gives an imaginary part.

    A rational number has radicand 0 and sign 0.
    """

    rational: Fraction
    radicand: Fraction = Fraction(0)
    sign: int = 0


def closed_forms(p: Integers, points: list[Point], in_square: bool) -> list[Surd | None]:
    """For every image of the points the exact form of its root, where it is rational or quadratic over the rationals.

    A rational factor of degree 1 or 2 of the primitive p has a leading coefficient that divides a_n, so a_n times
    the root, or times the sum and the product of two roots, is an integer (Gauss). The nearest integer is the only
    candidate once the coordinates are good to the length of a_n.
    """
    lead = abs(p[-1])
    everyone = [image for point in points for image in images(point, in_square)]
    forms: list[Surd | None] = [None] * len(everyone)
    if lead.bit_length() > _CLOSED_FORM_BITS:
        return forms
    fine = -(lead.bit_length() + max(0.0, *(point.log_size for point in points)) + _CERTAIN + 10)
    newton = Newton(p)
    sharp: list[Point] = []
    for point in points:
        better = point if point.log_radius <= fine else refine(newton, point, 1, fine)
        sharp.extend(images(better or point, in_square))
    for i, point in enumerate(sharp):
        if point.y == 0:
            integer = _integer(lead * point.x, point.shift)
            if integer is not None and not dense.value_at(p, Fraction(integer, lead)):
                forms[i] = _inside(Surd(Fraction(integer, lead)), everyone[i])
    # Conjugates follow each other in the list; two real roots of one quadratic can stand anywhere.
    real = [i for i, point in enumerate(sharp) if point.y == 0 and forms[i] is None]
    pairs = [(i, i + 1) for i, point in enumerate(sharp) if point.y > 0]
    pairs += [(i, k) for place, i in enumerate(real) for k in real[place + 1 :]]
    for i, k in pairs:
        if forms[i] is None and forms[k] is None:
            quadratic = _quadratic(p, lead, sharp[i], sharp[k])
            if quadratic is not None:
                centre, radicand = quadratic
                high = 1 if sharp[i].y > 0 or gap(sharp[i], sharp[k], 0).real > 0 else -1
                forms[i] = _inside(Surd(centre, radicand, high), everyone[i])
                forms[k] = _inside(Surd(centre, radicand, -high), everyone[k])
    return forms


def _integer(number: int, shift: int) -> int | None:
    """The integer that number/2^shift is all but equal to, if any."""
    nearest = (number + (1 << shift >> 1)) >> shift
    return nearest if abs(number - (nearest << shift)) << _CERTAIN <= 1 << shift else None


def _quadratic(p: Integers, lead: int, a: Point, b: Point) -> tuple[Fraction, Fraction] | None:
    """Centre and radicand of the rational quadratic that has these two roots and divides p, if there is one."""
    shift = max(a.shift, b.shift)
    total = _integer(lead * ((a.x << (shift - a.shift)) + (b.x << (shift - b.shift))), shift)
    if total is None:
        return None
    product = _integer(lead * (a.x * b.x - a.y * b.y), a.shift + b.shift)
    if product is None:
        return None
    factor = dense.primitive([Fraction(product), Fraction(-total), Fraction(lead)])[1]
    if dense.divide_exactly(p, factor) is None:
        return None
    centre = Fraction(total, 2 * lead)
    return centre, centre * centre - Fraction(product, lead)


def _inside(surd: Surd, point: Point) -> Surd | None:
    """The surd, if it lies in the disc of the point; then it is that disc's root."""
    unit = 1 << point.shift
    x, y = Fraction(point.x, unit), Fraction(point.y, unit)
    # One more bit than the proven radius; discs are further apart than that.
    whole = math.ceil(point.log_radius) if point.log_radius > -math.inf else 0
    reach = Fraction(2) ** whole if point.log_radius > -math.inf else Fraction(0)
    if surd.radicand < 0:
        return surd if abs(x - surd.rational) <= reach and _near_root(surd, y, reach) else None
    if surd.sign:
        return surd if y == 0 and _near_root(surd, x - surd.rational, reach) else None
    return surd if y == 0 and abs(x - surd.rational) <= reach else None


def _near_root(surd: Surd, value: Fraction, reach: Fraction) -> bool:
    """Is sign*sqrt(|radicand|) within ``reach`` of the value?"""
    low, high = surd.sign * value - reach, surd.sign * value + reach
    return high >= 0 and max(low, Fraction(0)) ** 2 <= abs(surd.radicand) <= high * high
