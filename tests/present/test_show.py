"""Every result is typeset when it is the last expression of a cell, has a short repr, and counts what it leaves out."""

from __future__ import annotations

from typing import Any
from xml.etree import ElementTree as ET

import pytest

import symnet as sn
from symnet.exact.ratio import Ratio
from symnet.shape.figures import f3db

NET = sn.network(
    "in -- R1 -- x -- R2 -- p -- C2 -- gnd; x -- C1 -- out; U1: opamp(plus=p, minus=out, out=out)\n"
    "R1, R2 = 10k; C1 = 22n; C2 = 10n; drive in; read out"
)
SYMBOLS = NET.with_values(R1=None, R2=None, C1=None, C2=None)
H = sn.derive(NET)

FINITE = NET.with_opamp("U1", gbw="1 MHz")
POSITIVE = SYMBOLS.without("U1").add("hold out = K*p as amp")

RESULTS: dict[str, Any] = {
    "network": NET,
    "equations": sn.equations(NET),
    "transfer": H,
    "limits": sn.limits(H),
    "normal form": sn.normalise(H),
    "normal form in symbols": sn.normalise(sn.derive(SYMBOLS)),
    "sections": sn.sections(H),
    "sections in symbols": sn.sections(sn.derive(SYMBOLS)),
    "form": sn.form(H, "constant term 1"),
    "factored form": sn.form(H, "w0/Q"),
    "recognition": sn.recognise(H),
    "conditions": sn.recognise(sn.derive(SYMBOLS)),
    "prototype": sn.bessel(4),
    "half power": f3db(H),
    "loop gain": sn.loop_gain(FINITE, "U1"),
    "loop gain in symbols": sn.loop_gain(POSITIVE, "amp"),
    "loop gain of what swings": sn.loop_gain(
        POSITIVE.with_values(R1="1k", R2="1k", C1="1n", C2="1n", K=4), "amp"
    ),
    "locus": sn.locus(sn.derive(POSITIVE.with_values(R1="1k", R2="1k", C1="1n", C2="1n", K=2)), "K"),
    "real op amps": sn.real_opamps(NET, gain="100k", gbw="1 MHz", Rout="100 ohm"),
    "stability": sn.stability(H),
    "stability in symbols": sn.stability(sn.derive(POSITIVE)),
    "noise": sn.noise(NET, "p", signal="1 V at 1 kHz"),
    "noise of an op amp in a band": sn.noise(
        NET, U1="en = 5 nV/rtHz, in = 1 pA/rtHz, corner = 100 Hz", band="0.1 Hz to 20 kHz"
    ),
    "noise in symbols": sn.noise(SYMBOLS, "p"),
    "brief": sn.brief(NET),
    "review": sn.verify(NET, "node x: (x - in)/R1 + s*C1*x = 0; p = out; out/in = 1/(1 + s*R1*C1); R1 = R2"),
    "review in symbols": sn.verify(SYMBOLS, "R1 = R2; out/in = 1/(1 + s*C2*(R1 + R2) + s^2*R1*R2*C1*C2)"),
}


@pytest.mark.parametrize("result", RESULTS.values(), ids=RESULTS.keys())
def test_typeset_in_four_dresses(result: Any) -> None:
    bundle = result._repr_mimebundle_()
    assert set(bundle) == {"text/plain", "text/markdown", "text/html", "text/latex"}
    assert all(bundle.values())
    ET.fromstring(bundle["text/html"].replace("&nbsp;", " "))
    assert "<Figure" not in bundle["text/plain"]
    assert "object at 0x" not in "".join(bundle.values())


@pytest.mark.parametrize("result", RESULTS.values(), ids=RESULTS.keys())
def test_repr_is_one_short_line(result: Any) -> None:
    assert "\n" not in repr(result)
    assert len(repr(result)) <= 500


@pytest.mark.parametrize("result", RESULTS.values(), ids=RESULTS.keys())
def test_plain_text_keeps_to_its_width(result: Any) -> None:
    assert max(map(len, result._repr_mimebundle_()["text/plain"].splitlines())) <= 110


def test_transfer_is_a_formula() -> None:
    bundle = H._repr_mimebundle_()
    assert bundle["text/latex"] == (
        r"$\displaystyle H(s) = \frac{\mathrm{out}}{\mathrm{in}} = "
        r"\frac{1}{1 + s \left(R_{1} + R_{2}\right) C_{2} + s^{2} R_{1} R_{2} C_{2} C_{1}}$"
    )


def test_conditions_are_typeset() -> None:
    """Unity-gain section with equal resistors: Butterworth when C1 = 2 C2 (Q = sqrt(C1/C2)/2; textbook, from memory)."""
    equal = sn.derive(sn.network(SYMBOLS.to_text() + "\nR2 = R1"))
    latex = sn.recognise(equal)._repr_mimebundle_()["text/latex"]
    assert r"$C_{1}$ = $2 C_{2}$" in latex


def test_cancelled_factors_are_shown_with_the_transfer() -> None:
    hidden = sn.derive(
        sn.network("in -- R1 || C1 -- out -- R2 || C2 -- gnd; C2 = R1*C1/R2; drive in; read out")
    )
    assert "hidden mode" in hidden._repr_mimebundle_()["text/plain"]
    by_values = sn.derive(
        sn.network("in -- R1 || C1 -- out -- R2 || C2 -- gnd; drive in; read out; R1, R2 = 1k; C1, C2 = 1n")
    )
    assert "hidden mode with these values" in by_values._repr_mimebundle_()["text/plain"]


def ladder(sections: int) -> Any:
    """H of an RC ladder, every part a symbol; D has F(2n + 1) terms (Fibonacci numbers: 13, 89, 610, ...)."""
    text = "; ".join(f"n{k - 1} -- R{k} -- n{k} -- C{k} -- gnd" for k in range(1, sections + 1))
    return sn.derive(sn.network(f"{text}; drive n0; read n{sections}"))


def test_many_terms_are_counted_and_the_first_shown() -> None:
    shown = ladder(7)._repr_mimebundle_()["text/plain"]
    assert "terms: 1 over 610; the first of each power are shown" in shown
    assert "s*(R1*C1 + R1*C2 + R1*C3 + ... 25 more terms)" in shown
    assert len(shown) < 2500


def test_very_many_terms_are_only_counted() -> None:
    shown = ladder(13)._repr_mimebundle_()["text/plain"].replace("\n", " ")
    assert "has up to 1 term over 196418" in shown
    assert "keep fewer names as symbols" in shown


def test_a_step_response_shows_its_figures() -> None:
    shown = sn.step(Ratio.of([1], [1, 2, 2, 1]))
    text = shown._repr_mimebundle_()["text/markdown"]
    assert "overshoot" in text
    assert "8.1" in text
