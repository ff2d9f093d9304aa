"""Stability from poles and, in symbols, from the signs of Hurwitz' determinants."""

from __future__ import annotations

from fractions import Fraction

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

import symnet as sn
from symnet.circuit.build import network
from symnet.exact.derive import derive
from symnet.exact.ratio import Ratio
from symnet.shape.closed import value_of
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
        ("1", "1+s^4*L^2*C^2+s^2*L*C", "L C", "unstable"),
        ("1", "1+s^4*L^2*C^2+3*s^2*L*C", "L C", "marginal"),
        ("1", "1+s^2*L*C*R+s^4*L^2*C^2", "R L C", "conditional"),
        ("1", "1+s^2*L*C+s^4*L^2*C^2+s^6*L^3*C^3", "L C", "unstable"),
        ("1", "1+s^2*L*C+s^4*L^2*R+s^6*L^3*C^3", "L R C", "undecided"),
        ("1", "(1+s*R*C)*(1+s^2*L*C)", "L R C", "marginal"),
        ("1", "(1+s^2*L*C)*(1+s^2*L*C)", "L C", "unstable"),
        ("1", "(1+s^2*L*C)*(1+s*R1*C-s*R2*C)", "L C R1 R2", "conditional"),
        ("1", "R1-R2+s*(R1-2*R2)*R1*C", "R1 R2 C", "undecided"),
        ("1", "R1-R2+s*R1*R2*C", "R1 R2 C", "conditional"),
        ("1", "1+s*R*C+s^2*R^2*C^2+2*s^3*R^3*C^3", "R C", "unstable"),
        ("1", "1+3*s*R*C+3*s^2*R^2*C^2+s^3*R^3*C^3", "R C", "stable"),
        ("1", "1+4*s*R*C+6*s^2*R^2*C^2+4*s^3*R^3*C^3+s^4*R^4*C^4", "R C", "stable"),
        ("1", "1+s*R*C+s^2*R^2*C^2+s^3*R^3*C^3+s^4*R^4*C^4", "R C", "unstable"),
        ("1", "1+s*R*C+s^2*R^2*C^2+s^3*R^3*C^3+s^4*R^4*C^4+s^5*R^5*C^5", "R C", "unstable"),
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


#: Networks whose stability hangs on their parts, each with the names that are given random values.
HANGING = {
    "two sections around a gain": """
        in -- R1 -- x -- R2 -- p -- C2 -- gnd;  x -- C1 -- out
        hold out = K*p;  drive in;  read out
    """,
    "three sections around an inverting gain": """
        drive in;  in -- R4 -- m;  hold out = -K*m;  m -- R1 -- a -- R2 -- b -- R3 -- out
        a -- C1 -- gnd;  b -- C2 -- gnd;  out -- R5 -- gnd;  m -- C3 -- gnd;  read out
    """,
    "an op amp of two poles with a capacitance at its input": """
        drive current into m;  m -- Cin -- gnd;  m -- Rf || Cf -- out
        U1: opamp(plus=gnd, minus=m, out=out, gbw=1 MHz, pole2=1 MHz);  read out
    """,
    "three poles in a loop": """
        drive current into a;  a -- R1 || C1 -- gnd;  b -- R2 || C2 -- gnd;  c -- R3 || C3 -- gnd
        push from b to gnd = g1*a;  push from gnd to c = g2*b;  push from gnd to a = g3*c;  read c
    """,
}


@pytest.mark.parametrize("name", HANGING)
def test_conditions_and_poles_agree_on_random_values(name: str) -> None:
    """2000 sets of values in all: every condition is positive if and only if numpy finds all poles to the left."""
    h = derive(network(HANGING[name]))
    names = h.names
    symbolic = stability(h.with_values(dict.fromkeys(names)))
    assert symbolic.verdict == "conditional"
    random = np.random.default_rng(len(name))
    stable = 0
    for _ in range(500):
        values = {
            word: Fraction(float(10 ** random.uniform(-1, 3 if word == "K" else 1))).limit_denominator(1000)
            + Fraction(1, 1000)
            for word in names
        }
        numbers = h.with_values(values)
        den = [float(c) for c in numbers.numeric().den]
        rightmost = np.roots(den[::-1]).real.max()
        if abs(rightmost) < 1e-6:
            continue  # doubles cannot tell
        fulfilled = all(value_of(condition, values) > 0 for condition in symbolic.conditions)
        assert fulfilled == (rightmost < 0)
        found = stability(numbers)
        assert (found.verdict == "stable") == fulfilled
        assert found.largest_real == pytest.approx(rightmost, rel=1e-6)
        stable += fulfilled
    assert 20 < stable < 480  # both happen


