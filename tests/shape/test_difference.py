"""What changed in H: coefficient by coefficient, in symbols and in numbers, at the ends, at -3 dB and at the poles."""

from __future__ import annotations

from fractions import Fraction
from math import log10
from random import Random

import pytest

import symnet as sn
from symnet.errors import NotationError
from symnet.exact.ratio import Ratio
from symnet.shape.coefficients import CoefficientChange
from symnet.shape.difference import Comparison, compare
from tests.property.test_laws import passive
from tests.reference.comparing import assert_same_figure

BARE = sn.network("""
    in -- R1 -- x -- R2 -- out
    x -- C1 -- gnd
    out -- C2 -- gnd
    R1, R2 = 1 kohm
    C1, C2 = 100 nF
    drive in
    read out
""")
LOADED = BARE.add("out -- RL = 10k -- gnd")


def coefficient(found: Comparison, side: str, power: int) -> CoefficientChange:
    assert found.function is not None
    return next(c for c in found.function.coefficients if (c.side, c.power) == (side, power))


class TestALoadOnTwoSections:
    """RL = 10 kohm: constant term 1 -> 1.2, s term 300 us -> 310 us, s^2 term unchanged, H(0) 0 -> -1.58 dB (by hand)."""

    found = compare(BARE, LOADED)

    def test_one_added_part(self) -> None:
        assert [part.name for part in self.found.changes.added] == ["RL"]
        assert not self.found.changes.moved
        assert not self.found.changes.values
        assert repr(self.found) == "<Comparison: added RL; H changed>"

    def test_constant_term(self) -> None:
        c = coefficient(self.found, "D", 0)
        assert c.numbers == (Fraction(1), Fraction(6, 5))
        assert_same_figure(c.after, "1 + (R1 + R2)/RL")
        assert repr(c.change) == "<(R1 + R2)/RL>"
        assert c.relative == pytest.approx(0.2)

    def test_s_term(self) -> None:
        c = coefficient(self.found, "D", 1)
        assert c.numbers == (Fraction(300, 10**6), Fraction(310, 10**6))
        assert repr(c.change) == "<R1*R2*C1/RL>"
        assert str(c.before.dimension) == "s"

    def test_unchanged_terms(self) -> None:
        assert coefficient(self.found, "D", 2).unchanged
        assert coefficient(self.found, "N", 0).unchanged

    def test_gain_at_dc(self) -> None:
        assert self.found.function is not None
        at_dc = self.found.function.gains[0]
        assert at_dc.before is not None
        assert at_dc.after is not None
        assert at_dc.before.value == 1
        assert at_dc.after.value is not None
        assert 20 * log10(at_dc.after.value) == pytest.approx(-1.58, abs=5e-3)

    def test_poles_and_half_power(self) -> None:
        """Roots of 1 + 300e-6 s + 1e-8 s^2 and of 1.2 + 310e-6 s + 1e-8 s^2, by the quadratic formula."""
        assert self.found.function is not None
        shifts = [
            (p.before.value.real, p.after.value.real)
            for p in self.found.function.poles
            if p.before and p.after
        ]
        assert [x for pair in shifts for x in pair] == pytest.approx(
            [
                (-3e-4 + 5e-8**0.5) / 2e-8,
                (-3.1e-4 + 4.81e-8**0.5) / 2e-8,
                (-3e-4 - 5e-8**0.5) / 2e-8,
                (-3.1e-4 - 4.81e-8**0.5) / 2e-8,
            ]
        )
        before, after = self.found.function.half_power
        assert before is not None
        assert after is not None
        assert before[0].f == pytest.approx(595.6, abs=0.05)  # 0.3742/(2 pi RC)
        assert after[0].f > before[0].f


def test_equal_networks() -> None:
    found = compare(BARE, sn.network(BARE.to_text()))
    assert not found
    assert found.same_function
    assert repr(found) == "<Comparison: nothing changed>"


def test_another_value_changes_numbers_and_no_formula() -> None:
    found = compare(BARE, BARE.with_values(R1="2k"))
    assert found
    assert found.same_function is False
    c = coefficient(found, "D", 1)
    assert c.change is not None
    assert not c.change.num
    assert not c.unchanged
    assert c.numbers == (Fraction(3, 10**4), Fraction(5, 10**4))


def test_another_drawing_with_the_same_function() -> None:
    """Two resistors of 500 ohm in series are one of 1 kohm, for H."""
    found = compare(BARE, BARE.without("R1").add("in -- Ra = 500 -- q -- Rb = 500 -- x"))
    assert found
    assert found.same_function


def test_a_removed_pole() -> None:
    found = compare(BARE, BARE.without("C2"))
    assert found.function is not None
    assert [pole.after is None for pole in found.function.poles].count(True) == 1
    c = coefficient(found, "D", 2)
    assert c.numbers is not None
    assert c.numbers[1] == 0
    assert c.relative == -1


def test_symbols_alone() -> None:
    names = dict.fromkeys(("R1", "R2", "C1", "C2"))
    found = compare(BARE.with_values(names), LOADED.with_values(names | {"RL": None}))
    assert repr(coefficient(found, "D", 1).change) == "<R1*R2*C1/RL>"
    assert found.function is not None
    assert found.function.half_power == (None, None)
    assert "need values for R1" in found.function.notes[0]


def test_numbers_beside_symbols() -> None:
    """One H with names and one with numbers alone stand in the same ring."""
    found = compare(sn.derive(BARE, symbols="C1"), sn.derive(LOADED, symbols=[]))
    assert coefficient(found, "D", 0).numbers == (Fraction(1), Fraction(6, 5))
    assert coefficient(found, "D", 1).change is not None


