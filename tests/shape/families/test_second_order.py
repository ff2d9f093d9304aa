"""First and second order by Q, with the figures that practitioners look up."""

from __future__ import annotations

import math
from fractions import Fraction

import pytest

from symnet.errors import NotationError
from symnet.shape.families.second_order import first_order, second_order


@pytest.mark.parametrize(
    ("Q", "w3"),
    [(Fraction(1, 3), 0.3742), ("0.5", 0.6436), (1 / math.sqrt(2), 1), (1, 1.2720), ("2", 1.4845)],
)
def test_minus_3_db_is_not_w0(Q: str | float | Fraction, w3: float) -> None:
    """w3/w0 = sqrt(1 - 2z^2 + sqrt(4z^4 - 4z^2 + 2)), and |H(j w0)| = Q (N12)."""
    made = second_order(Q)
    assert made.reference("w3dB").w == pytest.approx(w3, abs=5e-5)
    assert made.decibels(made.reference("w3dB").w) - made.decibels(0.0) == pytest.approx(
        -10 * math.log10(2), abs=1e-12
    )
    q = float(Fraction(Q)) if isinstance(Q, str) else float(Q)
    assert abs(made(1j) / made(0j)) == pytest.approx(q, rel=1e-14)
    assert made.delay(0.0) == pytest.approx(1 / q, rel=1e-14)


@pytest.mark.parametrize("Q", [0.8, 1, 3, 50])
def test_peak(Q: float) -> None:
    """Height Q/sqrt(1 - z^2) at sqrt(1 - 2 z^2); |H| is 1 there, and half power above it is given too."""
    made = second_order(Q)
    at = math.sqrt(1 - 1 / (2 * Q * Q))
    assert made.decibels(at) == pytest.approx(0, abs=1e-10)
    assert made.decibels(at * 1.001) < 0
    assert made.decibels(at * 0.999) < 0
    assert made.decibels(made.reference("f3dB_peak").w) == pytest.approx(-10 * math.log10(2), abs=1e-10)
    assert made.gain == pytest.approx(math.sqrt(1 - 1 / (4 * Q * Q)) / Q)


def test_no_peak_below_the_flattest_one() -> None:
    assert [r.name for r in second_order(0.7).references] == ["w0", "w3dB", "unit_delay"]
    assert second_order(0.7).gain == 1.0


@pytest.mark.parametrize("Q", [0.01, 0.3, 0.5, 0.500001, 7.0, 1e4])
def test_poles_to_full_precision(Q: float) -> None:
    """Sum -1/Q and product 1, also where one real pole is ten thousand times the other."""
    a, b = second_order(Q).poles
    assert (a + b).real == pytest.approx(-1 / Q, rel=1e-15)
    assert a * b == pytest.approx(1, rel=1e-15)
    assert [complex(p) for p in second_order(Q).precise(30)[0]] == pytest.approx([a, b], rel=1e-15)


@pytest.mark.parametrize("Q", ["0", -1, float("inf"), float("nan"), "Q"])
def test_q_is_a_positive_number(Q: str | float) -> None:
    with pytest.raises(NotationError):
        second_order(Q)


def test_first_order() -> None:
    made = first_order()
    assert made(1j) == pytest.approx(0.5 - 0.5j)
    assert {r.w for r in made.references} == {1.0}
