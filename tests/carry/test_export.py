"""H carried away is H: compiled C, Python, arrays, state space, sections; discrete time by its definitions."""

from __future__ import annotations

import json
import math
import shutil
import subprocess
import warnings
from collections.abc import Callable
from fractions import Fraction
from pathlib import Path

import numpy as np
import pytest
from numpy.typing import NDArray
from scipy import signal

import symnet as sn
from symnet.carry.discrete import FrequencyWarpWarning, WordLengthWarning
from symnet.carry.export import Export
from symnet.errors import DimensionError, MissingValueError, NotationError, UndefinedError
from symnet.exact.ratio import Ratio

LADDER = """
    # a filter between a sensor and its line (invented)
    in -- Rs = 600 -- a -- L1 = 10 mH -- b -- L2 = 4.7 mH -- out
    a -- C1 = 13 nF -- gnd; b -- C2 = 22 nF -- gnd; out -- C3 = 6.8 nF -- gnd; out -- RL = 600 -- gnd
    drive in; read out
"""
NOTCH = "X1: twin_t(in=in, out=out, foot=f, R=10k, C=1 nF); f -- R5 = 1 -- gnd; drive in; read out"
HIGH = "in -- C1 = 1 nF -- a -- C2 = 3.3 nF -- out; a -- R1 = 10k -- gnd; out -- R2 = 47k -- gnd; drive in; read out"
TEXTS = {"ladder": LADDER, "notch": NOTCH, "high-pass": HIGH}
F = np.geomspace(1, 1e7, 200)


def made(name: str) -> tuple[Export, NDArray[np.complex128]]:
    H = sn.derive(sn.network(TEXTS[name]))
    return sn.export(H), np.asarray(H.numeric()(2j * np.pi * F))


def same(found: NDArray[np.complex128], wanted: NDArray[np.complex128], within: float = 1e-12) -> None:
    assert np.abs(found / wanted - 1).max() < within


@pytest.mark.parametrize("name", TEXTS)
def test_python_source_is_h(name: str) -> None:
    export, wanted = made(name)
    space: dict[str, Callable[[NDArray[np.float64]], NDArray[np.complex128]]] = {}
    code = compile(export.python("h_of"), "exported", "exec")
    exec(code, space)  # noqa: S102 - the code under test is code
    same(space["h_of"](F), wanted)


@pytest.mark.skipif(shutil.which("cc") is None, reason="no C compiler here")
@pytest.mark.parametrize("name", TEXTS)
def test_compiled_c_is_h(name: str, tmp_path: Path) -> None:
    export, wanted = made(name)
    main = (
        '#include <stdio.h>\nint main(void) { double f; while (scanf("%lf", &f) == 1) { double complex h = H_of(f); '
        'printf("%.17g %.17g\\n", creal(h), cimag(h)); } return 0; }\n'
    )
    (tmp_path / "h.c").write_text(export.c("H_of") + main, encoding="utf-8")
    built = [
        "cc",
        "-std=c99",
        "-O2",
        "-Wall",
        "-Wextra",
        "-Werror",
        "-o",
        str(tmp_path / "h"),
        str(tmp_path / "h.c"),
    ]
    subprocess.run(built, check=True, capture_output=True)
    ran = subprocess.run(
        [str(tmp_path / "h")],
        input=" ".join(map(repr, F.tolist())),
        capture_output=True,
        text=True,
        check=True,
    )
    same(np.array([complex(*map(float, line.split())) for line in ran.stdout.splitlines()]), wanted)


def test_source_names_the_exact_coefficients_and_no_name_breaks_it() -> None:
    export, _ = made("high-pass")
    assert "D, s^1: + 1*C1*R1 + 1*C2*R1 + 1*C2*R2" in export.c()
    assert "values in ohm, henry, farad: C1 = 1e-09" in export.python()
    for bad in ("1x", "a b", "int", "x); system(", ""):
        with pytest.raises(NotationError):
            export.c(bad)
    with pytest.raises(NotationError):
        export.python("lambda")


@pytest.mark.parametrize("name", TEXTS)
def test_arrays_are_h(name: str) -> None:
    export, wanted = made(name)
    _, by_ba = signal.freqs(*export.ba(), worN=2 * np.pi * F)
    same(by_ba, wanted, 1e-9)
    z, p, k = export.zpk()
    s = 2j * np.pi * F
    factors = [(s - a) for a in z], [(s - a) for a in p]
    same(k * np.prod(factors[0], axis=0) / np.prod(factors[1], axis=0), wanted)
    rows = export.sos()
    same(np.prod([np.polyval(r[:3], s) / np.polyval(r[3:], s) for r in rows], axis=0), wanted)


@pytest.mark.parametrize("name", TEXTS)
def test_state_space_is_h(name: str) -> None:
    export, wanted = made(name)
    a, b, c, d = export.state_space()
    found = np.array([(c @ np.linalg.solve(2j * np.pi * f * np.eye(len(a)) - a, b) + d)[0, 0] for f in F])
    # where H is small it is a difference of large terms here, as in any state space: judged against its peak
    assert np.abs(found - wanted).max() < 1e-12 * np.abs(wanted).max()
    assert len(a) == len(export.ratio.den) - 1


