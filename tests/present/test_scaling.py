"""A scaling on the page: values with units before and after, and the identity with how it was checked."""

from __future__ import annotations

from typing import Any
from xml.etree import ElementTree as ET

import pytest

import symnet as sn

PROTOTYPE = sn.network("""
    in -- Rs -- a -- L1 -- b -- L2 -- out
    b -- C1 -- gnd
    out -- RL -- gnd
    Rs, RL, L1, L2 = 1
    C1 = 2 ±5%
    drive in
    read out
""")
TIED = sn.network(
    "in -- R1 -- b -- R2 -- gnd; b -- C1 -- gnd; R2 = R1 + 100 ohm; push into b = in*3 mS; drive current into in; read b;"
    "in -- R4 -- gnd"
)

SCALINGS: dict[str, Any] = {
    "prototype": sn.scale(PROTOTYPE, frequency="10 MHz", impedance=50),
    "tied": sn.scale(TIED, frequency=10, impedance=50),
    "impedance only": sn.scale(PROTOTYPE, impedance="50 ohm"),
    "no read": sn.scale(sn.network("in -- R1 = 1 -- a -- C1 = 1 -- gnd"), 2),
}


def shown(scaling: Any) -> str:
    return " ".join(scaling._repr_mimebundle_()["text/plain"].split())


@pytest.mark.parametrize("scaling", SCALINGS.values(), ids=SCALINGS.keys())
def test_typeset_in_four_dresses(scaling: Any) -> None:
    bundle = scaling._repr_mimebundle_()
    assert set(bundle) == {"text/plain", "text/markdown", "text/html", "text/latex"}
    ET.fromstring(f"<div>{bundle['text/html'].replace('&nbsp;', ' ')}</div>")
    assert max(map(len, bundle["text/plain"].splitlines())) <= 110
    assert "\n" not in repr(scaling)


def test_prototype_to_10_mhz_and_50_ohm() -> None:
    """50/(2 pi 1e7) = 795.77 nH, 2/(50*2 pi 1e7) = 636.62 pF."""
    text = shown(SCALINGS["prototype"])
    assert "1 rad/s goes to 62.8319 Mrad/s, f = 10 MHz; impedances times 50." in text
    assert "L1 1 H 795.77 nH" in text
    assert "C1 2 F 636.62 pF ±5 %" in text
    assert "out/in: H_scaled(s) = H(s/6.28319e7), checked: exactly, in numbers and in symbols" in text


def test_ties_laws_and_symbols() -> None:
    text = shown(SCALINGS["tied"])
    assert "R2 = R1 + 100 ohm = R1 + 5 kohm" in text
    assert "law1 = in*3 mS = in*60 uS" in text
    assert "R1, C1, R4 symbol symbol, the scaled part" in text
    assert "H_scaled(s) = 50 H(s/10), checked: exactly, in symbols" in text


def test_what_stays_is_said() -> None:
    assert shown(SCALINGS["impedance only"]).startswith("Frequencies stay; impedances times 50.")
    text = shown(SCALINGS["no read"])
    assert "impedances stay" in text
    assert "identity: no drive or no read, so no H to compare" in text
