"""Two-ports: reciprocity, losslessness and cascade as exact laws; published pads; what exists and what does not."""

from __future__ import annotations

import math
from dataclasses import replace
from fractions import Fraction
from math import prod
from random import Random

import pytest

import symnet as sn
from symnet.errors import DimensionError, NotationError, SingularError, UnknownNameError, WiringError
from symnet.exact.ports.figures import Parameter
from symnet.exact.ports.twoport import TwoPort
from symnet.exact.transfer import Transfer
from tests.networks import seeded
from tests.reference.attenuators import CASES, Pad

PRIME = 2**61 - 1
LADDER = "in -- L1 -- a -- C1 -- gnd; a -- L2 -- out; out -- C2 -- gnd"
TEE = "in -- R1 -- a -- R2 -- out; a -- R3 -- gnd"


def mirrored(parameter: Parameter) -> Parameter:
    """The parameter at -s."""
    n, d = parameter.numerator, parameter.denominator
    s = n.ring.gens[0]
    return replace(parameter, numerator=n.compose(s, -s), denominator=d.compose(s, -s))


def named(h: Parameter | Transfer) -> tuple[object, object]:
    """Numerator and denominator as sets of terms with the names in them."""
    return tuple(  # type: ignore[return-value]
        frozenset(
            (frozenset((str(x), e) for x, e in zip(part.ring.symbols, m, strict=True) if e), int(c))
            for m, c in part.terms()
        )
        for part in (h.numerator, h.denominator)
    )


def modulo(parameter: Parameter, point: list[int]) -> int:
    """The value at a point, modulo a prime."""
    above, below = (
        sum(int(c) * prod(pow(x, e, PRIME) for x, e in zip(point, m, strict=True)) for m, c in part.terms())
        for part in (parameter.numerator, parameter.denominator)
    )
    return above * pow(below, -1, PRIME) % PRIME


def plus(one: Parameter, two: Parameter) -> tuple[object, object]:
    """Numerator and denominator of a sum."""
    return (
        one.numerator * two.denominator + two.numerator * one.denominator,
        one.denominator * two.denominator,
    )


def times(one: Parameter, two: Parameter) -> Parameter:
    return replace(
        one, numerator=one.numerator * two.numerator, denominator=one.denominator * two.denominator
    )


def test_the_determinant_of_the_chain_matrix_is_1_for_reciprocal_networks() -> None:
    """AD - BC = z12/z21 = 1 (reciprocity, Lorentz): 200 random networks of R, L, C, Z, Y."""
    found = 0
    random = Random(4)
    for seed in range(400):
        sketch = seeded(seed, active=False, most_nodes=5)
        network = sn.network(sketch.text)
        nodes = [node for node in network.nodes if "+" not in node]
        if len(nodes) < 2:
            continue
        one, two = random.sample(nodes, 2)
        port = sn.two_port(network, one, two)
        assert port.is_reciprocal
        if not port.z21:
            continue
        point = [random.randrange(1, PRIME) for _ in port.ring.symbols]
        (a, b), (c, d) = ([modulo(entry, point) for entry in row] for row in port.chain())
        assert (a * d - b * c) % PRIME == 1, seed  # a wrong one passes with probability below 1e-16
        found += 1
        if found == 200:
            break
    assert found == 200


@pytest.mark.parametrize(
    "text",
    [LADDER, "in -- C1 -- out; in -- L1 -- gnd; out -- L2 -- gnd", "in -- L1 || C1 -- out -- C2 + L2 -- gnd"],
)
def test_s_of_a_lossless_ladder_is_unitary(text: str) -> None:
    """S(s) S(-s)^T = 1: no power is lost (Belevitch, Classical Network Theory, 1968)."""
    s = sn.two_port(sn.network(text), "in", "out").s("Z0")
    for i in range(2):
        for j in range(2):
            top, bottom = plus(times(s[i, 0], mirrored(s[j, 0])), times(s[i, 1], mirrored(s[j, 1])))
            assert top == (bottom if i == j else 0)


@pytest.mark.parametrize("case", [case for case in CASES if case.kind != "L"], ids=lambda case: case.id)
def test_s_of_published_pads(case: Pad) -> None:
    """|S21| is the printed loss, S11 is nil, to what rounding the printed elements leaves."""
    network = sn.network(case.text)
    source, load = (next(n for n in names if n in network) for names in (("Rs",), ("RL", "Rl")))
    port = sn.two_port(network.without(source, load), network[source].nodes[1], "out")
    s = port.s(f"{case.z0} ohm")
    assert -20 * math.log10(abs(s[1, 0].numeric()(0j))) == pytest.approx(case.db, abs=0.1)
    assert abs(s[0, 0].numeric()(0j)) < 2e-3


def test_parameters_of_a_tee() -> None:
    port = sn.two_port(sn.network(TEE), "in", "out")
    assert [str(entry) for row in port.z() for entry in row] == [
        "z11 = R1 + R3",
        "z12 = R3",
        "z21 = R3",
        "z22 = R2 + R3",
    ]
    assert [str(entry) for row in port.chain() for entry in row] == [
        "A = 1 + R1/R3",
        "B = R1 + R2 + R1*R2/R3",
        "C = 1/R3",
        "D = 1 + R2/R3",
    ]
    assert str(port.y()[1, 0]) == "y21 = -R3/(R1*R2 + R3*(R1 + R2))"
    assert repr(port) == "<TwoPort from in to out: reciprocal>"


