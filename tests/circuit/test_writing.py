"""Text that a network is written as reads back to an equal network."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given

from symnet.circuit.network import Network, read_network
from symnet.circuit.parts import Branch, CurrentDrive, OpAmp, Value, VoltageDrive
from symnet.circuit.reading import read_expression
from symnet.circuit.spelling import write_dimension, write_expression
from symnet.circuit.writing import default_labels, write_drive, write_network, write_part, write_value
from symnet.expressions import Expression, Name, Number, Power, Product, Sum
from symnet.quantities import FARAD, HERTZ, NUMBER, OHM, SECOND, VOLT
from tests.circuit.strategies import expressions, networks, patient

PROBE = """\
in -- Rs -- a -- L1 -- out
a -- C1 -- gnd
out -- C2 || RL -- gnd
drive in
read out
Rs, RL = 600 ohm ±1%
C1, C2 = 13 nF ±2%
L1 = 10 mH ±5%"""

EVERYTHING = """\
1 -- R1 -- x -- R2 + (L2 || (C2 + R3)) + C3 -- out
x -- (R4 + C4) || R5 + R6 -- gnd
hold out = mu*(x - v_1)
push from x to gnd = gm*(v_1 - out) - i_R1/4 as amp
hold y - out = r*i_amp
y -- Z1 -- gnd
U1: opamp(plus=1, minus=x, out=y)
drive current from 1 to gnd as Is
drive y - 1
read out - v_1
read 2*i_R1 + i_U1
free gm, K
free w1 in 1/s
free eps in V/V
free slew in V/s
R1 = 1 ohm/3 ±0.5%
C2 = 2*C3
L2 = 10 uH
Z1 = (R || (R/3))/(1 + (1/7)*s/w1)^2
w1 = 2 krad/s
tau = 1 s
slew = 3
R6 = -5 Mohm"""


@pytest.mark.parametrize("text", [PROBE, EVERYTHING], ids=["probe", "everything"])
def test_written_text_is_written_again(text: str) -> None:
    net = read_network(text)
    expected = text.replace("x -- (R4 + C4) || R5 + R6 -- gnd", "x -- ((R4 + C4) || R5) + R6 -- gnd")
    assert write_network(net) == expected
    assert read_network(write_network(net)) == net


@patient
@given(networks())
def test_network_round_trip(net: Network) -> None:
    # Law: reading what was written gives the same network, and writing that gives the same text.
    text = write_network(net)
    again = read_network(text)
    assert again == net
    assert write_network(again) == text


@patient
@given(expressions)
def test_expression_round_trip(expression: Expression) -> None:
    # Law: reading what was written gives the same tree; a whole number alone is written as a value is.
    assert read_expression(write_expression(expression)) == expression


@pytest.mark.parametrize(
    ("expression", "text"),
    [
        (Sum(((-1, Name("a")), (1, Name("b")))), "-a + b"),
        (Product(((-1, Name("a")),)), "1/a"),
        (Product(((1, Sum(((-1, Name("a")),))), (1, Name("b")))), "(-a)*b"),
        (Product(((1, Name("a")), (-1, Product(((1, Name("b")), (1, Name("c"))))))), "a/(b*c)"),
        (Power(Number(Fraction(2000), OHM), 2), "(2 kohm)^2"),
        (Power(Power(Name("a"), 2), -3), "(a^2)^-3"),
        (Sum(((1, Name("a")), (-1, Number(Fraction(-2))))), "a - (-2)"),
        (Product(((1, Number(Fraction(3), SECOND)), (1, Name("K")))), "3000 ms*K"),
        (Product(((1, Number(Fraction(1, 3), SECOND)), (1, Name("K")))), "(1000 ms/3)*K"),
        (Product(((1, Name("K")), (-1, Number(Fraction(5), HERTZ)))), "K/(5 rad/s)"),
        (Product(((1, Number(Fraction(2), VOLT * VOLT)), (1, Name("K")))), "(2*(1 V)^2)*K"),
    ],
)
def test_expression(expression: Expression, text: str) -> None:
    assert write_expression(expression) == text


def test_a_number_with_a_dimension_of_no_unit() -> None:
    odd = Product(((1, Name("K")), (1, Number(Fraction(2), VOLT**2 / SECOND))))
    assert read_expression(write_expression(odd)) == odd


@pytest.mark.parametrize(
    ("name", "value", "text"),
    [
        ("R1", Value(Number(Fraction(4700), OHM)), "4.7 kohm"),
        ("C1", Value(Number(Fraction(13, 10**9), FARAD), Fraction(1, 50)), "13 nF ±2%"),
        ("R1", Value(Number(Fraction(1, 7), OHM), Fraction(1, 300)), "1 ohm/7 ±1/3%"),
        ("K", Value(Number(Fraction(3))), "3"),
        ("w0", Value(Number(Fraction(6283), HERTZ)), "6.283 krad/s"),
        ("C2", Value(Product(((1, Number(Fraction(2))), (1, Name("C1"))))), "2*C1"),
    ],
)
def test_value(name: str, value: Value, text: str) -> None:
    assert write_value(name, value) == text


def test_names_of_laws_are_left_out_when_they_would_come_back() -> None:
    plain = "a -- R1 -- b\nhold b = K*a\npush into a = i_R1"
    assert write_network(read_network(plain)) == plain
    named = "a -- R1 -- b\nhold b = K*a as law2\npush into a = i_R1 as law1"
    assert write_network(read_network(named)) == named


def test_a_name_read_in_a_current_comes_back() -> None:
    text = "a -- R1 -- b\nhold a - b = 0\nread i_law1"
    assert write_network(read_network(text)) == text
    assert default_labels(2, ["law2"]) == ["law1", "law3"]


def test_chains_end_at_gnd_and_are_not_endless() -> None:
    chain = "1 -- R1 -- 2 -- R2 -- 3 -- R3 -- 4 -- R4 -- 5 -- R5 -- 6 -- R6 -- 7"
    net = read_network(f"{chain} -- R7 -- gnd -- C1 -- 2")
    assert write_network(net) == f"{chain}\n7 -- R7 -- gnd\ngnd -- C1 -- 2"


def test_nameless_nodes_without_a_series_get_a_plain_name() -> None:
    net = read_network("a -- R1 + L1 + C1 -- gnd")
    left = Network(tuple(part for part in net.parts if part.name != "L1"))
    assert write_network(left) == "a -- R1 -- n1\nn2 -- C1 -- gnd"


def test_pieces() -> None:
    assert write_part(Branch("R1", "a", "b")) == "a -- R1 -- b"
    assert write_part(OpAmp("U1", "p", "m", "o")) == "U1: opamp(plus=p, minus=m, out=o)"
    assert write_drive(VoltageDrive("a", "b", "Vs")) == "drive a - b as Vs"
    assert write_drive(CurrentDrive("gnd", "b")) == "drive current into b"
    assert write_dimension(NUMBER) == "V/V"


def test_an_empty_network() -> None:
    assert write_network(Network()) == ""
    assert read_network("") == Network()
