"""Prototypes against published tables and against their own definitions."""

from __future__ import annotations

import math
from collections.abc import Callable
from fractions import Fraction

import mpmath
import pytest

from symnet.errors import LimitError, NotationError, UnknownNameError
from symnet.shape.families import CATALOGUE, Prototype
from symnet.shape.families.bessel import bessel
from symnet.shape.families.butterworth import butterworth
from symnet.shape.families.chebyshev import chebyshev
from symnet.shape.families.family import LARGEST_ORDER, Family
from tests.reference import families as published

RIPPLES = ("0.01 dB", "0.5 dB", "1 dB", "3 dB")


def prototype(row: published.Row) -> Prototype:
    if row.family == "chebyshev":
        return chebyshev(row.order, row.ripple)
    return {"butterworth": butterworth, "bessel": bessel}[row.family](row.order)


def members(orders: range = range(1, 13)) -> list[Prototype]:
    fixed = [make(n) for n in orders for make in (butterworth, bessel)]
    return fixed + [chebyshev(n, ripple) for n in orders for ripple in RIPPLES]


def every(rows: tuple[published.Row, ...]) -> pytest.MarkDecorator:
    return pytest.mark.parametrize("row", rows, ids=[row.id for row in rows])


class TestPublishedTables:
    @every(published.POLYNOMIALS)
    def test_polynomial(self, row: published.Polynomial) -> None:
        found = prototype(row).denominator()
        if row.decimals == 0:
            assert prototype(row).exact == row.coefficients
            assert found == pytest.approx(row.coefficients, rel=1e-14)
        else:
            assert found == pytest.approx(
                row.coefficients, abs=0.6 * 10.0**-row.decimals
            )  # one digit is rounded wrongly

    @every(published.POLES)
    def test_poles(self, row: published.Poles) -> None:
        made = prototype(row)
        if row.scale:  # 3 dB at 1 rad/s, but for the error of scale that the row has
            made = made.scaled("w3dB", 1.0)
        upper = [complex(-s, w) for s, w in row.sigma_omega]
        everything = upper + [p.conjugate() for p in upper if p.imag]
        w0 = math.prod(map(abs, everything)) ** (1 / len(everything))
        k = w0 / made.reference("w0").w if row.scale else 1.0
        assert abs(k - 1) <= row.scale
        found = [p * k for p in made.poles if p.imag >= 0]
        for p in upper:
            assert min(abs(p - q) for q in found) <= row.within * abs(p)

    @every(published.SECTIONS)
    def test_sections(self, row: published.Sections) -> None:
        found = [
            (1 / w if q is None else 1 / (q * w), 0.0 if q is None else 1 / w**2, q)
            for w, q in _sections(row)
        ]
        assert len(found) == len(row.sections)
        for (a, b, q), (a_found, b_found, q_found) in zip(
            row.sections, sorted(found, key=_by_q), strict=True
        ):
            assert (a_found, b_found) == pytest.approx((a, b), abs=row.within)
            assert q_found is None if q is None else q_found == pytest.approx(q, abs=row.q_within)

    @every(published.SCALES)
    def test_3_db_frequency_of_unit_delay_bessel(self, row: published.Figure) -> None:
        assert bessel(row.order).reference("w3dB").w == pytest.approx(row.value, abs=row.within)

    @every(published.CHEBYSHEV_3_DB)
    def test_3_db_frequency_relative_to_the_peak(self, row: published.Figure) -> None:
        name = "w3dB" if row.order % 2 else "w3dB_peak"
        assert prototype(row).reference(name).w == pytest.approx(row.value, abs=row.within)

    @every(published.DELAYS_AT_DC)
    def test_delay_at_dc(self, row: published.Figure) -> None:
        made = prototype(row)
        assert made.delay(0.0) == pytest.approx(row.value, abs=row.within)
        assert made.reference("unit_delay").w == pytest.approx(1 / row.value, abs=row.within)


def _sections(row: published.Sections) -> tuple[tuple[float, float | None], ...]:
    return prototype(row).scaled("w3dB", 1.0).sections()


