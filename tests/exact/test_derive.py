"""H(s) from text: worked cases, ties, numbers, currents, several drives and reads, and what is refused."""

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction
from typing import Any

import pytest

import symnet as sn
from symnet.errors import (
    LimitError,
    MissingValueError,
    NotationError,
    SingularError,
    UnknownNameError,
    WiringError,
)
from symnet.exact.confirm import UnconfirmedError, confirm
from symnet.exact.derive import derive_from
from symnet.exact.quotient import Quotient
from symnet.exact.transfer import Transfer

TWO_SECTIONS = "in -- R1 -- a -- R2 -- out -- C2 -- gnd; a -- C1 -- gnd; drive in; read out"


def fraction(transfer: Transfer, text: str) -> bool:
    """Whether H is exactly the fraction of two polynomials in its own names, given as text for the ring."""
    over = text.split(" / ")
    names = {
        str(symbol): generator
        for symbol, generator in zip(transfer.ring.symbols, transfer.ring.gens, strict=True)
    }
    n, d = (polynomial(part, names, transfer.ring.one) for part in over)
    return bool(transfer.numerator * d == transfer.denominator * n)


def polynomial(text: str, names: dict[str, Any], one: Any) -> Any:
    """A sum of products such as ``R1*C1*s + 2`` in the ring; nothing else is read."""
    total = one - one
    for term in text.split(" + "):
        product = one
        for factor in term.split("*"):
            product = product * (names[factor] if factor in names else int(factor))
        total = total + product
    return total


def test_two_loaded_sections() -> None:
    """N1: the loading term R1*C2 is there (textbook; recomputed with sympy)."""
    H = sn.derive(sn.network(TWO_SECTIONS))
    assert fraction(H, "1 / 1 + s*R1*C1 + s*R1*C2 + s*R2*C2 + s*s*R1*R2*C1*C2")
    assert H.label == "out/in"
    assert H.hidden == ()


def test_numbers_come_out_exact() -> None:
    H = sn.derive(sn.network(TWO_SECTIONS + "; R1, R2 = 1 kohm; C1, C2 = 100 nF"))
    assert H.numeric().num == (Fraction(1),)
    assert H.numeric().den == (Fraction(1), Fraction(3, 10_000), Fraction(1, 10**8))


def test_only_chosen_names_stay_symbols() -> None:
    net = sn.network(TWO_SECTIONS + "; R1, R2 = 1 kohm; C1, C2 = 100 nF")
    H = sn.derive(net, symbols="C1")
    assert H.names == ("C1",)
    assert fraction(H, "10000000 / 10000000 + s*2000 + s*C1*10000000000 + s*s*C1*1000000")
    assert sn.derive(net, symbols=[]).names == ()
    with pytest.raises(UnknownNameError, match="did you mean C1"):
        sn.derive(net, symbols="C11")


def test_a_tie_replaces_the_name_everywhere() -> None:
    H = sn.derive(sn.network(TWO_SECTIONS + "; R1, R2 = R; C1 = 2*C2"))
    assert H.names == ("R", "C2")
    assert fraction(H, "1 / 1 + 4*s*R*C2 + 2*s*s*R*R*C2*C2")


def test_equal_values_stay_separate_symbols() -> None:
    H = sn.derive(sn.network(TWO_SECTIONS + "; R1, R2 = 1k"))
    assert set(H.names) == {"R1", "R2", "C1", "C2"}
    assert H.values == {"R1": 1000, "R2": 1000}


def test_multiple_feedback_section() -> None:
    """Textbook standard, D4 of the wrong derivations corrected: -(R2/R1)/(1 + s C2 (R2 + R3 + R2 R3/R1) + ...)."""
    H = sn.derive(
        sn.network(
            """
            in -- R1 -- x -- R2 -- out;  x -- C1 -- gnd
            x -- R3 -- m -- C2 -- out
            U1: opamp(plus=gnd, minus=m, out=out)
            drive in
            read out
            """
        )
    )
    assert fraction(H, "-1*R2 / R1 + s*C2*R1*R2 + s*C2*R1*R3 + s*C2*R2*R3 + s*s*R1*R2*R3*C1*C2")


def test_a_law_with_an_expression_in_s() -> None:
    """Inverting amplifier with A = wt/s: H = -R2 wt/(R1 wt + s (R1 + R2)) (N14)."""
    H = sn.derive(sn.network("in -- R1 -- m -- R2 -- out; hold out = wt/s*(-m); drive in; read out"))
    assert fraction(H, "-1*R2*wt / R1*wt + s*R1 + s*R2")


