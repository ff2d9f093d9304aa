"""Dominant terms: the figures of a review, bounds that hold everywhere, and poles that are told."""

from __future__ import annotations

import math
import random
from fractions import Fraction
from typing import Any

import mpmath
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

import symnet as sn
from symnet.errors import DimensionError, LimitError, MissingValueError, NotationError, UndefinedError
from symnet.exact.ratio import Ratio
from symnet.shape import deviation as deviation_module
from symnet.shape import shortening
from symnet.shape.dominant import Dominant, dominant
from symnet.typeset.tree import evaluate
from symnet.typeset.writing import to_text

TWO_SECTIONS = "in -- R1 -- a -- R2 -- out; a -- C1 -- gnd; out -- C2 -- gnd; drive in; read out"
#: Fast first, slow second: R1 C1 = R2 C2 = 100 us, and R1 C2 = 1 us between them.
CLOSE = TWO_SECTIONS + "; R1 = 1 kohm; C1 = 100 nF; R2 = 100 kohm; C2 = 1 nF"
#: R2 = 100 R1, equal capacitors.
APART = TWO_SECTIONS + "; R1 = 1 kohm; R2 = 100 kohm; C1, C2 = 10 nF"


def transfer(text: str) -> sn.Transfer:
    return sn.derive(sn.network(text))


def by_powers(polynomial: Any, values: dict[str, Fraction]) -> dict[int, Any]:
    """The coefficients of a ring element in 40 digits, each term worked out by itself."""
    names = [str(symbol) for symbol in polynomial.ring.symbols]
    found: dict[int, Any] = {}
    for (power, *exponents), coefficient in polynomial.items():
        term = Fraction(int(coefficient))
        for name, exponent in zip(names[1:], exponents, strict=True):
            term *= values[name] ** exponent
        found[power] = found.get(power, 0) + mpmath.mpf(term.numerator) / term.denominator
    return found


def ratio_at(H: sn.Transfer, short: Dominant, frequencies: Any) -> list[Any]:
    """H'/H at these frequencies in Hz, in 40 digits: powers of jw added up, no root, no reduction."""
    with mpmath.workdps(40):
        n, d, now_n, now_d = (
            by_powers(p, dict(H.values))
            for p in (H.numerator, H.denominator, short.numerator, short.denominator)
        )
        found = []
        for f in frequencies:
            s = mpmath.mpc(0, 2 * mpmath.pi * mpmath.mpf(float(f)))
            a, b, c, e = (mpmath.fsum(v * s**k for k, v in p.items()) for p in (now_n, d, now_d, n))
            found.append(a * b / (c * e))
        return found


def errors_at(H: sn.Transfer, short: Dominant, frequencies: Any) -> tuple[list[float], list[float]]:
    """The errors in dB and in degrees."""
    with mpmath.workdps(40):
        ratios = ratio_at(H, short, frequencies)
        decibels = [float(20 * mpmath.log10(abs(ratio))) for ratio in ratios]
        return decibels, [float(mpmath.degrees(mpmath.arg(ratio))) for ratio in ratios]


def sampled(H: sn.Transfer, short: Dominant, points: int = 400) -> tuple[list[float], list[float]]:
    """The errors at frequencies evenly spaced over the band on a logarithmic axis."""
    return errors_at(H, short, np.geomspace(*short.band, points))


# -- the worked case --------------------------------------------------------------------------------------------


def test_half_a_per_cent_of_a_coefficient_is_ten_per_cent_of_a_pole() -> None:
    """a1 = R1 C1 + R1 C2 + R2 C2 = 201 us; without R1 C2 both poles stand at 1592 Hz (recomputed by hand)."""
    H = transfer(CLOSE)
    short = dominant(H)
    (dropped,) = short.dropped
    assert to_text(dropped.tree) == "s*R1*C2"
    assert dropped.percent == pytest.approx(100 / 201, rel=1e-12)
    change = next(c for c in short.coefficients if c.side == "denominator" and c.power == 1)
    assert (change.exact, change.shortened) == (Fraction(201, 10**6), Fraction(200, 10**6))
    assert change.percent == pytest.approx(-100 / 201, rel=1e-12)
    slow, fast = short.poles
    # roots of 1e-8 s^2 + 201e-6 s + 1 by the formula for a quadratic
    root = math.sqrt(201e-6**2 - 4e-8)
    exact = [(201e-6 - root) / 2e-8, (201e-6 + root) / 2e-8]
    assert [slow.f0, fast.f0] == pytest.approx([w / (2 * math.pi) for w in exact], rel=1e-9)
    assert [round(slow.f0), round(fast.f0)] == [1440, 1759]
    assert slow.shortened_f0 == fast.shortened_f0 == pytest.approx(1e4 / (2 * math.pi), rel=1e-14)
    assert [round(slow.shift_percent, 1), round(fast.shift_percent, 1)] == [10.5, 9.5]
    assert slow.f0_percent > 0 > fast.f0_percent


