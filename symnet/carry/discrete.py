"""H in discrete time, as second-order sections: bilinear with a stated frequency, matched z, impulse invariance.

Bilinear: s = c (z - 1)/(z + 1), with c = 2 fs, or c = w/tan(w/(2 fs)) so that the frequency w/(2 pi) stays where it
is; every other frequency f of H lands at fs/pi atan(2 pi f/c). Matched z: every pole and zero goes to exp(s/fs),
zeros at infinite frequency but one go to z = -1, the gain is kept at DC (or where |H| is not 0 or infinite there).
Impulse invariance: the impulse response at the times k/fs, divided by fs, half of its jump at t = 0 (L. B. Jackson, A
correction to impulse invariance, IEEE Signal Processing Letters 7, 2000, 273-275). A. V. Oppenheim, R. W. Schafer,
Discrete-Time Signal Processing, chapter 7, for all three (from memory).

Sections are made of poles and zeros, never of multiplied-out coefficients.
"""

from __future__ import annotations

import cmath
import math
import warnings
from dataclasses import dataclass
from typing import TYPE_CHECKING, Literal, TypeAlias

import numpy as np
from numpy.typing import NDArray

from symnet.errors import Fault, NotationError, UndefinedError
from symnet.typeset.displayed import Displayed

if TYPE_CHECKING:
    from symnet.exact.ratio import Ratio

__all__ = ["Discrete", "FrequencyWarpWarning", "WordLengthWarning", "discretise"]

Method: TypeAlias = Literal["bilinear", "matched z", "impulse invariance"]
Floats: TypeAlias = NDArray[np.float64]

_LOUD = 0.005  # relative shift of a frequency of H that is worth a warning


class FrequencyWarpWarning(UserWarning):
    """A frequency of H lands somewhere else than it was."""


class WordLengthWarning(UserWarning):
    """The coefficients would not survive in single precision."""


@dataclass(frozen=True, eq=False)
class Discrete(Displayed):
    """A discrete-time H(z) at ``fs`` in Hz as second-order sections.

    ``sos`` has one row b0, b1, b2, 1, a1, a2 for each section, in powers of 1/z; the gain stands in the first.
    """

    fs: float
    method: Method
    sos: Floats

    def __call__(self, f: float | Floats) -> NDArray[np.complex128]:
        """H at the frequencies f in Hz (z = exp(j 2 pi f/fs))."""
        z = np.exp(-2j * np.pi * np.asarray(f, dtype=float) / self.fs)  # 1/z
        total = np.ones(z.shape, dtype=complex)
        for b0, b1, b2, _, a1, a2 in self.sos:
            total = total * (b0 + z * (b1 + z * b2)) / (1 + z * (a1 + z * a2))
        return total

    def ba(self) -> tuple[Floats, Floats]:
        """Numerator and denominator multiplied out, in powers of 1/z; sections keep more digits."""
        b, a = np.array([1.0]), np.array([1.0])
        for row in self.sos:
            b, a = np.convolve(b, row[:3]), np.convolve(a, row[3:])
        return np.trim_zeros(b, "b"), np.trim_zeros(a, "b")

    def rows(self) -> tuple[tuple[str, ...], ...]:
        """The sections, one row each, coefficients as they are in a double."""
        return tuple(tuple(repr(float(c)) for c in row) for row in self.sos)

    def __repr__(self) -> str:
        return f"<Discrete: {len(self.sos)} sections at fs = {self.fs:.6g} Hz, {self.method}>"


