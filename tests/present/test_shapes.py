"""Normal form, sections and standard forms in words: names, formulas, units, half planes."""

from __future__ import annotations

from typing import get_args

import pytest

import symnet as sn
from symnet.present import writers
from symnet.present.shapes import form_blocks, normal_blocks, sections_blocks
from symnet.shape.forms import Style

FIRST_ORDER = "in -- R1 -- out -- C1 -- gnd; drive in; read out"
RESONANCE = "in -- R1 -- out -- L1 || C1 -- gnd; drive in; read out"


def normal(text: str) -> str:
    return writers.text(normal_blocks(sn.normalise(sn.derive(sn.network(text)))))


def factored(text: str) -> str:
    return writers.text(sections_blocks(sn.sections(sn.derive(sn.network(text)))))


def test_gain_stands_under_its_name() -> None:
    assert "K = H(0)" in normal(FIRST_ORDER)
    assert "K = H(infinity)" in normal("in -- C1 -- out -- R1 -- gnd; drive in; read out")
    band_pass = normal(RESONANCE)
    assert "K = |H(j w0)|, signed" in band_pass
    assert "K_0, coefficient of s^1" in band_pass
    assert "H(s) = K_0 * s *" in band_pass


def test_integrator_has_no_frequency_scale() -> None:
    text = normal("drive current into a; a -- C1 -- gnd; read a")
    assert "coefficient of s^-1" in text
    assert "w0" not in text


def test_zero_is_said() -> None:
    assert normal("in -- R1 -- gnd; a -- R2 -- gnd; drive in; read a").startswith("H = 0")


def test_coefficients_that_are_one_or_zero_have_no_row() -> None:
    text = normal(RESONANCE)
    assert "c_1" in text
    assert "c_2" not in text


def test_sections_in_numbers_and_in_names() -> None:
    text = factored(RESONANCE + "; R1 = 1k; L1 = 10m; C1 = 100n")
    assert "pole pair" in text
    assert "In the names of the parts:" in text
    assert "R1*sqrt(C1/L1) = 3.1623" in text
    assert "zero at the origin" in text


def test_real_poles_still_have_a_q_together() -> None:
    """Two equal RC sections: Q = 1/3 (any textbook on the Wien arm)."""
    text = factored(
        "in -- R1 -- a -- R2 -- out; a -- C1 -- gnd; out -- C2 -- gnd; R1, R2 = 1k; C1, C2 = 1n; drive in; read out"
    )
    assert text.count("real pole") == 2
    assert "All of the denominator as one quadratic: Q = 0.33333" in text


def test_right_half_plane_is_shouted() -> None:
    assert "RIGHT half plane" in factored(FIRST_ORDER + "; R1 = -1k; C1 = 1n")


def test_constant() -> None:
    assert (
        factored("in -- R1 -- out -- R2 -- gnd; drive in; read out")
        == "No poles and no zeros: H is a constant."
    )


@pytest.mark.parametrize("style", get_args(Style))
def test_every_standard_form_is_shown(style: Style) -> None:
    H = sn.derive(sn.network(RESONANCE + "; R1 = 1k; L1 = 10m; C1 = 100n"))
    text = writers.text(form_blocks(sn.form(H, style)))
    assert text.lstrip().splitlines()
    assert "H(s) =" in text
    assert "a_" in text or "b_" in text
