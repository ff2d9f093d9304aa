"""The network as understood: the table of parts and the notes."""

from __future__ import annotations

import pytest

import symnet as sn
from symnet.exact.naming import Naming
from symnet.present import writers
from symnet.present.blocks import Paragraph
from symnet.present.network import network_blocks, notes, parts_table


def table(text: str) -> list[list[str]]:
    net = sn.network(text)
    rows = parts_table(net, Naming.of(net).numbers).rows
    return [[writers.text((Paragraph(cell),)) for cell in row] for row in rows]


def said(text: str) -> str:
    return " ".join(map(str, notes(sn.network(text))))


def test_parts_with_values_and_tolerances() -> None:
    rows = table("in -- R1 -- out -- C1 -- gnd; drive in; read out; R1 = 4k7 ±0.1%; C1 = 22 nF")
    assert rows == [
        ["R1", "resistor", "in, out", "4.7 kohm", "±0.1 %"],
        ["C1", "capacitor", "out, gnd", "22 nF", ""],
    ]


def test_ties_symbols_and_parts_without_value() -> None:
    rows = table("in -- R1 -- out -- C1 -- a -- L1 -- gnd; drive in; read out; R1 = 2*R; R = 1 kohm")
    assert rows == [
        ["R1", "resistor", "in, out", "= 2*R", ""],
        ["C1", "capacitor", "out, a", "symbol, no value", ""],
        ["L1", "inductor", "a, gnd", "symbol, no value", ""],
        ["R", "symbol", "", "1 kohm", ""],
    ]


def test_laws_and_op_amps() -> None:
    rows = table(
        "in -- R1 -- m -- R2 -- out; U1: opamp(plus=gnd, minus=m, out=out); out -- R3 -- b -- R4 -- gnd\n"
        "push from gnd to b = gm*m as amp1; drive in; read out"
    )
    assert ["U1", "op amp, ideal", "plus gnd, minus m, out out", "", ""] in rows
    assert ["amp1", "current law", "gnd, b", "= gm*m", ""] in rows


def test_nameless_nodes_are_said_by_their_parts() -> None:
    rows = table("in -- R1 + L1 -- out -- C1 -- gnd; drive in; read out")
    assert rows[0][2] == "in, the node between R1 and L1"


def test_long_tables_are_counted() -> None:
    net = sn.network(
        "; ".join(f"a{k} -- R{k} -- gnd; a{k} -- C{k} -- a{k + 1}" for k in range(50)) + "; drive a0; read a9"
    )
    assert parts_table(net, {}).omitted == 40


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("in -- R1 -- gnd; drive in; read in", "driven by an ideal voltage source, + at in, - at gnd"),
        ("in -- R1 -- gnd; drive in as Vs; read in", "Vs: driven by"),
        ("a -- R1 -- gnd; drive current into a; read a", "ideal current source from gnd into a"),
        ("a -- R1 -- gnd; drive a; read i_R1", "current through R1, positive from a to gnd"),
        (
            "a -- R1 -- b -- R2 -- gnd; drive a; read b",
            "b, a voltage against gnd; nothing loads it but the parts",
        ),
        ("a -- R1 -- b; drive a; read b", "node b has only R1"),
        ("a -- R1 -- b -- R2 -- gnd; R1 = 1k; drive a; read b", "Without a value: R2"),
        (
            "a -- R1 -- b -- R2 -- gnd; hold c = mu*b; c -- R3 -- gnd; drive a; read c",
            "mu is a free symbol (a number)",
        ),
        ("a -- R1 -- b -- R2 -- gnd; R1 = -1k; R2 = 3k; drive a; read b", "R1 is negative"),
        (
            "a -- R1 -- m -- R2 -- o; U1: opamp(plus=gnd, minus=m, out=o); drive a; read o",
            "gives the same H with plus and minus exchanged",
        ),
    ],
)
def test_notes(text: str, words: str) -> None:
    assert words in said(text)


def test_blocks_begin_with_what_was_typed() -> None:
    net = sn.network("# a comment\nin -- R1 -- gnd\ndrive in; read in")
    assert "# a comment" in writers.text(network_blocks(net, {}))


def test_sections_in_their_places_are_told_with_their_source_and_what_they_were_given() -> None:
    net = sn.network("""
        define rc(in, out; R, C = 10 nF)
          in -- R -- out -- C -- gnd
        done
        A1: rc(in=in, out=a, R=2 kohm)
        F1: unity_lowpass(in=a, out=b, R1, R2=10k, C1=1 nF, C2=2 nF)
        U1: opamp(plus=b, minus=out, out=out, gbw=1 MHz)
        drive in; read out
    """)
    rows = {row[0]: row for row in parts_table(net, Naming.of(net).numbers).rows}
    assert rows["A1"][1:4] == ("section rc", "in in, out a", "R = 2 kohm")
    assert rows["F1"][3] == "R1, a symbol, R2 = 10 kohm, C1 = 1 nF, C2 = 2 nF"
    told = [str(note) for note in notes(net)]
    assert [note for note in told if "ships with symnet" in note] == [
        "unity_lowpass: a section that ships with symnet; source: R. P. Sallen, E. L. Key, 1955, with K = 1."
    ]
    assert any(note.startswith("U1.gbw = 1 MHz stands in H as the angular frequency") for note in told)
