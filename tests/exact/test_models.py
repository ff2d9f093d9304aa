"""Models of devices from the ideal one to the rich ones: figures, and exact limits of each richer one."""

from __future__ import annotations

import math

import numpy as np
import pytest

import symnet as sn
from symnet.exact.transfer import Transfer

# The unity-gain two-pole section and the inverting stage of tests/test_needs.py, with the op amp left open.
SECTION = """
in -- R1 -- x -- R2 -- p
p -- C2 -- gnd
x -- C1 -- out
U1: opamp(plus=p, minus=out, out=out{model})
drive in; read out
"""
INVERTING = "in -- R1 -- m -- R2 -- out; U1: opamp(plus=gnd, minus=m, out=out{model}); drive in; read out"


def figures(h: Transfer) -> tuple[float, float, float]:
    """f0 in Hz and Q of the dominant pole pair, and the third pole in rad/s."""
    poles = [root.value for root in h.numeric().poles()]
    pair = next(p for p in poles if p.imag > 0)
    third = next((-p.real for p in poles if p.imag == 0), math.inf)
    return abs(pair) / (2 * math.pi), abs(pair) / (-2 * pair.real), third


# Recomputed figures for an inverting gain of 10 and a 100 kHz Butterworth section, R = 1125.4 ohm, 2 nF, 1 nF.
@pytest.mark.parametrize(
    ("gbw", "f0", "q"), [("1 MHz", 92.86e3, 0.7541), ("3 MHz", 97.62e3, 0.7235), ("10 MHz", 99.29e3, 0.7121)]
)
def test_a_limited_bandwidth_shifts_f0_and_q(gbw: str, f0: float, q: float) -> None:
    network = sn.network(SECTION.format(model=f", gbw={gbw}")).with_values(
        R1="1125.4 ohm", R2="1125.4 ohm", C1="2 nF", C2="1 nF"
    )
    found_f0, found_q, third = figures(sn.derive(network))
    assert found_f0 == pytest.approx(f0, rel=5e-5)
    assert found_q == pytest.approx(q, abs=5e-5)
    if gbw == "1 MHz":
        assert third / (2 * math.pi) == pytest.approx(1.160e6, rel=5e-4)


def test_an_inverting_gain_of_ten_with_1_mhz_ends_at_90_9_khz() -> None:
    h = sn.derive(sn.network(INVERTING.format(model=", gbw=w")))
    assert str(h) == "out/in = -(R2/R1)/(1 + s*(1 + R2/R1)/w)"
    network = sn.network(INVERTING.format(model=", gbw=1 MHz")).with_values(R1="1k", R2="10k")
    (pole,) = sn.derive(network).numeric().poles()
    assert -pole.value.real / (2 * math.pi) == pytest.approx(1e6 / 11, rel=1e-12)


def test_the_stop_band_rises_again_with_an_output_resistance() -> None:
    network = sn.network(SECTION.format(model=", gbw=400 kHz, Rout=100 ohm")).with_values(
        R1="2.26 kohm", R2="16.5 kohm", C1="100 nF", C2="22 nF"
    )
    h = sn.derive(network).numeric()
    f = np.geomspace(1e3, 1e9, 6001)
    level = 20 * np.log10(np.abs(h(2j * np.pi * f)))
    deepest = int(np.argmin(level))
    assert level[deepest] == pytest.approx(-53.5, abs=0.05)
    assert f[deepest] == pytest.approx(15.7e3, rel=0.01)
    assert level[-1] == pytest.approx(20 * math.log10(100 / (2260 + 100 + 2260 * 100 / 16500)), abs=1e-3)
    assert level[-1] == pytest.approx(-27.5, abs=0.05)


LADDER = [
    (", gain, gbw, pole2, Rin, Cin, Rout", "Rout", False, ", gain, gbw, pole2, Rin, Cin"),
    (", gain, gbw, pole2, Rin, Cin", "Cin", False, ", gain, gbw, pole2, Rin"),
    (", gain, gbw, pole2, Rin", "Rin", True, ", gain, gbw, pole2"),
    (", gain, gbw, pole2", "pole2", True, ", gain, gbw"),
    (", gain, gbw", "gbw", True, ", gain"),
    (", gain, gbw", "gain", True, ", gbw"),
    (", gain", "gain", True, ""),
    (", gbw", "gbw", True, ""),
    (", Rin, Cin, Rout", "Rout", False, ", Rin, Cin"),
]


