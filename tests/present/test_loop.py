"""How feedback, stability and moving poles are shown: units and conventions beside every number, no number where none is."""

from __future__ import annotations

from typing import Any

import symnet as sn

POSITIVE = sn.network("""
    in -- R1 -- x -- R2 -- p -- C2 -- gnd;  x -- C1 -- out
    hold out = K*p as amp;  drive in;  read out
    R1, R2 = 1 kohm;  C1, C2 = 1 nF;  K = 2
""")


def shown(value: Any) -> str:
    return " ".join(value._repr_mimebundle_()["text/plain"].split())


def test_margins_come_with_unit_and_convention() -> None:
    said = shown(sn.loop_gain(POSITIVE, "amp"))
    assert "T real and negative 159.15 kHz 1 Mrad/s T = -1 there with 1.5 times the gain" in said
    assert "gain margin 3.5218 dB" in said
    assert "phase margin infinite: |T| is nowhere 1" in said
    assert "T is positive at DC where the feedback is negative" in said


def test_what_swings_shows_the_reason_and_no_margin() -> None:
    said = shown(sn.loop_gain(POSITIVE.with_values(K=5), "amp"))
    assert "|T| = 1, rising 37.571 kHz" in said
    assert "none: the loop of amp has no margins: with its feedback closed the network is unstable" in said
    assert "phase margin " not in said.partition("T is positive")[0]
    assert " dB" not in said.partition("T is positive")[0]


def test_symbols_show_the_formula_of_the_crossover() -> None:
    net = sn.network("in -- R1 -- m -- R2 -- out;  hold out = -wt*m/s as amp;  drive in;  read out")
    said = shown(sn.loop_gain(net, "amp"))
    assert "|T| = 1 at w = wt*R1/(R1 + R2)." in said
    assert "No margins in numbers: no value for R1, R2, wt." in said


def test_stability() -> None:
    said = shown(sn.stability(sn.derive(POSITIVE)))
    assert said.startswith(
        "stable: both poles in the left half plane. In symbols it is stable if and only if:"
    )
    assert "K < 1 + (1 + R2/R1)*C2/C1" in said
    assert "All parts are taken to be positive." in said
    assert "poles 2 left, 0 on the jw axis, 0 right counted exactly" in said
    assert "largest real part of a pole -500 krad/s dies out with the time constant 2 us" in said
    assert "smallest damping zeta 0.5 Q = 1" in said


def test_locus() -> None:
    said = shown(sn.locus(sn.derive(POSITIVE), "K", [2, 4]))
    assert "K = 3: a pair lies on the jw axis at ±j1 Mrad/s, f = 159.15 kHz" in said
    assert "0 < K < 3: stable, all poles to the left - K > 3: 2 to the right of the jw axis" in said
    assert "2 -500 + j866.03 krad/s -500 - j866.03 krad/s" in said


def test_real_op_amps() -> None:
    unity = POSITIVE.without("amp").add("U1: opamp(plus=p, minus=out, out=out)").with_values(C1="2n")
    said = shown(sn.real_opamps(unity, gbw="1 MHz"))
    assert "ideal pair 112.54 kHz 0.70711 stable" in said
    assert "new, real" in said