def test_largest_error_of_the_worked_case() -> None:
    """H'/H = (1 - x + j w a1)/(1 - x + j w a1'), largest at w = 10 krad/s, where it is a1/a1' = 2.01/2."""
    short = dominant(transfer(CLOSE))
    assert short.error_db.value == pytest.approx(20 * math.log10(2.01 / 2), rel=1e-12)
    assert short.error_db.f == pytest.approx(1e4 / (2 * math.pi), rel=1e-12)
    assert short.proven


def test_tighter_bounds_drop_nothing() -> None:
    short = dominant(transfer(CLOSE), within_db=0.04)
    assert not short.dropped
    assert (short.error_db.value, short.error_deg.value) == (0.0, 0.0)


def test_phase_alone_can_forbid_it() -> None:
    H = transfer(CLOSE)
    error = abs(dominant(H).error_deg.value)
    assert dominant(H, within_deg=error * 1.01).dropped
    assert not dominant(H, within_deg=error * 0.99).dropped


def test_rest_and_dropped_make_up_the_whole() -> None:
    H = transfer(CLOSE)
    short = dominant(H)
    assert short.denominator + short.dropped[0].term == H.denominator
    assert short.numerator == H.numerator
    assert short.ratio == Ratio.of([1], [1, Fraction(200, 10**6), Fraction(1, 10**8)])
    assert evaluate(short.tree, {"s": Fraction(7), **H.values}.__getitem__) == short.ratio.at(Fraction(7))


def test_narrow_band_drops_whole_coefficients_and_says_which_pole_has_gone() -> None:
    short = dominant(transfer(APART), within_db=0.03, within_deg=1, band=("1 Hz", "100 Hz"))
    assert short.ratio.order == 1
    assert [move.shortened is None for move in short.poles] == [False, True]
    assert short.poles[1].shift_percent == math.inf
    assert any(change.shortened == 0 and change.percent == -100 for change in short.coefficients)


# -- bounds -----------------------------------------------------------------------------------------------------


def ladder(seed: int) -> sn.Transfer:
    """A ladder of random parts over four decades, resonances and zeros included."""
    chance = random.Random(seed)
    value = {
        "R": lambda: f"{chance.choice((1, 2.2, 4.7))}e{chance.randint(1, 4)}",
        "C": lambda: f"{chance.choice((1, 2.2, 4.7))}e{chance.randint(-10, -7)}",
        "L": lambda: f"{chance.choice((1, 2.2, 4.7))}e{chance.randint(-5, -2)}",
    }
    lines, values = [], []
    for k in range(1, chance.randint(2, 4) + 1):
        series, shunt = (
            chance.choice(("R", "R || C", "L + R", "R || L")),
            chance.choice(("C", "C || R", "C + R")),
        )
        lines.append(
            f"n{k - 1} -- {series.replace('R', f'R{k}').replace('C', f'C{k}').replace('L', f'L{k}')} -- n{k}"
        )
        lines.append(f"n{k} -- {shunt.replace('R', f'R{k}b').replace('C', f'C{k}b')} -- gnd")
        values += [f"{kind}{k} = {value[kind]()}" for kind in "RCL" if kind in series]
        values += [f"{kind}{k}b = {value[kind]()}" for kind in "RC" if kind in shunt]
    return transfer("; ".join([*lines, *values, "drive n0", f"read n{k}"]))


