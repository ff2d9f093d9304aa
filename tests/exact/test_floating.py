"""Weights in floating point: against exact evaluation at rational points, and what is refused."""

from __future__ import annotations

from collections.abc import Mapping
from fractions import Fraction
from math import prod
from typing import Any

import numpy as np
import pytest

import symnet as sn
from symnet.errors import MissingValueError, SymnetError
from symnet.exact.floating import factor_at, weights_at
from symnet.exact.sweeps import sweep
from symnet.exact.transfer import Transfer
from tests import oracle
from tests.networks import seeded

POINTS = (Fraction(37), Fraction(4001))


def transfer_of(text: str) -> Transfer:
    H: Transfer = sn.derive(sn.network(text))
    return H


def exactly(weight: Any, values: Mapping[str, Fraction], s: Fraction) -> Fraction:
    """A ring element at a rational point, by the definition of a polynomial."""
    names = {"s": s, **values}
    symbols = [str(symbol) for symbol in weight.ring.symbols]
    total = Fraction(0)
    for monomial, coefficient in weight.items():
        powers = (names[name] ** e for name, e in zip(symbols, monomial, strict=True) if e)
        total += int(coefficient) * prod(powers, start=Fraction(1))
    return total


@pytest.mark.parametrize("seed", range(0, 200, 5))
def test_the_weights_are_those_of_exact_evaluation(seed: int) -> None:
    """Law: a weight is a polynomial in s and the names."""
    sketch = seeded(seed)
    try:
        H = transfer_of(sketch.text)
    except SymnetError:
        return
    points = np.array([float(s) for s in POINTS])
    for determinant in (H.quotient.numerator, H.quotient.denominator):
        found = weights_at(determinant, H.values, points)
        for weights, rows in zip((determinant.take, determinant.leave), found, strict=True):
            assert rows.shape == (len(weights), len(points))
            for weight, row in zip(weights, rows, strict=True):
                wanted = [float(exactly(determinant.generators.element(weight), H.values, s)) for s in POINTS]
                assert row.tolist() == pytest.approx(wanted, rel=1e-14)


@pytest.mark.parametrize("seed", range(0, 200, 5))
def test_h_from_passive_weights_is_that_of_the_oracle(seed: int) -> None:
    """Law: H = N/D. Without sources and at positive s no term of D cancels another, so D is found to rounding."""
    sketch = seeded(seed, active=False)
    try:
        wanted = [float(oracle.transfer_exact(sketch.drawing, {**sketch.values, "s": s})) for s in POINTS]
    except oracle.NoSolutionError:
        return
    H = transfer_of(sketch.text)
    points = np.array([float(s) for s in POINTS])
    n, d = (
        sweep(determinant.diagram, *weights_at(determinant, H.values, points))
        for determinant in (H.quotient.numerator, H.quotient.denominator)
    )
    size = max(1.0, *map(abs, wanted))
    assert n.over(d).plain().tolist() == pytest.approx(wanted, rel=1e-10, abs=1e-12 * size)


def test_complex_points_and_powers_of_s() -> None:
    H = transfer_of("a -- Z1 -- gnd; drive current into a; read a; Z1 = 2 ohm + s*3 H + s^2*4 H*1 ms")
    s = np.array([1j, 1 + 2j])
    _, leave = weights_at(H.quotient.denominator, H.values, s)
    wanted = 2 + 3 * s + 4e-3 * s**2
    assert np.allclose(leave[0] / leave[0, 0], wanted / wanted[0], rtol=1e-14, atol=0)


def test_a_factor_is_a_row_of_its_own() -> None:
    H = transfer_of("a -- R1 -- gnd; drive a; read i_R1/2; R1 = 5 ohm")
    assert factor_at(H.quotient.denominator, H.values, np.array([1j, 2j])).tolist() == [2, 2]


def test_a_network_without_frequency_needs_no_number_of_it() -> None:
    H = transfer_of("in -- R1 -- out -- R2 -- gnd; drive in; read out; R1, R2 = 3 ohm")
    take, leave = weights_at(H.quotient.denominator, H.values, np.array([1.0, 2.0, 3.0]))
    assert take.shape == leave.shape == (len(H.quotient.denominator.take), 3)
    found = sweep(H.quotient.denominator.diagram, take, leave).plain()
    assert np.abs(found).tolist() == [6, 6, 6]  # R1 + R2


def test_a_missing_number_is_named() -> None:
    H = transfer_of("in -- R1 -- out -- C1 -- gnd; drive in; read out; R1 = 3 ohm")
    with pytest.raises(MissingValueError, match="no value for C1"):
        weights_at(H.quotient.denominator, H.values, np.array([1j]))
