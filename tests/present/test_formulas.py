"""Labels as fractions, numbers with units, powers of s beside a formula."""

from __future__ import annotations

import pytest

from symnet.present.formulas import amount, label_tree, with_power_of_s
from symnet.quantities import AMPERE, FARAD, HERTZ, NUMBER, OHM, VOLT, Dimension
from symnet.typeset.tree import Atom, Quotient, minus
from symnet.typeset.writing import to_text

R, C = Atom("R"), Atom("C")


def test_label() -> None:
    assert to_text(label_tree("out/in")) == "out/in"
    assert to_text(label_tree("(a - b)/V1")) == "(a - b)/V1"
    assert to_text(label_tree("alone")) == "alone"


@pytest.mark.parametrize(
    ("value", "dimension", "shown"),
    [
        (4700, OHM, "4.7 kohm"),
        (2.2e-8, FARAD, "22 nF"),
        (0.5, NUMBER, "0.5"),
        (1e5, HERTZ, "100 krad/s"),
        (1, VOLT / AMPERE, "1 ohm"),
        (3, Dimension(v=1, t=-1), "3 V/s"),
    ],
)
def test_amounts(value: float, dimension: Dimension, shown: str) -> None:
    assert amount(value, dimension).text == shown


def test_hertz_on_request() -> None:
    assert amount(19515.3, HERTZ, 5, angular=False).text == "19.515 kHz"


@pytest.mark.parametrize(
    ("power", "shown"), [(0, "R/C"), (1, "s*R/C"), (2, "s^2*R/C"), (-1, "R/(s*C)"), (-3, "R/(s^3*C)")]
)
def test_power_of_s_joins_the_fraction(power: int, shown: str) -> None:
    assert to_text(with_power_of_s(Quotient(R, C), power)) == shown


def test_sign_stays_in_front() -> None:
    assert to_text(with_power_of_s(minus(Quotient(R, C)), -1)) == "-R/(s*C)"
