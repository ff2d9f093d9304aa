"""From the ideal to the real op amp: the published figures of a unity-gain section, each worked out apart."""

from __future__ import annotations

import math

import pytest

import symnet as sn
from symnet.errors import NotationError

#: 100 kHz Butterworth section of unity gain (invented): 1125.4 ohm, 2 nF, 1 nF.
UNITY = """
    in -- R1 -- x -- R2 -- p -- C2 -- gnd;  x -- C1 -- out
    U1: opamp(plus=p, minus=out, out=out);  drive in;  read out
    R1, R2 = 1125.4 ohm;  C1 = 2 nF;  C2 = 1 nF
"""
INVERTER = """
    in -- R1 = 1 kohm -- m -- R2 = 10 kohm -- out;  m -- C1 = 1 pF -- gnd
    U1: opamp(plus=gnd, minus=m, out=out);  drive in;  read out
"""


@pytest.mark.parametrize(
    ("gbw", "f0", "q", "third", "f3db"),
    [  # worked out apart from this package: common practice, no source
        ("1 MHz", 92.86e3, 0.7541, 1.160e6, 98.32e3),
        ("3 MHz", 97.62e3, 0.7235, None, None),
        ("10 MHz", 99.29e3, 0.7121, None, None),
    ],
)
def test_unity_section(gbw: str, f0: float, q: float, third: float | None, f3db: float | None) -> None:
    ideal, real = sn.real_opamps(sn.network(UNITY), gbw=gbw)
    assert ideal.added == "ideal"
    assert ideal.more == ()
    assert [move.f0_percent for move in ideal.poles] == [0, 0]
    (pair, other) = real.poles
    assert pair.shortened_f0 == pytest.approx(f0, rel=1e-4)
    assert pair.shortened_q == pytest.approx(q, rel=1e-4)
    assert other.shortened_f0 == pair.shortened_f0
    (new,) = real.more
    assert new.is_real
    if third is not None:
        assert abs(new.value) / (2 * math.pi) == pytest.approx(third, rel=1e-3)
    if f3db is not None:
        assert sn.f3db(real.transfer)[0].f == pytest.approx(f3db, rel=1e-4)
    assert real.stability.verdict == "stable"


def test_steps_come_in_the_order_given_and_add_up() -> None:
    found = sn.real_opamps(sn.network(UNITY), gain="100k", gbw="1 MHz", Rout="100 ohm")
    assert [step.added for step in found] == ["ideal", "gain = 100k", "gbw = 1 MHz", "Rout = 100 ohm"]
    assert [len(step.more) for step in found] == [0, 0, 1, 1]
    assert found.opamps == ("U1",)
    direct = sn.derive(sn.network(UNITY).with_opamp("U1", gain="100k", gbw="1 MHz", Rout="100 ohm"))
    assert found[3].transfer.numeric() == direct.numeric()


def test_exchanged_inputs_show_as_soon_as_the_gain_is_finite() -> None:
    """With A = wt/s the exchanged inverter has a pole in the right half plane, which the ideal H does not tell."""
    exchanged = sn.network(INVERTER.replace("plus=gnd, minus=m", "plus=m, minus=gnd"))
    ideal, real = sn.real_opamps(exchanged, gbw="1 MHz")
    assert ideal.stability.verdict == "stable"
    assert real.stability.verdict == "unstable"


def test_inverter_of_gain_ten_is_ninety_kilohertz_wide() -> None:
    """GBW 1 MHz: f = GBW R1/(R1 + R2) = 90.9 kHz, not 100 kHz."""
    real = sn.real_opamps(sn.network(INVERTER).without("C1"), gbw="1 MHz")[1]
    (new,) = real.more
    assert abs(new.value) / (2 * math.pi) == pytest.approx(1e6 / 11, rel=1e-12)


def test_refusals() -> None:
    with pytest.raises(NotationError, match="no ideal op amp"):
        sn.real_opamps(sn.network("in -- R1 -- out -- C1 -- gnd; drive in; read out"), gbw="1 MHz")
    with pytest.raises(NotationError, match="no property"):
        sn.real_opamps(sn.network(UNITY))
    with pytest.raises(NotationError, match="no terminal or parameter slew"):
        sn.real_opamps(sn.network(UNITY), slew=1)
