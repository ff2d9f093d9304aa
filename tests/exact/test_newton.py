"""Newton's step in fixed point against p/p' in exact fractions, with the bounds that are promised for it."""

from __future__ import annotations

import math
from fractions import Fraction

from hypothesis import given, settings
from hypothesis import strategies as st

from symnet.exact.dense import trim
from symnet.exact.newton import Newton, Point

Complex = tuple[Fraction, Fraction]


def exactly(p: tuple[int, ...], z: Complex) -> Complex:
    """P at z by the schoolbook rule."""
    x, y = Fraction(0), Fraction(0)
    for c in reversed(p):
        x, y = x * z[0] - y * z[1] + c, x * z[1] + y * z[0]
    return x, y


def size(z: Complex) -> float:
    square = z[0] * z[0] + z[1] * z[1]
    return 2.0 ** ((math.log2(square.numerator) - math.log2(square.denominator)) / 2) if square else 0.0


coefficients = st.lists(st.integers(-(10**40), 10**40) | st.integers(-3, 3), min_size=2, max_size=12)
parts = st.integers(-(10**25), 10**25)


@given(coefficients, parts, parts | st.just(0), st.integers(0, 120), st.sampled_from([20, 80, 300]))
@settings(max_examples=200, deadline=None)
def test_law_step_and_radius_keep_their_promises(c: list[int], x: int, y: int, shift: int, bits: int) -> None:
    p = trim(c)
    if len(p) < 2 or not p[0]:
        return
    degree, unit = len(p) - 1, 1 << shift
    z = (Fraction(x, unit), Fraction(y, unit))
    value, slope = exactly(p, z), exactly(tuple(k * a for k, a in enumerate(p))[1:], z)
    point = Point(x, y, shift)
    step = Newton(p).step(point, bits, bits)
    norm = slope[0] ** 2 + slope[1] ** 2
    if step is None:
        assert not norm
        assert point.log_radius == math.inf
        return
    assert norm
    true = (
        (value[0] * slope[0] + value[1] * slope[1]) / norm,
        (value[1] * slope[0] - value[0] * slope[1]) / norm,
    )
    u, v, e = step
    got = (u * Fraction(2) ** e, v * Fraction(2) ** e)
    error = size((got[0] - true[0], got[1] - true[1]))
    allowed = 2.0**-bits * max(size(z), size(true))
    assert error <= allowed
    radius = 2.0**point.log_radius
    assert radius >= degree * size(true)
    assert radius <= 1.1 * degree * size(true) + degree * allowed


def test_a_slope_of_zero_gives_no_step() -> None:
    point = Point(-1, 0, 0)
    assert Newton((1, 2, 1)).step(point, 80, 30) is None
    assert point.log_radius == math.inf


def test_a_root_itself_has_a_disc_as_small_as_is_asked_for() -> None:
    point = Point(-3, 0, 1)  # -1.5, a root of 2s + 3 and of (2s + 3)(s^2 + 1)
    for bits in (80, 1000):
        Newton((3, 2, 3, 2)).step(point, bits, bits)
        assert point.log_radius < 1 - bits


def test_a_point_moves_by_the_step_and_keeps_so_many_bits() -> None:
    point = Point(5, 0, 0).moved(80, (1, -3, -2))
    assert (Fraction(point.x, 1 << point.shift), Fraction(point.y, 1 << point.shift)) == (
        Fraction(19, 4),
        Fraction(3, 4),
    )
    assert point.x.bit_length() == 80
