"""The brief: every number with unit and convention, every gap said, one piece for each drive and read."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest

import symnet as sn

PROBE = Path(__file__).resolve().parents[2] / "symnet" / "examples" / "probe.symnet"
RC = "in -- R1 -- out -- C1 -- gnd; drive in; read out"


def pieces(text: str) -> dict[str, str]:
    """The brief cut at its headings."""
    found: dict[str, str] = {}
    title = ""
    lines = text.splitlines()
    for line, below in zip(lines, [*lines[1:], ""], strict=True):
        if line and below == "-" * len(line):
            title = line
        found[title] = found.get(title, "") + line + "\n"
    return found


def test_the_shipped_network() -> None:
    found = pieces(sn.brief(sn.load(PROBE)).to_text())
    assert list(found) == [
        "Network",
        "H(s) = out/in",
        "Normal form",
        "Poles, zeros, sections",
        "Magnitude and delay",
        "Limits",
        "Recognition",
        "Conventions",
    ]
    assert "s^3*Rs*RL*L1*C1*C2" in found["H(s) = out/in"]
    assert "unit: V/V" in found["H(s) = out/in"]
    assert "confirmed: " in found["H(s) = out/in"]
    assert "-6.021 dB" in found["Limits"]
    assert "nearest: Butterworth, order 3, low-pass" in found["Recognition"]
    assert "f in Hz, w in rad/s" in found["Conventions"]


def test_figures_of_the_shipped_network_against_numpy() -> None:
    """Oracle: D(s) worked out by hand, its roots by numpy, f3dB by bisection on |H|."""
    r, c, inductance = 600.0, 13e-9, 10e-3
    d = [r * r * inductance * c * c, inductance * 2 * r * c, inductance + 2 * r * r * c, 2 * r]
    poles = np.roots(d)
    low, high = 1e3, 1e6
    for _ in range(200):  # bisection for |H| = |H(0)|/sqrt(2)
        middle = (low + high) / 2
        above = abs(r / np.polyval(d, 2j * np.pi * middle)) > 0.5 / np.sqrt(2)
        low, high = (middle, high) if above else (low, middle)
    text = sn.brief(sn.load(PROBE)).to_text()
    assert f"{low / 1e3:.5g} kHz" in text
    pair = next(p for p in poles if p.imag > 0)
    assert f"{pair.real / 1e3:.5g} ± j{pair.imag / 1e3:.5g} krad/s" in text
    assert f"{-abs(pair) / 2 / pair.real:.5g}" in text


def test_all_four_dresses_say_the_same() -> None:
    brief = sn.brief(sn.load(PROBE))
    for dress in (brief.to_text(), brief.to_markdown(), brief.to_html(), brief.to_latex()):
        assert "Butterworth, order 3, low-pass" in dress
        assert "19.515" in dress
        assert "Conventions" in dress
    assert str(brief) == brief.to_text()


def test_symbols_only() -> None:
    found = pieces(sn.brief(sn.network(RC)).to_text())
    assert "1 + s*R1*C1" in found["H(s) = out/in"]
    assert "1/(R1*C1)" in found["Normal form"]
    assert "not available: no value for R1, C1" in found["Magnitude and delay"]
    assert "first order, low-pass" in found["Recognition"]


def test_some_values() -> None:
    found = pieces(sn.brief(sn.network(RC + "; R1 = 1k")).to_text())
    assert "Without a value: C1" in found["Network"]
    assert "no value for C1" in found["Magnitude and delay"]


def test_one_piece_for_each_drive_and_read() -> None:
    brief = sn.brief(
        sn.network("a -- R1 -- m -- R2 -- b; m -- C1 -- gnd; drive a as V1; drive b as V2; read m; read i_R1")
    )
    assert [transfer.label for transfer in brief.transfers] == ["m/V1", "i_R1/V1", "m/V2", "i_R1/V2"]
    text = brief.to_text()
    assert text.count("Conventions\n-") == 1
    assert "unit: A/V = S" in text
    assert "positive in the direction in which its chain was written" in text


def test_transimpedance_has_its_unit() -> None:
    found = pieces(
        sn.brief(
            sn.network("drive current into m; m -- R1 = 100k -- gnd; m -- C1 = 1n -- gnd; read m")
        ).to_text()
    )
    assert "unit: V/A = ohm" in found["H(s) = m/i_drive"]
    assert "100 kohm" in found["Limits"]


def test_h_is_zero() -> None:
    found = pieces(sn.brief(sn.network("in -- R1 -- gnd; a -- R2 -- gnd; drive in; read a")).to_text())
    assert "not available: H = 0" in found["Poles, zeros, sections"]


def test_hidden_mode_in_symbols_and_by_values() -> None:
    """The compensated divider: R1 C1 = R2 C2 hides -1/(R1 C1)."""
    divider = "in -- R1 || C1 -- out -- R2 || C2 -- gnd; drive in; read out"
    tied = pieces(sn.brief(sn.network(divider + "; C2 = R1*C1/R2")).to_text())["H(s) = out/in"]
    assert "hidden mode at s = -1/(R1*C1): R1, C1, C2; it cancels through values" in tied.replace("\n  ", " ")
    valued = pieces(sn.brief(sn.network(divider + "; R1, R2 = 1k; C1, C2 = 1n")).to_text())["H(s) = out/in"]
    assert "with these values, and only with exactly these: a factor with s cancels" in valued.replace(
        "\n  ", " "
    )
    assert "-1 Mrad/s" in valued
    assert "leaves a tail of about its size in the step response, time constant 1 us" in " ".join(
        valued.split()
    )


def test_unstable_hidden_mode_is_shouted() -> None:
    """A natural frequency at +1/(R C) that the read does not see: a negative resistor beside a capacitor."""
    text = "in -- R1 -- out -- R2 -- gnd; hold b = out; b -- R4 = 1k -- c -- C1 = 1n -- gnd; c -- R3 -- gnd; R3 = -500 ohm"
    brief = sn.brief(sn.network(text + "; R1, R2 = 1k; drive in; read out"))
    assert brief.transfers[0].hidden
    said = " ".join(brief.to_text().split())
    assert "R4, C1, R3; the read does not see it; IT GROWS WITH TIME" in said


def test_large_networks_are_counted_and_not_set() -> None:
    sections = " -- ".join(f"R{k} -- n{k} -- C{k} -- gnd; n{k}" for k in range(1, 10))
    text = f"in -- {sections.rsplit(';', 1)[0]}; drive in; read n9"
    found = pieces(sn.brief(sn.network(text)).to_text())
    assert "terms" in found["H(s) = n9/in"]


def test_repr_is_short_and_equality_is_that_of_the_network() -> None:
    brief = sn.brief(sn.network(RC))
    assert repr(brief) == "<Brief of 2 parts: out/in>"
    assert brief == sn.brief(sn.network(RC))
    assert brief != sn.brief(sn.network(RC + "; R1 = 1k"))


@pytest.mark.parametrize(
    "text", ["in -- R1 -- out -- C1 -- gnd; read out", "in -- R1 -- out -- C1 -- gnd; drive in"]
)
def test_without_drive_or_read(text: str) -> None:
    with pytest.raises(sn.SymnetError):
        sn.brief(sn.network(text))


def test_a_very_long_network_is_not_waited_for() -> None:
    """Poles of order 150 would take minutes: the brief says so and what to call instead."""
    chain = [f"n{k} -- R{k + 1} = 1 kohm -- n{k + 1} -- C{k + 1} = 1 nF -- gnd" for k in range(150)]
    text = sn.brief(sn.network("\n".join([*chain, "drive n0", "read n150"]))).to_text()
    assert text.count("not available: the order is 150") == 4
    assert "sn.f3db(H) find them" in text.replace("\n", " ")
