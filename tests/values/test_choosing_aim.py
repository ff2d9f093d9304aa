"""Objectives against their definitions, and the law of every bound: it is never above what it bounds."""

from __future__ import annotations

from itertools import permutations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from numpy.typing import NDArray

import symnet as sn
from symnet.values.choosing_aim import Aim, Objective
from symnet.values.choosing_model import Model
from symnet.values.choosing_search import Space, _bounds
from symnet.values.choosing_target import Wanted, aim_of
from tests.values.test_choosing import SEVEN

Floats = NDArray[np.float64]
Complexes = NDArray[np.complex128]


def figures(poles: Complexes, gain: float, unit: float) -> Floats:
    """c_1 ... c_n of the product of (1 - s/p), s in the unit, and K."""
    c = np.real(np.poly(unit / poles))  # the product of (x - unit/p), highest power first
    return np.array([*c[1:], gain])


def distance(poles: Complexes, wanted: Complexes) -> float:
    """The largest |p/p* - 1|, in the pairing that makes it smallest."""
    return min(float(np.max(np.abs(np.array(p) / wanted - 1))) for p in permutations(poles))


@given(st.integers(0, 2**32 - 1), st.sampled_from([2, 3, 4]), st.floats(0.001, 0.3))
def test_pole_error_is_the_distance_in_the_best_pairing(seed: int, order: int, size: float) -> None:
    random = np.random.default_rng(seed)
    target = np.array(sn.butterworth(order).poles) * 5000
    upper = target[target.imag > 0] * (1 + size * random.uniform(-1, 1, order // 2))
    upper = upper * np.exp(1j * size / 2 * random.uniform(-1, 1, order // 2))
    real = target[np.abs(target.imag) < 1e-6].real * (1 + size * random.uniform(-1, 1, order % 2))
    poles = np.concatenate([upper, upper.conj(), real])
    aim = Aim(tuple(target), (), 2.0, "poles")
    row = figures(poles, 2 * (1 + size / 50), aim.unit)[:, None]
    expected = max(distance(poles, target), size / 50)
    assert aim.error(row)[0] == pytest.approx(expected, rel=1e-6)
    assert aim.least(row, row)[0] <= expected * (1 + 1e-9)


@given(st.floats(0.51, 20), st.floats(0.5, 2), st.floats(0.5, 2))
def test_f0_and_q_error_of_one_section(quality: float, f_ratio: float, q_ratio: float) -> None:
    """f0 and Q of 1 + c1 s + c2 s^2: w0 = 1/sqrt(c2), Q = sqrt(c2)/c1."""
    w0 = 6283.0
    root = np.sqrt(1 - 1 / (4 * quality**2))
    pole = complex(-w0 / (2 * quality), w0 * root)
    aim = Aim((pole, pole.conjugate()), (), None, "f0/Q")
    w, q = w0 * f_ratio / aim.unit, quality * q_ratio
    row = np.array([[1 / (q * w)], [1 / w**2]])
    expected = max(abs(f_ratio - 1), abs(q_ratio - 1))
    assert aim.error(row)[0] == pytest.approx(expected, rel=1e-6, abs=1e-9)
    assert aim.least(row, row)[0] <= expected + 1e-9


def seven(objective: Objective, band: tuple[str, str] | None = None) -> Space:
    """The seven-part section, every part with three decades in steps of 5 %."""
    H = sn.derive(SEVEN)
    model = Model.of(H, H.names)
    aim = aim_of(model, Wanted(sn.chebyshev(3, "0.5 dB").at(f3dB="1 kHz"), None, None, -2, objective, band))
    steps = 1.05 ** np.arange(-70, 71)
    lists = tuple(np.asarray(steps * (10e3 if name[0] == "R" else 10e-9), np.float64) for name in H.names)
    return Space(lists, lambda values: model.figures(aim, values), model.linear, aim)


CASES: dict[str, Space] = {
    "poles": seven("poles"),
    "f0/Q": seven("f0/Q"),
    "dB": seven("dB", ("10 Hz", "3 kHz")),
}


@pytest.mark.parametrize("space", CASES.values(), ids=CASES.keys())
@given(seed=st.integers(0, 2**32 - 1), width=st.sampled_from([1, 3, 12, 60]))
def test_no_combination_in_a_box_is_better_than_its_bound(space: Space, seed: int, width: int) -> None:
    """N and D are linear in every value, so the corners of a box bound every figure in it."""
    assert all(space.linear)
    random = np.random.default_rng(seed)
    low = random.integers(0, 141 - width, size=(1, 7))
    high = low + random.integers(0, width + 1, size=(1, 7))
    varying = np.flatnonzero(high[0] > low[0])
    if not len(varying):
        return
    bound = _bounds(space, low, high, varying)[0]
    inside = random.integers(low, high + 1, size=(200, 7))
    errors = np.nan_to_num(space.aim.error(space.at(inside)), nan=np.inf)
    assert bound <= errors.min() * (1 + 1e-9)


@pytest.mark.parametrize("space", CASES.values(), ids=CASES.keys())
def test_the_bound_of_a_single_combination_is_useful(space: Space) -> None:
    """Near the target the bound at a point is the objective but for a factor that the module's head derives."""
    random = np.random.default_rng(7)
    target = figures(np.array(space.aim.poles), -2, space.aim.unit)
    near = target[:, None] * (1 + 0.01 * random.uniform(-1, 1, (4, 2000)))
    errors, bounds = space.aim.error(near), space.aim.screen(near)
    assert (bounds <= errors).all()
    assert (space.aim.least(near, near) <= errors).all()
    assert np.median(bounds / errors) > 0.25


def test_db_is_taken_at_61_frequencies_of_the_band() -> None:
    space = CASES["dB"]
    assert space.aim.frequencies[[0, -1]].tolist() == pytest.approx([10, 3000])
    places = np.full((1, 7), 70)
    values = {name: each[70] for name, each in zip(sn.derive(SEVEN).names, space.lists, strict=True)}
    H = sn.derive(SEVEN).with_values({name: float(value) for name, value in values.items()}).numeric()
    target = sn.chebyshev(3, "0.5 dB").at(f3dB="1 kHz")
    w = 2 * np.pi * space.aim.frequencies
    wanted = np.array([target.decibels(each) - target.decibels(0.0) for each in w.tolist()]) + 20 * np.log10(
        2
    )
    expected = np.max(np.abs(20 * np.log10(np.abs(H(1j * w))) - wanted))
    assert space.aim.error(space.at(places))[0] == pytest.approx(expected, rel=1e-9)
