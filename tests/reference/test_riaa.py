"""Gramophone reproduction and emphasis: networks against the published tables and time constants."""

from __future__ import annotations

from math import inf, log10, pi

import pytest

import symnet as sn
from tests.reference import riaa
from tests.reference.cases import Response
from tests.reference.comparing import decibels, numeric


def name(case: Response) -> str:
    return case.id


@pytest.mark.parametrize(
    "case", [*riaa.CASES, riaa.RUMBLE, riaa.J17, *riaa.DEEMPHASIS, riaa.PREEMPHASIS], ids=name
)
def test_every_row_of_the_table(case: Response) -> None:
    H = numeric(case)
    reference = decibels(H, case.ref_f)
    for f, db in case.rows:
        assert decibels(H, f) - reference == pytest.approx(db, abs=case.tol_db), f


@pytest.mark.parametrize("case", riaa.CASES[:2], ids=name)
def test_time_constants_of_the_reproduction_curve(case: Response) -> None:
    H = numeric(case)
    assert [-1 / root.value.real for root in H.poles()] == pytest.approx(riaa.TAU_POLES, rel=1e-15)
    assert [-1 / root.value.real for root in H.zeros()] == pytest.approx([riaa.TAU_ZERO], rel=1e-15)


def test_inverse_network_has_the_poles_where_the_curve_has_zeros() -> None:
    H = numeric(riaa.CASES[2])
    assert [-1 / root.value.real for root in H.zeros()] == pytest.approx(riaa.TAU_POLES, rel=1e-15)
    # 3.18 us is the extra pole, a corner at 50 kHz
    assert [-1 / root.value.real for root in H.poles()] == pytest.approx([riaa.TAU_ZERO, 3.18e-6], rel=1e-15)


def test_published_slip_of_the_inverse_network() -> None:
    (pole,) = numeric(riaa.SLIP).poles()
    assert -1e6 / pole.value.real == pytest.approx(3.374, abs=0.0005)
    right = sn.derive(sn.network(riaa.SLIP.text)).with_values(R4="332.08020050125316 ohm").numeric()
    assert -1e6 / right.poles()[0].value.real == pytest.approx(3.18, rel=1e-12)


def test_printed_curves_are_their_own_closed_forms() -> None:
    # rounding to the printed digits is all that lies between formula and table
    def db(f: float) -> float:
        w = 2 * pi * f
        zero, (low, high) = riaa.TAU_ZERO, riaa.TAU_POLES
        return 10 * log10((1 + (w * zero) ** 2) / ((1 + (w * low) ** 2) * (1 + (w * high) ** 2)))

    for f, printed in riaa.REPRODUCTION:
        assert db(f) - db(1000) == pytest.approx(printed, abs=0.0066)
    for f, printed in riaa.J17_ROWS:
        x = (2 * pi * f / 3000) ** 2
        assert 10 * log10((75 + x) / (1 + x)) == pytest.approx(printed, abs=0.0051)


def test_j17_zero_and_pole() -> None:
    H = numeric(riaa.J17)
    assert [root.value.real for root in H.zeros()] == pytest.approx([-3000], rel=1e-15)
    assert [root.value.real for root in H.poles()] == pytest.approx([-3000 * 75**0.5], rel=1e-14)
    assert H(complex(inf)) == 1