def test_transfers_to_different_nodes() -> None:
    found = compare(sn.derive(BARE), sn.derive(BARE, read="x"))
    assert found.changes.reads[1]
    assert found.same_function is False
    assert coefficient(found, "D", 1).unchanged
    assert repr(coefficient(found, "N", 1).change) == "<R2*C2>"


def test_another_unit_is_not_compared_term_by_term() -> None:
    found = compare(sn.derive(BARE), sn.derive(BARE, read="i_R1"))
    assert found.function is not None
    assert not found.function.coefficients
    assert found.function.notes[0].startswith("H is a number before and in S after")


def test_a_network_without_h_is_compared_as_drawn() -> None:
    found = compare(BARE, BARE.add("p -- Rp -- q"))
    assert found
    assert found.function is None
    assert found.same_function is None
    assert found.note.startswith("no H after")
    several = compare(BARE.add("read x"), LOADED.add("read x"))
    assert "several reads" in several.note
    assert compare(BARE.add("read x"), LOADED.add("read x"), read="x").function is not None


def test_values_without_a_single_solution_are_said() -> None:
    """A follower of gain 1 that feeds R1 from its own node leaves the node open."""
    loop = sn.network(
        "in -- R1 -- a; a -- R2 -- b; hold b = mu*a; push into a = g*a; g = 1 mS; R1, R2 = 1k; drive in; read a; mu = 2"
    )
    found = compare(loop.with_values(mu="1"), loop)
    assert found.same_function is None
    assert found.note.startswith("no H before: for these values")


def test_a_read_that_is_not_there() -> None:
    with pytest.raises(NotationError, match="no node or part called nowhere"):
        compare(BARE, LOADED, read="nowhere")


def test_h_of_many_terms_is_compared_in_numbers() -> None:
    text = "; ".join(f"n{k - 1} -- R{k} = 1k -- n{k} -- C{k} = 1n -- gnd" for k in range(1, 9))
    ladder = sn.network(f"{text}; drive n0; read n8")
    found = compare(ladder, ladder.with_values(R1="2k"))
    assert found.function is not None
    assert "in numbers only" in found.function.notes[0]
    assert not coefficient(found, "D", 1).unchanged
    symbols, fewer = (
        net.with_values(dict.fromkeys(net.part_names)) for net in (ladder, ladder.without("C2"))
    )
    bare = compare(symbols, fewer)
    assert bare.function is not None
    assert "more than 1000 terms" in bare.function.notes[0]
    assert bare.same_function is False


def test_values_for_which_a_factor_cancels() -> None:
    """R1 C1 = R2 C2: the compensated divider has no pole left in numbers; symbols are compared."""
    text = "in -- R1 || C1 -- out -- R2 || C2 -- gnd; R1, R2 = 1k; C1 = 1n; drive in; read out"
    found = compare(sn.network(text + "; C2 = 1n"), sn.network(text + "; C2 = 2n"))
    assert found.function is not None
    assert "factors of H cancel" in found.function.notes[0]
    assert found.same_function is False


def test_a_zero_h_and_an_infinite_gain() -> None:
    integrator = sn.network(
        "in -- R1 = 1k -- m -- C1 = 1u -- out; U1: opamp(plus=gnd, minus=m, out=out); drive in; read out"
    )
    found = compare(integrator, integrator.add("m -- R2 = 1M -- out"))
    assert found.function is not None
    assert found.function.gains[0].before is None
    assert found.function.gains[0].after is not None
    assert found.function.gains[0].after.value == -1000
    cut = sn.network("in -- R1 = 1k -- gnd; out -- R2 = 1k -- gnd; drive in; read out")
    joined = cut.add("in -- R3 = 1k -- out")
    nothing = compare(cut, joined)
    assert nothing.same_function is False
    assert nothing.function is not None
    assert nothing.function.half_power[0] is None


@pytest.mark.parametrize("seed", range(12))
def test_shuffled_lines_and_new_node_names_change_no_h(seed: int) -> None:
    """H is a property of the graph; the drawing differs in names of nodes at most."""
    net = passive(seed).add("drive n1", "read n5")
    lines = net.to_text().splitlines()
    Random(seed).shuffle(lines)
    shuffled = sn.network("\n".join(lines))
    assert not compare(net, shuffled)
    renamed = compare(net, sn.network(shuffled.to_text().replace("n3", "p3").replace("n5", "p5")))
    assert renamed.same_function
    assert set(renamed.changes.renamed) == {("n3", "p3"), ("n5", "p5")}
    assert not renamed.changes.moved
    assert not any(renamed.changes.reads)


@pytest.mark.parametrize("seed", range(12))
def test_change_is_after_minus_before(seed: int) -> None:
    """In every row before + change = after, and the rows are H: N/D before and after, exactly."""
    net = passive(seed).add("drive n1", "read n5")
    more = net.add("n5 -- Rnew = 3k -- gnd", "n2 -- Cnew = 5n -- n4")
    found = compare(net, more).function
    assert found is not None
    for which, H in enumerate((found.before, found.after)):
        sides: dict[str, list[Fraction]] = {}
        for side in ("N", "D"):
            rows = {c.power: c.numbers[which] for c in found.coefficients if c.side == side and c.numbers}
            sides[side] = [rows.get(k, Fraction(0)) for k in range(max(rows, default=-1) + 1)]
        if found.coefficients and all(c.numbers for c in found.coefficients):
            assert Ratio.of(sides["N"], sides["D"]) == H.numeric()
    values = {**found.before.values, **found.after.values}
    for c in found.coefficients:
        if c.change is not None and c.numbers is not None:
            assert c.change.value(values) == pytest.approx(
                float(c.numbers[1] - c.numbers[0]), rel=1e-12, abs=0
            )
    assert not compare(net, more.without("Rnew", "Cnew"))
