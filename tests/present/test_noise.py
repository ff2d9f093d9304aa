"""Noise as it is shown: the contributors, the totals with what they are referred to, the assumptions."""

from __future__ import annotations

import symnet as sn
from symnet.present.noise import noise_blocks
from symnet.present.writers import html, latex, text


def shown(net: str, **how: str) -> str:
    found = sn.noise(sn.network(net), **how)  # type: ignore[arg-type]
    plain: str = found._repr_mimebundle_()["text/plain"]
    return plain


RC = "in -- R1 = 10k -- out -- C1 = 1 nF -- gnd; drive in; read out"


def test_an_rc_section_letter_by_letter() -> None:
    assert (
        shown(RC, signal="10 mV at 1 kHz")
        == """\
Noise
-----

At out: 2.035 uV rms over all frequencies.

  source  its own density  at the read, white, at DC  rms at the read  share
  ------  ---------------  -------------------------  ---------------  -----
  R1      12.87 nV/rtHz    12.87 nV/rtHz              2.035 uV         100 %

  figure                       value          remark
  ---------------------------  -------------  -------------------------------------------------
  mean square                  4.142e-12 V^2  = k_B*T/C1
  rms                          2.035 uV       over all frequencies
  peak to peak                 13.43 uV       the factor 6.6, outside of it 0.097 % of the time
  |H| of out/in                1 V/V          at DC
  noise bandwidth of H         25 kHz         to |H| at DC
  density at the drive, white  12.87 nV/rtHz  at DC; the density at the read over |H|
  rms at the drive             2.035 uV       the rms at the read over |H| at DC
  signal to noise              73.81 dB       for 10 mV rms at the drive, at 1 kHz

- all resistors at 300 K, each 4kTR with k = 1.380649e-23 J/K exactly; sources independent
- densities are one-sided, f from 0 up; drives are ideal and noiseless
- all frequencies are counted"""
    )


def test_what_has_no_figure_gives_the_reason() -> None:
    plain = shown(
        "in -- R1 = 1k -- m -- R2 = 10k -- out; U1: opamp(plus=gnd, minus=m, out=out); drive in; read out",
        band="up to 20 kHz",
        U1="en = 5 nV/rtHz",
    )
    assert "H does not fall off at high frequencies" in plain
    assert "en of U1" in plain


def test_symbols_and_their_conditions() -> None:
    plain = shown(
        "in -- R1 -- a -- R2 -- p; a -- C1 -- out; p -- C2 -- gnd; hold out = K*p; drive in; read out"
    )
    assert "K^2*k_B*T*(R1 + R2 + R1*C1/C2)/((R1 + R2)*C2 + (1 - K)*R1*C1)" in plain
    assert "- (R1 + R2)*C2 + (1 - K)*R1*C1 > 0" in plain


def test_no_drive_no_rows_about_one() -> None:
    plain = shown("gnd -- R1 = 1k -- a -- C1 = 1 nF -- gnd; read a")
    assert "at the drive" not in plain


def test_units_of_densities_are_typeset() -> None:
    found = sn.noise(sn.network(RC))
    blocks = noise_blocks(found)  # type: ignore[arg-type]
    assert "nV/\N{SQUARE ROOT}Hz" in html(blocks)
    assert r"nV/\sqrt{Hz}" in latex(blocks)
    assert "12.87 nV/rtHz" in text(blocks)
