"""DC and high frequency, from H and from the network itself."""

from __future__ import annotations

import pytest

import symnet as sn
from symnet.exact.limits import Limit


def ends(text: str) -> tuple[Limit, Limit]:
    found = sn.limits(sn.derive(sn.network(text)))
    return found.dc, found.high


def test_multiple_feedback_section() -> None:
    """N8: H(0) = -R2/R1 with the capacitors open, H(inf) = 0, -40 dB per decade."""
    dc, high = ends(
        "in -- R1 -- x -- R2 -- out; x -- C1 -- gnd; x -- R3 -- m -- C2 -- out\n"
        "U1: opamp(plus=gnd, minus=m, out=out); drive in; read out"
    )
    assert (str(dc.numerator), str(dc.denominator), dc.power) == ("-R2", "R1", 0)
    assert dc.reason == "C1, C2 open"
    assert dc.from_network is True
    assert high.slope == -40
    assert high.is_zero
    assert high.reason == "C1, C2 shorted"
    assert high.from_network is True


@pytest.mark.parametrize(
    ("text", "dc_power", "high_power"),
    [
        ("in -- C1 -- out -- R1 -- gnd; drive in; read out", 1, 0),
        ("in -- L1 -- out -- C1 || R1 -- gnd; drive in; read out", 0, -2),
        ("a -- L1 || L2 -- gnd; a -- R1 -- gnd; drive current into a; read a", 1, 0),
        ("in -- R1 -- out -- Z1 -- gnd; Z1 = R + 1/(s*C); drive in; read out", 0, 0),
        ("in -- R1 -- out -- Y1 -- gnd; Y1 = s*C/(1 + s*R*C); drive in; read out", 0, 0),
        ("in -- Z1 -- out -- R1 -- gnd; Z1 = s*M; drive in; read out", 0, -1),
    ],
)
def test_powers_and_agreement(text: str, dc_power: int, high_power: int) -> None:
    dc, high = ends(text)
    assert (dc.power, high.power) == (dc_power, high_power)
    assert dc.from_network is True
    assert high.from_network is True


def test_an_integrator_is_infinite_at_dc() -> None:
    dc, high = ends("in -- R1 -- m -- C1 -- out; U1: opamp(plus=gnd, minus=m, out=out); drive in; read out")
    assert dc.is_infinite
    assert dc.power == -1
    assert "from H alone" in dc.reason
    assert high.is_zero


def test_a_law_that_holds_s_is_not_taken_to_the_limit() -> None:
    dc, _ = ends("in -- R1 -- m -- R2 -- out; hold out = wt/s*(-m); drive in; read out")
    assert dc.from_network is None
    assert dc.reason == "a law holds s; from H alone"
    assert (str(dc.numerator), str(dc.denominator)) == ("-R2", "R1")


def test_zero_stays_zero() -> None:
    dc, high = ends("in -- R1 -- gnd; b -- C2 -- gnd; b -- R3 -- gnd; drive in; read b")
    assert dc.is_zero
    assert high.is_zero
    assert not dc.is_infinite
