"""The network as a value: what it knows, and the new networks that come from it."""

from __future__ import annotations

from decimal import Decimal
from fractions import Fraction
from pathlib import Path

import pytest

import symnet as sn
from symnet.circuit.network import Network
from symnet.errors import LimitError, NotationError, UnknownNameError

DIVIDER = "in -- R1 -- out -- R2 || C2 -- gnd; drive in; read out; R1 = 10 kohm ±1%"


def number(net: Network, name: str) -> Fraction:
    from symnet.exact.naming import Naming

    return Naming.of(net).numbers[name]


def test_what_there_is() -> None:
    net = sn.network(DIVIDER)
    assert net.nodes == ("in", "out")
    assert net.part_names == ("R1", "R2", "C2")
    assert net["C2"].nodes == ("out", "gnd")
    assert "R1" in net
    assert "R9" not in net
    assert net.value("R2") is None
    assert net.value("R1") is not None
    assert net.symbols() == ("R1", "R2", "C2")
    assert net._ipython_key_completions_() == ["R1", "R2", "C2"]


def test_a_name_that_is_not_there_gets_the_nearest() -> None:
    with pytest.raises(UnknownNameError, match="did you mean C2"):
        sn.network(DIVIDER)["C22"]
    with pytest.raises(UnknownNameError, match="did you mean R1"):
        sn.network(DIVIDER).with_values(r1="5k")
    with pytest.raises(UnknownNameError, match="no part called in"):
        sn.network(DIVIDER).without("in")


def test_networks_are_values() -> None:
    assert sn.network(DIVIDER) == sn.network(DIVIDER)
    assert hash(sn.network(DIVIDER)) == hash(sn.network(DIVIDER))
    assert sn.network(DIVIDER) != sn.network(DIVIDER).with_values(R1="11k")


@pytest.mark.parametrize(
    ("given", "exact"),
    [
        ("4k7", 4700),
        ("4.7 kohm", 4700),
        ("R47", Fraction(47, 100)),
        ("M47", 470_000),
        (4700, 4700),
        (4.7, Fraction(47, 10)),
        (Fraction(1, 3), Fraction(1, 3)),
        (Decimal("0.1"), Fraction(1, 10)),
    ],
)
def test_values_are_taken_exactly(given: object, exact: Fraction) -> None:
    assert number(sn.network(DIVIDER).with_values(R1=given), "R1") == exact  # type: ignore[arg-type]


def test_a_capacitor_takes_codes_with_a_leading_letter() -> None:
    assert number(sn.network(DIVIDER).with_values(C2="u47"), "C2") == Fraction(47, 10**8)
    assert number(sn.network(DIVIDER).with_values(C2="U47"), "C2") == Fraction(47, 10**8)
    with pytest.warns(UserWarning, match="m47 for C2 is read as 470 uF, which is unusual; please confirm"):
        unusual = sn.network(DIVIDER).with_values(C2="m47")
    assert number(unusual, "C2") == Fraction(47, 10**5)


def test_numpy_numbers_are_numbers() -> None:
    import numpy as np

    assert number(sn.network(DIVIDER).with_values(C2=np.float64(4.7e-9)), "C2") == Fraction(47, 10**10)


def test_a_value_can_be_taken_away() -> None:
    assert sn.network(DIVIDER).with_values(R1=None).value("R1") is None


def test_what_is_no_value_is_refused() -> None:
    with pytest.raises(NotationError):
        sn.network(DIVIDER).with_values(R1="__import__('os')")
    with pytest.raises(NotationError, match="not a finite number"):
        sn.network(DIVIDER).with_values(R1=float("nan"))
    with pytest.raises(NotationError):
        sn.network(DIVIDER).with_values(R1="10 nF")


def test_add_and_without_are_inverse() -> None:
    net = sn.network(DIVIDER)
    loaded = net.add("out -- RL = 10k -- gnd")
    assert loaded.part_names == ("R1", "R2", "C2", "RL")
    assert loaded.without("RL") == net
    assert net.add(sn.resistor("RL", "out", "gnd", "10k")) == loaded


def test_faults_in_added_text_stand_at_their_place_in_it() -> None:
    with pytest.raises(NotationError) as caught:
        sn.network(DIVIDER).add("out -- RL -- C9 -- gnd")
    assert "line 1, column" in str(caught.value)
    assert "out -- RL -- C9 -- gnd" in str(caught.value)


def test_a_name_that_is_taken_is_refused() -> None:
    with pytest.raises(NotationError, match="R1"):
        sn.network(DIVIDER).add("out -- R1 -- gnd")
    with pytest.raises(NotationError, match="R1 stands in the network twice"):
        sn.network(DIVIDER).add(sn.resistor("R1", "out", "gnd"))
    with pytest.raises(NotationError, match="two different values"):
        sn.network(sn.resistor("R1", "a", "gnd", 1)).add(Network(values=sn.network(DIVIDER).values))


def test_replace_keeps_the_symbol_and_its_value() -> None:
    """N28: C2 with its series resistance; the limit Resr -> 0 gives back the earlier H."""
    net = sn.network(DIVIDER).with_values(C2="10n")
    real = net.replace("C2", "C2 + Resr")
    assert real.part_names == ("R1", "R2", "C2", "Resr")
    assert real["C2"].nodes[0] == "out"
    assert real["Resr"].nodes[1] == "gnd"
    assert real.value("C2") == net.value("C2")
    before, after = sn.derive(net), sn.derive(real.with_values(Resr=0), symbols="R1 R2 C2")
    assert before == after


