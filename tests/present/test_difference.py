"""A comparison on the page: figures of the two-section filter with a load, and few words where nothing changed."""

from __future__ import annotations

from typing import Any
from xml.etree import ElementTree as ET

import pytest

import symnet as sn

BARE = sn.network(
    "in -- R1 -- x -- R2 -- out; x -- C1 -- gnd; out -- C2 -- gnd\n"
    "R1, R2 = 1k; C1, C2 = 100n; drive in; read out"
)
LOADED = BARE.add("out -- RL = 10k -- gnd")
SYMBOLS = dict.fromkeys(("R1", "R2", "C1", "C2"))
INTEGRATOR = sn.network(
    "in -- R1 = 1k -- m -- C1 = 1u -- out; U1: opamp(plus=gnd, minus=m, out=out); drive in; read out"
)

COMPARISONS: dict[str, Any] = {
    "load": sn.compare(BARE, LOADED),
    "load in symbols": sn.compare(BARE.with_values(SYMBOLS), LOADED.with_values({**SYMBOLS, "RL": None})),
    "nothing": sn.compare(BARE, BARE),
    "values": sn.compare(BARE, BARE.with_values(R1="2 kohm ±1%", C1=None)),
    "moved": sn.compare(BARE, BARE.replace("C1", "C1 + Lx").with_values(Lx="1 mH")),
    "renamed": sn.compare(BARE, sn.network(BARE.to_text().replace("x", "w"))),
    "numbers alone": sn.compare(sn.derive(BARE, symbols=[]), sn.derive(LOADED, symbols=[])),
    "another unit": sn.compare(sn.derive(BARE), sn.derive(BARE, read="i_R1")),
    "no H": sn.compare(BARE.add("read x"), LOADED),
    "infinite gain": sn.compare(INTEGRATOR, INTEGRATOR.add("m -- R2 = 1M -- out")),
    "law": sn.compare(BARE.add("hold y = 2*out as buf"), BARE.add("hold y = 3*out as buf")),
}


def shown(comparison: Any) -> str:
    """The plain text with all space between words made one."""
    return " ".join(comparison._repr_mimebundle_()["text/plain"].split())


@pytest.mark.parametrize("comparison", COMPARISONS.values(), ids=COMPARISONS.keys())
def test_typeset_in_four_dresses(comparison: Any) -> None:
    bundle = comparison._repr_mimebundle_()
    assert set(bundle) == {"text/plain", "text/markdown", "text/html", "text/latex"}
    ET.fromstring(f"<div>{bundle['text/html'].replace('&nbsp;', ' ')}</div>")
    assert max(map(len, bundle["text/plain"].splitlines())) <= 110
    assert "object at 0x" not in "".join(bundle.values())
    assert "\n" not in repr(comparison)
    assert len(repr(comparison)) <= 500


def test_a_load_on_two_sections() -> None:
    text = shown(COMPARISONS["load"])
    assert "Added: 1 part" in text
    assert "RL resistor out, gnd 10 kohm" in text
    assert "1 + (R1 + R2)/RL (R1 + R2)/RL 1 1.2 +20 %" in text
    assert "R1*R2*C1/RL 300 us 310 us +3.333 %" in text
    assert "R1*R2*C1*C2 R1*R2*C1*C2 unchanged 1e-8 s^2 1e-8 s^2" in text
    assert "H(0) 1 (0 dB) 0.83333 (-1.584 dB) -1.584 dB" in text
    assert "H = N/D, divided so that the constant term of N is 1 in both:" in text


def test_without_values_there_are_formulas_alone() -> None:
    text = shown(COMPARISONS["load in symbols"])
    assert "R1*R2*C1/RL" in text
    assert "%" not in text
    assert "H(0) 1 RL/(R1 + R2 + RL)" in text


def test_nothing_changed() -> None:
    assert shown(COMPARISONS["nothing"]) == "Nothing changed, in the drawing and in H."


def test_values() -> None:
    text = shown(COMPARISONS["values"])
    assert "R1 1 kohm 2 kohm ±1 % +100 %" in text
    assert "C1 100 nF symbol, no value" in text


def test_moved_parts_and_new_poles() -> None:
    text = shown(COMPARISONS["moved"])
    assert "C1 x, gnd x, the node between C1 and Lx" in text
    assert "Lx*C1 Lx*C1 0 s^2 1e-10 s^2 new" in text
    assert "none -473.5 krad/s (f0 = 75.37 kHz)" in text


def test_renamed_nodes_leave_h_alone() -> None:
    assert shown(COMPARISONS["renamed"]) == (
        "- node x is now called w H - H is the same function, before and after."
    )


def test_numbers_without_unit_are_not_shown_beside_those_with_one() -> None:
    """The change of a coefficient of s is in seconds; a bare 1/100000 would leave that open."""
    text = shown(COMPARISONS["numbers alone"])
    assert "s in D 300 us 310 us +3.333 %" in text
    assert "1/100000" not in text.split("divided so")[1]


def test_reads_and_notes() -> None:
    text = shown(COMPARISONS["another unit"])
    assert "- no longer read out - new: read i_R1" in text
    assert "H is a number before and in S after: its coefficients are not compared" in text
    assert "no H before: the network has several reads" in shown(COMPARISONS["no H"])


def test_an_infinite_gain_and_a_law() -> None:
    assert "H(0) infinite -1000 (60 dB)" in shown(COMPARISONS["infinite gain"])
    assert "buf hold = 2*out hold = 3*out" in shown(COMPARISONS["law"])


def test_many_rows_are_counted() -> None:
    text = "; ".join(f"n{k - 1} -- R{k} = 1k -- n{k} -- C{k} = 1n -- gnd" for k in range(1, 46))
    ladder = sn.network(f"{text}; drive n0; read n45")
    shown_text = shown(sn.compare(ladder, ladder.with_values(R1="2k")))
    assert "... 7 more rows" in shown_text  # 47 coefficients
    assert "s^38 in D" in shown_text
    assert "s^39 in D" not in shown_text
