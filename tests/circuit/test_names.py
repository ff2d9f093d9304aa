"""What names mean, which of them look like a slip, which dimension they have."""

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from symnet.circuit.meanings import Meanings, NearNames, one_edit
from symnet.circuit.names import check, dimensions, free_symbols, names_of
from symnet.circuit.network import Network, read_network
from symnet.circuit.parts import Branch, Value, VoltageDrive, VoltageLaw
from symnet.errors import NotationError
from symnet.expressions import Name, Number, Product
from symnet.quantities import NUMBER, OHM, SECOND, SIEMENS, VOLT
from tests.circuit.strategies import patient

words = st.text(alphabet="abAB1", min_size=1, max_size=4)


def edits(word: str, letters: str) -> set[str]:
    """All words one edit away, written out: the definition that the index is measured by."""
    gone = {word[:k] + word[k + 1 :] for k in range(len(word))}
    more = {word[:k] + c + word[k:] for k in range(len(word) + 1) for c in letters}
    other = {word[:k] + c + word[k + 1 :] for k in range(len(word)) for c in letters}
    swapped = {word[:k] + word[k + 1] + word[k] + word[k + 2 :] for k in range(len(word) - 1)}
    return (gone | more | other | swapped) - {word}


@patient
@given(words, words)
def test_one_edit(one: str, two: str) -> None:
    # Law: one letter less, more or other, two neighbours exchanged, or the case alone.
    expected = two in edits(one, "abAB1") or (one != two and one.lower() == two.lower())
    assert one_edit(one, two) == expected


@patient
@given(st.lists(words, max_size=12), words)
def test_the_index_finds_what_comparing_finds(known: list[str], name: str) -> None:
    found = NearNames(known).to(name)
    assert set(found) == {k for k in known if one_edit(name, k)}
    cases = [k.lower() != name.lower() for k in found]
    assert cases == sorted(cases)


@pytest.mark.parametrize(
    "text",
    [
        "p -- R1 -- m; hold out = mu*(p - m)",  # mu and m: too short to be compared
        "g -- R1 -- d; push from d to gnd = gm*g",  # gm and g
        "a -- R1 -- b; Z1 = R/(1 + s*R*C); b -- Z1 -- gnd",  # bare class letters
        "a -- Z1 -- b -- R1 -- gnd; Z1 = R1 + s*L1",  # L1 and R1, L1 and Z1: not parts of one letter
        "a -- R1 -- b; hold b = gm1*R1*a; hold c = gm2*R1*b; gm1 = 2 mS; c -- R2 -- gnd",  # numbered symbols
        "tau1 = 75 us; tau2 = 318 us; tau3 = 3.18 ms; a -- Z1 -- b; Z1 = R*(1 + s*tau1)*(1 + s*tau2)/(1 + s*tau3)",
        "vin -- R1 -- vout -- R2 -- gnd; free vinn; hold vout = vinn*vin",  # declared
        "a1 -- R1 -- a2 -- R11 -- a11 -- R12 -- gnd; read a11 - a1",  # nodes and parts are never compared
    ],
)
def test_good_texts_read(text: str) -> None:
    assert check(read_network(text)) == []


@pytest.mark.parametrize(
    ("text", "unknown", "meant"),
    [
        ("a -- R1 -- b; Z1 = R2 + s*L; b -- Z1 -- gnd", "R2", "R1"),
        ("a -- Rs -- b; Z1 = RS; b -- Z1 -- gnd", "RS", "Rs"),
        ("a -- Rload -- b; Rlaod = 5 ohm", "Rlaod", "Rload"),
        ("a -- R1 -- b; c -- C -- d; Z1 = 1/(s*c2) + 1/(s*C); b -- Z1 -- gnd; free C2", "c2", "C2"),
        ("in -- R1 -- mid; push into mid = gm*(in - mdi)", "mdi", "mid"),
        ("a -- R1 -- b; hold b = amq*a as amp", "amq", "amp"),
        ("a -- R1 -- b; free gain; hold b = gai*a", "gai", "gain"),
    ],
)
def test_a_slip_is_a_fault(text: str, unknown: str, meant: str) -> None:
    with pytest.raises(NotationError) as caught:
        read_network(text)
    fault = caught.value.faults[0]
    assert fault.message == f"{unknown} is not known"
    assert fault.hint == f"did you mean {meant}? If it is meant as a free symbol, say: free {unknown}"


def test_the_remedy_helps() -> None:
    net = read_network("in -- R1 -- mid; free mdi in V/A; push into mid = in/mdi")
    assert free_symbols(net) == ("mdi",)


def test_a_slip_is_told_once() -> None:
    with pytest.raises(NotationError) as caught:
        read_network("in -- R1 -- mid; push into mid = gm*(in - mdi) + gm*mdi; read mdi")
    assert len(caught.value.faults) == 1


