"""The sections that ship with symnet give the published formulas, as the same networks drawn by hand do."""

from __future__ import annotations

import pytest

import symnet as sn
from symnet.circuit.devices import device_source
from tests.reference.active_sections import CASES as ACTIVE
from tests.reference.comparing import assert_same_function
from tests.reference.passive_sections import CASES as PASSIVE

PUBLISHED = {case.id: case.formula for case in (*ACTIVE, *PASSIVE)}

VOLTAGE = "drive in; read out"
CURRENT = "drive current into in; read in"

#: published case (its formula, its source stands there) -> how the shipped section is placed, what is driven and read
PLACED = {
    "sk-lp-K": ("positive_feedback_lowpass(in=in, out=out, R1=R1, R2=R2, C1=C1, C2=C2, K=K)", VOLTAGE),
    "sk-hp-K": ("positive_feedback_highpass(in=in, out=out, R1=R1, R2=R2, C1=C1, C2=C2, K=K)", VOLTAGE),
    "sk-bp-equal": (
        "positive_feedback_bandpass(in=in, out=out, R1=R, R2=2*R, R3=R, C1=C, C2=C, K=K)",
        VOLTAGE,
    ),
    "sk3-unity": ("unity_lowpass3(in=in, out=out, R1=R, R2=R, R3=R, C1=C1, C2=C2, C3=C3)", VOLTAGE),
    "mfb-lp": ("multiple_feedback_lowpass(in=in, out=out, R1=R1, R2=R2, R3=R3, C1=C1, C2=C2)", VOLTAGE),
    "mfb-hp": ("multiple_feedback_highpass(in=in, out=out, R1=R1, R2=R2, C1=C1, C2=C2, C3=C3)", VOLTAGE),
    "svf-bp": (
        "state_variable(in=in, hp=h, bp=out, lp=l, Ra=Ra, Rb=Rb, R1=R1, R2=R2, R5=R5, R6=R6, C1=C1, C2=C2)",
        VOLTAGE,
    ),
    "svf-lp": (
        "state_variable(in=in, hp=h, bp=b, lp=out, Ra=Ra, Rb=Rb, R1=R1, R2=R2, R5=R5, R6=R6, C1=C1, C2=C2)",
        VOLTAGE,
    ),
    "tt-bp": (
        "two_integrator_biquad(in=in, bp=out, lp=l, inv=i, R1=R1, R2=R2, R3=R3, R4=R4, C1=C1, C2=C2, Ri=Rx, Rf=Rx)",
        VOLTAGE,
    ),
    "tt-lp": (
        "two_integrator_biquad(in=in, bp=b, lp=out, inv=i, R1=R1, R2=R2, R3=R3, R4=R4, C1=C1, C2=C2, Ri=Rx, Rf=Rx)",
        VOLTAGE,
    ),
    "twin-t-boot": ("twin_t_notch(in=in, out=out, R=R, C=C, k=k)", VOLTAGE),
    "bridged-t-c": ("bridged_t(in=in, out=out, R1=R1, R2=R2, C1=C, C2=C)", VOLTAGE),
    "wien": ("wien(in=in, out=out, R1=R1, R2=R2, C1=C1, C2=C2)", VOLTAGE),
    "gic-fdnr": (
        "impedance_converter(a=in, Z1=1/(s*C1), Z2=R2, Z3=R3, Z4=R4, Z5=1/(s*C5))",
        CURRENT,
    ),
    "gyr-1op": ("follower_inductor(a=in, RL=RL, R=R, C=C)", CURRENT),
    "nic": ("negative_resistance(a=in, R=R, Ra=r, Rb=r)", CURRENT),
    "sk-lp-opamp-gain": (
        "positive_feedback_lowpass(in=in, out=out, R1=R1, R2=R2, C1=C1, C2=C2, K=1 + R4/R3); free R3, R4",
        VOLTAGE,
    ),
    "sk-loaded-source": ("unity_lowpass(in=g, out=out, R1=R1, R2=R2, C1=C1, C2=C2); in -- Rg -- g", VOLTAGE),
    "howland": ("voltage_to_current(in=in, out=out, Ra=r, Rb=r, Rc=r, Rd=r); out -- RL -- gnd", VOLTAGE),
    "inv-gbw": ("opamp(plus=gnd, minus=m, out=out, gbw=wt); in -- R1 -- m -- R2 -- out", VOLTAGE),
    "cfa": (
        "cfa(plus=in, minus=m, out=out, Rt=Rt, Ct=Ct); m -- Rg -- gnd; m -- Rf -- out; free Rt, Ct",
        VOLTAGE,
    ),
    "xfmr-load": ("transformer(p1=in, p2=gnd, s1=a, s2=gnd, n=n); a -- RL -- gnd", CURRENT),
    "diff-amp": ("difference_amplifier(a=in, b=in, out=out, R1=R1, R2=R2, R3=R3, R4=R4)", VOLTAGE),
}

