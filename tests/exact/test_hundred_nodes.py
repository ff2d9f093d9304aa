"""Networks of a hundred nodes with exact values: their poles against mpmath, to 30 digits and to any other number.

The oracles never see H. For the RC ladder the poles are the eigenvalues of a symmetric tridiagonal matrix, and
Sylvester's law of inertia counts how many of them lie below a number: one between the two ends of a pole's 30
digits. For the LC ladder numpy's eigenvalues of the state equations are where Newton's method starts, on the chain
of voltage and current from the far end. For the op amps each buffered stage has a quadratic of its own (R. P.
Sallen, E. L. Key, A practical method of designing RC active filters, IRE Transactions CT-2, 1955, from memory).
All values are invented.
"""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction
from random import Random
from typing import Any

import mpmath
import numpy as np
import pytest

import symnet as sn
from symnet.exact.ratio import Ratio
from symnet.exact.roots import Root

#: IEC 60063, E24, the first decade.
E24 = (10, 11, 12, 13, 15, 16, 18, 20, 22, 24, 27, 30, 33, 36, 39, 43, 47, 51, 56, 62, 68, 75, 82, 91)
DIGITS = 30
RC_SECTIONS, LC_SECTIONS, STAGES = 100, 50, 33

NANO, MILLI = Fraction(1, 10**9), Fraction(1, 10**3)


def some(seed: int, count: int, decades: Sequence[Fraction | int]) -> list[Fraction]:
    random = Random(seed)
    return [random.choice(E24) * Fraction(random.choice(decades)) for _ in range(count)]


def values_of(**columns: Sequence[Fraction]) -> dict[str, Fraction]:
    return {f"{name}{k}": value for name, column in columns.items() for k, value in enumerate(column)}


def numeric(lines: list[str], read: str, values: dict[str, Fraction]) -> Ratio:
    """H with exact numbers, from the text; R in ohm, L in mH, C in pF."""
    units = {"R": (1, "ohm"), "L": (1000, "mH"), "C": (10**12, "pF")}
    given = [f"{name} = {value * units[name[0]][0]} {units[name[0]][1]}" for name, value in values.items()]
    net = sn.network("\n".join([*lines, *given, "drive n0", f"read {read}"]))
    assert 99 <= len(net.nodes) <= 102
    return sn.derive(net).numeric()


def number(value: Fraction) -> Any:
    return mpmath.mpf(value.numerator) / value.denominator


def assert_digits(root: Root, expected: Any, digits: int = DIGITS) -> None:
    """Both coordinates of the pole have so many digits, and the disc that is said to hold the pole does."""
    for got, wanted in ((root.real, expected.real), (root.imag, expected.imag)):
        assert abs(number(got) - wanted) <= mpmath.mpf(10) ** -digits * abs(wanted)
    rounding = mpmath.mpf(10) ** (-digits - 20) * abs(expected)
    assert abs(mpmath.mpc(number(root.real), number(root.imag)) - expected) <= root.bound + rounding


R = some(1, RC_SECTIONS, (10, 100, 1000))
C = some(2, RC_SECTIONS, (NANO / 1000, NANO / 100, NANO / 10))


@pytest.fixture(scope="module")
def rc_ladder() -> Ratio:
    lines = [f"n{k} -- R{k} -- n{k + 1} -- C{k} -- gnd" for k in range(RC_SECTIONS)]
    return numeric(lines, f"n{RC_SECTIONS}", values_of(R=R, C=C))


def poles_below(s: Any) -> int:
    """How many poles of the RC ladder lie below s: the matrix G + s*C has as many negative pivots."""
    g = [*(1 / number(r) for r in R), mpmath.mpf(0)]
    count, pivot = 0, mpmath.inf
    for k in range(RC_SECTIONS):
        pivot = g[k] + g[k + 1] + s * number(C[k]) - (g[k] ** 2 / pivot if k else 0)
        count += pivot < 0
    return RC_SECTIONS - count


@pytest.mark.parametrize("digits", [DIGITS, 60])
def test_rc_ladder_of_100_sections(rc_ladder: Ratio, digits: int) -> None:
    poles = rc_ladder.poles(digits)
    assert len(poles) == RC_SECTIONS == rc_ladder.order
    with mpmath.workdps(2 * digits + 20):
        tiny = mpmath.mpf(10) ** -digits
        for rank, pole in enumerate(sorted(poles, key=lambda pole: pole.real)):
            assert pole.is_real
            s = number(pole.real)
            assert poles_below(s * (1 + tiny)) == rank
            assert poles_below(s * (1 - tiny)) == rank + 1


def test_doubles_are_the_poles_rounded(rc_ladder: Ratio) -> None:
    for pole, finer in zip(rc_ladder.poles(), rc_ladder.poles(DIGITS), strict=True):
        assert abs(Fraction(pole.value.real) - finer.real) <= Fraction(pole.radius)
        assert pole.radius <= 2.0**-52 * abs(pole.value)