def test_relation_is_solved_for_the_gain() -> None:
    """K < 1 + (C2/C1)(1 + R2/R1), K < 3 for equal parts (common practice, no source)."""
    net = network(HANGING["two sections around a gain"])
    assert str(stability(derive(net))) == "conditional: stable if and only if: K < 1 + (1 + R2/R1)*C2/C1"
    equal = net.with_values(R1="1k", R2="1k", C1="10n", C2="10n")
    assert str(stability(derive(equal))) == "conditional: stable if and only if: K < 3"


def test_numbers_keep_the_conditions_beside_them() -> None:
    net = network(HANGING["two sections around a gain"])
    found = stability(derive(net.with_values(R1="1k", R2="1k", C1="10n", C2="10n", K=2)))
    assert found.verdict == "stable"
    assert [sign for _, sign, _ in found.relations] == ["<"]
    assert found.largest_real == pytest.approx(-0.5e5)  # K = 2: Q = 1/(3 - K) = 1, w0 = 1e5
    assert found.damping == pytest.approx(0.5)
    edge = stability(derive(net.with_values(R1="1k", R2="1k", C1="10n", C2="10n", K=3)))
    assert (edge.verdict, edge.damping, edge.largest_real) == ("marginal", 0.0, 0.0)


def test_two_sections_have_real_poles() -> None:
    """A1^2 - 4 a2 = (R1 C1 - R2 C2)^2 + R1 C2 (R1 C2 + 2 R1 C1 + 2 R2 C2), by hand."""
    net = network("in -- R1 -- a -- R2 -- out;  a -- C1 -- gnd;  out -- C2 -- gnd;  drive in;  read out")
    found = stability(derive(net))
    assert found.verdict == "stable"
    assert found.remark == (
        "the poles are always real, because a1^2 - 4*a0*a2 = "
        "(R1*C1 - R2*C2)^2 + R1*C2*(2*R1*C1 + (R1 + 2*R2)*C2)"
    )


def test_tank_is_marginal() -> None:
    net = network("drive current into a;  a -- L1 || C1 -- gnd;  read a")
    assert stability(derive(net)).verdict == "marginal"
    found = stability(derive(net.with_values(L1="1 mH", C1="1 nF")))
    assert found.verdict == "marginal"
    assert found.planes is not None
    assert found.planes.axis == 2


def test_mode_that_h_hides_counts() -> None:
    """A tank across the drive is in the network and not in H; so is a twin-T mode that a matched buffer cancels."""
    net = network("in -- R1 -- out -- C1 -- gnd;  in -- L1 -- y -- C2 -- gnd;  drive in;  read out")
    for each in (net, net.with_values(R1="1k", C1="1n", L1="1m", C2="1n")):
        found = stability(derive(each))
        assert found.verdict == "marginal"
        assert "a mode that it hides in L1, C2 is marginal" in found.reason
        assert [parts for parts, _ in found.hidden] == [("L1", "C2")]


def test_mode_that_cancels_by_its_values_counts() -> None:
    """The null of a trap before a buffer falls on a tank behind it: H is flat there, and the tank rings for ever."""
    net = network("""
        in -- R1 -- a;  a -- L1 + C1 -- gnd;  push from gnd to c = gm*a;  c -- L2 || C2 -- gnd
        R1 = 1k;  L1, L2 = 1 mH;  C1, C2 = 1 nF;  gm = 1 mS;  drive in;  read c
    """)
    found = stability(derive(net))
    assert found.verdict == "marginal"
    assert found.reason.startswith(
        "H is stable (both poles in the left half plane), but a mode that it hides is"
    )
    beside = stability(derive(net.with_values(C2="2 nF")))
    assert (beside.verdict, beside.hidden) == ("marginal", ())


