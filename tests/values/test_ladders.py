"""Ladders between resistors, from the poles alone: all sets, the printed ones among them, and why there are none."""

from __future__ import annotations

from fractions import Fraction
from typing import Any

import mpmath
import pytest

import symnet as sn
from symnet.errors import LimitError, UndefinedError
from symnet.values.ladders import LadderSet, doubly_terminated, singly_terminated
from tests.reference.cases import Ladder
from tests.reference.test_element_tables import EXACT_SCALE, SCALE, printed, prototype

BESSEL_5 = (945, 945, 420, 105, 15, 1)  # W. E. Thomson, Proc. IEE 96 (1949): the reverse Bessel polynomial


def polynomial(case: Ladder) -> list[Any]:
    """D of the family at the reference of the table, ascending, to a hundred digits."""
    made, reference = prototype(case)
    with mpmath.workdps(110):
        out = [mpmath.mpf(1)]
        for pole in made.precise(100)[0]:
            p = pole / made.reference(reference).w
            out = [a - p * b for a, b in zip([0, *out], [*out, 0], strict=True)]
        return [mpmath.re(c) for c in out]


def sets(case: Ladder) -> tuple[LadderSet, ...]:
    """All ladders that the drawing of the table and its family have."""
    values = sn.derive(sn.network(case.text)).values
    if "Rs" not in values:
        return singly_terminated(polynomial(case), load=Fraction(values["RL"]))
    source, load = Fraction(values["Rs"]), Fraction(values["RL"])
    ripple: Any = case.ripple_db
    with mpmath.workdps(120):
        if (
            ripple and case.order % 2 == 0
        ):  # RL/Rs = (sqrt(1 + e^2) - e)^2, or its inverse: printed with four digits
            e = mpmath.sqrt(mpmath.mpf(10) ** (mpmath.mpf(str(ripple)) / 10) - 1)
            low = (mpmath.sqrt(1 + e * e) - e) ** 2
            load = low if load < source else 1 / low
        first_in_series = "L1" in {part.name for part in sn.network(case.text).parts}
        return doubly_terminated(polynomial(case), source=source, load=load, series_first=first_in_series)


@pytest.mark.parametrize("case", EXACT_SCALE, ids=lambda case: case.id)
def test_the_printed_set_is_among_those_found(case: Ladder) -> None:
    found = sets(case)
    slack = SCALE if "3dB" in case.id else 0
    want = printed(case)
    assert any(
        all(abs(v - x) < 1.5 * 10.0**-n + slack * x for (v, n), x in zip(want, one.elements, strict=True))
        for one in found
    )
    assert all(one.error < 1e-15 for one in found)


@pytest.mark.parametrize("series_first", [True, False])
def test_bessel_5_between_equal_resistors_has_two_sets_and_their_mirror_images(*, series_first: bool) -> None:
    found = doubly_terminated(BESSEL_5, source=1, load=1, series_first=series_first)
    assert len(found) == 4
    for one in found:  # reciprocity: a ladder between equal resistors may be turned round
        assert any(other.elements == pytest.approx(one.elements[::-1], rel=1e-14) for other in found)
    assert len({round(one.spread, 9) for one in found}) == 2


@pytest.mark.parametrize("series_first", [True, False])
def test_the_network_has_the_response_that_its_elements_are_for(*, series_first: bool) -> None:
    """D of the exact derivation, with 600 ohm and 250 ohm, against 945 ... 1."""
    for one in doubly_terminated(BESSEL_5, source=600, load=250, series_first=series_first):
        x = [f"{v!r}" for v in one.elements]
        text = (
            f"in -- Rs + L1 -- a -- L3 -- b -- L5 -- out; a -- C2 -- gnd; b -- C4 -- gnd; out -- RL -- gnd\n"
            f"L1 = {x[0]} H; C2 = {x[1]} F; L3 = {x[2]} H; C4 = {x[3]} F; L5 = {x[4]} H"
            if series_first
            else f"in -- Rs -- a -- L2 -- b -- L4 -- out; a -- C1 -- gnd; b -- C3 -- gnd; out -- C5 || RL -- gnd\n"
            f"C1 = {x[0]} F; L2 = {x[1]} H; C3 = {x[2]} F; L4 = {x[3]} H; C5 = {x[4]} F"
        )
        H = sn.derive(sn.network(text + "\nRs = 600 ohm; RL = 250 ohm\ndrive in; read out")).numeric()
        for w in (0.5, 2.0, 5.0):
            want = 945 / sum(c * (1j * w) ** k for k, c in enumerate(BESSEL_5)) * 250 / 850
            assert complex(H(1j * w)) == pytest.approx(want, rel=1e-10)


@pytest.mark.parametrize(
    ("denominator", "room"),
    [
        ((1, 1, 1), "0.000 dB"),  # Q = 1: |H| peaks 1.25 dB above DC, 10 log10(4/3)
        ((16, 4, 2, 1), "0.000 dB"),
    ],
)
def test_a_response_that_rises_above_dc_has_no_ladder_between_equal_resistors(
    denominator: tuple[int, ...], room: str
) -> None:
    with pytest.raises(UndefinedError, match=f"rises further above its value at DC .* {room}"):
        doubly_terminated(denominator, source=1, load=1, series_first=True)


def test_with_unequal_resistors_it_may_rise() -> None:
    """Q = 1 needs 4 Rs RL/(Rs + RL)^2 <= 3/4, that is RL/Rs >= 3 or <= 1/3."""
    assert doubly_terminated((1, 1, 1), source=1, load=4, series_first=True)
    with pytest.raises(UndefinedError, match="Make Rs and RL more unequal"):
        doubly_terminated((1, 1, 1), source=1, load=2, series_first=True)


def test_a_denominator_with_roots_on_the_right_is_none_of_a_ladder() -> None:
    with pytest.raises(UndefinedError, match="roots on the right"):
        singly_terminated((1, 1, 1, 2), load=1)


def test_beyond_order_20_the_shares_are_too_many() -> None:
    with pytest.raises(LimitError, match="Order 21"):
        doubly_terminated((1,) * 22, source=1, load=1, series_first=True)
