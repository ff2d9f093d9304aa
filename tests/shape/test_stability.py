"""Stability from poles and, in symbols, from the signs of Hurwitz' determinants."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from symnet.circuit.build import network
from symnet.exact.derive import derive
from symnet.exact.ratio import Ratio
from symnet.shape.stability import stability
from tests.shape.symbols import transfer


@pytest.mark.parametrize(
    ("den", "verdict"),
    [
        ([5], "stable"),
        ([1, 1], "stable"),
        ([1, 2, 2, 1], "stable"),
        ([0, 1], "marginal"),
        ([1, 0, 1], "marginal"),
        ([0, 1, 0, 1], "marginal"),
        ([1, 1, 1, 1], "marginal"),  # (s + 1)(s^2 + 1)
        ([0, 0, 1], "unstable"),
        ([1, 0, 2, 0, 1], "unstable"),  # (s^2 + 1)^2
        ([1, -1], "unstable"),
        ([2, 1, 1, 1], "unstable"),
    ],
)
def test_numbers(den: list[int], verdict: str) -> None:
    assert stability(Ratio.of([1], den)).verdict == verdict


def test_ladder_of_third_order_is_stable_for_all_values() -> None:
    h = derive(
        network("in -- Rs -- a -- L1 -- out; a -- C1 -- gnd; out -- C2 || RL -- gnd; drive in; read out")
    )
    assert stability(h).verdict == "stable"
    assert "for all positive values" in stability(h).reason


def test_positive_feedback_gives_the_condition() -> None:
    # stable if and only if C1(R1 + R2) + (1 - K) R1 C2 > 0, K < 3 for equal parts (common practice, no source)
    found = stability(transfer("K", "1+s*(C1*(R1+R2)+(1-K)*R1*C2)+s^2*R1*R2*C1*C2", "R1 R2 C1 C2 K"))
    assert found.verdict == "conditional"
    (condition,) = found.conditions
    ring = condition.ring
    _, R1, R2, C1, C2, K = ring.gens
    assert condition == C1 * (R1 + R2) + (1 - K) * R1 * C2


@pytest.mark.parametrize(
    ("num", "den", "names", "verdict"),
    [
        ("1", "1", "R", "stable"),
        ("1", "s*R*C", "R C", "marginal"),
        ("1", "s*R*C+s^2*R*L*C^2", "R L C", "marginal"),
        ("1", "s^2*R*C", "R C", "unstable"),
        ("1", "1-s*R*C", "R C", "unstable"),
        ("1", "0-1-s*R*C", "R C", "stable"),
        ("1", "1+s^2*L*C", "L C", "marginal"),
        ("1", "1+s*R*C+s^3*R*L*C^2", "R L C", "unstable"),
        ("1", "1+s^4*L^2*C^2+s^2*L*C", "L C", "undecided"),
        ("1", "R1-R2+s*(R1-2*R2)*R1*C", "R1 R2 C", "undecided"),
        ("1", "R1-R2+s*R1*R2*C", "R1 R2 C", "conditional"),
        ("1", "1+s*R*C+s^2*R^2*C^2+2*s^3*R^3*C^3", "R C", "unstable"),
        ("1", "1+3*s*R*C+3*s^2*R^2*C^2+s^3*R^3*C^3", "R C", "stable"),
        ("1", "1+4*s*R*C+6*s^2*R^2*C^2+4*s^3*R^3*C^3+s^4*R^4*C^4", "R C", "stable"),
        ("1", "1+s*R*C+s^2*R^2*C^2+s^3*R^3*C^3+s^4*R^4*C^4", "R C", "unstable"),
        ("1", "1+s*R*C+s^2*R^2*C^2+s^3*R^3*C^3+s^4*R^4*C^4+s^5*R^5*C^5", "R C", "undecided"),
    ],
)
def test_symbols(num: str, den: str, names: str, verdict: str) -> None:
    assert stability(transfer(num, den, names)).verdict == verdict


@given(st.lists(st.integers(1, 12), min_size=2, max_size=5))
@settings(max_examples=80, deadline=None)
def test_law_hurwitz_and_the_poles_agree(den: list[int]) -> None:
    """With one name scaled through all powers the signs are those of the numbers."""
    text = "+".join(f"{c}*s^{k}*R^{k}" for k, c in enumerate(den) if k) + f"+{den[0]}"
    in_symbols = stability(transfer("1", text, "R")).verdict
    in_numbers = stability(Ratio.of([1], [Fraction(c) for c in den])).verdict
    if in_numbers != "marginal":
        assert in_symbols == in_numbers