def _by_q(section: tuple[float, float, float | None]) -> float:
    return section[2] or 0.0


class TestDefinitions:
    @pytest.mark.parametrize("order", [*range(1, 13), 25, LARGEST_ORDER])
    def test_butterworth_is_flat(self, order: int) -> None:
        """|H(jw)|^2 = 1/(1 + w^(2n)) (Butterworth 1930)."""
        made = butterworth(order)
        for w in (0.3, 0.9, 1.0, 1.1, 2.0):
            assert abs(made(1j * w)) ** -2 == pytest.approx(1 + w ** (2 * order), rel=1e-11)

    @pytest.mark.parametrize("order", [*range(1, 13), 25])
    @pytest.mark.parametrize("ripple", ["0.001 dB", *RIPPLES, "12 dB"])
    def test_chebyshev_has_equal_ripples(self, order: int, ripple: str) -> None:
        """|H(jw)|^2 = 1/(1 + e^2 T_n(w)^2), e^2 = 10^(ripple/10) - 1."""
        e2 = 10 ** (float(ripple.removesuffix(" dB")) / 10) - 1
        made = chebyshev(order, ripple)
        for w in (0.0, 0.2, 0.77, 1.0, 1.3):
            t = math.cos(order * math.acos(w)) if w <= 1 else math.cosh(order * math.acosh(w))
            assert abs(made(1j * w)) ** -2 == pytest.approx(1 + e2 * t * t, rel=1e-9)

    @pytest.mark.parametrize("order", range(2, 6))
    def test_bessel_delay_is_flat(self, order: int) -> None:
        """The group delay is 1 - w^(2n)/(D(jw) D(-jw)) (Thomson 1949)."""
        made = bessel(order)
        assert made.exact is not None
        for w in (0.5, 1.0, 2.0, 4.0):
            d = sum(int(b) * (1j * w) ** k for k, b in enumerate(made.exact))
            assert made.delay(w) == pytest.approx(1 - w ** (2 * order) / abs(d) ** 2, rel=1e-13)

    @pytest.mark.parametrize("order", [1, 2, 10, 25, 40, LARGEST_ORDER])
    def test_bessel_poles_at_any_order(self, order: int) -> None:
        """Vieta: the sum of the poles and the sum of their inverses are exact integer ratios; nothing drifts with n."""
        made = bessel(order)
        b = made.exact
        assert b is not None
        assert math.fsum(p.real for p in made.poles) == pytest.approx(-int(b[-2]), rel=1e-14)
        assert math.fsum((1 / p).real for p in made.poles) == pytest.approx(-1.0, rel=1e-13)
        assert made.reference("unit_delay").w == 1.0

    @pytest.mark.parametrize("made", members(), ids=str)
    def test_every_reference_is_what_its_label_says(self, made: Prototype) -> None:
        dc = made.decibels(0.0)
        checks: dict[str, Callable[[float], float]] = {
            "w0": lambda w: math.prod(map(abs, made.poles)) ** (1 / made.order) - w,
            "w3dB": lambda w: made.decibels(w) - dc + 10 * math.log10(2),
            "w3dB_peak": lambda w: made.decibels(w) + 10 * math.log10(2),
            "ripple_edge": lambda w: made.decibels(w) + made.settings[0].value,
            "unit_delay": lambda w: made.delay(0.0) - 1 / w,
        }
        assert {r.name for r in made.references} >= {"w0", "w3dB", "unit_delay"}
        for reference in made.references:
            assert checks[reference.name](reference.w) == pytest.approx(0, abs=1e-10)
            assert reference.f == pytest.approx(reference.w / (2 * math.pi))
        if made.family == "Chebyshev":
            assert ("w3dB_peak" in {r.name for r in made.references}) == (made.order % 2 == 0)

    @pytest.mark.parametrize("order", range(1, 7))
    @pytest.mark.parametrize("make", [butterworth, bessel])
    def test_exact_coefficients(self, make: Callable[[int], Prototype], order: int) -> None:
        made = make(order)
        assert made.exact is not None
        assert [float(c) for c in made.exact] == pytest.approx(made.denominator(), rel=1e-14)

    def test_exact_coefficients_are_readable(self) -> None:
        assert str(butterworth(4).exact) == "(1, sqrt(2*sqrt(2) + 4), sqrt(2) + 2, sqrt(2*sqrt(2) + 4), 1)"
        assert str(butterworth(5).exact) == "(1, 1 + sqrt(5), sqrt(5) + 3, sqrt(5) + 3, 1 + sqrt(5), 1)"
        assert butterworth(7).exact is None

    def test_stage_qualities_of_a_cascade(self) -> None:
        """Order 4: Q = 0.5412 and 1.3066, in that order."""
        assert [q for _, q in butterworth(4).sections()] == pytest.approx([0.5412, 1.3066], abs=5e-5)


