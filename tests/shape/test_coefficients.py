"""Both H are divided so that as little as possible differs, and the rows keep their units."""

from __future__ import annotations

from fractions import Fraction

import pytest

import symnet as sn
from symnet.errors import LimitError
from symnet.quantities import NUMBER, OHM, SECOND
from symnet.shape.coefficients import SideBySide

DIVIDER = "in -- R1 -- out -- R2 -- gnd; out -- C1 -- gnd; drive in; read out"


def pair(before: str, after: str) -> SideBySide:
    return SideBySide.of(*(sn.derive(sn.network(text)) for text in (before, after)))


@pytest.mark.parametrize(
    ("after", "normalised"),
    [
        (DIVIDER, "the constant term of D is 1"),
        # R2 gone: N and D = R1 + R2 + s R1 R2 C1 lose the factor R2, and 1 + R1/R2 the term R1/R2
        ("in -- R1 -- out -- C1 -- gnd; drive in; read out", "the constant term of N is 1"),
        # an inductor before R1: N stays R2, D gets s L and s^2 L R2 C1
        (
            "in -- L -- q -- R1 -- out -- R2 -- gnd; out -- C1 -- gnd; drive in; read out",
            "the constant term of D is 1",
        ),
    ],
)
def test_the_normalisation_that_leaves_most_unchanged(after: str, normalised: str) -> None:
    said, rows = pair(DIVIDER, after).best()
    assert said == normalised
    assert any(row.unchanged for row in rows)


def test_n_and_d_without_constant_terms_in_common() -> None:
    """s R1 C1/(1 + s R1 C1) beside s^2 L1 C1/(1 + s L1/R1 + s^2 L1 C1): by hand, D from 1 on."""
    first = "in -- C1 -- out -- R1 -- gnd; drive in; read out"
    said, rows = pair(first, first + "; out -- L1 -- gnd").best()
    assert said == "the constant term of D is 1"
    assert {(row.side, row.power): repr(row.change) for row in rows} == {
        ("N", 1): "<-R1*C1>",
        ("N", 2): "<L1*C1>",
        ("D", 0): "<0>",
        ("D", 1): "<-(R1*C1 - L1/R1)>",
        ("D", 2): "<L1*C1>",
    }


def test_another_power_is_taken_where_constant_terms_are_missing() -> None:
    """1/(s R1 C1) beside (1 + s R2 C1)/(s R1 C1): no constant term in D, so the coefficient of s."""
    text = "in -- R1 -- m -- {} -- out; U1: opamp(plus=gnd, minus=m, out=out); drive in; read out"
    said, rows = pair(text.format("C1"), text.format("(C1 + R2)")).best()
    assert said == "the coefficient of s of D is 1"
    assert [(row.side, row.power) for row in rows if not row.unchanged] == [("N", 1)]


def test_units_of_an_impedance() -> None:
    """1/(1/R1 + s C1) with R2 beside it: with N = 1, D is an admittance, and 1/R2 is added to it."""
    text = "drive current into a; a -- R1 = 2 -- gnd; a -- C1 = 3 -- gnd; read a"
    said, rows = pair(text, text + "; a -- R2 = 2 -- gnd").best()
    assert said == "the constant term of N is 1"
    units = {(row.side, row.power): row.before.dimension for row in rows}
    assert units == {("N", 0): NUMBER, ("D", 0): NUMBER / OHM, ("D", 1): SECOND / OHM}
    one, half, three = Fraction(1), Fraction(1, 2), Fraction(3)
    assert [row.numbers for row in rows] == [(one, one), (half, one), (three, three)]
    assert repr(rows[1].change) == "<1/R2>"


def test_gains_at_both_ends() -> None:
    """R2/(R1 + R2) = 2/5 at DC, with C1 across R1 and all of the input at high frequency."""
    text = "in -- R1 = 3 -- out -- R2 = 2 -- gnd; drive in; read out"
    dc, high = pair(text, text + "; in -- C1 = 1 -- out").gains()
    assert dc.before is not None
    assert dc.after is not None
    assert high.after is not None
    assert (dc.before.value, dc.after.value, high.after.value) == (0.4, 0.4, 1.0)


def test_many_terms_without_numbers_are_refused() -> None:
    text = "; ".join(f"n{k - 1} -- R{k} -- n{k} -- C{k} -- gnd" for k in range(1, 9)) + "; drive n0; read n8"
    with pytest.raises(LimitError, match="more than 1000 terms"):
        pair(text, text)
