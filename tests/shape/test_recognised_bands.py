"""Every family in every band, with centre and bandwidth; what is no transformed low-pass; all-passes, shelves, products."""

from __future__ import annotations

import math
from collections.abc import Sequence
from fractions import Fraction

import numpy as np
import pytest

from symnet.errors import NotationError
from symnet.exact.ratio import Ratio
from symnet.shape.families import CATALOGUE, Prototype
from symnet.shape.families.bessel import bessel
from symnet.shape.families.butterworth import butterworth
from symnet.shape.families.chebyshev import chebyshev
from symnet.shape.families.family import build
from symnet.shape.recognise import Recognition, recognise
from symnet.shape.undoing import views

#: One member of each family at orders 3 and 4, its parameters in the middle of what tables offer.
TYPICAL = {"ripple": 0.5, "attenuation": 45.0, "phase error": 0.2, "m": 0.4}
MEMBERS = [
    build(family, order, tuple(TYPICAL[p.name] for p in family.parameters(order)), exact=False)
    for family in CATALOGUE
    for order in (3, 4)
    if family.has_order(order)
]

CENTRE = 2 * math.pi * 1000.0


def verdict(
    poles: Sequence[complex] | None = None, zeros: Sequence[complex] = (), h: Ratio | None = None
) -> Recognition:
    found = recognise(h) if h is not None else recognise(poles=poles, zeros=zeros)
    assert isinstance(found, Recognition)
    return found


def is_told(found: Recognition, made: Prototype) -> None:
    assert found.match is not None, found.verdict
    assert found.match.prototype.family == made.family
    assert found.match.prototype.order == made.order
    assert found.match.response_error_db < 1e-6
    for wanted, setting in zip(made.settings, found.match.prototype.settings, strict=True):
        assert setting.value == pytest.approx(wanted.value, rel=1e-5)


class TestEveryFamily:
    @pytest.mark.parametrize("made", MEMBERS, ids=str)
    def test_as_a_high_pass(self, made: Prototype) -> None:
        turned = made.scaled("w3dB", CENTRE).high_pass()
        found = verdict(turned.poles, turned.zeros)
        is_told(found, made)
        assert found.band == "high-pass"

    @pytest.mark.parametrize("percent", [10, 50, 200])
    @pytest.mark.parametrize("made", MEMBERS, ids=str)
    def test_as_a_band_pass(self, made: Prototype, percent: int) -> None:
        width = CENTRE * percent / 100
        turned = made.band_pass(f0="1 kHz", bandwidth=f"{percent} %")
        found = verdict(turned.poles, turned.zeros)
        is_told(found, made)
        assert found.band == "band-pass"
        assert found.centre is not None
        assert found.bandwidth is not None
        assert found.centre.f == pytest.approx(1000, rel=1e-7)
        assert found.bandwidth.w == pytest.approx(width, rel=1e-6)
        assert "centre 1 kHz" in found.verdict

    @pytest.mark.parametrize("percent", [10, 50, 200])
    @pytest.mark.parametrize("made", MEMBERS, ids=str)
    def test_as_a_band_stop(self, made: Prototype, percent: int) -> None:
        width = CENTRE * percent / 100
        turned = made.band_stop(f0="1 kHz", bandwidth=f"{percent} %")
        found = verdict(turned.poles, turned.zeros)
        is_told(found, made)
        assert found.band == "band-stop"
        assert found.centre is not None
        assert found.bandwidth is not None
        assert found.centre.f == pytest.approx(1000, rel=1e-7)
        assert found.bandwidth.w == pytest.approx(width, rel=1e-6)


class TestTheLowPassBehind:
    def test_unequal_pole_pairs_are_no_transformed_low_pass(self) -> None:
        """Two resonators of equal bandwidth in Hz, far apart: p + 1/p of one does not fit the other."""
        pairs = [(0.7, 8.0), (1.45, 3.0)]
        poles = [
            complex(-w / (2 * q), s * w * math.sqrt(1 - 1 / (4 * q * q))) for w, q in pairs for s in (1, -1)
        ]
        found = verdict(poles, [0, 0])
        assert found.misfit_percent > 10
        assert not found
        assert dict(found.rows())["transformed low-pass"].startswith("no: pole pairs differ by up to")

    def test_unequal_slopes_have_none(self) -> None:
        found = verdict(bessel(3).scaled("w3dB", 1.0).poles, [0])
        assert "a band-pass (one zero at s = 0, 2 zeros at infinite frequency) that is no transformed" in str(
            found
        )

    def test_real_poles_of_a_wide_band_pass(self) -> None:
        """Bandwidth 600 %: the real pole of the low-pass becomes two real poles, and is found again."""
        made = chebyshev(3, "1 dB").band_pass(f0="1 Hz", bandwidth="600 %")
        assert sum(not p.imag for p in made.poles) == 2
        (view,) = (v for v in views(made.poles, made.zeros) if v.band == "band-pass")
        assert view.misfit_percent < 1e-9
        scale = chebyshev(3, "1 dB").scaled("w0", 1.0).poles
        assert sorted(view.prototype, key=lambda p: p.imag) == pytest.approx(
            sorted(scale, key=lambda p: p.imag), rel=1e-9
        )

    def test_second_orders(self) -> None:
        s = [Fraction(0), Fraction(1, 10)]
        assert str(verdict(h=Ratio.of(s, [1, Fraction(1, 10), 1]))).startswith(
            "second order, band-pass: f0 = 159.15 mHz, Q = 10, -3.0103 dB bandwidth f0/Q = 15.915 mHz"
        )
        assert str(verdict(h=Ratio.of([1, 0, 1], [1, Fraction(1, 2), 1]))).startswith(
            "second order, band-stop: f0 = 159.15 mHz, Q = 2"
        )

    def test_parts_a_little_off(self) -> None:
        """Poles moved by 0.1 %: 1 % of the low-pass poles at 10 % bandwidth, and the centre is still told."""
        made = butterworth(3).band_pass(f0="1 kHz", bandwidth="10 %")
        rng = np.random.default_rng(4)
        upper = [
            complex(p * (1 + 1e-3 * np.exp(2j * np.pi * rng.random()))) for p in made.poles if p.imag > 0
        ]
        found = verdict([*upper, *(p.conjugate() for p in upper)], made.zeros)
        assert found.match is not None
        assert found.match.prototype.family == "Butterworth"
        assert found.match.prototype.reference("centre").f == pytest.approx(1000, rel=2e-3)
        assert "exactly" not in found.verdict
        assert 0 < found.misfit_percent < 5


