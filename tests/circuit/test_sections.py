"""Sections: what placing one comes to, the text that comes back, and what changes do to it."""

from __future__ import annotations

from collections.abc import Callable

import pytest

import symnet as sn
from symnet.errors import NotationError, UnknownNameError
from symnet.expressions import Number
from symnet.quantities import HERTZ, TWO_PI

# a cable driver's two filters (invented)
CABLE = """
define rc(in, out; R, C = 10 nF)
  in -- R -- out -- C -- gnd
done
define pair(in, out; Ra)
  S1: rc(in=in, out=x, R=Ra)
  S2: rc(in=x, out=out, R=2*Ra, C=20 nF)
done
A1: rc(in=in, out=a, R=2 kohm)
a -- R9 -- b
A2: pair(in=b, out=out, Ra=R9)
drive in
read out
"""


def test_the_parts_of_a_section_have_the_name_of_its_place_before_theirs() -> None:
    network = sn.network(CABLE)
    assert network.part_names == ("A1.R", "A1.C", "R9", "A2.S1.R", "A2.S1.C", "A2.S2.R", "A2.S2.C")
    assert network.nodes == ("in", "a", "b", "A2.x", "out")
    written_out = sn.network("""
        in -- Ra -- a -- Ca -- gnd
        a -- R9 -- b -- R1 -- x -- C1 -- gnd
        x -- R2 -- out -- C2 -- gnd
        drive in; read out
        Ra = 2 kohm; Ca, C1 = 10 nF; C2 = 20 nF; R1 = R9; R2 = 2*R9
    """)
    same = {"A1.R": "Ra", "A1.C": "Ca", "R9": "R9", "A2.S1.C": "C1", "A2.S2.C": "C2"}
    one, two = sn.derive(network), sn.derive(written_out)
    assert [same.get(name, name) for name in one.names] == list(two.names)
    assert str(one.denominator) == str(two.denominator).replace("Ra", "A1.R").replace("Ca", "A1.C").replace(
        "C1", "A2.S1.C"
    ).replace("C2", "A2.S2.C")


@pytest.mark.parametrize(
    "text",
    [
        CABLE,
        "define s1(1, 2)\n1 -- R1 + L1 -- 2\nhold 2 = k*v_1 as amp\ndone\nX: s1(1=gnd, 2=7)\n7 -- R5 -- gnd",
        "define s1(a, b; k)\na -- R1 -- b\npush into b = k*i_R1/R1*(a - b)/i_R1\ndone".replace(
            "k*i_R1/R1*(a - b)/i_R1", "k*(a - b) + 2*i_R1"
        )
        + "\nX: s1(a=in, b=gnd, k=3 mS)\nin -- C1 -- gnd",
        "define d(in, out; R, C = 1 nF)\nin -- R -- out -- C -- gnd\ndone\nA: d(in=a, out=b, R, C)\na -- R1 -- b",
        "U1: opamp(plus=gnd, minus=m, out=o, gain=1e5, gbw=1 MHz, Rout=75 ohm)\nm -- R1 -- o",
        "U1: opamp(plus=p, minus=o, out=o, gbw, Rin, Cin)\np -- R1 -- o",
        "U1: opamp(plus=p, minus=o, out=o, gain=2000 ±50%, pole2=3 Mrad/s)\np -- R1 -- o",
    ],
)
def test_the_text_that_is_written_reads_to_the_same_network(text: str) -> None:
    network = sn.network(text)
    assert sn.network(network.to_text()) == network


def test_an_inner_series_keeps_its_nameless_node() -> None:
    network = sn.network("define t(a, b)\na -- R1 + L1 -- b\ndone\nX: t(a=in, b=gnd)\ndrive in; read in")
    assert network.nodes == ("in", "X.R1+X.L1")


def test_a_terminal_at_gnd_leaves_no_voltage_behind() -> None:
    network = sn.network(
        "define d(p, m, o; k)\nhold o = k*(p - m)\ndone\nX: d(p=in, m=gnd, o=out, k=2)\nin -- R1 -- out\n"
        "drive in; read out"
    )
    assert str(sn.derive(network)) == "out/in = X.k"


def test_values_of_a_section_can_be_changed_and_are_written_where_they_were_given() -> None:
    network = sn.network(CABLE).with_values({"A1.R": "3k", "A2.S1.C": "33n"})
    text = network.to_text()
    assert "A1: rc(in=in, out=a, R=3 kohm)" in text
    assert text.endswith("A2.S1.C = 33 nF")
    assert sn.network(text) == network
    symbol = sn.network(CABLE).with_values({"A1.C": None})
    assert "A1: rc(in=in, out=a, R=2 kohm, C)" in symbol.to_text()
    assert sn.network(symbol.to_text()) == symbol


