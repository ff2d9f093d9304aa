"""Active building blocks: the derived H is the published formula, exactly, and has the published Q and w0."""

from __future__ import annotations

import math
from fractions import Fraction

import pytest

import symnet as sn
from tests import oracle
from tests.reference.active_sections import CASES
from tests.reference.cases import Formula
from tests.reference.comparing import assert_same_function

BY_ID = {case.id: case for case in CASES}


@pytest.mark.parametrize("case", CASES, ids=lambda case: case.id)
def test_h_is_the_published_formula(case: Formula) -> None:
    assert_same_function(sn.derive(sn.network(case.text)), case.formula)


@pytest.mark.parametrize("case", [case for case in CASES if "Q" in case.facts], ids=lambda case: case.id)
def test_q_and_w0_are_the_published_ones(case: Formula) -> None:
    H = sn.derive(sn.network(case.text))
    # any values will do as long as the section is stable: K and k below the limit of oscillation
    gains = {"K": Fraction(3, 2), "k": Fraction(2, 3)}
    values = {name: gains.get(name, Fraction(11 + 2 * i, 7)) for i, name in enumerate(H.names)}
    form = sn.normalise(H.with_values(values).numeric())

    def published(fact: str) -> float:
        return float(
            oracle.arithmetic(
                case.facts[fact], {n: oracle.mp_number(v) for n, v in values.items()}, oracle.mp_number
            )
        )

    assert form.w0 is not None
    assert form.w0.value == pytest.approx(published("w0"), rel=1e-12)
    assert 1 / form.c[1] == pytest.approx(published("Q"), rel=1e-12)
    if "gain at w0" in case.facts:
        assert pytest.approx(published("gain at w0"), rel=1e-12) == form.K


def test_wien_arm_with_equal_parts() -> None:
    case = BY_ID["wien"]
    H = sn.derive(sn.network(case.text + "\nR1 = R;  R2 = R;  C1 = C;  C2 = C"))
    assert_same_function(H, case.facts["equal"])
    # published: 1/3 at w = 1/RC, phase 0
    assert H.with_values(R="1 kohm", C="1 uF").numeric()(1000j) == pytest.approx(1 / 3, abs=1e-15)


def test_three_sections_turn_the_phase_by_180_degrees_where_a_gain_of_29_is_needed() -> None:
    H = sn.derive(sn.network(BY_ID["rc3-hp"].text)).with_values(R="1 kohm", C="1 uF").numeric()
    assert H(1000j / math.sqrt(6)) == pytest.approx(-1 / 29, rel=1e-12)  # w R C = 1/sqrt(6)


@pytest.mark.parametrize(
    ("name", "hidden"),
    [
        ("sk-lp-K", 0),  # two capacitors, order 2: nothing is left to hide
        ("inv-gbw", 0),  # one integrator, order 1
        ("cfa", 0),  # one transimpedance pole, order 1
        ("bridged-t-c", 0),
        ("gyr-1op", 0),
        ("twin-t-boot", 1),  # three capacitors, order 2
    ],
)
def test_no_hidden_mode_that_the_network_does_not_have(name: str, hidden: int) -> None:
    # The number of natural frequencies is the number of independent reactances, counted by hand beside the name.
    H = sn.derive(sn.network(BY_ID[name].text))
    assert sum(mode.factor.degree(0) for mode in H.hidden if mode.factor is not None) == hidden