@pytest.mark.parametrize(
    ("read", "wanted"),
    [
        ("i_R1", "1 + s*C2*RL / R1 + RL + s*L1 + s*R1*C2*RL + s*s*L1*C2*RL"),
        ("i_L1", "1 + s*C2*RL / R1 + RL + s*L1 + s*R1*C2*RL + s*s*L1*C2*RL"),
        ("i_drive", "-1 + -1*s*C2*RL / R1 + RL + s*L1 + s*R1*C2*RL + s*s*L1*C2*RL"),
        ("i_C2", "s*C2*RL / R1 + RL + s*L1 + s*R1*C2*RL + s*s*L1*C2*RL"),
        ("v_L1", "s*L1 + s*s*L1*C2*RL / R1 + RL + s*L1 + s*R1*C2*RL + s*s*L1*C2*RL"),
        ("a - out", "s*L1 + s*s*L1*C2*RL / R1 + RL + s*L1 + s*R1*C2*RL + s*s*L1*C2*RL"),
    ],
)
def test_currents_and_voltages_across_parts(read: str, wanted: str) -> None:
    net = sn.network("in -- R1 -- a -- L1 -- out -- C2 || RL -- gnd; drive in")
    assert fraction(sn.derive(net, read=read), wanted)


def test_an_impedance_is_a_current_drive_and_a_read() -> None:
    from symnet.quantities import OHM

    H = sn.derive(sn.network("a -- R1 + L1 -- gnd; drive current into a; read a"))
    assert fraction(H, "R1 + s*L1 / 1")
    assert H.dimension == OHM


def test_several_drives_and_reads_give_one_h_each() -> None:
    net = sn.network("a -- R1 -- x -- R2 -- b; x -- R3 -- gnd; drive a; drive b; read x; read i_R3")
    labels = [H.label for H in sn.derive_all(net)]
    assert labels == ["x/a", "i_R3/a", "x/b", "i_R3/b"]
    assert fraction(sn.derive_all(net)[0], "R2*R3 / R1*R2 + R1*R3 + R2*R3")
    with pytest.raises(WiringError, match="several drives"):
        sn.derive(net)
    with pytest.raises(WiringError, match="several reads"):
        sn.derive(net, drive="a")
    assert sn.derive(net, drive="a", read="x") == sn.derive_all(net)[0]


def test_driving_elsewhere_does_not_touch_the_text() -> None:
    net = sn.network(TWO_SECTIONS)
    shorted = net.add("in -- Rshort -- gnd; Rshort = 0")
    zout = sn.derive(shorted, drive="current into out", symbols="R1 R2 C1 C2")
    assert fraction(zout, "R1 + R2 + s*C1*R1*R2 / 1 + s*R1*C1 + s*R1*C2 + s*R2*C2 + s*s*R1*R2*C1*C2")
    assert net == sn.network(TWO_SECTIONS)


def test_a_hidden_mode_is_kept_and_named() -> None:
    """N32: a compensated divider hides the mode of R1 C1 = R2 C2."""
    H = sn.derive(sn.network("in -- R1 || C1 -- out -- R2 || C2 -- gnd; drive in; read out; R1 = R2*C2/C1"))
    assert fraction(H, "C1 / C1 + C2")
    assert [str(mode.factor) for mode in H.hidden] == ["s*R2*C2 + 1"]


def test_a_name_that_has_cancelled_needs_no_number() -> None:
    H = sn.derive(
        sn.network(
            "in -- R1 -- out -- R2 -- gnd; out -- C1 -- b; hold b = out; hold c = mu*out; c -- RL -- gnd; drive in; read out"
        )
    )
    assert H.names == ("R1", "R2")
    assert H.with_values(R1=1, R2=3).numeric().num == (Fraction(3, 4),)
    assert H.with_values(R1=1, R2=3).is_numeric
    assert H.with_values(R1=0, R2=3).numeric().num == (Fraction(1),)


def test_an_h_is_printed_in_its_readable_form() -> None:
    H = sn.derive(sn.network("in -- R1 -- out -- R2 + C2 -- gnd; drive in; read out"))
    assert str(H) == "out/in = (1 + s*R2*C2)/(1 + s*(R1 + R2)*C2)"
    assert repr(H).startswith("<Transfer out/in")


def test_a_branch_that_the_read_cannot_see_is_hidden() -> None:
    H = sn.derive(sn.network("in -- R1 -- out -- C1 -- gnd; in -- R2 -- b -- C2 -- gnd; drive in; read out"))
    assert fraction(H, "1 / 1 + s*R1*C1")
    assert [str(mode.factor) for mode in H.hidden] == ["s*R2*C2 + 1"]


def test_zero_is_a_transfer_function_too() -> None:
    H = sn.derive(sn.network("in -- R1 -- gnd; b -- R2 -- gnd; drive in; read b"))
    assert H.numerator == 0
    assert H.denominator == 1
    assert H.with_values(R1=1, R2=1).numeric().num == ()


