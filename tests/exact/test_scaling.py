"""H of a scaled network is the same function of s/k_f: published figures, then laws on random networks."""

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction
from random import Random

import pytest

import symnet as sn
from symnet.circuit.scaling import Factors
from symnet.errors import SymnetError
from symnet.exact.ratio import Ratio
from symnet.exact.scaling import is_scaled_copy, scale
from tests.networks import seeded
from tests.property.test_laws import passive

# Doubly terminated Butterworth low-pass of order 3, normalised: 1, 2, 1 (Matthaei, Young, Jones, table 4.05-1; from memory).
PROTOTYPE = sn.network("""
    in -- Rs -- a -- L1 -- b -- L2 -- out
    b -- C1 -- gnd
    out -- RL -- gnd
    Rs, RL, L1, L2 = 1
    C1 = 2
    drive in
    read out
""")


def test_prototype_to_10_mhz_and_50_ohm() -> None:
    """50/(2 pi 1e7) = 795.8 nH, 2/(50*2 pi 1e7) = 636.6 pF, and H is that of the prototype at s/(2 pi 1e7)."""
    result = sn.scale(PROTOTYPE, frequency="10 MHz", impedance=50)
    values = sn.derive(result.network).values
    assert [float(values[name]) for name in ("L1", "C1", "L2")] == pytest.approx(
        [795.8e-9, 636.6e-12, 795.8e-9], rel=1e-4
    )
    assert values["Rs"] == values["RL"] == 50
    (identity,) = result.identities
    assert identity.holds
    assert identity.factor == 1
    assert result.holds
    assert str(identity).startswith("H_scaled(s) = H(s/6.28319e7)")
    (crossing,) = sn.f3db(sn.derive(result.network))
    assert crossing.f == pytest.approx(10e6, rel=1e-14)  # 1 rad/s is the -3.01 dB frequency of the prototype


def test_an_impedance_is_scaled_itself() -> None:
    net = sn.network("drive current into a; a -- R1 = 1 -- b -- L1 = 2 -- gnd; a -- C1 = 3 -- gnd; read a")
    result = scale(net, frequency=4, impedance=5)
    (identity,) = result.identities
    assert identity.holds
    assert identity.factor == 5
    before, after = identity.before.numeric(), identity.after.numeric()
    assert after.at(Fraction(4)) == 5 * before.at(Fraction(1))
    assert str(identity).startswith("H_scaled(s) = 5 * H(s/4)")


def test_symbols_and_ties_with_numbers_in_them() -> None:
    net = sn.network("in -- R1 -- a -- R2 -- out -- C1 -- gnd; R2 = R1 + 100 ohm; drive in; read out")
    result = scale(net, frequency=7, impedance=3)
    assert result.holds
    assert result.identities[0].how == "exactly, in symbols"


def test_a_symbol_without_a_unit_leaves_the_identity_open() -> None:
    net = sn.network("a -- R1 -- b -- R2 -- gnd; hold a = x*y*i_R2; drive current into b; read b")
    result = scale(net, 2, 3)
    assert not result.holds
    assert result.identities[0].holds is None
    assert "free x in ohm" in str(result.identities[0])


def test_h_that_is_too_long_to_be_written_out() -> None:
    text = "; ".join(f"n{k - 1} -- R{k} -- n{k} -- C{k} -- gnd" for k in range(1, 17))
    result = scale(sn.network(f"{text}; drive n0; read n16"), 10, 50)
    assert result.holds
    assert "modulo" in result.identities[0].how


def test_several_drives_and_reads_have_an_identity_each() -> None:
    net = sn.network("in -- R1 -- a -- C1 -- gnd; drive in; drive current into a; read a; read i_C1")
    result = scale(net, 2, 3)
    assert [identity.factor for identity in result.identities] == [1, Fraction(1, 3), 3, 1]
    assert result.holds


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("in -- R1 = 1 -- a -- C1 = 1 -- gnd", "no drive or no read"),
        ("in -- R1 = 1 -- a -- C1 -- gnd; c -- R2 -- d; drive in; read c", "no H to compare"),
        (
            "in -- R1 = 1 -- a -- R2 = 1 -- b; hold b = a; push into a = 1 S*a; drive in; read a",
            "no H to compare",
        ),
    ],
)
def test_without_h_the_values_are_scaled_all_the_same(text: str, said: str) -> None:
    result = scale(sn.network(text), 2, 3)
    assert result.network.with_values(R1=1) != result.network
    assert said in result.note
    assert not result.holds


def test_one_wrong_value_is_no_scaled_copy() -> None:
    """The check is a check: it fails for a value that was left as it was, in numbers and in symbols."""
    result = scale(PROTOTYPE, 10, 50)
    before = sn.derive(PROTOTYPE)
    assert is_scaled_copy(before, sn.derive(result.network), 10, 50)
    assert not is_scaled_copy(before, sn.derive(result.network), 10, 51)
    assert not is_scaled_copy(before, sn.derive(result.network), 11, 50)
    wrong = result.network.with_values(L1=1)
    assert not is_scaled_copy(before, sn.derive(wrong), 10, 50)
    some = {"Rs": None, "L2": None}
    half = sn.derive(PROTOTYPE.with_values(some))
    assert is_scaled_copy(half, sn.derive(result.network.with_values(some)), 10, 50)
    assert not is_scaled_copy(half, sn.derive(wrong.with_values(some)), 10, 50)


def test_another_network_is_no_scaled_copy() -> None:
    before, after = (
        sn.derive(sn.network(f"in -- R1 -- a -- C1 {joined} R2 -- gnd; drive in; read a"))
        for joined in ("||", "+")
    )
    assert not is_scaled_copy(before, after)
    assert is_scaled_copy(before, before)


@pytest.mark.parametrize("seed", range(12))
def test_scaling_law_on_passive_networks(seed: int) -> None:
    """H_scaled(s) = H(s/k_f) for ratios, Z_scaled(s) = k_z Z(s/k_f): all terms of the equations scale alike."""
    random = Random(seed)
    k_f, k_z = (Fraction(random.randint(1, 50), random.randint(1, 50)) for _ in range(2))
    net = passive(seed)
    for drive, factor in (("drive n1", Fraction(1)), ("drive current into n1", k_z)):
        driven = net.add(drive, "read n5")
        result = scale(driven, k_f, k_z)
        assert result.holds
        before, after = (sn.derive(each).numeric() for each in (driven, result.network))
        wanted = before.stretched(k_f)
        assert after == Ratio.of([c * factor for c in wanted.num], wanted.den)


@pytest.mark.parametrize("seed", range(12))
def test_scaling_law_with_laws_and_op_amps(seed: int) -> None:
    """The same where gm, ohms, gains and time constants stand in laws, and Z and Y hold s."""
    net = sn.network(seeded(seed).text)
    result = scale(net, Fraction(7, 3), Fraction(11, 5))
    if result.note:
        with pytest.raises(SymnetError):
            sn.derive(net)
        return
    assert result.holds
    undone = scale(result.network, Fraction(3, 7), Fraction(5, 11)).network
    assert undone == replace(net, text=None)


def test_nothing_to_scale_is_the_same_network() -> None:
    result = scale(PROTOTYPE)
    assert result.network == PROTOTYPE
    assert result.factors == Factors()
    assert result.holds