def test_a_small_leading_coefficient_survives() -> None:
    """Coefficients of SI size: 2e-16 s^2 in the numerator is no rounding error."""
    b, _ = sn.export(Ratio.of([Fraction(1, 100), 0, Fraction(2, 10**16)], [1, 1, 1])).ba()
    assert b.tolist() == [2e-16, 0.0, 0.01]


def test_json_holds_the_exact_coefficients() -> None:
    export, _ = made("high-pass")
    data = json.loads(json.dumps(export.data()))
    assert (
        Ratio.of(*([Fraction(c) for c in data[key]] for key in ("numerator", "denominator"))) == export.ratio
    )
    assert sn.network(data["network"]).part_names == ("C1", "C2", "R1", "R2")


# -- discrete time ------------------------------------------------------------------------------------------------


def butterworth(f: str) -> Ratio:
    """Order 2 with w0 = 2 pi f, to double precision."""
    w = Fraction(2 * math.pi) * Fraction(f)
    return Ratio.of([1], [1, Fraction(math.sqrt(2)) / w, 1 / w**2])


def test_bilinear_with_the_frequency_that_stays() -> None:
    """fs = 48 kHz, 1 kHz Butterworth of order 2; coefficients computed apart from this package."""
    found = sn.export(butterworth("1000")).discrete("48 kHz", prewarp="1 kHz")
    b, a = found.ba()
    assert b == pytest.approx([0.00391613, 0.00783225, 0.00391613], abs=5e-9)
    assert a == pytest.approx([1, -1.81534108, 0.83100559], abs=5e-9)
    assert abs(found(1000.0)) == pytest.approx(math.sqrt(0.5), rel=1e-12)


@pytest.mark.parametrize(("f", "lands"), [("1000", 998.6), ("10000", 8854.6)])
def test_without_it_frequencies_move_and_that_is_told(f: str, lands: float) -> None:
    """The -3 dB frequency lands at fs/pi atan(pi f/fs); figures computed apart."""
    with warnings.catch_warnings(record=True) as told:
        warnings.simplefilter("always")
        found = sn.export(butterworth(f)).discrete("48 kHz")
    assert abs(found(lands)) == pytest.approx(math.sqrt(0.5), abs=1e-4)
    moved = [w for w in told if w.category is FrequencyWarpWarning]
    assert bool(moved) == (f == "10000")


def test_word_length_is_told() -> None:
    """fc = 20 Hz at fs = 192 kHz: single precision leaves little of the pole."""
    with pytest.warns(WordLengthWarning, match="single precision"):
        sn.export(butterworth("20")).discrete("192 kHz", prewarp="20 Hz")


@pytest.mark.parametrize("name", TEXTS)
def test_bilinear_is_h_at_the_warped_frequency(name: str) -> None:
    """H(z) = H(s = 2 fs (z - 1)/(z + 1)), its definition."""
    export, _ = made(name)
    fs = 1e7
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        found = export.discrete("10 MHz")
    f = np.geomspace(100, 4.5e6, 50)
    z = np.exp(2j * np.pi * f / fs)
    wanted = export.ratio(2 * fs * (z - 1) / (z + 1))
    assert np.abs(found(f) / wanted - 1).max() < 1e-7


def test_impulse_invariance_is_the_sampled_impulse_response() -> None:
    export, _ = made("ladder")
    fs = 2e6
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        found = export.discrete("2 MHz", "impulse invariance")
    impulse = signal.sosfilt(found.sos, np.eye(1, 400)[0])
    wanted = sn.step(export.ratio).impulse(np.arange(400) / fs) / fs
    assert impulse == pytest.approx(wanted, abs=1e-9 * float(np.abs(wanted).max()))


def test_matched_z_keeps_poles_and_the_gain_at_dc() -> None:
    export, _ = made("ladder")
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        found = export.discrete("1 MHz", "matched z")
    _, a = found.ba()
    poles = np.sort_complex(np.log(np.roots(a)) * 1e6)
    assert poles == pytest.approx(np.sort_complex(export.zpk()[1]), rel=1e-4)
    assert found(0.0) == pytest.approx(complex(export.ratio(0j)), rel=1e-9)


def test_what_cannot_be_carried_away() -> None:
    with pytest.raises(MissingValueError):
        sn.export(sn.derive(sn.network("in -- R1 -- out -- C1 -- gnd; drive in; read out")))
    grows = sn.export(Ratio.of([0, 0, 1], [1, 1]))
    with pytest.raises(UndefinedError):
        grows.state_space()
    with pytest.raises(UndefinedError):
        grows.discrete("48 kHz")
    export, _ = made("ladder")
    with pytest.raises(DimensionError):
        export.discrete("48000")
    with pytest.raises(NotationError, match="cannot be kept"):
        export.discrete("48 kHz", prewarp="30 kHz")
    with pytest.raises(NotationError, match="no frequency to keep"):
        export.discrete("48 kHz", "matched z", prewarp="1 kHz")