@pytest.mark.parametrize("stage", [SECTION, INVERTING])
@pytest.mark.parametrize(("richer", "name", "to_infinity", "simpler"), LADDER)
def test_the_limit_of_a_richer_model_is_the_simpler_h_exactly(
    stage: str, richer: str, name: str, to_infinity: bool, simpler: str
) -> None:
    """lim H(richer) = H(simpler): the ratio of the dominating coefficients, cross-multiplied in the ring."""
    rich = sn.derive(sn.network(stage.format(model=richer)))
    plain = sn.derive(sn.network(stage.format(model=simpler)))
    if f"U1.{name}" in rich.names:
        ends = sn.limits(rich, f"U1.{name}")
        end = ends.infinite if to_infinity else ends.zero
        assert end is not None
        top, bottom = end.numerator, end.denominator
    else:  # an impedance at an ideal op amp changes nothing
        top, bottom = rich.numerator, rich.denominator
    n, d = (part.set_ring(rich.numerator.ring) for part in (plain.numerator, plain.denominator))
    assert top * d == bottom * n
    assert bottom


# Devices with several models, each in a stage, and the way from every richer one to the simpler one.
STAGES = {
    "ota": "in -- R1 -- p; A: ota(plus=p, minus=m, out=out{}); m -- R2 -- out; m -- R3 -- gnd; out -- C1 -- gnd",
    "cfa": "in -- R1 -- p; A: cfa(plus=p, minus=m, out=out{}); m -- R2 -- out; m -- R3 -- gnd; p -- C1 -- gnd",
    "bjt": "in -- R1 -- p; A: bjt(collector=out, base=p, emitter=e{}); e -- R2 -- gnd; out -- R3 -- gnd; p -- C1 -- gnd",
    "fet": "in -- R1 -- p; A: fet(drain=out, gate=p, source=e{}); e -- R2 -- gnd; out -- R3 -- gnd; p -- C1 -- gnd",
}
#: property -> whether the simpler model is at infinity
IDEAL = {
    "ota": {"Rin": True, "Cin": False, "Rout": True, "Cout": False},
    "cfa": {"Rx": False, "Ct": False},
    "bjt": {"Rpi": True, "Ro": True, "Rb": False, "Cpi": False, "Cmu": False},
    "fet": {"Ro": True, "Rg": False, "Cgs": False, "Cgd": False, "Cds": False},
}


@pytest.mark.parametrize(("kind", "name"), [(kind, name) for kind in IDEAL for name in IDEAL[kind]])
def test_the_limit_of_a_richer_device_is_the_simpler_one(kind: str, name: str) -> None:
    others = [other for other in IDEAL[kind] if other != name]
    if kind == "cfa":
        others.append("Rt")
    text = STAGES[kind] + "; drive in; read out"
    rich = sn.derive(sn.network(text.format("".join(f", {each}" for each in (*others, name)))))
    plain = sn.derive(sn.network(text.format("".join(f", {each}" for each in others))))
    if f"A.{name}" in rich.names:
        ends = sn.limits(rich, f"A.{name}")
        end = ends.infinite if IDEAL[kind][name] else ends.zero
        assert end is not None
        top, bottom = end.numerator, end.denominator
    else:
        top, bottom = rich.numerator, rich.denominator
    n, d = (part.set_ring(rich.ring) for part in (plain.numerator, plain.denominator))
    assert top * d == bottom * n
    assert bottom


@pytest.mark.parametrize(
    ("real", "ideal", "to_zero"),
    [
        ("L1 + R_L1", "L1", "R_L1"),
        ("L1 || C_L1", "L1", "C_L1"),
        ("C1 + R_C1", "C1", "R_C1"),
        ("C1 + L_C1", "C1", "L_C1"),
    ],
)
def test_the_limit_of_a_real_part_is_the_ideal_one(real: str, ideal: str, to_zero: str) -> None:
    other = "C1" if ideal == "L1" else "L1"
    texts = [
        f"in -- R1 -- a -- {part} -- out; out -- {other} -- gnd; out -- R2 -- gnd; drive in; read out"
        for part in (real, ideal)
    ]
    rich, plain = (sn.derive(sn.network(text)) for text in texts)
    end = sn.limits(rich, to_zero).zero
    assert end is not None
    n, d = (part.set_ring(rich.ring) for part in (plain.numerator, plain.denominator))
    assert end.numerator * d == end.denominator * n
