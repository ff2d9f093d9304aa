"""Table coefficients that know their reference; denormalised ones are refused with what they should be (N17)."""

from __future__ import annotations

import math

import pytest

from symnet.errors import NotationError, UnknownNameError
from symnet.shape.families.bessel import bessel
from symnet.shape.families.butterworth import butterworth
from symnet.shape.families.chebyshev import chebyshev
from symnet.shape.families.critically_damped import critically_damped
from symnet.shape.families.second_order import first_order
from symnet.shape.families.tabled import table_section, table_sections
from tests.reference import families as published
from tests.reference.families_without_ripple import CRITICALLY_DAMPED


class TestPublishedTables:
    @pytest.mark.parametrize("row", published.SECTIONS, ids=lambda row: row.id)
    def test_sections(self, row: published.Sections) -> None:
        made = {"butterworth": butterworth, "bessel": bessel}[row.family](row.order).at(f3dB="1 kHz")
        found = table_sections(made)
        assert len(found) == len(row.sections)
        for section, (a, b, q) in zip(found, row.sections, strict=True):
            assert (section.a, section.b) == pytest.approx((a, b), abs=row.within)
            assert section.q == (None if q is None else pytest.approx(q, abs=row.q_within))
            assert section.reference == "-3.0103 dB relative to DC"
            assert section.w == pytest.approx(2000 * math.pi)

    @pytest.mark.parametrize("row", CRITICALLY_DAMPED, ids=lambda row: row.id)
    def test_critically_damped(self, row: published.Sections) -> None:
        """Tables pair the equal poles; here each stands alone, so a pair is the square of one factor."""
        ((a, b, _),) = row.sections
        one = table_sections(critically_damped(row.order))[0]
        assert (2 * one.a if b else one.a) == pytest.approx(a, abs=row.within)
        assert (one.a**2 if b else 0.0) == pytest.approx(b, abs=row.within)


class TestDenormalised:
    """Multiple-feedback low-pass for a 3 dB Chebyshev filter of order 2 with its ripple edge at 1.5 kHz (D9)."""

    def test_what_should_have_been_typed(self) -> None:
        words = (
            r"these look denormalised \(w0 = 7930 rad/s\); "
            r"normalised they are a = 0\.91094, b = 1\.41253, gain = -0\.70795"
        )
        with pytest.raises(NotationError, match=words):
            table_section("6078.04", "62884481", "-44518803", f="1.5 kHz")

    def test_it_is_the_chebyshev_row(self) -> None:
        made = chebyshev(2, "3 dB").at(ripple_edge="1.5 kHz")
        (row,) = table_sections(made, "ripple_edge")
        assert (row.a, row.b) == pytest.approx((0.910942, 1.412538), abs=1e-5)
        assert made.gain == pytest.approx(0.70795, abs=1e-5)
        typed = table_section("0.91094", "1.41253", "-0.70795", f="1.5 kHz")
        assert typed.w0 == pytest.approx(7930, abs=0.5)
        assert typed.denormalised()[1] == pytest.approx(1 / 62884481, rel=1e-5)

    @pytest.mark.parametrize(
        ("a", "b", "words"),
        [
            (9.6654e-5, 1.590217e-8, r"a = 0\.91094, b = 1\.41253.*of 1 \+ a s \+ b s\^2"),
            (1e-4, 0, r"a = 0\.94248\n.*of 1 \+ a s with"),
            (6078.04, 62884481, r"of s\^2 \+ a s \+ b with s in rad/s"),
            (1e9, 1e-20, "is the frequency of the table right"),
        ],
    )
    def test_both_ways_of_writing_it(self, a: float, b: float, words: str) -> None:
        with pytest.raises(NotationError, match=f"(?s){words}"):
            table_section(a, b, f="1.5 kHz")

    @pytest.mark.parametrize("order", range(1, 21))
    def test_no_row_of_a_table_is_taken_for_one(self, order: int) -> None:
        for made in (butterworth(order), bessel(order), chebyshev(order, "3 dB"), critically_damped(order)):
            for reference in made.references:
                for row in table_sections(made.at(f0="1 kHz"), reference.name):
                    assert table_section(row.a, row.b, w=f"{row.w!r} rad/s").w0 == pytest.approx(row.w0)


def test_moving_keeps_the_shape() -> None:
    (row,) = table_sections(first_order())
    moved = row.at(f="1 kHz")
    assert (moved.a, moved.b, moved.q) == (1.0, 0.0, None)
    assert moved.w0 == pytest.approx(2000 * math.pi)
    assert ("w0", "6283.19 rad/s, 1 kHz") in moved.rows()


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        ({}, "mean nothing without it"),
        ({"f": "1 kHz", "w": "1 krad/s"}, "mean nothing without it"),
        ({"f": "1000"}, "has no unit"),
        ({"f": "1 krad/s"}, "in Hz, not in rad/s"),
    ],
)
def test_reference_is_needed(arguments: dict[str, str], words: str) -> None:
    with pytest.raises(NotationError, match=words):
        table_section("1.4142", "1", **arguments)


@pytest.mark.parametrize(("a", "b"), [("0", "1"), ("-1", "1"), ("1", "-1"), (float("nan"), 1), ("x", 1)])
def test_coefficients_are_positive_numbers(a: str | float, b: str | float) -> None:
    with pytest.raises(NotationError):
        table_section(a, b, f="1 kHz")


def test_unknown_reference() -> None:
    with pytest.raises(UnknownNameError, match="ripple_edge"):
        table_sections(bessel(3), "ripple_edge")
