"""The return ratio as a value: which sources have one, how it is written out, and its numbers without that."""

from __future__ import annotations

from fractions import Fraction

import pytest

import symnet as sn
from symnet.errors import LimitError, MissingValueError, NotationError
from symnet.exact.ports.loop import return_ratio, sources

FOLLOWER = """
    in -- R1 -- p -- R2 -- gnd;  hold out = A*(p - out) as amp;  out -- R3 -- gnd
    push from out to gnd = gm*p as leak;  drive in;  read out
"""


def test_every_law_is_a_source() -> None:
    assert sources(sn.network(FOLLOWER)) == ("amp", "leak")


def test_follower_and_transconductance() -> None:
    """T = A by hand, with the output at the source; what the ideal source holds no current law can move: T = 0."""
    net = sn.network(FOLLOWER)
    assert str(return_ratio(net, "amp").ratio) == "T = A"
    assert str(return_ratio(net, "amp").difference) == "1 + T = 1 + A"
    assert str(return_ratio(net, "leak").ratio) == "T = 0"


def test_a_device_of_several_sources_wants_to_know_which() -> None:
    net = sn.network("""
        in -- R1 -- m -- R2 -- out;  U1: cfa(plus=gnd, minus=m, out=out, Rt=1 Mohm, Ct=2 pF, Rx=50 ohm)
        drive in;  read out
    """)
    with pytest.raises(NotationError, match=r"U1 holds 2 dependent sources\n *say which: U1.buffer, U1.amp"):
        return_ratio(net, "U1")
    assert return_ratio(net, "U1.amp").source == "U1.amp"


def test_no_drive_is_needed() -> None:
    net = sn.network("p -- R1 -- out;  p -- C1 -- gnd;  hold out = -A*p as amp")
    assert str(return_ratio(net, "amp").ratio) == "T = A/(1 + s*R1*C1)"


def test_numbers_are_those_of_the_symbols() -> None:
    net = sn.network(FOLLOWER).with_values(R1="1k", R2="2k", R3="3k", A=1000, gm="1e-3")
    found = return_ratio(net, "amp")
    assert found.numeric() == found.ratio.numeric()
    dead, whole = found.numbers
    assert Fraction(whole[0], dead[0]) == 1001
    with pytest.raises(MissingValueError, match="no value for A"):
        _ = return_ratio(net.with_values(A=None), "amp").numbers


def test_coupled_coils_whose_mutual_inductance_is_a_root() -> None:
    """M = k sqrt(L1 L2) is irrational here; T = A k sqrt(L2/L1) of a transformer driven by the source itself, by hand."""
    net = sn.network("""
        hold a = -A*b as amp;  a -- L1 -- gnd;  b -- L2 -- gnd;  couple L1 to L2 with k = 0.5
        L1 = 1 mH;  L2 = 2 mH;  A = 3
    """)
    T = return_ratio(net, "amp").numeric()
    assert float(T.num[-1] / T.den[-1]) == pytest.approx(3 * 0.5 * 2**0.5, rel=1e-15)


def test_too_long_in_symbols_still_has_numbers() -> None:
    nodes = [f"n{k}" for k in range(14)]
    pairs = [(a, b) for k, a in enumerate(nodes) for b in nodes[:k]]
    lines = [f"{a} -- R{k} = {k + 1} kohm -- {b}" for k, (a, b) in enumerate(pairs)]
    net = sn.network(
        "\n".join([*lines, "n0 -- C1 = 1 nF -- gnd; n5 -- Ra = 1 kohm -- gnd; hold n3 = A*n9 as amp; A = 2"])
    )
    found = return_ratio(net, "amp")
    assert found.numeric().order == 1
    with pytest.raises(LimitError):
        _ = found.ratio
