"""Poles before and after: which has become which, by how much it has moved, and what that is in f0 and Q."""

from __future__ import annotations

import math
from fractions import Fraction

import pytest

from symnet.shape.moves import moves


def test_pair_that_becomes_sharper() -> None:
    """s^2 + s/Q + 1 with Q from 5 to 10: f0 stays, Q doubles, the poles move by about 1/20 of their size."""
    (move, other) = moves(
        "pole", [Fraction(1), Fraction(1, 5), Fraction(1)], [Fraction(1), Fraction(1, 10), Fraction(1)]
    )
    assert (move.q, move.shortened_q) == pytest.approx((5, 10))
    assert move.q_percent == pytest.approx(100)
    assert move.f0_percent == pytest.approx(0, abs=1e-12)
    assert move.shift_percent == pytest.approx(
        100 * abs(complex(-0.05, math.sqrt(0.9975)) - complex(-0.1, math.sqrt(0.99)))
    )
    assert other.exact.imag == -move.exact.imag
    assert other.shortened is not None
    assert other.shortened.imag < 0


def test_pole_that_goes_to_the_origin() -> None:
    (move,) = moves("pole", [Fraction(1), Fraction(1)], [Fraction(0), Fraction(1)])
    assert move.shift_percent == 100
    assert move.shortened_f0 == 0