def discretise(h: Ratio, fs: float, method: Method, prewarp: float | None) -> Discrete:
    """H(s) at a sampling frequency fs in Hz; ``prewarp`` is the frequency in Hz that the bilinear transform keeps."""
    if not (fs > 0 and math.isfinite(fs)):
        raise NotationError(Fault(f"a sampling frequency of {fs} Hz", "it is above 0 Hz"))
    if prewarp is not None and method != "bilinear":
        raise NotationError(Fault(f"{method} has no frequency to keep", "leave out prewarp"))
    if prewarp is not None and not 0 < prewarp < fs / 2:
        raise NotationError(
            Fault(f"{prewarp:.6g} Hz cannot be kept at fs = {fs:.6g} Hz", "it lies between 0 and fs/2")
        )
    if len(h.num) > len(h.den):
        raise UndefinedError(Fault("H grows with s and has no discrete form", "add the pole that limits it"))
    poles = [r.value for r in h.poles() for _ in range(r.multiplicity)]
    zeros = [r.value for r in h.zeros() for _ in range(r.multiplicity)]
    if not h.num:
        return Discrete(fs, method, np.array([[0.0, 0, 0, 1, 0, 0]]))
    if method == "impulse invariance":
        return Discrete(fs, method, _invariant(h, fs))
    if method == "bilinear":
        c = 2 * fs if prewarp is None else 2 * math.pi * prewarp / math.tan(math.pi * prewarp / fs)
        z_poles = [(c + p) / (c - p) for p in poles]
        z_zeros = [(c + z) / (c - z) for z in zeros] + [-1.0] * (len(poles) - len(zeros))
        if prewarp is None:
            _warn_of_warp(poles, fs)
        at = next(x for x in (0.0, math.inf, c, c / 2) if _is_plain(h, x))
        there = -1.0 if at == math.inf else (c + at) / (c - at) if at != c else math.inf
    else:
        z_poles = [cmath.exp(p / fs) for p in poles]
        z_zeros = [cmath.exp(z / fs) for z in zeros] + [-1.0] * max(0, len(poles) - len(zeros) - 1)
        at = next(x for x in (0.0, 0.1 * fs, 0.3 * fs) if _is_plain(h, x))
        there = math.exp(at / fs)
    sections = _sections(z_poles, z_zeros)
    own = 1.0
    for row in sections:
        own *= _value(row, there)
    value = float(h.num[-1] / h.den[-1]) if at == math.inf else h(complex(at)).real
    sections[0][:3] *= value / own
    _warn_of_words(sections)
    return Discrete(fs, method, np.array(sections))


def _is_plain(h: Ratio, s: float) -> bool:
    """Whether H is neither zero nor infinite at a real s."""
    if s == math.inf:
        return len(h.num) == len(h.den)
    if s == 0:
        return bool(h.num[0] and h.den[0])
    value = abs(h(complex(s)))
    return bool(value) and math.isfinite(value)


def _sections(poles: list[complex], zeros: list[complex]) -> list[Floats]:
    """Poles by falling distance from the circle, each pair with the zeros nearest to it."""
    pairs = sorted(_pairs(poles), key=lambda pair: abs(1 - max(map(abs, pair))), reverse=True)
    left = list(zeros)
    found: list[Floats] = []
    for pair in reversed(pairs):  # the sharpest pair chooses first
        chosen: list[complex] = []
        while left and len(chosen) < len(pair):
            nearest = min(left, key=lambda z: min(abs(z - p) for p in pair))
            if complex(nearest).imag:
                if len(pair) - len(chosen) < 2:
                    others = [z for z in left if not complex(z).imag]
                    if not others:
                        break
                    nearest = min(others, key=lambda z: min(abs(z - p) for p in pair))
                else:
                    twin = min(left, key=lambda z: abs(z - complex(nearest).conjugate()))
                    left.remove(twin)
                    chosen.append(twin)
            left.remove(nearest)
            chosen.append(nearest)
        found.append(np.concatenate([_quadratic(chosen), _quadratic(list(pair))]))
    while left:  # zeros that no pair had room for
        extra = [left.pop() for _ in range(min(2, len(left)))]
        found.append(np.concatenate([_quadratic(extra), [1.0, 0.0, 0.0]]))
    return found[::-1] or [np.array([1.0, 0, 0, 1, 0, 0])]