def test_two_equal_derivations_are_equal_whatever_the_order() -> None:
    one = sn.derive(sn.network("in -- R1 -- out -- C1 -- gnd; drive in; read out"))
    two = sn.derive(sn.network("gnd -- C1 -- out; drive in; out -- R1 -- in; read out"))
    assert one == two
    assert hash(one) == hash(two)
    assert one != sn.derive(sn.network("in -- C1 -- out -- R1 -- gnd; drive in; read out"))
    assert one != 1


def test_what_is_missing_is_said() -> None:
    with pytest.raises(WiringError, match="nothing drives the network"):
        sn.derive(sn.network("in -- R1 -- gnd; read in"))
    with pytest.raises(WiringError, match="nothing is read"):
        sn.derive(sn.network("in -- R1 -- gnd; drive in"))
    with pytest.raises(NotationError, match="no node or part called outt"):
        sn.derive(sn.network(TWO_SECTIONS), read="outt")
    with pytest.raises(MissingValueError, match="no value for R1, C1"):
        sn.derive(sn.network("in -- R1 -- out -- C1 -- gnd; drive in; read out")).numeric()


def test_singular_for_these_values() -> None:
    """A gain of exactly one around a loop leaves the node open; the wiring is sound."""
    net = sn.network(
        "in -- R1 -- p; p -- R2 -- out; hold out = K*p; drive in; read out; K = 2*R2/R1 - R2/R1 + 1"
    )
    with pytest.raises(SingularError, match="leave open"):
        sn.derive(net)


def test_no_determinant_is_written_out_beyond_the_limit() -> None:
    text = ["drive n0", "read n30"]
    text += [f"n{k} -- R{k + 1} -- n{k + 1} -- C{k + 1} -- gnd" for k in range(30)]
    H = sn.derive(sn.network("\n".join(text)))
    assert H.terms[1] == 2504730781961  # F(61), the spanning trees of a ladder of 30 sections
    assert str(H) == repr(H)
    with pytest.raises(LimitError, match=r"2\.51e12 terms"):
        H.denominator  # noqa: B018
    values = {f"{letter}{k + 1}": k + 1 for k in range(30) for letter in "RC"}
    assert len(H.with_values(values).numeric().den) == 31


def test_the_symbol_of_a_name_is_found() -> None:
    H = sn.derive(sn.network(TWO_SECTIONS))
    assert str(H.symbol("R1")) == "R1"
    assert H.expr.free_symbols == {H.symbol(name) for name in ("s", *H.names)}
    with pytest.raises(UnknownNameError, match="did you mean R1"):
        H.symbol("r1")


def test_a_resistance_of_zero_is_a_short() -> None:
    H = sn.derive(sn.network(TWO_SECTIONS + "; R2 = 0"), symbols="R1 C1 C2")
    assert fraction(H, "1 / 1 + s*R1*C1 + s*R1*C2")


@pytest.mark.parametrize("sections", [2, 12])
def test_a_wrong_h_does_not_pass_the_confirmation(sections: int) -> None:
    """Both where N and D are compared as written out and where the determinants are."""
    lines = [f"n{k} -- R{k + 1} -- n{k + 1} -- C{k + 1} -- gnd" for k in range(sections)]
    net = sn.network("\n".join([*lines, "drive n0", "read n1"]))
    H = sn.derive(net)
    n, d = H.quotient.numerator, H.quotient.denominator
    wrong = Quotient(replace(n, factor=((2, ()),)), d)
    with pytest.raises(UnconfirmedError, match="must not be used"):
        confirm(net, H.naming, H.drive, H.read, wrong)


def test_other_numbers_do_not_derive_anew() -> None:
    H = sn.derive(sn.network(TWO_SECTIONS + "; R2 = R1"))
    changed = H.with_values(R1="1k", C1=1e-9, C2="1n")
    assert changed.quotient is H.quotient
    assert changed.numeric().den == (Fraction(1), Fraction(3, 10**6), Fraction(1, 10**12))
    assert changed.with_values(C1=None).values == {"R1": 1000, "C2": Fraction(1, 10**9)}
    with pytest.raises(UnknownNameError, match="H holds no symbol called R2"):
        H.with_values(R2="5k")
    with pytest.raises(NotationError, match="makes another H"):
        H.with_values(C2="2*C1")


def test_every_h_says_how_it_was_confirmed() -> None:
    net = sn.network(TWO_SECTIONS)
    H = derive_from(net, net.drives[0], net.reads[0])
    assert "solved by elimination modulo 2^127 - 1" in str(H.confirmation)
    assert H.confirmation.exponent > 30
