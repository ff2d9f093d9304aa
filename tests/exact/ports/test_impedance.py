"""Impedances between nodes, one part seen by the others, common and differential mode."""

from __future__ import annotations

import itertools
import math

import pytest

import symnet as sn
from symnet.circuit.meanings import uses
from symnet.errors import NotationError, UnknownNameError, WiringError
from symnet.expressions import names_in
from tests.networks import seeded

TWO_SECTIONS = """
    in -- R1 -- x -- R2 -- out;  x -- C1 -- gnd;  out -- C2 -- gnd
    drive in; read out
"""


def test_input_and_output_impedance_of_two_sections() -> None:
    """Figures computed apart from this package for 1 kohm and 100 nF at 1 kHz."""
    net = sn.network(TWO_SECTIONS)
    zin, zout = sn.driving_point(net, "in"), sn.driving_point(net, "out")
    assert str(zin) == (
        "in/i_test = (1 + s*(R1*C1 + (R1 + R2)*C2) + s^2*R1*R2*C1*C2)/(s*(C1 + C2 + s*R2*C1*C2))"
    )
    assert str(zout) == (
        "out/i_test = (R1 + R2 + s*R1*R2*C1)/(1 + s*(R1*C1 + (R1 + R2)*C2) + s^2*R1*R2*C1*C2)"
    )
    equal = net.with_values(R1="1k", R2="1k", C1="100 nF", C2="100 nF")
    at_1_khz = sn.driving_point(equal, "in").numeric()(2j * math.pi * 1000)
    assert at_1_khz.real == pytest.approx(1227.5, abs=0.05)
    assert at_1_khz.imag == pytest.approx(-867.3, abs=0.05)


def test_between_two_nodes_and_with_other_drives_at_zero() -> None:
    net = sn.network("in -- R1 -- a -- R2 -- b -- R3 -- gnd; drive in; read b")
    assert str(sn.driving_point(net, "a - b")) == "(a - b)/i_test = R2||(R1 + R3)"
    open_input = sn.network("in -- R1 -- a -- R2 -- gnd; drive current into in; read a")
    assert str(sn.driving_point(open_input, "a")) == "a/i_test = R2"
    with pytest.raises(UnknownNameError, match="did you mean a"):
        sn.driving_point(net, "aa")
    with pytest.raises(NotationError, match="no pair of nodes"):
        sn.driving_point(net, "current into a")


def test_a_part_put_back_gives_h_again() -> None:
    """H = H_open (1 + Z_n/Z)/(1 + Z_d/Z) (Middlebrook 1989), exactly, for every branch of 40 random networks."""
    checked = 0
    for seed in range(40):
        network = sn.network(seeded(seed, most_nodes=4, rational=False).text)
        h = sn.derive(network)
        for part in itertools.islice(network.branches(), 3):
            named = f"i_{part.name}"
            if any(named == name.name for use in uses(network) for name in names_in(use.expression)):
                continue  # what a law or the read follows cannot be taken away
            seen = sn.extra_element(network, part.name)
            if seen.opened is None or seen.driving_point is None or seen.nulled is None:
                continue
            ring = h.ring
            value = ring(h.symbol(part.name)) if part.name in h.names else None
            if value is None:
                continue
            s = ring.gens[0]
            z_above, z_below = {
                "R": (value, ring.one),
                "L": (s * value, ring.one),
                "C": (ring.one, s * value),
            }[part.kind]
            (n0, d0), (na, nb), (da, db) = (
                (p.numerator.set_ring(ring), p.denominator.set_ring(ring))
                for p in (seen.opened, seen.nulled, seen.driving_point)
            )
            top = n0 * (nb * z_above + na * z_below) * db
            bottom = d0 * (db * z_above + da * z_below) * nb
            assert top * h.denominator == bottom * h.numerator, (seed, part.name)
            checked += 1
    assert checked >= 40


def test_an_element_that_is_none() -> None:
    net = sn.network("in -- R1 -- m -- R2 -- out; U1: opamp(plus=gnd, minus=m, out=out); drive in; read out")
    with pytest.raises(NotationError, match="U1 is no branch"):
        sn.extra_element(net, "U1")
    seen = sn.extra_element(net, "R2")
    assert seen.opened is None
    assert str(seen.shorted) == "H_short = 0"


DIFFERENCE = """
    a -- R1 -- m -- R2 -- out;  b -- R3 -- p -- R4 -- gnd
    U1: opamp(plus=p, minus=m, out=out)
    drive b as plus; drive a as minus; read out
"""


def test_rejection_of_a_difference_amplifier() -> None:
    """Gain 10 with 1 % parts, worst case: 0.0357 and 48.9 dB; figures computed apart from this package."""
    modes = sn.common_mode(sn.network(DIFFERENCE))
    assert str(modes.common) == "common-mode gain = (R4 - R2*R3/R1)/(R3 + R4)"
    worst = sn.network(DIFFERENCE).with_values(R1="1010", R2="9900", R3="990", R4="10100")
    found = sn.common_mode(worst)
    assert abs(complex(found.common.numeric()(0j))) == pytest.approx(0.0357, abs=5e-5)
    assert 20 * math.log10(10 / 0.0357) == pytest.approx(48.9, abs=0.05)  # the nominal gain over it
    gain = abs(complex(found.differential.numeric()(0j)))  # and with the gain that these parts have
    assert found.rejection_db(0) == pytest.approx(20 * math.log10(gain / 0.0357), abs=0.01)
    matched = sn.network(DIFFERENCE).with_values(R1="1k", R2="10k", R3="1k", R4="10k")
    assert sn.common_mode(matched).common.numeric().num == ()


def test_modes_need_two_drives() -> None:
    with pytest.raises(WiringError, match="two drives and one read"):
        sn.common_mode(sn.network(TWO_SECTIONS))
    with pytest.raises(UnknownNameError, match="did you mean plus"):
        sn.common_mode(sn.network(DIFFERENCE), plus="pluss")
