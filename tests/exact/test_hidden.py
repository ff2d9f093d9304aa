"""Hidden modes: what the wiring finds is what algebra finds; parts, reasons, and long common factors."""

from __future__ import annotations

from fractions import Fraction

import pytest

import symnet as sn
from symnet.exact.derive import quotient_of
from symnet.exact.hidden import Reason
from tests import oracle
from tests.networks import seeded


@pytest.mark.parametrize("seed", range(0, 120, 3))
def test_modes_found_by_the_wiring_are_those_of_the_gcd(seed: int) -> None:
    """Law: lowest terms are unique; N and D whole, reduced by algebra alone, give the same H and the same factors."""
    sketch = seeded(seed, rational=False, single=True)
    try:
        oracle.transfer_exact(sketch.drawing, {**sketch.values, "s": Fraction(104729, 7)})
    except oracle.NoSolutionError:
        return
    H = sn.derive(sn.network(sketch.text))
    _, whole = quotient_of(H.network, H.drive, H.read)
    assert whole.aside == ()
    assert (whole.lowest.numerator, whole.lowest.denominator) == (H.numerator, H.denominator)
    found = sorted(str(mode.factor) for mode in H.hidden)
    assert found == sorted(str(factor) for factor in whole.lowest.hidden)


# these took 10 and 20 seconds with a gcd of the polynomials: common factors of two or three terms in 10 to 30 thousand
@pytest.mark.parametrize(("seed", "rational"), [(11094, True), (11077, True)])
def test_a_short_common_factor_of_long_polynomials_is_found(seed: int, rational: bool) -> None:
    sketch = seeded(seed, rational=rational, single=False, least_nodes=7, most_nodes=15, links=(3, 6))
    H = sn.derive(sn.network(sketch.text))
    assert any(mode.factor is not None and len(mode.factor) > 1 for mode in H.hidden)
    ratio = H.numeric()
    s = Fraction(104729, 7)
    assert ratio.at(s) == oracle.transfer_exact(sketch.drawing, {**sketch.values, "s": s})


def hidden(text: str) -> list[tuple[str, tuple[str, ...], Reason]]:
    H = sn.derive(sn.network(text))
    return [(str(mode.factor), mode.parts, mode.reason) for mode in H.hidden]


def test_a_factor_that_shares_its_names_with_the_rest() -> None:
    """Two equal low-passes at one source: the one that is not read is a factor in the very names of H."""
    text = "in -- R1 -- a -- C1 -- gnd; in -- R2 -- b -- C2 -- gnd; drive in; read a; R1, R2 = R; C1, C2 = C"
    assert hidden(text) == [("s*R*C + 1", ("R2", "C2"), Reason.UNSEEN)]


def test_a_mode_that_only_ties_hide() -> None:
    """The compensated divider (needs.md N32): the natural frequency -1/(R1 C1)."""
    text = "in -- R1 || C1 -- out -- R2 || C2 -- gnd; drive in; read out; C2 = R1*C1/R2"
    ((factor, parts, reason),) = hidden(text)
    assert (factor, reason) == ("s*R1*C1 + 1", Reason.CANCELS)
    assert set(parts) == {"R1", "C1", "C2"}


def test_a_loop_of_inductors_keeps_its_current() -> None:
    text = "in -- L1 -- a -- L2 -- gnd; in -- L3 -- gnd; a -- R1 -- gnd; drive current into in; read a"
    assert hidden(text) == [("s", ("L1", "L2", "L3"), Reason.STAYS)]


def test_values_that_make_a_part_aside_singular_are_refused() -> None:
    """R3 = -R4 leaves node c open: the network has no single solution although H does not see it."""
    text = "in -- R1 -- out -- R2 -- gnd; hold b = out; b -- R4 -- c -- R3 -- gnd; drive in; read out"
    H = sn.derive(sn.network(text)).with_values(R1="1k", R2="1k", R3="1k", R4="-1 kohm")
    with pytest.raises(sn.SymnetError, match="for these values"):
        H.numeric()
