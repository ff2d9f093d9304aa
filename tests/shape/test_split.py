"""Split poles: formulas for poles that are far apart, their errors, and when they are not to be used."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

import symnet as sn
from symnet.errors import MissingValueError, UndefinedError
from symnet.exact.ratio import Ratio
from symnet.quantities import HERTZ
from symnet.shape.split import split_poles
from symnet.typeset.tree import evaluate
from symnet.typeset.writing import to_text

TWO_SECTIONS = "in -- R1 -- a -- R2 -- out; a -- C1 -- gnd; out -- C2 -- gnd; drive in; read out"
CLOSE = TWO_SECTIONS + "; R1 = 1 kohm; C1 = 100 nF; R2 = 100 kohm; C2 = 1 nF"
#: R2 = 100 R1, equal capacitors.
APART = TWO_SECTIONS + "; R1 = 1 kohm; R2 = 100 kohm; C1, C2 = 10 nF"


def transfer(text: str) -> sn.Transfer:
    return sn.derive(sn.network(text))


def test_split_poles_of_the_worked_case() -> None:
    """a1 = 1020 us, a2 = 1e-8 s^2: 980.4 and 102 000 rad/s for 990.0 and 101 010 rad/s (recomputed)."""
    found = split_poles(transfer(APART))
    assert [pole.approximation.value for pole in found.poles] == pytest.approx(
        [-1 / 1020e-6, -1020e-6 / 1e-8]
    )
    assert [round(pole.exact.value.real, 1) for pole in found.poles] == [-990.0, -101010.0]
    assert [round(abs(pole.error_percent), 2) for pole in found.poles] == [0.97, 0.98]
    assert found.poles[0].approximation.dimension == HERTZ
    assert to_text(found.poles[0].tau.closed.tree()) == "R1*C1 + (R1 + R2)*C2"  # type: ignore[union-attr]
    assert found.far_apart
    assert found.separations == pytest.approx((1020e-6**2 / 1e-8,))


def test_split_form_has_the_poles_that_it_names() -> None:
    H = transfer(APART)
    found = split_poles(H)
    s = Fraction(-1234)
    taus = [Fraction(1020, 10**6), Fraction(1, 10**8) / Fraction(1020, 10**6)]
    expected = 1 / ((1 + s * taus[0]) * (1 + s * taus[1]))
    assert evaluate(found.tree, {"s": s, **H.values}.__getitem__) == expected


def test_close_poles_are_split_with_a_warning() -> None:
    found = split_poles(transfer(CLOSE))
    assert not found.far_apart
    assert found.error_percent > 40
    assert "NOT far apart" in repr(found)


def test_pole_at_the_origin_stands_apart() -> None:
    H = transfer(
        "drive current into a; a -- C1 -- gnd; a -- R1 -- b -- C2 -- gnd; read b; C1, C2 = 1n; R1 = 1k"
    )
    found = split_poles(H)
    assert found.at_origin == 1
    (pole,) = found.poles
    assert pole.error_percent == 0
    assert found.separations == ()


def test_complex_pair_is_named() -> None:
    """Series RLC: w0 = 1/sqrt(LC) = 100 krad/s, Q = sqrt(L/C)/R = 10."""
    H = transfer("in -- R1 + L1 -- out -- C1 -- gnd; drive in; read out; R1 = 100; L1 = 10m; C1 = 10n")
    with pytest.raises(UndefinedError, match=r"-5000 ± j99875 rad/s \(f0 = 15915 Hz, Q = 10\)"):
        split_poles(H)


def test_numbers_only_can_be_split() -> None:
    found = split_poles(Ratio.of([2], [1, 101, 100]))
    assert [pole.approximation.value for pole in found.poles] == pytest.approx([-1 / 101, -1.01])
    with pytest.raises(UndefinedError, match=r"coefficient of s\^1 in the denominator is 0"):
        split_poles(Ratio.of([1], [-1, 0, 1]))


@given(st.lists(st.integers(1, 10**6), min_size=2, max_size=6))
@settings(max_examples=60, deadline=None)
def test_law_kurtz(taus: list[int]) -> None:
    """All coefficients positive and every a_k^2 above 4 a_(k-1) a_(k+1): all poles are real and distinct.

    The other way round the first-order error of far poles: 1/r_(k-1) - 1/r_k, up to terms of second order.
    """
    polynomial: list[Fraction] = [Fraction(1)]
    for k, tau in enumerate(taus):
        far = Fraction(tau, 10 ** (9 * k))
        polynomial = [
            (polynomial[i] if i < len(polynomial) else Fraction(0))
            + (far * polynomial[i - 1] if i else Fraction(0))
            for i in range(len(polynomial) + 1)
        ]
    found = split_poles(Ratio.of([1], polynomial))
    assert found.far_apart
    inverse = [0.0, *(1 / r for r in found.separations), 0.0]
    for k, pole in enumerate(found.poles):
        first_order = 100 * (inverse[k] - inverse[k + 1])
        assert pole.error_percent == pytest.approx(first_order, abs=1e-9 + 500 * max(inverse) ** 2)


@pytest.mark.parametrize(
    ("text", "error", "said"),
    [
        (TWO_SECTIONS + "; R1, R2 = 1k; C1 = 1n", MissingValueError, "C2"),
        ("in -- R1 -- gnd; a -- R2 -- gnd; drive in; read a; R1, R2 = 1k", UndefinedError, "H = 0"),
        ("in -- R1 -- out -- R2 -- gnd; drive in; read out; R1, R2 = 1k", UndefinedError, "no poles"),
        (
            "drive current into a; a -- C1 -- gnd; read a; C1 = 1u",
            UndefinedError,
            "no poles away from the origin",
        ),
    ],
)
def test_nothing_to_split(text: str, error: type[Exception], said: str) -> None:
    with pytest.raises(error, match=said):
        split_poles(transfer(text))
