"""Remarks on what is odd and not wrong."""

from __future__ import annotations

import pytest

from symnet.circuit.network import read_network
from symnet.circuit.notes import code_note, notes


def values(text: str) -> tuple[str, ...]:
    """The remarks on values."""
    return tuple(note for note in notes(read_network(text)) if not note.startswith("node "))


@pytest.mark.parametrize(
    ("text", "note"),
    [
        # needs.md N45: a bare 0.1 for a capacitor is flagged
        ("a -- C1 = 0.1 -- b -- R1 = 1k -- c", "C1 = 100 mF is much for a capacitor; did you mean 0.1 uF?"),
        ("a -- C1 = 10 MF -- b", "C1 = 10 MF is much for a capacitor; did you mean 10 uF?"),
        ("a -- C1 = 47 -- b -- R1 = 1k -- c", "C1 = 47 F is much for a capacitor; did you mean 47 uF?"),
        ("a -- C1 = 1 fF -- b", "C1 = 1 fF is little for a capacitor"),
        ("a -- L1 = 47 MH -- b", "L1 = 47 MH is much for an inductor; did you mean 47 uH?"),
        ("a -- R1 = 10 uohm -- b", "R1 = 10 uohm is little for a resistor"),
        ("a -- R1 = 10 Tohm -- b", "R1 = 10 Tohm is much for a resistor"),
        ("a -- R1 = 0 -- b", "R1 = 0: a short circuit"),
        ("a -- C1 = 0 -- b", "C1 = 0: an open circuit"),
        ("a -- R1 = -5 kohm -- b", "R1 is negative: conditions that take parts as positive do not hold"),
        ("a -- R1 = 1k -- b; K = 3", "K has a value and is used nowhere"),
    ],
)
def test_values(text: str, note: str) -> None:
    assert values(text) == (note,)


@pytest.mark.parametrize(
    "text",
    [
        "a -- R1 = 600 -- b -- C1 = 13 nF -- c",
        "a -- R1 = 1 mohm -- b -- C1 = 4700 uF -- c",
        "a -- R1 = 1 Gohm -- b -- L1 = 10 H -- c",
        "a -- R1 = 1k -- b; K = 3; hold c = K*a",
        "a -- R1 -- b; C2 = 2*C1; b -- C1 -- c -- C2 -- gnd",
        "a -- R1 = 1 -- b -- R2 = 2 -- c",
    ],
)
def test_nothing_to_say(text: str) -> None:
    assert values(text) == ()


def test_a_normalised_prototype_gets_one_remark() -> None:
    # needs.md N21: the T with L = 1, C = 2, L = 1, Rs = RL = 1
    text = "s1 -- Rs = 1 -- a -- L1 = 1 -- b -- L2 = 1 -- c -- RL = 1 -- gnd; b -- C1 = 2 -- gnd; drive s1"
    assert notes(read_network(text)) == (
        "all values are near 1: this looks like a normalised prototype (1 ohm, 1 rad/s)",
    )


class TestNodes:
    def test_a_node_of_near_name(self) -> None:
        # needs.md N46: "node 'vout' appears once, did you mean 'Vout'?"
        net = read_network("in -- R1 -- Vout -- C1 -- gnd; vout -- R2 -- gnd; drive in; read Vout")
        assert notes(net) == ("node vout has only R2; did you mean Vout?",)

    def test_a_node_with_one_part(self) -> None:
        # needs.md N31: "node a has only C2: typo?"
        net = read_network("in -- R1 -- x -- C1 -- gnd; x -- C2 -- a; drive in; read x")
        assert notes(net) == ("node a has only C2",)

    def test_a_node_that_is_only_driven(self) -> None:
        assert notes(read_network("drive in; a -- R1 -- b -- R2 -- a")) == ("node in has only a drive",)

    def test_a_sensed_node_is_no_loose_end(self) -> None:
        assert notes(read_network("a -- R1 -- p; hold a = K*p; b -- R2 -- q; hold b = K*v_q")) == ()

    def test_two_nodes_that_differ_in_case(self) -> None:
        net = read_network("Mid -- R1 -- mid -- R2 -- Mid -- R3 -- gnd -- R4 -- mid")
        assert notes(net) == ("nodes Mid and mid differ in case only",)

    def test_numbered_nodes_are_no_slips(self) -> None:
        assert notes(read_network("n1 -- R1 -- n2 -- R2 -- n1; 1 -- R3 -- 11 -- R4 -- 1")) == ()

    def test_hidden_nodes_are_never_mentioned(self) -> None:
        assert notes(read_network("a -- R1 + R2 -- b -- R3 -- a")) == ()


@pytest.mark.parametrize(
    ("code", "name", "note"),
    [
        # needs.md N45: M against m is decided by the part and reported
        ("M47", "R1", "M47 for R1 is read as 470 kohm"),
        ("m47", "C1", "m47 for C1 is read as 470 uF, which is unusual; please confirm"),
        ("u47", "C1", "u47 for C1 is read as 470 nF"),
        ("M47", "C1", "M47 for C1 is read as 470 kF, which is unusual; please confirm"),
        ("m47", "R1", "m47 for R1 is read as 470 uohm, which is unusual; please confirm"),
        ("n47", "K", "n47 for K is read as 4.7e-10"),
        ("47n", "C1", ""),
        ("R1", "C1", "R1 for C1 is read as 100 mohm, which is unusual; please confirm"),
        ("2*C1", "C2", ""),
    ],
)
def test_codes(code: str, name: str, note: str) -> None:
    assert code_note(code, name) == note


def test_reversed_dots_and_perfect_coupling_are_told() -> None:
    text = "a -- R1 -- b -- L1 -- gnd; c -- L2 -- gnd; c -- R2 -- gnd; drive a; read c; couple L1 to L2 with k = {}"
    reversed_, perfect = notes(read_network(text.format("-0.5"))), notes(read_network(text.format("1")))
    assert any(note.startswith("k is negative: the dots of L1 and L2 are reversed") for note in reversed_)
    assert "L1 and L2 are coupled perfectly (k = 1): the order is lower by one" in perfect
    assert not any("coupled" in note or "dots" in note for note in notes(read_network(text.format("0.5"))))
