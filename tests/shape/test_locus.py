"""Poles against one name: where they meet and cross, against closed forms, and followed, against numpy."""

from __future__ import annotations

import math
from fractions import Fraction

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

import symnet as sn
from symnet.errors import LimitError, MissingValueError, UndefinedError, UnknownNameError
from symnet.shape.locus import Locus, locus
from symnet.typeset.writing import to_text

#: Two equal RC sections around a gain: 1 + (3 - K) s T + s^2 T^2, T = 1 us (common practice, no source).
POSITIVE = """
    in -- R1 -- x -- R2 -- p -- C2 -- gnd;  x -- C1 -- out;  hold out = K*p
    R1, R2 = 1 kohm;  C1, C2 = 1 nF;  drive in;  read out
"""

#: Three equal poles in a loop of negative feedback: (1 + s T)^3 + k, T = 1 us, swings at k = 8, w = sqrt(3)/T.
THREE = """
    drive current into a;  a -- R1 || C1 -- gnd;  b -- R2 || C2 -- gnd;  c -- R3 || C3 -- gnd
    push from b to gnd = k*a/R2;  push from c to gnd = b/R3;  push from gnd to a = -c/R1 ;  read c
    R1, R2, R3 = 1 kohm;  C1, C2, C3 = 1 nF
"""


def happened(found: Locus) -> list[tuple[str, float]]:
    return [(each.kind, each.value) for each in found.happenings]


def test_two_sections_around_a_gain() -> None:
    found = locus(sn.derive(sn.network(POSITIVE)), "K", ["0.5", 2, 3, 4.5])
    assert happened(found) == [("poles meet", 1.0), ("on the jw axis", 3.0), ("poles meet", 5.0)]
    assert [each.place for each in found.happenings] == [-1e6, 1e6j, 1e6]
    assert [to_text(each.exact) for each in found.happenings if each.exact is not None] == ["1", "3", "5"]
    assert [(each.lower, each.upper, each.right, each.axis) for each in found.ranges] == [
        (0, 3, 0, 0),
        (3, math.inf, 2, 0),
    ]
    for i, value in enumerate(found.values):
        K = float(value)
        by_formula = np.sort_complex(np.roots([1e-12, (3 - K) * 1e-6, 1]))
        here = np.sort_complex(np.array([branch[i] for branch in found.branches], dtype=complex))
        assert here == pytest.approx(by_formula, rel=1e-9, abs=1e-3)


def test_three_poles_in_a_loop() -> None:
    """(1 + s T)^3 = -k: by hand s = (k^(1/3) e^(j 60 deg) - 1)/T, on the axis at k = 8; the three meet at k = 0."""
    found = locus(sn.derive(sn.network(THREE)), "k", [1, 8, 27])
    assert happened(found) == [("on the jw axis", 8.0)]
    place = found.happenings[0].place
    assert place is not None
    assert place == pytest.approx(1e6j * math.sqrt(3), rel=1e-12)
    for branch in found.branches:
        for k, pole in zip((1, 8, 27), branch, strict=True):
            assert pole is not None
            assert (1 + pole * 1e-6) ** 3 == pytest.approx(-k)
    real = next(branch for branch in found.branches if branch[0] is not None and branch[0].imag == 0)
    assert [pole.real for pole in real if pole is not None] == pytest.approx([-2e6, -3e6, -4e6])


def test_an_irrational_edge_is_written_as_a_root() -> None:
    """S^3 + k s^2 + s + k^2 - 1 (times powers of T): Routh gives k > k^2 - 1, so k = (1 + sqrt 5)/2."""
    net = sn.network("""
        drive current into a;  a -- R1 -- gnd;  R1 = 1 ohm;  T = 1 s
        push from a to gnd = (k*(s*T)^2 + s*T + k*k - 1)/(s*T)^3*a/R1;  read a
    """)
    found = locus(sn.derive(net), "k", [1.2, 2])
    edge = next(each for each in found.happenings if each.kind == "on the jw axis")
    assert edge.value == pytest.approx((1 + math.sqrt(5)) / 2, rel=1e-15)
    assert edge.exact is not None
    assert to_text(edge.exact) == "1/2 + sqrt(5/4)"
    assert ("at the origin", 1.0) in happened(found)
    stable = [(each.lower, each.upper) for each in found.ranges if not each.right and not each.axis]
    assert stable == [(1.0, edge.value)]