def test_replace_refuses_what_does_not_fit() -> None:
    net = sn.network("in -- R1 -- m -- R2 -- out; U1: opamp(plus=gnd, minus=m, out=out); drive in; read out")
    with pytest.raises(NotationError, match="not a branch"):
        net.replace("U1", "R9")
    with pytest.raises(NotationError):
        net.replace("R2", "R1")
    with pytest.raises(NotationError):
        net.replace("R2", "+ +")


def test_a_file_is_read_as_the_text_it_holds(tmp_path: Path) -> None:
    file = tmp_path / "divider.symnet"
    file.write_bytes(
        "\ufeffin -- R1 -- out -- R2 || C2 -- gnd\r\ndrive in\r\nread out\r\nR1 = 10 kΩ ±1%".encode()
    )
    assert sn.load(file) == sn.network(DIVIDER)
    file.write_bytes(b"in -- R1 -- gnd\n\xff\xfe")
    with pytest.raises(NotationError, match=r"not text in UTF-8 .*line 2"):
        sn.load(file)
    with pytest.raises(FileNotFoundError):
        sn.load(tmp_path / "nothing.symnet")
    file.write_bytes(b" " * 4_000_001)
    with pytest.raises(LimitError, match="is it the right file"):
        sn.load(file)


def test_named_constructors_build_what_text_builds() -> None:
    typed = sn.network(
        """
        in -- R1 -- a -- L1 -- b
        b -- C1 -- gnd
        a -- Z1 -- b
        b -- Y1 -- gnd
        U1: opamp(plus=gnd, minus=b, out=o)
        hold c - o = mu*b as amp1
        push from b to gnd = gm*a as amp2
        c -- R3 -- b
        drive in as Vs
        read o
        """
    )
    built = sn.network(
        sn.resistor("R1", "in", "a"),
        sn.inductor("L1", "a", "b"),
        sn.capacitor("C1", "b", "gnd"),
        sn.impedance("Z1", "a", "b"),
        sn.admittance("Y1", "b", "gnd"),
        sn.opamp("U1", "gnd", "b", "o"),
        sn.hold("amp1", "c", "mu*b", "o"),
        sn.push("amp2", "b", "gnd", "gm*a"),
        sn.resistor("R3", "c", "b"),
        sn.drive("in", name="Vs"),
        sn.read("o"),
    )
    assert built == typed
    assert sn.derive(built) == sn.derive(typed)
    assert sn.network(sn.drive("a", current=True)) == sn.network("drive current into a")


def test_constructors_refuse_names_that_say_something_else() -> None:
    with pytest.raises(NotationError, match="its name begins with R"):
        sn.resistor("C1", "a", "b")
    with pytest.raises(NotationError, match="cannot be the name of a node"):
        sn.resistor("R1", "C1", "b")
    with pytest.raises(NotationError, match="an empty name"):
        sn.resistor("R1", "", "b")


def test_the_repr_is_short() -> None:
    assert repr(sn.network(DIVIDER)) == "<Network: 3 parts, nodes in, out; drive in; read out>"
    long = sn.network("drive n0; read n9; " + "; ".join(f"n{k} -- R{k + 1} -- n{k + 1}" for k in range(20)))
    assert len(repr(long)) < 120


def test_nodes_inside_a_series_are_named_afresh() -> None:
    net = sn.network("in -- R1 + R2 + R3 -- gnd; drive in; read i_R1")
    shorter = net.replace("R2", "C2")
    assert shorter.nodes == ("in", "R1+C2", "C2+R3")
    assert shorter == sn.network(shorter.to_text())


def test_a_tie_in_a_circle_is_refused() -> None:
    net = sn.network("in -- R1 -- out -- R2 -- gnd; drive in; read out; R1 = 2*R2")
    with pytest.raises(NotationError):
        net.with_values(R2="2*R1")


def test_what_others_are_tied_to_cannot_go() -> None:
    net = sn.network("in -- R1 -- out -- R2 -- gnd; drive in; read out; R1 = 2*R2")
    with pytest.raises(NotationError, match="the value of R1 is tied to R2, which is to go"):
        net.without("R2")


def test_a_code_that_is_also_a_part_is_ambiguous() -> None:
    net = sn.network("in -- R1 -- out -- R2 -- gnd; drive in; read out")
    with pytest.raises(NotationError, match="may also be the code of a value"):
        net.with_values(R1="R2")
    assert sn.derive(net.with_values(R1="(R2)"), read="i_R1").names == ("R2",)


def test_a_symbol_takes_the_unit_that_the_laws_give_it() -> None:
    net = sn.network("in -- R1 -- out; push from out to gnd = gm*out; drive in; read out")
    value = net.with_values(gm="2m").value("gm")
    assert value is not None
    assert net.with_values(gm=0.002).value("gm") == value
    assert net.with_values(gm="2m") == sn.network(net.with_values(gm="2m").to_text())


def test_a_part_at_the_start_of_an_expression_is_no_code() -> None:
    """R1 alone may be the code of 0.1 ohm; in front of a sum it is the part."""
    net = sn.network("in -- R1 -- out -- R2 -- gnd; drive in; read i_R1")
    assert sn.derive(net.with_values(R2="R1 + 5 kohm")).names == ("R1",)
    assert number(net.with_values(R2="R47 +/- 1%"), "R2") == Fraction(47, 100)