class TestOtherBands:
    def test_all_pass_is_the_pade_approximant(self) -> None:
        """exp(-sT) with 3 poles and 3 zeros: (120 - 60 x + 12 x^2 - x^3)/(120 + 60 x + 12 x^2 + x^3), x = sT."""
        found = verdict(h=Ratio.of([120, -60, 12, -1], [120, 60, 12, 1]))
        assert found.verdict.startswith("all-pass, D(s) of Bessel, order 3, exactly (the Pade approximant")
        assert "T = 1 s of delay at DC" in found.verdict
        assert found.band == "all-pass"

    def test_all_pass_of_low_order(self) -> None:
        assert str(verdict(h=Ratio.of([1, -1], [1, 1]))).startswith("first order, all-pass: f0 = 159.15 mHz")
        second = verdict(h=Ratio.of([1, -1, 1], [1, 1, 1]))
        assert second.verdict.startswith("second order, all-pass; f0 = 159.15 mHz, Q = 1, T = 2 s")

    def test_nearly_an_all_pass(self) -> None:
        found = verdict(bessel(2).poles, [-1.01 * p for p in bessel(2).poles])
        assert found.verdict.startswith("nearly an all-pass")
        assert dict(found.rows())["mirrored"].startswith("zeros within 1 % of the mirrored poles")

    def test_shelf(self) -> None:
        """(1 + s tau1)/(1 + s tau2): 0 dB, then 20 dB more from tau1 to tau2."""
        found = verdict(h=Ratio.of([1, 1], [1, Fraction(1, 10)]))
        assert found.verdict == (
            "shelving, order 1: 0 dB at DC, 20 dB at infinite frequency (high shelf raised by 20 dB)"
        )
        assert [label for label, _ in found.notes] == ["zero", "pole"]

    def test_peak(self) -> None:
        found = verdict(h=Ratio.of([1, 2, 1], [1, Fraction(1, 2), 1]))
        assert found.verdict.startswith("peaking, order 2: 0 dB at both ends, 12.04 dB at f0 = 159.15 mHz")

    def test_a_product_of_two_filters(self) -> None:
        """A high-pass at 300 rad/s and a low-pass at 6 krad/s that know nothing of each other."""
        high = butterworth(2).scaled("w3dB", 300.0).high_pass()
        low = bessel(3).scaled("w3dB", 6000.0)
        found = verdict([*high.poles, *low.poles], high.zeros)
        said = dict(found.rows())["a product"]
        assert said.startswith("Butterworth, order 2, high-pass (f3dB = 47.746 Hz), times Bessel, order 3")

    def test_equal_sections(self) -> None:
        found = verdict([*chebyshev(2, "1 dB").poles] * 2)
        assert dict(found.rows())["equal sections"].startswith("2 equal sections, each Chebyshev, order 2")


class TestWhatIsGiven:
    def test_numerator_and_denominator(self) -> None:
        made = chebyshev(3, "0.5 dB").high_pass()
        found = recognise([1, 2, 2, 1], numerator=[1, 0, 0, 0])
        assert isinstance(found, Recognition)
        assert found.verdict == "Butterworth, order 3, high-pass, exactly"
        again = verdict(made.poles, made.zeros)
        assert again.match is not None
        assert again.match.prototype.family == "Chebyshev"

    def test_refusals(self) -> None:
        with pytest.raises(NotationError, match="without its conjugate"):
            recognise(poles=[-1 + 1j])
        with pytest.raises(NotationError, match="nothing to recognise"):
            recognise()
        with pytest.raises(NotationError, match="not by two of them"):
            recognise([1, 1], poles=[-1])
        with pytest.raises(NotationError, match="finite numbers"):
            recognise(poles=[float("nan")])
        with pytest.raises(NotationError, match="goes with the coefficients"):
            recognise(Ratio.of([1], [1, 1]), numerator=[1])

    def test_what_would_have_to_change(self) -> None:
        """One pair of a Butterworth filter of order 4 with Q 4 % too high: that section is named first."""
        poles = [complex(p) for p in butterworth(4).poles if p.imag > 0]
        q = 1.3066 * 1.04
        poles[-1] = complex(-1 / (2 * q), math.sqrt(1 - 1 / (4 * q * q)))
        found = verdict([*poles, *(p.conjugate() for p in poles)])
        assert found.match is not None
        assert found.match.prototype.family == "Butterworth"
        worst = found.changes()[0]
        assert worst.q == pytest.approx(q)
        assert worst.wanted_q == pytest.approx(1.3066, abs=1e-4)
