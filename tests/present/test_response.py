"""Figures of |H(jw)| with unit and reference; closed forms are those of first- and second-order textbooks."""

from __future__ import annotations

import math

import symnet as sn
from symnet.present import writers
from symnet.present.response import response_blocks


def shown(text: str) -> str:
    return writers.text(response_blocks(sn.derive(sn.network(text))))


def test_first_order_low_pass() -> None:
    """f3dB = 1/(2 pi R C), delay R C at DC."""
    text = shown("in -- R1 -- out -- C1 -- gnd; R1 = 1k; C1 = 100n; drive in; read out")
    assert f"{1 / (2 * math.pi * 1e-4) / 1e3:.5g} kHz" in text
    assert "10 krad/s" in text
    assert "-3.0103 dB relative to DC, where |H| = 1 (0 dB)" in text
    assert "100 us" in text


def test_resonance_has_a_bandwidth() -> None:
    """Parallel resonance behind R: f0 = 1/(2 pi sqrt(LC)), Q = R sqrt(C/L) = 3.1623, width f0/Q."""
    text = shown("in -- R1 -- out -- L1 || C1 -- gnd; R1 = 1k; L1 = 10m; C1 = 100n; drive in; read out")
    f0 = 1 / (2 * math.pi * math.sqrt(1e-9))
    assert f"{f0 / 1e3:.5g} kHz" in text
    assert f"{f0 / math.sqrt(10) / 1e3:.5g} kHz" in text
    assert "Q = f/width = 3.1623" in text
    assert "relative to the peak" in text


def test_transfer_conductance_is_in_siemens_and_has_no_decibels() -> None:
    text = shown("in -- R1 -- a -- C1 -- gnd; R1 = 1k; C1 = 1u; drive in; read i_C1")
    assert "|H| = 1 mS" in text
    assert "(0 dB)" not in text


def test_without_a_peak_the_reason_stands_there() -> None:
    text = shown("drive current into a; a -- C1 -- gnd; C1 = 1u; read a")
    assert "grows without bound at DC" in text