@given(st.integers(0, 10**6), st.sampled_from([(0.5, 5.0), (0.05, 0.3), (2.0, 20.0), (0.0, 0.0), (3.0, 0.5)]))
@settings(max_examples=12, deadline=None)
def test_law_bounds_hold_at_every_frequency(seed: int, bounds: tuple[float, float]) -> None:
    """|20 log10 |H'/H|| <= within_db and |phase| <= within_deg for every w of the band."""
    H = ladder(seed)
    short = dominant(H, *bounds)
    decibels, degrees = sampled(H, short)
    for found, errors, bound in zip(
        (short.error_db, short.error_deg), (decibels, degrees), bounds, strict=True
    ):
        largest = max(map(abs, errors))
        assert largest <= abs(found.value) * (1 + 1e-9) + 1e-12
        assert abs(found.value) <= bound
        assert short.band[0] * (1 - 1e-12) <= found.f <= short.band[1] * (1 + 1e-12)
    assert short.proven
    if bounds == (0.0, 0.0):
        assert not short.dropped
        assert (short.numerator, short.denominator) == (H.numerator, H.denominator)


@pytest.mark.parametrize("seed", range(6))
def test_reported_error_is_the_error_at_the_reported_frequency(seed: int) -> None:
    H = ladder(seed)
    short = dominant(H, 1.0, 10.0)
    assert short.dropped
    for worst, read in ((short.error_db, 0), (short.error_deg, 1)):
        there = errors_at(H, short, [worst.f])[read]
        assert worst.value == pytest.approx(there[0], rel=1e-8, abs=1e-12)


def test_proof_overrules_a_grid_that_has_seen_nothing(monkeypatch: pytest.MonkeyPatch) -> None:
    """With a grid of the two ends only the search takes far too much; what comes out keeps to the bounds all the same."""
    H = ladder(3)
    honest = dominant(H, 0.2, 2.0)
    monkeypatch.setattr(shortening, "grid", lambda low, high, _around: np.array([low, high]))
    short = dominant(H, 0.2, 2.0)
    assert short.proven
    assert abs(short.error_db.value) <= 0.2
    assert abs(short.error_deg.value) <= 2.0
    assert max(map(abs, sampled(H, short)[0])) <= 0.2
    assert len(short.dropped) <= len(honest.dropped)


def test_no_pole_crosses_into_the_right_half_plane() -> None:
    """R - (C) - L - (C): 1 + s + 0.01 s^2 + 0.009 s^3 without s^2 is within 0.2 dB up to 2 rad/s, and unstable (Hurwitz)."""
    H = transfer(
        "in -- R1 -- a -- L1 -- out; a -- C1 -- gnd; out -- C2 -- gnd; drive in; read out;"
        "R1 = 1; C1 = 0.9; C2 = 0.1; L1 = 0.1"
    )
    short = dominant(H, within_db=0.2, within_deg=4, band=("0.1 rad/s", "2 rad/s"))
    without = Ratio.of([1], [1, 1, 0, Fraction(9, 1000)])
    w = np.geomspace(0.1, 2, 500)
    errors = without.decibels(1j * w) - H.numeric().decibels(1j * w)
    assert np.abs(errors).max() < 0.2
    assert any(pole.real > 0 for pole in without.poles())
    assert all(pole.real < 0 for pole in short.ratio.poles())
    assert short.ratio != without
    assert short.held == 1


def test_a_part_that_is_worth_nothing_goes_at_no_cost() -> None:
    """R1 = 0: every term with R1 is 0, so that even with bounds of 0 it can go, and only such terms."""
    H = transfer(TWO_SECTIONS + "; R1 = 0; R2 = 1k; C1, C2 = 1n")
    short = dominant(H, 0, 0)
    assert {to_text(term.tree) for term in short.dropped} == {"s*R1*C1", "s*R1*C2", "s^2*R1*R2*C1*C2"}
    assert {term.percent for term in short.dropped} == {0.0}
    assert short.ratio == H.numeric()
    assert (short.error_db.value, short.error_deg.value) == (0.0, 0.0)


def test_resistors_alone_with_a_band() -> None:
    """R2/(R1 + R2) with R1 = R2/100: dropping R1 costs 20 log10(1.01) dB at every frequency, and no phase."""
    H = transfer("in -- R1 -- out -- R2 -- gnd; R1 = 10; R2 = 1k; drive in; read out")
    short = dominant(H, within_deg=0, band=(10, 1e5))
    assert to_text(short.dropped[0].tree) == "R1"
    assert short.error_db.value == pytest.approx(20 * math.log10(1.01), rel=1e-12)
    assert short.error_deg.value == 0
    assert short.poles == short.zeros == ()