def test_a_pole_goes_through_infinity() -> None:
    """A follower of gain K with a capacitor from its output: (1 + s (1 - K) R C), the pole is at infinity for K = 1."""
    net = sn.network("""
        in -- R1 -- p -- C1 -- out;  hold out = K*p;  drive in;  read out;  R1 = 1 kohm;  C1 = 1 nF
    """)
    found = locus(sn.derive(net), "K", [0.5, 1, 2])
    assert happened(found) == [("at infinity", 1.0)]
    assert [branch[1] for branch in found.branches] == [None]
    assert [each.right for each in found.ranges] == [0, 1]


def test_values_by_themselves() -> None:
    found = locus(sn.derive(sn.network(POSITIVE).with_values(K=2)), "C1")
    assert len(found.values) == 21
    assert float(found.values[0]) == pytest.approx(1e-10)
    assert float(found.values[-1]) == pytest.approx(1e-8)
    # a1 = 0: C1 (1 - K) R1 + C2 (R1 + R2) = 0 at C1 = 2 nF; by hand
    assert ("on the jw axis", 2e-9) in happened(found)


def test_refusals() -> None:
    H = sn.derive(sn.network(POSITIVE))
    with pytest.raises(MissingValueError, match="K has no value to start from"):
        locus(H, "K")
    with pytest.raises(UnknownNameError):
        locus(H, "Kx", [1])
    with pytest.raises(MissingValueError, match="no value for R1"):
        locus(H.with_values(R1=None), "K", [1])
    with pytest.raises(UndefinedError, match="no value of K"):
        locus(H, "K", [])
    static = sn.derive(sn.network("in -- R1 -- out -- R2 -- gnd; drive in; read out; R1, R2 = 1k"))
    with pytest.raises(UndefinedError, match="no poles"):
        locus(static, "R1")
    ladder = " -- ".join(f"R{k} -- n{k}" for k in range(1, 14))
    long = sn.network(
        f"in -- {ladder}; drive in; read n13\n"
        + "\n".join(f"n{k} -- C{k} = 1 nF -- gnd; R{k} = 1 kohm" for k in range(1, 14))
    )
    with pytest.raises(LimitError, match="order 13"):
        locus(sn.derive(long), "R1")


@given(
    st.lists(st.integers(1, 9), min_size=4, max_size=4),
    st.lists(st.integers(-9, 9), min_size=3, max_size=3).filter(any),
)
@settings(max_examples=60, deadline=None)
def test_law_counts_of_the_ranges_are_those_of_numpy(fixed: list[int], moving: list[int]) -> None:
    """D = fixed(s) + k moving(s) of order 3: in the middle of each range numpy finds as many poles to the right."""
    net = sn.network(f"""
        drive current into a;  a -- R1 -- gnd;  R1 = 1 ohm;  T = 1 s
        push from a to gnd = ({_text(fixed)} + k*({_text(moving)}))/(s*T)^4*a/R1;  read a
    """)
    found = locus(sn.derive(net), "k", [1])
    ends = [each.lower for each in found.ranges] + [math.inf]
    assert ends == sorted(ends)
    for each in found.ranges:
        k = (each.lower + each.upper) / 2 if math.isfinite(each.upper) else 2 * each.lower + 1
        D = np.zeros(5)
        D[4] = 1
        D[:4] += np.array(fixed)
        D[:3] += k * np.array(moving)
        real = np.roots(D[::-1]).real
        if abs(real).min() > 1e-6:
            assert (real > 0).sum() == each.right


def _text(coefficients: list[int]) -> str:
    return " + ".join(f"({c})*(s*T)^{k}" for k, c in enumerate(coefficients))


def test_every_branch_is_continuous() -> None:
    """Between neighbouring values no pole moves further than its distance to the next one, away from the meetings."""
    values = [Fraction(k, 20) for k in range(25, 95)]
    found = locus(sn.derive(sn.network(POSITIVE)), "K", values)
    upper, lower = found.branches
    signs = {math.copysign(1, pole.imag) for pole in upper if pole is not None}
    assert len(signs) == 1
    assert all(
        p is not None and q is not None and p == q.conjugate() for p, q in zip(upper, lower, strict=True)
    )