class TestDimensions:
    @pytest.mark.parametrize(
        ("text", "name", "dimension"),
        [
            ("hold b = mu*a", "mu", NUMBER),
            ("push into b = gm*a", "gm", SIEMENS),
            ("hold b = r*i_R1", "r", OHM),
            ("push into b = be*i_R1", "be", NUMBER),
            ("push into b = a/r", "r", OHM),
            ("hold b = K*a/(1 + s*tau)", "tau", SECOND),
            ("hold b = K*a/(1 + s/w0)", "w0", SECOND**-1),
            ("hold b = a*x/(x + y); y = 2 V", "x", VOLT),
            ("x = R1/C", "x", OHM**2 / SECOND),
            ("x = y*R1; y = 3", "x", OHM),
            ("hold b = x*y*a", "x", None),
            ("hold b = x^2*a", "x", NUMBER),
            ("hold b = x*a; x = y*z; y = 1 ohm", "z", SIEMENS),
            ("free x in V/s", "x", VOLT / SECOND),
            ("free x", "x", None),
            ("Rz = 5", "Rz", OHM),
            ("x = 0; hold b = x*a", "x", NUMBER),
        ],
    )
    def test_inferred(self, text: str, name: str, dimension: object) -> None:
        assert dimensions(read_network(f"free Rz; a -- R1 -- b; {text}"))[name] == dimension

    def test_the_order_of_writing_does_not_matter(self) -> None:
        one = read_network("a -- R1 -- b; x = y*z; y = w^2; w = 3 V; hold b = z*x*a")
        two = read_network("hold b = z*x*a; w = 3 V; y = w^2; x = y*z; a -- R1 -- b")
        assert dimensions(one) == dimensions(two)

    def test_parts_come_first(self) -> None:
        assert list(dimensions(read_network("hold b = mu*a; a -- C1 -- b"))) == ["C1", "mu"]


def test_free_symbols_of_a_network() -> None:
    net = read_network(
        "free K0; a -- R1 -- b; K = 3; hold b = mu*K*a; Z1 = R + s*tau*R; b -- Z1 -- gnd; read 2*a*G"
    )
    assert free_symbols(net) == ("K0", "K", "mu", "G", "R", "tau")


def test_names_of_a_network() -> None:
    net = read_network("a -- R1 -- b; K = 3; hold b = mu*a as amp; drive a as Vs; free x; read i_R1")
    assert names_of(net) == {"a", "b", "R1", "K", "mu", "amp", "Vs", "x", "i_R1", "gnd"}


class TestNetworksBuiltInPython:
    """A network from constructors is judged by the same rules, without places in a text."""

    NET = Network((Branch("R1", "a", "b"),), (VoltageDrive("a"),), (Name("b"),))

    def test_good(self) -> None:
        assert check(self.NET) == []

    def test_a_name_twice(self) -> None:
        net = replace(
            self.NET,
            parts=(*self.NET.parts, Branch("R1", "b", "gnd"), VoltageLaw("b", "b", "gnd", Name("a"))),
        )
        assert [fault.message for fault in check(net)] == [
            "R1 is placed twice",
            "b is already the name of a node",
        ]

    def test_a_law_that_is_none(self) -> None:
        law = VoltageLaw("law1", "b", "gnd", Product(((1, Name("a")), (1, Name("b")))))
        faults = check(replace(self.NET, parts=(*self.NET.parts, law)))
        assert [fault.message for fault in faults] == ["a product of two voltages or currents is not linear"]

    def test_a_value_of_another_dimension(self) -> None:
        net = replace(self.NET, values=(("R1", Value(Number(Fraction(2), SIEMENS))),))
        assert [fault.message for fault in check(net)] == ["R1 is in ohm, its value is in S"]

    def test_many_parts(self) -> None:
        parts = tuple(Branch(f"R{k}", f"n{k}", "gnd") for k in range(5001))
        assert [fault.message for fault in check(Network(parts))] == [
            "the network has 5001 parts; at most 5000 are read"
        ]


def test_meanings() -> None:
    net = read_network("a -- R1 -- 2; hold b = K*a as amp; drive a as Vs; b -- R2 -- gnd; x = 3")
    meanings = Meanings(net, ["lost"])
    expected = {
        "s": "s", "gnd": "gnd", "v_gnd": "gnd", "a": "voltage", "v_2": "voltage", "v_R1": "voltage", "i_R1": "current",
        "i_amp": "current", "i_Vs": "current", "R1": "part", "amp": "label", "Vs": "label", "K": "unknown",
        "x": "symbol", "lost": "doubtful", "v_lost": "doubtful", "v_amp": "no voltage", "i_a": "no current",
        "drive": "reserved", "2": "voltage",
    }  # fmt: skip
    assert {name: meanings.of(name) for name in expected} == expected
