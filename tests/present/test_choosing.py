"""A joint choice on the page: values, figures against what was wanted, proof, runners-up, cautions."""

from __future__ import annotations

from typing import Any
from xml.etree import ElementTree as ET

import pytest

import symnet as sn
from symnet.values.stock import read_stock

NETWORK = sn.network(
    "in -- R1 -- x -- R2 -- p; x -- C1 -- out; p -- C2 -- gnd; drive in; read out;"
    "U1: opamp(plus=p, minus=out, out=out)"
)
EXACT = NETWORK.with_values(R1="4.250k", R2="12.682k", C1="100n", C2="4.7n")
STOCK = read_stock("name,value\nR<1>,9.1 kohm\nR-2,27 kohm\nC-1,47 nF\nC-2,2.2 nF\n")

CASES: dict[str, Any] = {
    "n16": sn.choose(EXACT, f0="1 kHz", Q=2, runners_up=2),
    "pairs in a band": sn.choose(
        NETWORK,
        sn.butterworth(2).at(f3dB="1 kHz"),
        band=("10 Hz", "3 kHz"),
        R=sn.preferred("E6", "4.7 kohm", "47 kohm").with_pairs("series", "parallel"),
    ),
    "stock": sn.choose(NETWORK, f0="1 kHz", Q=2, R=STOCK["R"], C=STOCK["C"]),
    "not proved": sn.choose(NETWORK, f0="1 kHz", Q=2, R="E192, 1 kohm .. 1 Mohm", C="E24", work=1),
    "series": sn.preferred("E24"),
    "range": sn.preferred("E6", "1 nF", "1 uF"),
    "list of pairs": sn.preferred("E6", "1 kohm", "10 kohm").with_pairs("series"),
}


def shown(value: Any) -> str:
    return " ".join(value._repr_mimebundle_()["text/plain"].split())


@pytest.mark.parametrize("value", CASES.values(), ids=CASES.keys())
def test_typeset_in_four_dresses(value: Any) -> None:
    bundle = value._repr_mimebundle_()
    assert set(bundle) == {"text/plain", "text/markdown", "text/html", "text/latex"}
    ET.fromstring(f"<div>{bundle['text/html']}</div>".replace("&nbsp;", " "))


def test_values_figures_and_proof() -> None:
    text = shown(CASES["n16"])
    assert "largest error of f0 and Q: 0.347 %; optimal: branch and bound over 389 376 combinations" in text
    assert "R1 9.1 kohm chosen from E24, 48 values from 430 ohm to 39 kohm" in text
    assert "f0 1 kHz 998.5 Hz -0.15 %" in text
    assert "Q 2 2.007 +0.35 %" in text
    assert "best 9.1 kohm 27 kohm 47 nF 2.2 nF 0.347 % 998.5 Hz (-0.15 %) 2.007 (+0.35 %)" in text
    assert "rounded by itself" in text
    assert "981.9 Hz (-1.8 %)" in text


def test_cautions_about_tolerances_and_about_what_can_be_bought() -> None:
    text = shown(CASES["n16"])
    assert "Each part has a tolerance besides" in text
    assert "A preferred value is not always one that can be bought" in text


def test_a_band_says_where_it_is_worst_and_pairs_what_they_are_made_of() -> None:
    text = shown(CASES["pairs in a band"])
    assert "largest error of 20 log10 |H/K| from 10 Hz to 3 kHz" in text
    assert "dB" in text
    assert any(word in text for word in ("in parallel with", "in series with"))


def test_stock_names_stand_beside_the_values() -> None:
    assert "9.1 kohm (R<1>)" in shown(CASES["stock"])
    assert "R&lt;1&gt;" in CASES["stock"]._repr_mimebundle_()["text/html"]


def test_a_gap_is_said() -> None:
    text = shown(CASES["not proved"])
    assert "not proved optimal" in text
    assert "(the gap to the bound)" in text


def test_series_and_lists() -> None:
    assert "1 1.1 1.2 1.3 1.5 1.6 1.8 2 2.2 2.4 2.7 3 3.3" in shown(CASES["series"])
    assert "E6, 19 values from 1 nF to 1 uF. 1 nF, 1.5 nF, 2.2 nF" in shown(CASES["range"])
    assert "2 kohm 1 kohm in series with 1 kohm" in shown(CASES["list of pairs"])
