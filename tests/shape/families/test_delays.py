"""All-pass sections, Bessel all-pass and Pade delays, by the identities that define them."""

from __future__ import annotations

import math
from fractions import Fraction

import mpmath
import numpy as np
import pytest

from symnet.errors import LimitError, NotationError
from symnet.shape.families import Prototype
from symnet.shape.families.bessel import bessel
from symnet.shape.families.delays import (
    bessel_all_pass,
    first_order_all_pass,
    pade_delay,
    second_order_all_pass,
)

S = np.asarray(1j * np.geomspace(0.05, 20, 23), dtype=np.complex128)


def series(m: int, n: int) -> tuple[list[Fraction], list[Fraction]]:
    """N and D of the Pade approximant of exp(-s) by mpmath's solver, ascending, D(0) = 1."""
    with mpmath.workdps(60):
        taylor = [mpmath.mpf(-1) ** k / mpmath.factorial(k) for k in range(m + n + 1)]
        top, d = mpmath.pade(taylor, m, n)
        return [Fraction(str(c)) for c in top], [Fraction(str(c)) for c in d]


@pytest.mark.parametrize(
    "made",
    [
        first_order_all_pass(),
        *(second_order_all_pass(q) for q in (0.2, 0.5, "0.8", 6)),
        *map(bessel_all_pass, (1, 2, 3, 8, 20)),
    ],
    ids=str,
)
def test_all_pass_has_magnitude_1_and_mirrored_zeros(made: Prototype) -> None:
    assert made.band == "all-pass"
    assert np.abs(np.asarray(made(S))) == pytest.approx(np.ones(len(S)), abs=1e-13)
    assert sorted(made.zeros, key=abs) == sorted((-p.conjugate() for p in made.poles), key=abs)
    assert [r.name for r in made.references] == ["w0", "unit_delay"]
    # the delay is the slope of the phase: by a central difference
    for w in (0.3, 1.0, 2.0):
        h = 1e-5
        turned = np.angle(made(1j * (w + h)) / made(1j * (w - h))) / (2 * h)
        assert made.delay(w) == pytest.approx(-turned, rel=1e-7)


def test_sections() -> None:
    assert first_order_all_pass()(1j) == pytest.approx(-1j)
    assert second_order_all_pass("0.8")(1j) == pytest.approx(-1)
    assert first_order_all_pass().delay(0.0) == pytest.approx(2)


@pytest.mark.parametrize("order", [1, 2, 3, 6, 12])
def test_bessel_all_pass_is_the_diagonal_pade_delay_and_twice_bessel(order: int) -> None:
    """B(-s/2)/B(s/2): delay 1 s at DC, poles twice those of the Bessel low-pass of unit delay."""
    made = bessel_all_pass(order)
    assert made.poles == pytest.approx([2 * p for p in bessel(order).poles], rel=1e-14)
    assert made.poles == pade_delay(order, order).poles
    assert made.zeros == pade_delay(order, order).zeros
    assert made.delay(0.0) == pytest.approx(1, rel=1e-13)


@pytest.mark.parametrize(
    ("m", "n"), [(0, 1), (1, 1), (0, 2), (1, 2), (2, 2), (1, 3), (2, 3), (4, 5), (5, 7), (8, 8)]
)
def test_pade_agrees_with_the_exponential(m: int, n: int) -> None:
    """N/D - exp(-s) = O(s^(m + n + 1)); coefficients by another solver."""
    made = pade_delay(m, n)
    top, d = series(m, n)
    assert made.exact is not None
    assert [float(c) for c in made.exact] == pytest.approx([float(c) for c in d], rel=1e-12)
    s = 0.01 + 0.02j
    wanted = sum(float(c) * s**k for k, c in enumerate(top)) / sum(float(c) * s**k for k, c in enumerate(d))
    assert made(s) == pytest.approx(wanted, rel=1e-13)
    # at s the first neglected term has the size m! n!/((m + n)! (m + n + 1)!) |s|^(m + n + 1)
    rest = math.factorial(m) * math.factorial(n) / math.factorial(m + n) / math.factorial(m + n + 1)
    assert abs(made(s) - np.exp(-s)) < 1.2 * rest * abs(s) ** (m + n + 1) + 1e-15
    assert made.band == ("all-pass" if m == n else "low-pass")
    assert all(p.real < 0 for p in made.poles)
    assert np.abs(np.asarray(made(S))).max() <= 1 + 1e-13


def test_pade_at_a_stated_delay() -> None:
    made = pade_delay(2, 3).at(delay="50 us")
    assert made.delay(0.0) == pytest.approx(50e-6, rel=1e-13)
    assert made.reference("unit_delay").f == pytest.approx(20e3 / (2 * math.pi), rel=1e-13)


@pytest.mark.parametrize(("m", "n"), [(3, 2), (0, 3), (2, 5), (-1, 1), (1.0, 2)])
def test_degrees_that_grow_or_exceed_1_are_refused(m: int, n: int) -> None:
    with pytest.raises(NotationError, match="numerator of degree"):
        pade_delay(m, n)


def test_largest_order() -> None:
    with pytest.raises(LimitError):
        bessel_all_pass(61)
    assert bessel_all_pass(60).delay(0.0) == pytest.approx(1, rel=1e-11)
