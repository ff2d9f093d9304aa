"""Critically damped and Linkwitz-Riley: poles that coincide, by table and by identity."""

from __future__ import annotations

import math
from fractions import Fraction

import numpy as np
import pytest

from symnet.errors import NotationError
from symnet.shape.families.butterworth import butterworth
from symnet.shape.families.critically_damped import CRITICALLY_DAMPED, critically_damped
from symnet.shape.families.linkwitz_riley import LINKWITZ_RILEY, linkwitz_riley
from tests.reference import families_without_ripple as published
from tests.reference.families import Sections


class TestCriticallyDamped:
    @pytest.mark.parametrize("row", published.CRITICALLY_DAMPED, ids=lambda row: row.id)
    def test_published_sections(self, row: Sections) -> None:
        made = critically_damped(row.order).scaled("w3dB", 1.0)
        ((a, b, _),) = row.sections
        alpha = made.reference("w3dB").w / made.reference("w0").w  # the time constant of each pole
        assert (2 * alpha if b else alpha) == pytest.approx(a, abs=row.within)
        assert (alpha**2 if b else 0) == pytest.approx(b, abs=row.within)

    @pytest.mark.parametrize("order", [*range(1, 13), 60])
    def test_is_a_power_of_the_first_order(self, order: int) -> None:
        """H(s) = 1/(1 + s)^n."""
        made = critically_damped(order)
        for w in (0.1, 1.0, 3.0):
            assert made(1j * w) == pytest.approx((1 + 1j * w) ** -order, rel=1e-12)
        assert made.decibels(made.reference("w3dB").w) == pytest.approx(-10 * math.log10(2), abs=1e-12)
        assert made.delay(0.0) == pytest.approx(order, rel=1e-14)
        assert made.denominator() == pytest.approx([math.comb(order, k) for k in range(order + 1)])

    def test_conditions_hold_in_exact_arithmetic(self) -> None:
        d = [math.comb(7, k) * Fraction(3, 5) ** k for k in range(8)]
        assert CRITICALLY_DAMPED.conditions(d) == (0,) * 6
        assert any(CRITICALLY_DAMPED.conditions([*d[:-1], d[-1] + 1]))


class TestLinkwitzRiley:
    @pytest.mark.parametrize(("order", "db"), published.LINKWITZ_RILEY)
    def test_published_level_at_w0(self, order: int, db: float) -> None:
        assert linkwitz_riley(order).decibels(1.0) == pytest.approx(db, abs=5e-5)

    @pytest.mark.parametrize("order", [2, 4, 6, 8, 12, 30, 60])
    def test_low_pass_and_high_pass_add_up_to_an_all_pass(self, order: int) -> None:
        """H_low + (-1)^(n/2) H_high = B(-s)/B(s) with the Butterworth polynomial B of order n/2."""
        low = linkwitz_riley(order)
        high = low.high_pass()
        s = np.asarray(1j * np.geomspace(0.1, 10, 41), dtype=np.complex128)
        total = np.asarray(low(s)) + (-1) ** (order // 2) * np.asarray(high(s))
        assert np.abs(total) == pytest.approx(np.ones(41), abs=1e-10)
        b = butterworth(order // 2).poles
        mirrored = np.prod([(-s - p) / (s - p) for p in b], axis=0)
        assert total == pytest.approx(mirrored, abs=1e-10)

    @pytest.mark.parametrize("order", [2, 4, 6, 8, 20])
    def test_is_the_square_of_butterworth(self, order: int) -> None:
        """|H(jw)| = 1/(1 + w^n)."""
        made = linkwitz_riley(order)
        for w in (0.5, 0.9, 1.0, 1.2):
            assert abs(made(1j * w)) == pytest.approx(1 / (1 + w**order), rel=1e-12)
        assert made.decibels(made.reference("f3dB").w) == pytest.approx(-10 * math.log10(2), abs=1e-11)
        assert made.decibels(made.reference("w6dB").w) == pytest.approx(-20 * math.log10(2), abs=1e-11)
        assert made.delay(0.0) * made.reference("unit_delay").w == pytest.approx(1, rel=1e-13)

    def test_exact_coefficients(self) -> None:
        assert [str(linkwitz_riley(n).exact) for n in (2, 4)] == [
            "(1, 2, 1)",
            "(1, 2*sqrt(2), 4, 2*sqrt(2), 1)",
        ]
        for n in (2, 4, 6, 8, 12):
            exact = linkwitz_riley(n).exact
            assert exact is not None
            assert [float(c) for c in exact] == pytest.approx(linkwitz_riley(n).denominator(), rel=1e-13)

    def test_conditions_tell_the_square_from_other_polynomials(self) -> None:
        """(1 + 2s + 2s^2 + s^3)^2 with s for s*2/3, in exact arithmetic; a Butterworth polynomial of the order is none."""
        square = [Fraction(c) * Fraction(2, 3) ** k for k, c in enumerate((1, 4, 8, 10, 8, 4, 1))]
        assert not any(LINKWITZ_RILEY.conditions(square))
        assert all(p > 0 for p in LINKWITZ_RILEY.positives(square))
        d = butterworth(4).denominator()
        assert abs(LINKWITZ_RILEY.conditions(d)[-1]) > 1

    def test_odd_orders_are_refused(self) -> None:
        with pytest.raises(NotationError, match="even order, not 3"):
            linkwitz_riley(3)
        assert not LINKWITZ_RILEY.has_order(3)