def _pairs(poles: list[complex]) -> list[tuple[complex, ...]]:
    upper = [p for p in poles if complex(p).imag > 0]
    real = sorted((p for p in poles if not complex(p).imag), key=lambda p: complex(p).real)
    pairs: list[tuple[complex, ...]] = [(p, p.conjugate()) for p in upper]
    while len(real) > 1:
        pairs.append((real.pop(), real.pop()))
    return pairs + [(p,) for p in real]


def _quadratic(roots: list[complex]) -> Floats:
    """prod(1 - root/z) in powers of 1/z, three coefficients."""
    if not roots:
        return np.array([1.0, 0.0, 0.0])
    if len(roots) == 1:
        return np.array([1.0, -complex(roots[0]).real, 0.0])
    one, two = map(complex, roots)
    return np.array([1.0, -(one + two).real, (one * two).real])


def _value(row: Floats, z: float) -> float:
    """A section at a real z."""
    if math.isinf(z):
        return float(row[0])
    w = 1 / z
    return float((row[0] + w * (row[1] + w * row[2])) / (1 + w * (row[4] + w * row[5])))


def _invariant(h: Ratio, fs: float) -> Floats:
    """Sections whose impulse response is that of H at the times k/fs, over fs; the direct term stays as it is."""
    from symnet.response.modes import Modes

    modes = Modes.of(h, 0)
    direct = float(h.num[-1] / h.den[-1]) if len(h.num) == len(h.den) else 0.0
    jump = float(modes([0.0])[0]) / fs / 2
    poles = [cmath.exp(r.value / fs) for r in h.poles() for _ in range(r.multiplicity)]
    order = len(poles)
    samples = modes(np.arange(order + 1) / fs) / fs
    samples[0] -= jump
    samples[0] += direct
    denominator = np.array([1.0 + 0j])
    for p in poles:
        denominator = np.convolve(denominator, [1.0, -p])
    numerator = np.convolve(samples, denominator.real)[: order + 1]
    while len(numerator) > 1 and abs(numerator[-1]) < 1e-15 * np.abs(numerator).max():
        numerator = numerator[:-1]
    zeros = [complex(z) for z in np.roots(numerator)] if len(numerator) > 1 else []
    sections = _sections(poles, zeros)
    sections[0][:3] *= float(numerator[0])
    _warn_of_words(sections)
    return np.array(sections)


def _warn_of_warp(poles: list[complex], fs: float) -> None:
    shifts = []
    for p in poles:
        f = abs(p) / (2 * math.pi)
        lands = fs / math.pi * math.atan(math.pi * f / fs)
        shifts.append((f, lands))
    f, lands = max(
        shifts, key=lambda each: abs(each[1] / each[0] - 1) if each[0] else 0.0, default=(0.0, 0.0)
    )
    if f and abs(lands / f - 1) > _LOUD:
        warnings.warn(
            f"without prewarp the bilinear transform moves {f:.5g} Hz to {lands:.5g} Hz at fs = {fs:.6g} Hz; "
            "give the frequency to keep, prewarp=",
            FrequencyWarpWarning,
            stacklevel=4,
        )


def _warn_of_words(sections: list[Floats]) -> None:
    """Compare the poles of each section with those that single precision leaves of it."""
    worst = 0.0
    for row in sections:
        exact, rounded = (np.roots(each[3:]) for each in (row, row.astype(np.float32).astype(float)))
        for one, two in zip(np.sort_complex(exact), np.sort_complex(rounded), strict=False):
            if 0 < abs(one) < 1 and two:
                worst = max(worst, abs(np.log(complex(two)) / np.log(complex(one)) - 1))
    if worst > 0.02:
        warnings.warn(
            f"in single precision a pole would move by {100 * worst:.2g} %; keep these sections in double precision, "
            "or lower the sampling frequency",
            WordLengthWarning,
            stacklevel=4,
        )
