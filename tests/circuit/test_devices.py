"""What ships with symnet: every model reads, and gives the H that the trade writes for it."""

from __future__ import annotations

import itertools

import pytest

import symnet as sn
from symnet.circuit.devices import device_names, device_parameters, device_source
from symnet.circuit.reading import read_sections
from symnet.errors import NotationError, UnknownNameError
from tests.reference.comparing import assert_same_function


@pytest.mark.parametrize("kind", device_names())
def test_every_model_reads_and_has_a_source(kind: str) -> None:
    properties = device_parameters(kind)
    for count in range(len(properties) + 1):
        for given in itertools.combinations(properties, count):
            found = device_source(kind, given)
            assert found is not None
            assert found[1]
            assert kind in read_sections(found[0])


# Each H as it is written in the trade; common practice, no source, unless the definition names one.
FORMULAS = {
    "ideal transformer": (
        "in -- R1 -- a; T1: transformer(p1=a, p2=gnd, s1=out, s2=gnd, n=n); out -- R2 -- gnd; drive in; read out",
        "n*R2/(R1 + n^2*R2)",
    ),
    "tapped transformer, one half loaded": (
        (
            "in -- R1 -- a; T1: tapped_transformer(p1=a, p2=gnd, s1=out, tap=gnd, s2=b, n=n); out -- R2 -- gnd\n"
            "drive in; read out"
        ),
        "n*R2/(R1 + n^2*R2)",
    ),
    "tapped transformer, the other half has the opposite sign": (
        (
            "in -- R1 -- a; T1: tapped_transformer(p1=a, p2=gnd, s1=out, tap=gnd, s2=b, n=n); out -- R2 -- gnd\n"
            "b -- R3 -- gnd; drive in; read b"
        ),
        "-n*R2*R3/(R1*R2 + R1*R3 + n^2*R2*R3)",
    ),
    "a gyrator makes a coil of a capacitor": (
        "G1: gyrator(p1=in, p2=gnd, q1=b, q2=gnd, g=g); b -- C1 -- gnd; drive current into in; read in",
        "s*C1/g^2",
    ),
    "a negative impedance converter": (
        "N1: nic(a=in, b=b, k=k); b -- R1 -- gnd; in -- R2 -- gnd; drive current into in; read in",
        "R1*R2/(R1 - k*R2)",
    ),
    "a frequency-dependent negative resistance": (
        "in -- R1 -- out; F1: fdnr(a=out, b=gnd, D=D); drive in; read out",
        "1/(1 + s^2*D*R1)",
    ),
    "common-emitter stage": (
        (
            "in -- Rs -- b; Q1: bjt(collector=out, base=b, emitter=gnd, gm=gm, Rpi=Rpi); out -- Rc -- gnd\n"
            "drive in; read out; free Rpi"
        ),
        "-gm*Rc*Rpi/(Rs + Rpi)",
    ),
    "emitter follower": (
        (
            "Q1: bjt(collector=gnd, base=in, emitter=out, gm=gm, Rpi=Rpi); out -- Re -- gnd; drive in; read out\n"
            "free Rpi"
        ),
        "Re*(1 + gm*Rpi)/(Rpi + Re*(1 + gm*Rpi))",
    ),
    "common-source stage with its right-half-plane zero": (
        "Q1: fet(drain=out, gate=in, source=gnd, gm=gm, Cgd=Cgd); out -- Rd -- gnd; drive in; read out; free Cgd",
        "-gm*Rd*(1 - s*Cgd/gm)/(1 + s*Rd*Cgd)",
    ),
    "source follower": (
        "Q1: fet(drain=gnd, gate=in, source=out, gm=gm, Ro=Ro); out -- Rx -- gnd; drive in; read out; free Ro",
        "gm*Ro*Rx/(Ro + Rx + gm*Ro*Rx)",
    ),
    "a transconductor follower with its capacitor": (
        "A: ota(plus=in, minus=out, out=out, gm=gm); out -- C1 -- gnd; drive in; read out",
        "1/(1 + s*C1/gm)",
    ),
    "a current-feedback amplifier keeps its bandwidth at any gain": (
        "A: cfa(plus=in, minus=m, out=out, Ct=Ct); m -- Rg -- gnd; m -- Rf -- out; drive in; read out; free Ct",
        "(1 + Rf/Rg)/(1 + s*Rf*Ct)",
    ),
    "a crystal between its resonances": (
        (
            "X1: crystal(a=in, b=gnd, Rm=Rm, Lm=Lm, Cm=Cm, C0=C0); drive current into in; read in\n"
            "free Rm, Lm, Cm, C0"
        ),
        "(1 + s*Rm*Cm + s^2*Lm*Cm)/(s*(C0 + Cm + s*Rm*Cm*C0 + s^2*Lm*Cm*C0))",
    ),
}


