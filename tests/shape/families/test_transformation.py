"""Prototypes at a stated frequency and in another band: references, labels, poles to full precision."""

from __future__ import annotations

import math

import mpmath
import numpy as np
import pytest
import scipy.signal

from symnet.errors import DimensionError, NotationError, UnknownNameError
from symnet.shape.families import Prototype
from symnet.shape.families.bessel import bessel
from symnet.shape.families.butterworth import butterworth
from symnet.shape.families.chebyshev import chebyshev
from symnet.shape.families.delays import first_order_all_pass
from symnet.shape.families.elliptic import elliptic
from symnet.shape.families.linkwitz_riley import linkwitz_riley

HALF_POWER = 10 * math.log10(2)
LOW_PASSES = (
    butterworth(1),
    butterworth(4),
    bessel(3),
    chebyshev(4, "1 dB"),
    chebyshev(5, "0.1 dB"),
    elliptic(5, "0.5 dB", "50 dB"),
    elliptic(4, "0.5 dB", "50 dB"),
)
BANDS = ((1000.0, 0.001), (1.0, 0.1), (6e4, 0.5), (1.0, 2.0), (3e3, 7.0))


def low_pass_variable(s: complex, centre: float, width: float, edge: float, band: str) -> complex:
    """The s of the low-pass that a band-pass or band-stop stands for at s."""
    ratio = (s * s + centre * centre) / (width * s)
    return edge * (ratio if band == "band-pass" else 1 / ratio)


class TestAtAFrequency:
    def test_by_any_reference(self) -> None:
        """Chebyshev 3, 0.5 dB: -3 dB at 1.1675 times the ripple edge; Bessel 3: -3 dB at 1.7557/T (N11, D10)."""
        made = chebyshev(3, "0.5 dB").at(f3dB="1 kHz")
        assert made.reference("f3dB").f == pytest.approx(1000, rel=1e-15)
        assert made.reference("ripple_edge").f == pytest.approx(1000 / 1.1675, rel=5e-5)
        claimed = bessel(3).at(delay="159.15494309 us")  # 1/(2 pi 1 kHz): this table has unit delay
        assert claimed.decibels(2 * math.pi * 1000) == pytest.approx(-0.903, abs=5e-4)
        assert claimed.reference("f3dB").f == pytest.approx(1755.7, abs=0.05)
        by_phase = bessel(3).at(f0="1 kHz")
        assert by_phase.decibels(2 * math.pi * 1000) == pytest.approx(-6.24, abs=5e-3)

    def test_hertz_and_radians_say_the_same(self) -> None:
        a, b = butterworth(3).at(f3dB="20 kHz"), butterworth(3).at(w3dB="125.66370614359172 krad/s")
        assert a.poles == pytest.approx(b.poles, rel=1e-15)
        edge = chebyshev(3, "1 dB")
        assert edge.at(ripple_edge="1 kHz").reference("ripple_edge").f == pytest.approx(1000)
        assert edge.at(ripple_edge="1 krad/s").reference("ripple_edge").w == pytest.approx(1000)

    def test_linkwitz_riley_is_told_by_minus_6_db(self) -> None:
        made = linkwitz_riley(4).at(f6dB="2.2 kHz")
        assert made.reference("f3dB").f == pytest.approx(2200 * (math.sqrt(2) - 1) ** 0.25)
        assert made.high_pass().reference("w6dB").label == "-6.0206 dB relative to infinite frequency"

    @pytest.mark.parametrize("low", LOW_PASSES, ids=str)
    @pytest.mark.parametrize("name", ["f3dB", "f0"])
    def test_a_high_pass_stays_where_the_low_pass_was_put(self, low: Prototype, name: str) -> None:
        """s -> u^2/s: the reference stays at u, and |H_high(j u x)| = |H_low(j u/x)|."""
        placed = low.at(**{name: "80 Hz"})
        high = placed.high_pass()
        assert high.reference(name).f == pytest.approx(80, rel=1e-14)
        for x in (0.3, 1.0, 2.5):
            u = 160 * math.pi
            assert high.decibels(u * x) == pytest.approx(placed.decibels(u / x), abs=1e-9)
        assert high.at(**{name: "1 kHz"}).reference(name).f == pytest.approx(1000)

    def test_a_crossover_adds_up_at_its_frequency(self) -> None:
        low = linkwitz_riley(4).at(f6dB="2.2 kHz")
        s = np.asarray(2j * math.pi * np.geomspace(20, 20e3, 31), dtype=np.complex128)
        assert np.abs(np.asarray(low(s)) + np.asarray(low.high_pass()(s))) == pytest.approx(
            np.ones(31), abs=1e-12
        )

    @pytest.mark.parametrize(
        ("arguments", "words"),
        [
            ({"f3dB": 20e3}, 'f3dB = 20000.0 carries no unit.*f3dB="20 kHz"'),
            ({"f3dB": "20000"}, "has no unit"),
            ({"f3dB": "20 nF"}, "has F as its unit"),
            ({"f3dB": "20 krad/s"}, 'in Hz, not in rad/s.*w3dB="20 krad/s"'),
            ({"w3dB": "20 kHz"}, 'in rad/s, not in Hz.*f3dB="20 kHz"'),
            ({"f3dB": "-1 kHz"}, "is positive"),
            ({"delay": "1 kHz"}, 'delay="50 us"'),
            ({"f3dB": "1 ms"}, "has s as its unit"),
            ({}, "at one frequency, not at 0"),
            ({"f3dB": "1 Hz", "f0": "1 Hz"}, "at one frequency, not at 2"),
            ({"ripple_edge": "1 kHz"}, "no frequency reference 'ripple_edge'"),
            ({"f3db": "1 kHz"}, "did you mean f3dB"),
        ],
    )
    def test_refusals(self, arguments: dict[str, str], words: str) -> None:
        with pytest.raises((NotationError, UnknownNameError), match=f"(?s){words}"):
            bessel(3).at(**arguments)


