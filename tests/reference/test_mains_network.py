"""Artificial mains networks: the impedance of CISPR 16-1-2, row by row."""

from __future__ import annotations

from cmath import phase
from math import degrees, pi

import pytest

import symnet as sn
from tests.reference.comparing import assert_same_function, numeric
from tests.reference.mains_network import CASES, REAL_NETWORK, UNTABULATED, Impedance


@pytest.mark.parametrize("case", CASES, ids=lambda case: case.id)
def test_idealised_network_meets_every_printed_digit(case: Impedance) -> None:
    Z = numeric(case)
    for kilohertz, magnitude, angle in case.rows:
        value = Z(2j * pi * 1000 * kilohertz)
        assert abs(value) == pytest.approx(magnitude, abs=0.006)
        assert degrees(phase(value)) == pytest.approx(angle, abs=0.006)


def test_closed_forms() -> None:
    assert_same_function(sn.derive(sn.network(CASES[0].text)), "s*L1*Rm/(s*L1 + Rm)")
    for case in (CASES[1], UNTABULATED):
        assert_same_function(sn.derive(sn.network(case.text)), "(R1 + s*L1)*Rm/(R1 + s*L1 + Rm)")


def test_real_network_stays_within_the_tolerance_of_the_standard() -> None:
    case = REAL_NETWORK
    Z = numeric(case)
    off = 0.0
    for kilohertz, magnitude, angle in case.rows:
        value = Z(2j * pi * 1000 * kilohertz)
        assert abs(value) == pytest.approx(magnitude, rel=case.tol_percent / 100)
        assert degrees(phase(value)) == pytest.approx(angle, abs=case.tol_deg)
        off = max(off, abs(abs(value) / magnitude - 1))
    # it is another network than the idealised one, and H shows it
    assert off > 0.005
