"""Random networks: what the package derives is what the oracle finds, whatever was drawn.

The law: H = N/D with N and D by Cramer's rule; every way of writing the equations of one network down has the
same quotient, and the same denominator up to a factor without s.
"""

from __future__ import annotations

from fractions import Fraction
from functools import cache
from random import Random
from typing import Any

import mpmath
import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st
from sympy import QQ
from sympy.polys.rings import ring

import symnet as sn
from symnet.errors import SingularError, WiringError
from symnet.exact.ratio import Ratio
from symnet.exact.transfer import Transfer
from tests import oracle
from tests.networks import Sketch, seeded, sketches

SEEDS = range(300)


def solvable(sketch: Sketch) -> bool:
    """Whether the oracle finds a single solution; exact, at two rational frequencies that no network is made for."""
    for s in (Fraction(104729, 7), Fraction(1299709, 11)):
        try:
            oracle.transfer_exact(sketch.drawing, {**sketch.values, "s": s})
        except oracle.NoSolutionError:
            continue
        return True
    return False


def derived(sketch: Sketch) -> Transfer | None:
    """H of the sketch as the package reads it, or None when both the package and the oracle refuse it."""
    if solvable(sketch):
        H: Transfer = sn.derive(sn.network(sketch.text))
        return H
    # by its wiring, or for these values only (a gain of exactly one)
    with pytest.raises((SingularError, WiringError)):
        sn.derive(sn.network(sketch.text)).numeric()
    return None


@cache
def of_seed(seed: int) -> tuple[Sketch, Transfer | None]:
    """The network of a seed and its H; two tests ask for each."""
    sketch = seeded(seed)
    return sketch, derived(sketch)


def at_50_digits(H: Ratio, s: complex) -> Any:
    """H at a complex s from its exact coefficients."""
    with mpmath.workdps(oracle.DIGITS):
        num, den = (
            mpmath.polyval([oracle.mp_number(c) for c in p[::-1]], mpmath.mpc(s)) for p in (H.num, H.den)
        )
        return num / den


def assert_agrees(sketch: Sketch, H: Transfer, frequencies: list[complex]) -> None:
    """Exactly at a rational frequency; at complex ones to 30 digits, in doubles to 1e-9, and with numpy's solver."""
    ratio = H.numeric()
    exact = Fraction(104729, 7)
    try:
        wanted_exactly = oracle.transfer_exact(sketch.drawing, {**sketch.values, "s": exact})
    except oracle.NoSolutionError:
        pass
    else:
        assert ratio.at(exact) == wanted_exactly
    for s in frequencies:
        wanted = oracle.transfer_mp(sketch.drawing, sketch.values, s)
        with mpmath.workdps(oracle.DIGITS):
            if ratio.is_zero:
                assert abs(wanted) < mpmath.mpf("1e-30")
                continue
            assert abs(at_50_digits(ratio, s) - wanted) <= mpmath.mpf("1e-30") * abs(wanted)
            assert abs(ratio(s) - wanted) <= 1e-9 * abs(wanted)
        value, bound = oracle.transfer_float(sketch.drawing, sketch.values, s)
        assert abs(ratio(s) - value) <= bound


def assert_same_denominator(sketch: Sketch, H: Transfer) -> None:
    """Numerator, denominator and hidden factors against sympy's determinants of the oracle's own matrix."""
    numerator, denominator = oracle.polynomials(sketch.drawing, tuple(sketch.values))
    over = ring(["s", *sketch.values], QQ)[0]

    generator = dict(zip(map(str, over.symbols), over.gens, strict=True))

    def moved(polynomial: Any) -> Any:
        out = over.zero
        for powers, coefficient in polynomial.terms():
            term = over(int(coefficient))
            for symbol, power in zip(polynomial.ring.symbols, powers, strict=True):
                term *= generator[str(symbol)] ** power
            out += term
        return out

    N, D = moved(numerator), moved(denominator)
    num, den = moved(H.numerator), moved(H.denominator)
    assert N * den == D * num
    everything = den
    for mode in H.hidden:
        assert mode.factor is not None
        assert mode.factor.degree(0) > 0, "a hidden mode holds s"
        everything *= moved(mode.factor)
    content, rest = divmod(D, everything)
    assert not rest, f"{sketch.text}\nis missing in {H.denominator} and {H.hidden}"
    assert content.degree(0) <= 0, f"{sketch.text}\n{content} cancelled unseen in {H.denominator}"


@pytest.mark.parametrize("seed", SEEDS)
def test_agrees_with_the_oracle_at_random_frequencies(seed: int) -> None:
    sketch, H = of_seed(seed)
    if H is None:
        return
    random = Random(seed)
    frequencies = [
        complex(random.uniform(-1, 1), random.uniform(-1, 1)) * 10 ** random.uniform(1, 7) for _ in range(3)
    ]
    assert_agrees(sketch, H, frequencies)


@pytest.mark.parametrize("seed", SEEDS)
def test_denominators_are_those_of_sympys_determinant(seed: int) -> None:
    sketch, H = of_seed(seed)
    if H is not None and H.numerator:
        assert_same_denominator(sketch, H)


@pytest.mark.parametrize("seed", range(0, 300, 10))
def test_the_text_written_back_reads_the_same(seed: int) -> None:
    net = sn.network(seeded(seed).text)
    assert sn.network(net.to_text()) == net


@pytest.mark.parametrize("seed", range(0, 300, 10))
def test_numbers_put_in_before_or_after_give_the_same_h(seed: int) -> None:
    sketch = seeded(seed)
    if not solvable(sketch):
        return
    net = sn.network(sketch.text)
    few = sorted(sketch.values)[:2]
    assert (
        sn.derive(net, symbols=few).numeric()
        == sn.derive(net, symbols=()).numeric()
        == sn.derive(net).numeric()
    )


@settings(max_examples=60, deadline=None, suppress_health_check=[HealthCheck.too_slow], derandomize=True)
@given(sketches(5), st.complex_numbers(min_magnitude=10, max_magnitude=1e7, allow_nan=False))
def test_any_network_agrees_with_the_oracle(sketch: Sketch, s: complex) -> None:
    H = derived(sketch)
    if H is None:
        return
    try:
        oracle.transfer_mp(sketch.drawing, sketch.values, s)
    except oracle.NoSolutionError:
        return  # s is a natural frequency
    assert_agrees(sketch, H, [s])