def test_beyond_the_proof_it_says_that_a_grid_was_read(monkeypatch: pytest.MonkeyPatch) -> None:
    """The same errors, read and proven, as far as a grid can tell; and the reader is told which of the two it was."""
    H = ladder(5)
    proven = dominant(H, 1.0, 10.0)
    monkeypatch.setattr(deviation_module, "_MOST_PROVEN", 1)
    read = dominant(H, 1.0, 10.0)
    assert proven.proven
    assert proven.proof.startswith("proven")
    assert not read.proven
    assert "read on a grid of" in read.proof
    assert read.dropped == proven.dropped
    for one, other in ((read.error_db, proven.error_db), (read.error_deg, proven.error_deg)):
        assert one.value == pytest.approx(other.value, rel=1e-2)
        assert abs(one.value) <= abs(other.value) * (1 + 1e-9)
    assert not dominant(H, 0, 0).dropped


# -- bands and complaints ---------------------------------------------------------------------------------------


def test_band_in_hertz_in_text_or_number_and_in_radians() -> None:
    H = transfer(CLOSE)
    for band in (("10 Hz", "20 kHz"), (10, 20e3), ("62.83185307179586 rad/s", "125663.70614359172 rad/s")):
        assert dominant(H, band=band).band == pytest.approx((10, 20e3), rel=1e-14)
    slow, fast = (move.f0 for move in dominant(H).poles)
    assert dominant(H).band == pytest.approx((slow / 10, fast * 10), rel=1e-12)


@pytest.mark.parametrize(
    ("arguments", "error", "said"),
    [
        ({"within_db": -1.0}, NotationError, "from 0 to 40 dB"),
        ({"within_db": math.nan}, NotationError, "from 0 to 40 dB"),
        ({"within_deg": 90.0}, NotationError, "less than 90 degrees"),
        ({"band": ("1 kHz", "10 Hz")}, NotationError, "lower to a higher frequency"),
        ({"band": ("0 Hz", "10 Hz")}, NotationError, "above 0"),
        ({"band": (1.0, math.inf)}, NotationError, "inf Hz"),
        ({"band": "10 kHz"}, NotationError, "two ends"),
        ({"band": ("10 ms", "1 kHz")}, DimensionError, "a frequency; 10 ms is in s"),
    ],
)
def test_bounds_and_bands_that_are_none(arguments: dict[str, Any], error: type[Exception], said: str) -> None:
    with pytest.raises(error, match=said):
        dominant(transfer(CLOSE), **arguments)


def test_missing_value_is_named() -> None:
    with pytest.raises(MissingValueError, match="C2"):
        dominant(transfer(TWO_SECTIONS + "; R1, R2 = 1k; C1 = 1n"))


def test_nothing_at_the_output() -> None:
    H = transfer("in -- R1 -- gnd; a -- R2 -- gnd; drive in; read a; R1, R2 = 1k")
    with pytest.raises(UndefinedError, match="H = 0"):
        dominant(H)
    bridge = (
        "in -- R1 -- a -- R2 -- gnd; in -- R3 -- b -- R4 -- gnd; drive in; read a - b; R1, R2, R3, R4 = 1k"
    )
    with pytest.raises(UndefinedError, match="H = 0 with these values"):
        dominant(transfer(bridge), band=(1, 2))


def test_no_poles() -> None:
    H = transfer("in -- R1 -- out -- R2 -- gnd; drive in; read out; R1, R2 = 1k")
    with pytest.raises(UndefinedError, match="no pole and no zero"):
        dominant(H)


def test_numbers_have_no_terms() -> None:
    with pytest.raises(UndefinedError, match="numbers only"):
        dominant(Ratio.of([1], [1, 1]))  # type: ignore[arg-type]


def test_too_many_terms() -> None:
    text = "; ".join(f"n{k - 1} -- R{k} -- n{k} -- C{k} -- gnd; R{k} = 1k; C{k} = 1n" for k in range(1, 10))
    with pytest.raises(LimitError, match="4182 terms"):  # F(19) = 4181 (Fibonacci), and the 1 of N
        dominant(transfer(f"{text}; drive n0; read n9"))