def test_lossy_lc_ladder_of_100_nodes() -> None:
    """R_source, then LC_SECTIONS of a coil with its resistance and a capacitor, then a load."""
    L, coil = some(3, LC_SECTIONS, (MILLI,)), some(4, LC_SECTIONS, (1,))
    C, ends = some(5, LC_SECTIONS, (NANO,)), [Fraction(600), Fraction(620)]
    lines = [f"m{k} -- L{k} -- x{k} -- RL{k} -- m{k + 1} -- C{k} -- gnd" for k in range(LC_SECTIONS)]
    lines += ["n0 -- RE0 -- m0", f"m{LC_SECTIONS} -- RE1 -- gnd"]
    H = numeric(lines, f"m{LC_SECTIONS}", values_of(L=L, RL=coil, C=C, RE=ends))
    assert H.order == 2 * LC_SECTIONS

    def chain(s: Any) -> tuple[Any, Any]:
        """The source voltage for 1 V at the load, and its derivative by s; zero at a pole."""
        v, i, dv, di = mpmath.mpf(1), 1 / number(ends[1]), mpmath.mpf(0), mpmath.mpf(0)
        for k in reversed(range(LC_SECTIONS)):
            c, z, dz = number(C[k]), number(coil[k]) + s * number(L[k]), number(L[k])
            i, di = i + s * c * v, di + c * v + s * c * dv
            v, dv = v + z * i, dv + dz * i + z * di
        return v + number(ends[0]) * i, dv + number(ends[0]) * di

    states = np.zeros((2 * LC_SECTIONS, 2 * LC_SECTIONS))  # coil currents, then capacitor voltages
    for k in range(LC_SECTIONS):
        resistance = float(coil[k] + (ends[0] if k == 0 else 0))
        states[k, k] = -resistance / float(L[k])
        states[k, LC_SECTIONS + k] = -1 / float(L[k])
        states[LC_SECTIONS + k, k] = 1 / float(C[k])
        if k:
            states[k, LC_SECTIONS + k - 1] = 1 / float(L[k])
            states[LC_SECTIONS + k - 1, k] = -1 / float(C[k - 1])
    states[-1, -1] = -1 / float(ends[1] * C[-1])
    with mpmath.workdps(DIGITS + 30):
        expected = []
        for start in np.linalg.eigvals(states):
            s = mpmath.mpmathify(complex(start))
            for _ in range(8):
                v, dv = chain(s)
                s -= v / dv
            expected.append(mpmath.mpc(s.real, 0 if start.imag == 0 else s.imag))
        left = list(H.poles(DIGITS))
        assert len(left) == len(expected)
        for s in expected:
            nearest = min(left, key=lambda pole: abs(mpmath.mpc(pole.value) - s))
            left.remove(nearest)
            assert_digits(nearest, s)


def test_op_amps_of_100_nodes() -> None:
    """Buffered low-pass stages in cascade: D of each is 1 + s (Ra + Rb) Cb + s^2 Ra Rb Ca Cb."""
    Ra, Rb = some(6, STAGES, (10, 100, 1000)), some(7, STAGES, (100,))
    Ca, Cb = some(8, STAGES, (NANO, NANO / 10)), some(9, STAGES, (NANO / 10,))
    lines = []
    for k in range(STAGES):
        out = f"n{k + 1}"
        lines += [f"n{k} -- RA{k} -- a{k} -- RB{k} -- b{k} -- CB{k} -- gnd", f"a{k} -- CA{k} -- {out}"]
        lines.append(f"U{k}: opamp(plus=b{k}, minus={out}, out={out})")
    H = numeric(lines, f"n{STAGES}", values_of(RA=Ra, RB=Rb, CA=Ca, CB=Cb))
    poles = list(H.poles(DIGITS))
    assert sum(pole.multiplicity for pole in poles) == 2 * STAGES == H.order
    with mpmath.workdps(DIGITS + 30):
        for ra, rb, ca, cb in zip(Ra, Rb, Ca, Cb, strict=True):
            linear, square = (ra + rb) * cb, ra * rb * ca * cb
            centre, radicand = -linear / (2 * square), (linear / (2 * square)) ** 2 - 1 / square
            for sign in (1, -1):
                s = mpmath.mpmathify(number(centre)) + sign * mpmath.sqrt(mpmath.mpc(number(radicand)))
                pole = min(poles, key=lambda pole: abs(mpmath.mpc(pole.value) - s))
                assert_digits(pole, s)
                closed = pole.closed
                assert closed is not None
                assert closed.sign == 0 or (closed.rational, closed.radicand) == (centre, radicand)