@pytest.mark.parametrize("what", FORMULAS)
def test_the_h_of_the_trade(what: str) -> None:
    text, formula = FORMULAS[what]
    network = sn.network(text)
    assert sn.network(network.to_text()) == network
    assert_same_function(sn.derive(network), formula)


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("Q1: bjt(collector=a, base=b)", "Q1 has no emitter"),
        ("Q1: bjt(c=a, base=b, emitter=gnd)", "a bjt has no terminal or parameter c"),
        ("Q1: fet(drain=a, gate=b, source=gnd, cgs=1 pF)", "did you mean Cgs?"),
        ("T1: transformer(p1=a, p2=gnd, s1=b, s2=gnd, n=5 ohm)", "T1.n is in ohm"),
        ("P1: potentiometer(top=a, wiper=b, bottom=gnd, Rt=10 nF)", "Rt is in ohm, its value is in F"),
    ],
)
def test_a_wrong_terminal_or_value_gets_one_clear_message(text: str, said: str) -> None:
    with pytest.raises(NotationError) as caught:
        sn.network(text + "; a -- R1 -- gnd; b -- R2 -- gnd")
    assert len(caught.value.faults) == 1
    assert said in str(caught.value)


@pytest.mark.parametrize(("x", "gain"), [("0", "1/2"), ("1", "0")])
def test_the_positions_of_a_switch_are_exact(x: str, gain: str) -> None:
    text = "in -- R1 = 1k -- out; S1: switch(a=out, b=gnd, x={}); out -- R2 = 1k -- gnd; drive in; read out"
    h = sn.derive(sn.network(text.format(x))).numeric()
    assert str(h.num[0] / h.den[0] if h.num else 0) == gain


class TestRealOpAmps:
    """``with_opamp`` gives the model with exactly the properties that are named."""

    NET = sn.network("""
        in -- R1 = 1 kohm -- m -- R2 = 10 kohm -- out;  U1: opamp(plus=gnd, minus=m, out=out);  drive in;  read out
    """)

    def test_it_is_what_one_would_have_typed(self) -> None:
        typed = sn.network(
            self.NET.to_text().replace("out=out)", "out=out, gain=100000, gbw=1 MHz, Rout=100 ohm)")
        )
        made = self.NET.with_opamp("U1", gain="100k", gbw="1 MHz", Rout="100 ohm")
        assert sn.derive(made) == sn.derive(typed)
        assert dict(made.values) == dict(typed.values)
        assert sn.network(made.to_text()) == made

    def test_none_leaves_a_symbol_and_nothing_makes_it_ideal_again(self) -> None:
        symbol = self.NET.with_opamp("U1", gbw=None)
        assert "U1.gbw" in sn.derive(symbol).names
        assert not [name for name in symbol.symbols() if name.startswith("open_")]
        assert sn.derive(symbol.with_opamp("U1")) == sn.derive(self.NET)

    def test_of_a_section(self) -> None:
        net = sn.network("""
            define stage(a, b)
            a -- R1 -- m -- R2 -- b;  U1: opamp(plus=gnd, minus=m, out=b)
            done
            A1: stage(a=in, b=out);  drive in;  read out
        """)
        assert "A1.U1.gain" in sn.derive(net.with_opamp("A1.U1", gain=1000)).names

    def test_faults(self) -> None:
        with pytest.raises(UnknownNameError, match="no op amp called U2"):
            self.NET.with_opamp("U2", gain=1)
        with pytest.raises(NotationError, match="R1 is no op amp"):
            self.NET.with_opamp("R1", gain=1)
        with pytest.raises(NotationError, match="no terminal or parameter speed"):
            self.NET.with_opamp("U1", speed=1)
