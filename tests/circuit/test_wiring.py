"""Faults of the wiring: found on the graph, named by nodes and parts, before any algebra (N31)."""

from __future__ import annotations

import pytest

import symnet as sn
from symnet.circuit.series import spoken
from symnet.circuit.wiring import wiring_faults
from symnet.errors import WiringError

FAULTS = {
    "isolated part": (
        "in -- R1 -- out -- C1 -- gnd; x -- R9 -- y; drive in; read out",
        "nodes x, y (with R9) are an island: no part ties them to gnd",
    ),
    "isolated part with a hidden node": (
        "in -- R1 -- out -- C1 -- gnd; x -- R8 + R9 -- y; drive in; read out",
        "nodes x, y, the node between R8 and R9 (with R8, R9) are an island: no part ties them to gnd",
    ),
    "sensed only": (
        "in -- R1 -- out -- C1 -- gnd; hold b = K*c; b -- R2 -- gnd; hold d = 2*b; c -- R7 -- c2; drive in; read out",
        "nodes c, c2 (with R7) are an island: no part ties them to gnd",
    ),
    "two ideal sources in parallel": (
        "in -- R1 -- out -- C1 -- gnd; drive in; hold in = K*out; read out",
        "a loop of ideal voltage sources: law1 and drive in both fix the voltage at node in",
    ),
    "a ring of three ideal sources": (
        "a -- R1 -- b -- R2 -- gnd; drive a; hold a - b = K*c; hold b = M*c; c -- R3 -- a; c -- R4 -- gnd; read c",
        "a loop of ideal voltage sources: law2 and law1, drive a both fix the voltage at node b",
    ),
    "op amp without feedback path": (
        "in -- R1 -- p -- R2 -- gnd; out -- RL -- gnd; U1: opamp(plus=p, minus=gnd, out=out); drive in; read out",
        "U1 has no feedback path: nothing leads from its output out back to its inputs (p, gnd)",
    ),
    "op amp whose inputs are one node": (
        "in -- R1 -- p -- R2 -- out; U1: opamp(plus=p, minus=p, out=out); drive in; read out",
        "U1 has plus and minus at the same node p: its output is undefined",
    ),
    "two op amp outputs tied": (
        (
            "in -- R1 -- m -- R2 -- out; in -- R3 -- n -- R4 -- out; U1: opamp(plus=gnd, minus=m, out=out)\n"
            "U2: opamp(plus=gnd, minus=n, out=out); drive in; read out"
        ),
        "two op amp outputs are tied together: the output of U2 and the output of U1 both fix the voltage at node out",
    ),
    "current source into an open node": (
        "drive current into a; b -- R1 -- gnd; read a",
        (
            "node a is tied to the rest only by ideal current sources (drive current into a): "
            "the current has no way back"
        ),
    ),
    "current law into an open node": (
        "in -- R1 -- gnd; push into a = gm*in; drive in; read a",
        "node a is tied to the rest only by ideal current sources (law1): the current has no way back",
    ),
    "no reference": (
        "in -- R1 -- out; drive in - out; read out",
        "nothing is connected to gnd, the reference of all voltages",
    ),
}


@pytest.mark.parametrize("case", FAULTS)
def test_each_fault_names_nodes_and_parts(case: str) -> None:
    text, message = FAULTS[case]
    faults = wiring_faults(sn.network(text))
    assert message in [fault.message for fault in faults]
    with pytest.raises(WiringError):
        sn.derive(sn.network(text))


def test_a_shorted_source_that_was_built_in_python() -> None:
    net = sn.network(sn.drive("a", "a"), sn.resistor("R2", "a", "gnd"), sn.read("a"))
    assert [fault.message for fault in wiring_faults(net)] == [
        "drive a has both ends at node a: an ideal voltage source is shorted"
    ]


@pytest.mark.parametrize("text", ["drive inn", "drive in - inn", "drive current into inn"])
def test_a_drive_where_no_part_is(text: str) -> None:
    net = sn.network(f"in -- R1 -- out -- C1 -- gnd; read out; {text}")
    with pytest.raises(
        WiringError, match=r"the drive is at node inn, but no part is connected there\n.*\n.*\n.*in\?"
    ):
        sn.derive(net)


def test_an_empty_network_is_said_to_be_empty() -> None:
    assert [fault.message for fault in wiring_faults(sn.network(""))] == ["the network is empty"]


def test_the_place_in_the_text_is_shown() -> None:
    net = sn.network("in -- R1 -- out -- C1 -- gnd\nx -- R9 -- y\ndrive in\nread out")
    with pytest.raises(WiringError) as caught:
        sn.derive(net)
    assert str(caught.value) == (
        "line 2, column 6: nodes x, y (with R9) are an island: no part ties them to gnd\n"
        "    x -- R9 -- y\n"
        "         ^^\n"
        "    connect them, or give them a path to gnd"
    )


def test_all_faults_at_once() -> None:
    text = (
        "in -- R1 -- gnd; x -- R9 -- y; drive in; hold in = 2*in; "
        "U1: opamp(plus=in, minus=gnd, out=o); o -- R3 -- gnd; read in"
    )
    assert len(wiring_faults(sn.network(text))) == 3


SOUND = [
    "in -- R1 -- out -- C1 -- gnd; drive in; read out",
    "in -- R1 -- m -- R2 -- out; U1: opamp(plus=gnd, minus=m, out=out); drive in; read out",
    # feedback through another op amp
    (
        "in -- R1 -- p; p -- R2 -- o2; U1: opamp(plus=p, minus=gnd, out=o1); o1 -- R3 -- n -- R4 -- o2\n"
        "U2: opamp(plus=gnd, minus=n, out=o2); drive in; read o1"
    ),
    # feedback through a law
    "U1: opamp(plus=in, minus=m, out=o); hold m = K*o; drive in; read o; m -- R1 -- gnd",
    # a part that dangles, and a source that floats between two nodes
    "in -- R1 -- out; out -- R2 -- gnd; out -- C3 -- open; drive in - out; read out",
    # follower: output tied to the minus input
    "U1: opamp(plus=in, minus=out, out=out); drive in; read out; out -- R1 -- gnd",
]


@pytest.mark.parametrize("text", SOUND)
def test_a_sound_network_has_no_fault(text: str) -> None:
    net = sn.network(text)
    assert wiring_faults(net) == ()
    assert sn.derive(net).denominator


def test_places_are_said_as_on_the_drawing() -> None:
    assert spoken("a") == "node a"
    assert spoken("R2+L2") == "the node between R2 and L2"