class TestConditions:
    """What a family says of its coefficients vanishes for its members and for nothing else that is near."""

    @pytest.mark.parametrize("order", range(2, 9))
    @pytest.mark.parametrize("family", CATALOGUE, ids=lambda f: f.name)
    def test_conditions_hold_for_members_only(self, family: Family, order: int) -> None:
        if not family.has_order(order) or family.finite_zeros(order):
            return  # conditions are about the denominator of an all-pole H
        values = tuple(p.at(0.6) for p in family.parameters(order))
        d = family.prototype(order, values).scaled("w0", 1.3).denominator()
        conditions = family.conditions(d)
        if conditions is None:
            return
        assert all(p > 0 for p in family.positives(d))
        assert len(conditions) == order - 1 - len(values)
        moved = family.conditions([c * (1.02 if k == 1 else 1) for k, c in enumerate(d)])
        assert moved is not None
        largest = max(map(abs, moved), default=0)
        assert all(abs(c) < 1e-6 * largest for c in conditions)
        assert not conditions or largest > 1e-4

    def test_bessel_conditions_are_exact(self) -> None:
        b = [Fraction(int(c)) * Fraction(3, 7) ** k for k, c in enumerate(bessel(9).exact or ())]
        family = next(f for f in CATALOGUE if f.name == "Bessel")
        assert family.conditions(b) == (0,) * 8


class TestLevels:
    """Even orders: whether a level counts from DC or from the ripple peak; 3 dB against 3.0103 dB."""

    @pytest.mark.parametrize("order", [2, 4, 7, 10])
    def test_3_db_of_ripple_and_half_power(self, order: int) -> None:
        """3.000 dB: the half-power frequency lies beyond the edge, cosh(acosh(1/e)/n); 3.0103 dB: they are one."""
        name = "w3dB" if order % 2 else "w3dB_peak"
        three = chebyshev(order, "3 dB").reference(name).w
        assert three == pytest.approx(math.cosh(math.acosh(1 / 0.9976283451109836) / order), rel=1e-12)
        assert three > 1 + 1e-5
        half = chebyshev(order, "3.010299956639812 dB").reference(name).w
        assert half == pytest.approx(1, abs=1e-14)

    @pytest.mark.parametrize("order", [2, 4, 8])
    def test_even_order_says_from_where_a_level_counts(self, order: int) -> None:
        made = chebyshev(order, "1 dB")
        dc, peak = made.reference("w3dB"), made.reference("w3dB_peak")
        assert dc.w > peak.w
        assert "relative to DC (a ripple minimum, 1 dB below the peak)" in dc.label
        assert "relative to the ripple peak" in peak.label
        assert "relative to the peak" in made.reference("ripple_edge").label


