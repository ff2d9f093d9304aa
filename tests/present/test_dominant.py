"""Dominant terms and split poles as they are read: every figure with its unit, and what is left out counted."""

from __future__ import annotations

from xml.etree import ElementTree as ET

import pytest

import symnet as sn
from symnet.present import writers
from symnet.present.dominant import dominant_blocks, split_blocks
from symnet.shape.dominant import Dominant
from symnet.shape.split import SplitPoles

CLOSE = """
    in -- R1 -- a -- R2 -- out;  a -- C1 -- gnd;  out -- C2 -- gnd;  drive in;  read out
    R1 = 1 kohm;  C1 = 100 nF;  R2 = 100 kohm;  C2 = 1 nF
"""
APART = {"C1": "10n", "C2": "10n"}
H = sn.derive(sn.network(CLOSE))


def shown(short: Dominant) -> str:
    return writers.text(dominant_blocks(short))


def test_dominant_terms_as_text() -> None:
    rows = [" ".join(line.split()) for line in shown(sn.dominant(H)).splitlines()]
    assert "H'(s) = ---------------------------" in rows
    assert (
        "H' has 1 over 4 of the 1 over 5 terms of H = out/in. From 144 Hz to 17.59 kHz its largest errors, H'"
        in rows
    )
    assert "20 log10 |H'/H| 0.0433 dB 1.592 kHz 10 krad/s ± 0.5 dB" in rows
    assert "phase of H' minus phase of H 0.143 deg 658.1 Hz 4.135 krad/s ± 5 deg" in rows
    assert "s*R1*C2 denominator 0.498 % 0.498 %" in rows
    assert "s^1 in the denominator 201 us 200 us -0.498 %" in rows
    assert "pole 1 -9.049 krad/s -10 krad/s 10.5 %" in rows
    assert "pole 2 -11.05 krad/s -10 krad/s 9.51 %" in rows
    assert "pole 1 1.44 kHz 1.592 kHz 10.5 %" in rows
    assert "pole 2 1.759 kHz 1.592 kHz -9.51 %" in rows


def test_nothing_dropped_is_said() -> None:
    text = shown(sn.dominant(H, within_db=0))
    said = "No term can be dropped within ± 0 dB and ± 5 deg from 144 Hz to 17.59 kHz: H' = H = out/in."
    assert said in " ".join(text.split())
    assert "moved by" not in text


def test_pole_that_has_gone_and_pair_in_one_row() -> None:
    narrow = shown(sn.dominant(H.with_values(APART), within_db=0.03, within_deg=1, band=("1 Hz", "100 Hz")))
    assert "gone to infinity" in narrow
    resonance = sn.derive(
        sn.network(
            "in -- Rs -- a -- L1 -- out; a -- C1 -- gnd; out -- C2 || RL -- gnd; drive in; read out;"
            "Rs = 50; RL = 60k; C1 = 13n; C2 = 1n; L1 = 10m"
        )
    )
    text = shown(sn.dominant(resonance, band=("10 Hz", "200 kHz")))
    assert text.count("±") - text.count("± 0.5 dB") - text.count("± 5 deg") == 2  # the pair before and after
    rows = [" ".join(line.split()) for line in text.splitlines()]
    assert "pole pair 1 50.43 kHz 50.41 kHz -0.0399 % 14.75 14.71 -0.286 %" in rows
    assert "s^0 in the denominator 60.05 kohm 60 kohm -0.0833 %" in rows


def test_terms_that_stability_has_kept_are_counted() -> None:
    """1 + s + 0.01 s^2 + 0.009 s^3: without s^2 it would be near enough, and unstable (Hurwitz)."""
    net = sn.network(
        "in -- R1 -- a -- L1 -- out; a -- C1 -- gnd; out -- C2 -- gnd; drive in; read out;"
        "R1 = 1; C1 = 0.9; C2 = 0.1; L1 = 0.1"
    )
    short = sn.dominant(sn.derive(net), within_db=0.2, within_deg=4, band=("0.1 rad/s", "2 rad/s"))
    assert short.held == 1
    assert "kept only because a pole would have gone into the right half plane" in " ".join(
        shown(short).split()
    )


def test_many_rows_are_counted() -> None:
    text = "; ".join(
        f"n{k - 1} -- R{k} -- n{k} -- C{k} -- gnd; R{k} = {10 ** (k % 3)}k; C{k} = {k}n" for k in range(1, 7)
    )
    short = sn.dominant(sn.derive(sn.network(f"{text}; drive n0; read n6")))
    assert len(short.dropped) > 100
    assert f"... {len(short.dropped) - 30} more" in shown(short)


def test_split_poles_as_text() -> None:
    found = sn.split_poles(H.with_values(APART))
    rows = [" ".join(line.split()) for line in writers.text(split_blocks(found)).splitlines()]
    assert "-1/(R1*C1 + (R1 + R2)*C2) -980.4 rad/s 1.02 ms -990 rad/s 157.6 Hz -0.971 %" in rows
    assert any("-102 krad/s 9.804 us -101 krad/s 16.08 kHz 0.98 %" in row for row in rows)
    assert any("Ratio of each time constant to the next: 104." in row for row in rows)


def test_split_poles_that_are_close_are_shouted() -> None:
    text = writers.text(split_blocks(sn.split_poles(H)))
    assert "NOT far apart" in text


def test_split_poles_beside_the_origin_and_alone() -> None:
    net = "drive current into a; a -- C1 -- gnd; a -- R1 -- b -- C2 -- gnd; read b; C1, C2 = 1n; R1 = 1k"
    text = writers.text(split_blocks(sn.split_poles(sn.derive(sn.network(net)))))
    assert "1 pole at the origin, exact." in text
    assert "There is one pole only" in text


@pytest.mark.parametrize("result", [sn.dominant(H), sn.split_poles(H)], ids=["dominant", "split"])
def test_typeset_in_four_dresses(result: Dominant | SplitPoles) -> None:
    bundle = result._repr_mimebundle_()
    assert set(bundle) == {"text/plain", "text/markdown", "text/html", "text/latex"}
    ET.fromstring(bundle["text/html"].replace("&nbsp;", " "))
    assert max(map(len, bundle["text/plain"].splitlines())) <= 110
    assert r"\%" in bundle["text/latex"]
    assert "object at 0x" not in "".join(bundle.values())
    assert "\n" not in repr(result)
    assert len(repr(result)) < 200