class TestBands:
    @pytest.mark.parametrize("low", LOW_PASSES, ids=str)
    @pytest.mark.parametrize(("centre", "part"), BANDS)
    @pytest.mark.parametrize("band", ["band-pass", "band-stop"])
    def test_h_is_that_of_the_low_pass(self, low: Prototype, centre: float, part: float, band: str) -> None:
        """H(s) = H_low(r (s^2 + w0^2)/(B s)), and with the inverse for a band-stop."""
        width = part * centre
        make = low.band_pass if band == "band-pass" else low.band_stop
        made = make(w0=f"{centre!r} rad/s", bandwidth=f"{width!r} rad/s")
        assert made.band == band
        assert made.order == low.order
        assert len(made.poles) == 2 * low.order
        assert all(p.real < 0 for p in made.poles)
        edge = low.reference("w3dB").w
        for s in (0.3j, 0.95j, (1 + part / 3) * 1j, 4j, 0.2 + 0.7j):
            at = s * centre
            # an error of 1 in the last place of s^2 + w0^2 counts 1/part times in a narrow band
            assert made(at) == pytest.approx(
                low(low_pass_variable(at, centre, width, edge, band)), rel=2e-13 + 3e-14 / part, abs=1e-30
            )

    @pytest.mark.parametrize(("centre", "part"), BANDS)
    @pytest.mark.parametrize("low", LOW_PASSES, ids=str)
    def test_poles_to_full_precision(self, low: Prototype, centre: float, part: float) -> None:
        """s^2 - 2 b s + w0^2 = 0 with b = B p/(2 r) solved in 60 digits: real and imaginary part apart."""
        made = low.band_pass(w0=f"{centre!r} rad/s", bandwidth=f"{part * centre!r} rad/s")
        wanted = []
        with mpmath.workdps(60):
            for p in low.poles:
                b = mpmath.mpc(p) * (mpmath.mpf(part * centre) / low.reference("w3dB").w) / 2
                root = mpmath.sqrt(b * b - mpmath.mpf(centre) ** 2)
                wanted += [complex(b + root), complex(b - root)]
        for p in wanted:
            nearest = min(made.poles, key=lambda q: abs(q - p))
            assert nearest.real == pytest.approx(p.real, rel=3e-15)
            assert nearest.imag == pytest.approx(p.imag, rel=3e-15, abs=0)

    @pytest.mark.parametrize("low", LOW_PASSES, ids=str)
    @pytest.mark.parametrize(("centre", "part"), BANDS)
    def test_every_reference_is_what_its_label_says(self, low: Prototype, centre: float, part: float) -> None:
        name = "ripple_edge" if low.settings else "w3dB"
        width = f"{part * centre!r} rad/s"
        tolerance = 1e-10 + 1e-12 / part
        for made, at_reference in (
            (low.band_pass(w0=f"{centre!r} rad/s", bandwidth=width, edges=name), centre),
            (low.band_stop(w0=f"{centre!r} rad/s", bandwidth=width, edges=name), 0.0),
        ):
            assert made.reference("centre").w == centre
            assert math.exp(np.mean(np.log(np.abs(made.poles)))) == pytest.approx(centre, rel=1e-14)
            assert made.reference(f"{name}_bandwidth").w == pytest.approx(part * centre, rel=1e-14)
            for reference in low.references:
                if reference.name in {"w0", "unit_delay"}:
                    continue
                lower, upper, between = (
                    made.reference(f"{reference.name}_{k}").w for k in ("lower", "upper", "bandwidth")
                )
                assert lower * upper == pytest.approx(centre**2, rel=1e-14)
                assert upper - lower == pytest.approx(between, rel=1e-12 / part + 1e-14)
                for w in (lower, upper):
                    assert made.decibels(w) == pytest.approx(low.decibels(reference.w), abs=tolerance)
            assert 1 / made.delay(at_reference) == pytest.approx(made.reference("unit_delay").w, rel=1e-11)
            assert made.decibels(at_reference) == pytest.approx(low.decibels(0.0), abs=1e-10)

    @pytest.mark.parametrize(("kind", "part"), [("bandpass", 0.1), ("bandpass", 2.0), ("bandstop", 0.5)])
    def test_against_another_implementation(self, kind: str, part: float) -> None:
        half = part / 2
        edges = [math.hypot(1, half) - half, math.hypot(1, half) + half]
        z, p, _ = scipy.signal.ellip(5, 0.5, 50, edges, btype=kind, analog=True, output="zpk")
        low = elliptic(5, "0.5 dB", "50 dB")
        make = low.band_pass if kind == "bandpass" else low.band_stop
        made = make(w0="1 rad/s", bandwidth=f"{part} rad/s", edges="ripple_edge")
        for found, wanted in ((made.poles, p), (made.zeros, z)):
            assert len(found) == len(wanted)
            assert all(min(abs(q - complex(w)) for q in found) < 1e-8 for w in wanted)

    def test_zeros_stay_on_the_axis_and_pairs_stay_pairs(self) -> None:
        low = elliptic(5, "0.5 dB", "50 dB")
        for made in (
            low.band_pass(f0="1 kHz", bandwidth="3 %"),
            low.band_pass(f0="1 kHz", bandwidth="300 %"),
            low.band_stop(f0="1 kHz", bandwidth="3 %"),
        ):
            assert all(z.real == 0 for z in made.zeros)
            for roots in (made.poles, made.zeros):
                assert sorted((r.real, r.imag) for r in roots) == sorted(
                    (r.real, -r.imag or 0.0) for r in roots
                )

    def test_labels(self) -> None:
        low = chebyshev(4, "1 dB")
        labels = [r.label for r in low.band_pass(f0="1 kHz", bandwidth="100 Hz").references]
        assert labels[0] == "centre, geometric mean of the edges and of the pole magnitudes"
        assert labels[2] == (
            "lower edge, -3.0103 dB relative to the centre (a ripple minimum, 1 dB below the peak)"
        )
        assert "unit-delay frequency 1/T, T the group delay at the centre" in labels
        assert not [label for label in labels if "DC" in label]
        stop = low.band_stop(f0="1 kHz", bandwidth="100 Hz")
        assert stop.reference("f3dB_upper").label.startswith("upper edge, -3.0103 dB relative to DC")
        assert ("|H| at the centre", "0.891251 of the peak") in low.band_pass(
            f0="1 kHz", bandwidth="9 %"
        ).rows()

    def test_a_band_can_be_moved(self) -> None:
        made = butterworth(2).band_pass(f0="1 kHz", bandwidth="10 %")
        assert made.at(f0="5 kHz").poles == pytest.approx([5 * p for p in made.poles], rel=1e-14)
        assert made.at(f3dB_upper="2 kHz").reference("f3dB_upper").f == pytest.approx(2000)

    @pytest.mark.parametrize(
        ("arguments", "words"),
        [
            ({"f0": "1 kHz", "bandwidth": "100"}, "has no unit"),
            ({"f0": "1 kHz", "bandwidth": 0.1}, "carries no unit"),
            ({"f0": "1 kHz", "bandwidth": "-10 %"}, "is positive"),
            ({"f0": "1 krad/s", "bandwidth": "10 %"}, "in Hz, not in rad/s"),
            ({"bandwidth": "10 %"}, "one centre frequency"),
            ({"f0": "1 kHz", "w0": "1 krad/s", "bandwidth": "10 %"}, "one centre frequency"),
            ({"f0": "1 kHz", "bandwidth": "10 %", "edges": "stop_edge"}, "no frequency reference"),
        ],
    )
    def test_refusals(self, arguments: dict[str, str], words: str) -> None:
        for make in (bessel(3).band_pass, bessel(3).band_stop):
            with pytest.raises((NotationError, UnknownNameError, DimensionError), match=words):
                make(**arguments)

    def test_only_a_low_pass_is_moved_to_a_band(self) -> None:
        for made in (bessel(3).high_pass(), first_order_all_pass()):
            with pytest.raises(NotationError, match="is not a low-pass"):
                made.band_pass(f0="1 kHz", bandwidth="10 %")
            with pytest.raises(NotationError, match="is not a low-pass"):
                made.high_pass()
