"""Coupled coils in H: published forms, the exact order at k = 1, irrational mutual inductances."""

from __future__ import annotations

from fractions import Fraction

import mpmath
import numpy as np
import pytest

import symnet as sn
from symnet.exact.mutual import root

TWO = "in -- R1 -- a -- L1 -- gnd; out -- L2 -- gnd; out -- R2 -- gnd; couple L1 to L2 with {}; drive in; read out"


def test_two_windings_between_a_source_and_a_load() -> None:
    """H = s M R2/(R1 R2 + s (L1 R2 + L2 R1) + s^2 (L1 L2 - M^2)); common practice, no source."""
    h = sn.derive(sn.network(TWO.format("M")))
    s, r1, l1, l2, r2, m = (h.ring(h.symbol(x)) for x in ("s", "R1", "L1", "L2", "R2", "M"))
    assert (
        h.numerator * (r1 * r2 + s * (l1 * r2 + l2 * r1) + s**2 * (l1 * l2 - m**2))
        == h.denominator * s * m * r2
    )
    turned = sn.derive(sn.network(TWO.format("M").replace("out -- L2 -- gnd", "gnd -- L2 -- out")))
    assert turned.numerator == -h.numerator
    assert turned.denominator == h.denominator


@pytest.mark.parametrize(("second", "sign"), [("in -- L2 -- gnd", -1), ("gnd -- L2 -- in", 1)])
def test_coils_in_parallel(second: str, sign: int) -> None:
    """(L1 L2 - M^2)/(L1 + L2 -+ 2M), aiding and opposing; common practice, no source."""
    text = f"in -- L1 -- gnd; {second}; couple L1 to L2 with M; drive current into in; read in"
    h = sn.derive(sn.network(text))
    s, l1, l2, m = (h.ring(h.symbol(x)) for x in ("s", "L1", "L2", "M"))
    assert h.numerator * (l1 + l2 + sign * 2 * m) == h.denominator * s * (l1 * l2 - m**2)


def test_coils_in_series() -> None:
    """L1 + L2 + 2M with the dots the same way round; common practice, no source."""
    h = sn.derive(sn.network("in -- L1 + L2 -- gnd; couple L1 to L2 with M; drive current into in; read in"))
    assert str(h) == "in/i_drive = s*(L1 + L2 + 2*M)"


def test_perfect_coupling_lowers_the_order_also_where_m_is_irrational() -> None:
    tight = sn.network(TWO.format("k = 1")).with_values(R1="50", R2="100", L1="1 mH", L2="2 mH")
    h = sn.derive(tight).numeric()
    assert len(h.den) == 2
    (pole,) = h.poles()
    # D = R1 R2 + s (L1 R2 + L2 R1)
    assert pole.value == pytest.approx(-50 * 100 / (1e-3 * 100 + 2e-3 * 50), rel=1e-15)
    loose = sn.derive(tight.with_values(k="0.999999999999")).numeric()
    assert len(loose.den) == 3


def test_a_coefficient_and_its_mutual_inductance_are_the_same_network() -> None:
    with_k = sn.network(TWO.format("k = 0.3")).with_values(R1="50", R2="100", L1="1 mH", L2="4 mH")
    with_m = sn.network(TWO.format("M = 0.6 mH")).with_values(R1="50", R2="100", L1="1 mH", L2="4 mH")
    assert sn.derive(with_k).numeric() == sn.derive(with_m).numeric()


def test_irrational_coefficients_agree_with_a_numeric_solve() -> None:
    """Two coils in parallel with a third, all coupled: roots of 2, 3 and 6 in every coefficient."""
    text = """
        in -- R1 -- a -- L1 -- gnd; a -- L2 -- b; b -- L3 -- gnd; b -- C1 -- gnd; b -- R2 -- gnd
        couple L1 to L2 with k12 = 0.5; couple L2 to L3 with k23 = -0.4; couple L1 to L3 with k13 = 0.3
        drive in; read b
        R1 = 10; R2 = 1k; C1 = 1 uF; L1 = 1 mH; L2 = 2 mH; L3 = 3 mH
    """
    h = sn.derive(sn.network(text)).numeric()
    l1, l2, l3 = 1e-3, 2e-3, 3e-3
    m12, m23, m13 = 0.5 * np.sqrt(l1 * l2), -0.4 * np.sqrt(l2 * l3), 0.3 * np.sqrt(l1 * l3)
    for f in (10.0, 1e3, 1e5):
        s = 2j * np.pi * f
        # unknowns a, b, i1 (a-gnd), i2 (a-b), i3 (b-gnd), the source is 1 V
        matrix = np.array(
            [
                [1 / 10, 0, 1, 1, 0],
                [0, s * 1e-6 + 1e-3, 0, -1, 1],
                [1, 0, -s * l1, -s * m12, -s * m13],
                [1, -1, -s * m12, -s * l2, -s * m23],
                [0, 1, -s * m13, -s * m23, -s * l3],
            ]
        )
        assert h(s) == pytest.approx(np.linalg.solve(matrix, [0.1, 0, 0, 0, 0])[1], rel=1e-12)


def test_values_of_h_carry_the_mutual_inductance_along() -> None:
    h = sn.derive(sn.network(TWO.format("k = 1")).with_values(R1="50", R2="100", L1="1 mH", L2="2 mH"))
    assert h.with_values(L2="9 mH").numeric() == sn.derive(h.network.with_values(L2="9 mH")).numeric()


def test_a_root_has_sixty_digits() -> None:
    with mpmath.workdps(70):
        assert (
            abs(mpmath.mpf(root(Fraction(2)).numerator) / root(Fraction(2)).denominator - mpmath.sqrt(2))
            < 1e-59
        )
    assert root(Fraction(-9, 4)) == Fraction(-3, 2)


def test_the_limit_at_high_frequency_is_said_from_h_alone() -> None:
    ends = sn.limits(sn.derive(sn.network(TWO.format("M"))))
    assert ends.dc.from_network is True
    assert ends.high.from_network is None
    assert "coupled coils" in ends.high.reason


@pytest.mark.parametrize(
    ("tie", "mutual"),
    [("L2 = L1", "k*L1"), ("L2 = n^2*L1", "k*n*L1"), ("L2 = 4*L1", "2*k*L1"), ("L1 = L2/9", "k*L2/3")],
)
def test_windings_that_are_a_square_apart_have_a_rational_mutual_inductance(tie: str, mutual: str) -> None:
    """M = k sqrt(L1 L2), which needs no root where L2/L1 is a square."""
    with_k = sn.derive(sn.network(TWO.format("k") + f"; {tie}"))
    with_m = sn.derive(sn.network(TWO.format("M") + f"; {tie}; M = {mutual}"))
    assert with_k == with_m
    assert not any(name.startswith("M") for name in with_k.names)