@pytest.mark.parametrize(("beside", "verdict"), [("", "stable"), ("n3 -- C99 = 1 nF -- n98 -- L99 = 1 mH -- in", "stable"),
    ("in -- C99 = 1 nF -- n98 -- L99 = 1 mH -- gnd", "marginal")])  # fmt: skip
def test_long_networks_are_judged_in_numbers(beside: str, verdict: str) -> None:
    """A ladder of 40 sections is never written out; a lossless pair across its drive is found all the same."""
    chain = " -- ".join(f"R{k} -- n{k}" for k in range(1, 41))
    shunts = "\n".join(f"n{k} -- C{k} = 1 nF -- gnd;  R{k} = 1 kohm" for k in range(1, 41))
    found = stability(derive(network(f"in -- {chain}; drive in; read n40\n{shunts}\n{beside}")))
    assert found.verdict == verdict
    assert found.planes is not None
    assert found.planes.left == 40 + 2 * (verdict == "stable" and bool(beside))
    assert len(found.hidden) == (verdict == "marginal")


def test_twin_t_null_in_a_loop_of_gain_one_is_marginal() -> None:
    """An ideal amplifier whose only feedback is a twin-T has its poles at the null: R, R, R/2 and C, C, 2C."""
    net = network("""
        in -- R5 -- m;  U1: opamp(plus=gnd, minus=m, out=out)
        out -- R1 -- x -- R2 -- m;  x -- C3 -- gnd;  out -- C1 -- y -- C2 -- m;  y -- R3 -- gnd
        R1, R2 = 10k;  R3 = 5k;  C1, C2 = 1n;  C3 = 2n;  R5 = 10k;  drive in;  read out
    """)
    found = stability(derive(net))
    assert found.verdict == "marginal"
    assert found.planes is not None
    assert found.planes.right == 0


def test_passive_networks_are_never_unstable() -> None:
    """What squares do not prove of a ladder of order 5, its being made of R, L and C alone does."""
    net = network("""
        in -- R1 -- a -- L1 -- b -- L2 -- out;  a -- C1 -- gnd;  b -- C2 -- gnd;  out -- C3 || R2 -- gnd
        drive in;  read out
    """)
    found = stability(derive(net))
    assert found.verdict == "conditional"
    assert "no pole in the right half plane" in found.remark
    negative = stability(derive(net.with_values(R2=-50)))
    assert "no pole" not in negative.remark


def test_ladder_of_one_kind_of_store_is_stable_at_any_order() -> None:
    chain = " -- ".join(f"R{k} -- n{k}" for k in range(1, 7))
    shunts = "\n".join(f"n{k} -- C{k} -- gnd" for k in range(1, 7))
    found = stability(derive(network(f"in -- {chain}; drive in; read n6\n{shunts}")))
    assert found.verdict == "stable"
    assert found.reason == "a network of positive R and C alone has its poles on the negative real axis"


def test_a_mode_on_the_jw_axis_makes_the_whole_marginal_also_where_only_values_hide_it() -> None:
    """A lossless tank that the read does not see; a twin-T notch with its foot carried all the way, k = 1."""
    tank = sn.network(
        "in -- R1 = 1k -- out -- R2 = 1k -- gnd; x -- L1 = 1m -- gnd; x -- C1 = 1n -- gnd\n"
        "push into x = g*in; g = 1 mS; drive in; read out"
    )
    notch = sn.network("X1: twin_t_notch(in=in, out=out, R=1k, C=1n, k=1); drive in; read out")
    for each in (tank, notch):
        found = sn.stability(sn.derive(each))
        assert found.verdict == "marginal"
        assert sn.normalise(sn.derive(each)).stability == found
        assert "but a mode that it hides" in found.reason


def test_repr_stays_short_where_conditions_are_long() -> None:
    net = network(HANGING["three sections around an inverting gain"])
    found = stability(derive(net))
    assert len(str(found)) > 300
    assert len(repr(found)) < 400
    assert "conditions, see .relations" in repr(found)