@pytest.mark.parametrize(
    ("text", "missing", "there"),
    [("in -- R1 -- out", "z", "y"), ("in -- R1 -- gnd; in -- R2 -- a; a -- R3 -- gnd", "y", "z")],
)
def test_a_set_that_does_not_exist_is_refused_and_the_others_are_there(
    text: str, missing: str, there: str
) -> None:
    ports = ("in", "out") if "out" in text else ("in", "in")
    port = sn.two_port(sn.network(text), *ports)
    with pytest.raises(SingularError, match="has no"):
        getattr(port, missing)()
    assert getattr(port, there)()[0, 0].numerator
    assert port.chain()[0, 0].numerator == port.chain()[0, 0].denominator
    assert port.s("50 ohm")[0, 0].denominator


def test_the_chain_matrix_has_i2_leaving_the_port() -> None:
    """A shunt R: v1 = v2, i1 = v2/R + i2; a series Z: v1 = v2 + Z i2, i1 = i2. Common practice, no source."""
    shunt = sn.two_port(sn.network("in -- R1 -- gnd; in -- R2 -- out"), "in", "out").chain()
    assert [str(entry) for row in shunt for entry in row] == ["A = 1", "B = R2", "C = 1/R1", "D = 1 + R2/R1"]


def test_a_cascade_is_the_network_drawn_as_one() -> None:
    one = sn.two_port(sn.network("in -- R1 -- out; out -- C1 -- gnd"), "in", "out")
    two = sn.two_port(sn.network("in -- L2 -- out; out -- R2 -- gnd"), "in", "out")
    both = sn.two_port(
        sn.network("in -- R1 -- m; m -- C1 -- gnd; m -- L2 -- out; out -- R2 -- gnd"), "in", "out"
    )
    for one_row, other_row in zip((one @ two).chain(), both.chain(), strict=True):
        for a, b in zip(one_row, other_row, strict=True):
            assert str(a) == str(b)


def test_a_terminated_two_port_is_the_h_of_the_whole() -> None:
    """ZL/(A ZL + B + Zs (C ZL + D)) for every text of a ladder with its source and load."""
    port = sn.two_port(sn.network(LADDER), "in", "out")
    whole = sn.derive(sn.network(f"s1 -- Rs -- in; {LADDER}; out -- RL -- gnd; drive s1; read out"))
    ratio = port.voltage_ratio("Rs", "RL")
    assert named(ratio) == named(whole)
    driven = sn.network(f"{LADDER}; out -- RL -- gnd; drive in; read out")
    assert named(port.input_impedance("RL")) == named(sn.driving_point(driven, "in"))
    behind = sn.network(f"s1 -- Rs -- in; {LADDER}; drive s1; read out")
    assert named(port.output_impedance("Rs")) == named(sn.driving_point(behind, "out"))
    rs, rl = 70, 90
    numbers = dict.fromkeys(("L1", "L2", "C1", "C2"), "1")
    valued = sn.two_port(sn.network(LADDER).with_values(numbers), "in", "out")
    at = complex(valued.insertion_gain("70 ohm", "90 ohm").numeric()(0.3j))
    assert at == pytest.approx(
        complex(valued.voltage_ratio("70 ohm", "90 ohm").numeric()(0.3j)) * (rs + rl) / rl, rel=1e-14
    )


def test_zero_decibels_of_insertion_gain_are_a_voltage_ratio_of_one_half() -> None:
    """Equal terminations: 1/2 at DC is 0 dB insertion gain. Common practice, no source."""
    port = sn.two_port(sn.network(LADDER).with_values(L1="1", L2="1", C1="1", C2="1"), "in", "out")
    assert port.voltage_ratio("1 ohm", "1 ohm").numeric()(0j) == pytest.approx(0.5, rel=1e-15)
    assert port.insertion_gain("1 ohm", "1 ohm").numeric()(0j) == pytest.approx(1, rel=1e-15)


def test_references_of_s() -> None:
    port = sn.two_port(sn.network(TEE), "in", "out")
    exact = port.s("9 ohm", "4 ohm")[1, 0]
    assert "000000" not in str(exact)
    both = port.s("50 ohm", "75 ohm")
    assert both[1, 0] == both[0, 1]
    with pytest.raises(NotationError, match="different symbols"):
        port.s("Ra", "Rb")
    with pytest.raises(DimensionError, match="no resistance"):
        port.s("5 nF")
    with pytest.raises(NotationError, match="zero"):
        port.s("0 ohm")


def test_ports_that_are_not_there() -> None:
    network = sn.network(TEE)
    with pytest.raises(UnknownNameError, match="did you mean out"):
        sn.two_port(network, "in", "outt")
    with pytest.raises(NotationError, match="is no port"):
        sn.two_port(network, "in", "current into out")
    with pytest.raises(WiringError, match="island"):
        sn.two_port(sn.network("in -- R1 -- out; out -- R2 -- gnd; x -- R3 -- y"), "in", "out")


def test_an_amplifier_is_not_reciprocal_and_says_what_it_lacks() -> None:
    port: TwoPort = sn.two_port(sn.network("in -- R1 -- gnd; hold out = 5*in; out -- R2 -- gnd"), "in", "out")
    assert not port.is_reciprocal
    assert port.z()[0, 1].numerator == 0
    with pytest.raises(SingularError, match="both ports shorted"):
        port.y()
    a = port.chain()[0, 0].numeric()
    assert a(0j) == pytest.approx(float(Fraction(1, 5)), rel=1e-15)