def test_a_section_goes_as_a_whole_and_stays_as_parts_when_one_of_them_goes() -> None:
    network = sn.network(CABLE)
    read_before = sn.network(CABLE.replace("read out", "read b"))
    assert read_before.without("A2").part_names == ("A1.R", "A1.C", "R9")
    opened = network.without("A1.C")
    assert [instance.name for instance in opened.instances] == ["A2"]
    assert "in -- A1.R -- a -- R9 -- b" in opened.to_text().splitlines()
    assert sn.network(opened.to_text()) == opened
    with pytest.raises(UnknownNameError, match="did you mean A2"):
        network.without("A22")


def test_two_places_of_one_section_are_two_sets_of_parts() -> None:
    network = sn.network(
        "define h(in, out)\nin -- R1 -- out\nout -- C1 -- gnd\ndone\n"
        "A: h(in=in, out=m); B: h(in=m, out=out); drive in; read out"
    )
    assert sn.derive(network).names == ("A.R1", "A.C1", "B.R1", "B.C1")


def test_a_fault_inside_is_told_once_however_often_it_is_placed() -> None:
    text = "define h(in, out)\nin -- R1 -- out\nR1 = 5 nF\ndone\nA: h(in=in, out=m); B: h(in=m, out=out)"
    with pytest.raises(NotationError) as caught:
        sn.network(text)
    assert [fault.message for fault in caught.value.faults] == ["R1 is in ohm, its value is in F"]


def test_the_properties_of_a_device_may_be_given_in_hertz() -> None:
    network = sn.network("U1: opamp(plus=p, minus=o, out=o, gbw=1 MHz)\np -- R1 -- o; drive p; read o")
    value = network.value("U1.gbw")
    assert value is not None
    assert value.expression == Number(TWO_PI * 10**6, HERTZ)
    assert "gbw=1 MHz" in network.to_text()
    assert "gbw=3 MHz" in network.with_values({"U1.gbw": "3 MHz"}).to_text()


def test_sections_in_python_are_those_of_the_text() -> None:
    rc = sn.define("rc", "in out", "in -- R -- out -- C -- gnd", R=None, C="10 nF")
    pair = sn.define(
        "pair",
        ["in", "out"],
        "in -- Ra -- x -- Rb -- out\nRb = 2*Ra",
        Ra=None,
    )
    built = sn.network(
        sn.place("A1", rc, {"in": "in", "out": "a"}, R="2 kohm"),
        sn.place("A2", pair, {"in": "a", "out": "out"}, Ra="5 kohm"),
        sn.place("A3", rc, {"in": "out", "out": "b"}, C=None),
        sn.drive("in"),
        sn.read("b"),
    )
    typed = sn.network("""
        define rc(in, out; R, C = 10 nF)
          in -- R -- out -- C -- gnd
        done
        define pair(in, out; Ra)
          in -- Ra -- x -- Rb -- out
          Rb = 2*Ra
        done
        A1: rc(in=in, out=a, R=2 kohm); A2: pair(in=a, out=out, Ra=5 kohm); A3: rc(in=out, out=b, C)
        drive in; read b
    """)
    assert built == typed
    assert sn.network(built.to_text()) == built


@pytest.mark.parametrize(
    ("made", "said"),
    [
        (lambda: sn.define("rc", "in", "in -- R1 -- C1 -- gnd"), "C1 stands where a node must stand"),
        (lambda: sn.define("rc", "in out", "in -- R1 -- gnd"), "connected to out"),
        (lambda: sn.place("A", "opam", {}), "did you mean opamp"),
        (lambda: sn.place("A", "gyrator", {"p1": "a"}), "no node at p2 and q1 and q2"),
        (lambda: sn.place("A", "nic", {"a": "x", "b": "y"}, m="2"), "A has no m"),
        (lambda: sn.place("A", "nic", {"a": "R1", "b": "y"}), "R1 stands where a node must stand"),
        (lambda: sn.place("A", "crystal", {"a": "x", "b": "y"}, Rm="5 nF"), "in ohm"),
    ],
)
def test_a_section_in_python_that_cannot_be(made: Callable[[], object], said: str) -> None:
    with pytest.raises(NotationError, match=said):
        made()