class TestScaling:
    def test_between_references(self) -> None:
        """Chebyshev 3, 0.5 dB: -3 dB at 1.1675 times the ripple edge; Bessel 3 at 1.7557/T."""
        made = chebyshev(3, "0.5 dB").scaled("w3dB", 2 * math.pi * 1e3)
        assert made.reference("w3dB").f == pytest.approx(1e3)
        assert made.reference("ripple_edge").f == pytest.approx(1e3 / 1.1675, rel=1e-4)
        assert made.decibels(2 * math.pi * 1e3) == pytest.approx(-10 * math.log10(2))
        back = made.scaled("ripple_edge", 1.0)
        assert back.poles == pytest.approx(chebyshev(3, "0.5 dB").poles, rel=1e-14)

    @pytest.mark.parametrize("made", members(range(1, 5)), ids=str)
    def test_high_pass_twice_inverts_everything(self, made: Prototype) -> None:
        turned = made.high_pass()
        assert turned.band == "high-pass"
        assert turned.zeros == (0j,) * made.order
        for w in (0.4, 1.0, 2.2):
            assert turned.decibels(1 / w) == pytest.approx(made.decibels(w), abs=1e-10)
        for before, after in zip(made.references, turned.references, strict=True):
            assert after.w == pytest.approx(1 / before.w)
        assert "DC" not in turned.reference("w3dB").label.partition(" (")[0]
        with pytest.raises(NotationError, match="is not a low-pass"):
            turned.high_pass()

    def test_prototypes_are_values(self) -> None:
        assert bessel(4) == bessel(4)
        assert len({bessel(4), bessel(4), butterworth(4), bessel(4).scaled("w3dB", 1.0)}) == 3


class TestRefusals:
    @pytest.mark.parametrize("order", [0, -1, 2.0, True, "3"])
    def test_order_is_a_whole_number(self, order: object) -> None:
        with pytest.raises(NotationError, match="whole number from 1 upwards"):
            butterworth(order)  # type: ignore[arg-type]

    def test_order_is_bounded(self) -> None:
        with pytest.raises(LimitError, match="61"):
            bessel(61)

    @pytest.mark.parametrize(
        "ripple", ["0.5", "0.5 %", "-1 dB", "dB", "", "0 dB", "13 dB", "nan dB", "1e400 dB"]
    )
    def test_ripple_is_in_db(self, ripple: str) -> None:
        with pytest.raises(NotationError, match="dB"):
            chebyshev(3, ripple)

    def test_ripple_of_zero_is_butterworth(self) -> None:
        with pytest.raises(NotationError, match="Butterworth"):
            chebyshev(3, "0 dB")

    def test_unknown_reference_names_the_known_ones(self) -> None:
        with pytest.raises(UnknownNameError, match="did you mean w3dB"):
            bessel(3).reference("w3db")
        with pytest.raises(UnknownNameError, match="ripple_edge"):
            bessel(3).scaled("ripple_edge", 1.0)

    @pytest.mark.parametrize("w", [0.0, -1.0, math.inf, math.nan])
    def test_scale_is_positive(self, w: float) -> None:
        with pytest.raises(NotationError, match="positive frequency"):
            bessel(3).scaled("w0", w)


class TestMoreDigits:
    """``precise`` gives as many digits as are asked for, and they are those of the doubles as far as these go."""

    @pytest.mark.parametrize("made", members(range(1, 13)), ids=str)
    def test_doubles_are_the_rounded_digits(self, made: Prototype) -> None:
        poles, zeros = made.precise(40)
        assert [complex(p) for p in poles] == pytest.approx(made.poles, rel=1e-15, abs=0)
        assert [complex(z) for z in zeros] == pytest.approx(made.zeros, rel=1e-15, abs=0)

    def test_a_ripple_is_taken_as_typed(self) -> None:
        """Chebyshev 1, 0.1 dB: the pole is -1/e with e^2 = 10^(1/100) - 1, one tenth being exact."""
        (pole,), _ = chebyshev(1, "0.1 dB").precise(60)
        with mpmath.workdps(70):
            wanted = -1 / mpmath.sqrt(mpmath.power(10, mpmath.mpf(1) / 100) - 1)
            assert abs(pole.real / wanted - 1) < mpmath.mpf(10) ** -59
        assert pole.imag == 0

    def test_digits_belong_to_the_scale_of_the_definition(self) -> None:
        with pytest.raises(NotationError, match="this one was scaled"):
            bessel(3).scaled("w3dB", 1.0).precise()
        with pytest.raises(LimitError, match="501 digits"):
            bessel(3).precise(501)