#: sections without a published case here: their formulas are those of the source that the definition names
OTHERS = {
    "unity_lowpass(in=in, out=out, R1=R1, R2=R2, C1=C1, C2=C2)": (
        VOLTAGE,
        "1/(1 + s*C1*(R1 + R2) + s^2*R1*R2*C1*C2)",
    ),
    "multiple_feedback_bandpass(in=in, out=out, R1=R1, R2=R2, R3=R3, C1=C1, C2=C2)": (
        VOLTAGE,
        "-s*R2*R3*C2/(R1 + R2 + s*R1*R2*(C1 + C2) + s^2*R1*R2*R3*C1*C2)",
    ),
    "twin_t(in=in, out=out, foot=gnd, R=R, C=C)": (
        VOLTAGE,
        "(1 + s^2*R^2*C^2)/(1 + 4*s*R*C + s^2*R^2*C^2)",
    ),
    "allpass1(in=in, out=out, R=R, C=C, Ra=Rx)": (VOLTAGE, "(1 - s*R*C)/(1 + s*R*C)"),
    "allpass2(in=in, out=out, R1=R, R3=4*R, C1=C, C2=C, Ra=Rx, Rb=Rx)": (
        VOLTAGE,
        "(1 - 2*s*R*C + 4*s^2*R^2*C^2)/(2*(1 + 2*s*R*C + 4*s^2*R^2*C^2))",
    ),
}


NAMES = [
    "R",
    "R1",
    "R2",
    "R3",
    "R4",
    "R5",
    "R6",
    "RL",
    "Ra",
    "Rb",
    "Rx",
    "C",
    "C1",
    "C2",
    "C3",
    "C5",
    "K",
    "k",
    "r",
]


def placed(section: str, sentences: str) -> sn.Network:
    inside = section.partition("(")[2].partition(")")[0] + ")"
    used = [name for name in NAMES if any(f"{sign}{name}{end}" in inside for sign in "=*(" for end in ",)")]
    declared = f"; free {', '.join(used)}" if used else ""
    return sn.network(f"X1: {section}; {sentences}{declared}")


@pytest.mark.parametrize("case", PLACED)
def test_a_shipped_section_has_the_published_h(case: str) -> None:
    assert_same_function(sn.derive(placed(*PLACED[case])), PUBLISHED[case])


@pytest.mark.parametrize("section", OTHERS)
def test_a_shipped_section_has_the_h_of_its_source(section: str) -> None:
    sentences, formula = OTHERS[section]
    assert_same_function(sn.derive(placed(section, sentences)), formula)


def test_the_current_source_does_not_feel_its_load() -> None:
    network = sn.network(
        "X1: voltage_to_current(in=in, out=out, Ra=Ra, Rb=Rb, Rc=Rc, Rd=Rd); out -- RL -- gnd\n"
        "drive in; read i_RL; free Ra, Rc, Rb, Rd; Rd = Rb*Rc/Ra"
    )
    assert_same_function(sn.derive(network), "1/Ra")


def test_every_shipped_section_names_its_source() -> None:
    for section in [text for text, _ in PLACED.values()] + list(OTHERS):
        found = device_source(section.partition("(")[0], ())
        assert found is not None
        assert len(found[1]) > 10
