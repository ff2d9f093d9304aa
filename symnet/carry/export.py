"""H for other programs: arrays, factors, source code and discrete time, from one value that says what it is."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Any, TypeAlias

import numpy as np
from numpy.typing import NDArray

from symnet.carry.discrete import Discrete, Method, discretise
from symnet.carry.factors import factors_of
from symnet.carry.source import c_source, python_source
from symnet.errors import DimensionError, Fault, UndefinedError
from symnet.exact.ratio import Ratio
from symnet.quantities import HERTZ, read_quantity
from symnet.response.frequency import in_numbers
from symnet.typeset.displayed import Displayed

if TYPE_CHECKING:
    from symnet.exact.transfer import Transfer

__all__ = ["Export", "export"]

Floats: TypeAlias = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Export(Displayed):
    """H with numbers, ready to be taken elsewhere. Frequencies of H are in rad/s unless a method says Hz."""

    ratio: Ratio
    transfer: Transfer | None = None

    def ba(self) -> tuple[Floats, Floats]:
        """Numerator and denominator coefficients in *descending* powers of s, as scipy.signal takes them.

        The denominator's highest coefficient is 1. The coefficients of a high order in SI units are good to the last
        digit here, and little of that may be left of what is computed from them: :meth:`sos` or :meth:`zpk` keep it.
        """
        h = self.ratio
        lead = h.den[-1]
        b, a = (np.array([float(c / lead) for c in reversed(side)]) for side in (h.num or (0 * lead,), h.den))
        return b, a

    def zpk(self) -> tuple[NDArray[np.complex128], NDArray[np.complex128], float]:
        """Zeros and poles in rad/s, repeated as often as they occur, and the factor in front of the product."""
        h = self.ratio
        z, p = (
            np.array([r.value for r in found for _ in range(r.multiplicity)], dtype=complex)
            for found in (h.zeros(), h.poles())
        )
        return z, p, float(h.num[-1] / h.den[-1]) if h.num else 0.0

    def sos(self) -> Floats:
        """Analog second-order sections, rows b2, b1, b0, a2, a1, a0 in *descending* powers of s, gain in the first."""
        gain, factors = factors_of(self.ratio)
        rows = np.array([[*each.b[::-1], *each.a[::-1]] for each in factors] or [[0.0, 0, 1, 0, 0, 1]])
        rows[0, :3] *= gain
        return rows

    def state_space(self) -> tuple[Floats, Floats, Floats, Floats]:
        """A, B, C, D of x' = A x + B u, y = C x + D u: the factors one after the other, time in seconds.

        UndefinedError where H grows with s, which no state-space form does.
        """
        h = self.ratio
        if len(h.num) > len(h.den):
            raise UndefinedError(
                Fault("H grows with s and has no state-space form", "add the pole that limits it")
            )
        return _controllable(h)

    def c(self, name: str = "H") -> str:
        """A C99 function of the frequency in Hz, with the exact coefficients as comments."""
        return c_source(self.ratio, name, self.transfer)

    def python(self, name: str = "H") -> str:
        """A Python function of the frequency in Hz, with the exact coefficients as comments."""
        return python_source(self.ratio, name, self.transfer)

    def discrete(self, fs: str, method: Method = "bilinear", prewarp: str | None = None) -> Discrete:
        """H(z) at the sampling frequency ``fs`` (text, ``"48 kHz"``), as second-order sections.

        ``method`` is "bilinear", "matched z" or "impulse invariance". ``prewarp`` (text, Hz) is the frequency that
        the bilinear transform keeps; without it a FrequencyWarpWarning says how far frequencies move, when they move
        by more than 0.5 %. A WordLengthWarning says when single precision would not do.

        >>> import symnet as sn
        >>> H = sn.derive(sn.network("in -- R1 = 1k -- out -- C1 = 1 uF -- gnd; drive in; read out"))
        >>> sn.export(H).discrete("48 kHz", prewarp="159 Hz")
        <Discrete: 1 sections at fs = 48000 Hz, bilinear>
        """
        return discretise(self.ratio, _hertz(fs), method, None if prewarp is None else _hertz(prewarp))

    def data(self) -> dict[str, Any]:
        """Exact coefficients as text, ascending in s, with what they are: ready for JSON."""
        found: dict[str, Any] = {
            "format": "symnet transfer function 1",
            "s": "rad/s",
            "numerator": [str(c) for c in self.ratio.num],
            "denominator": [str(c) for c in self.ratio.den],
        }
        if self.transfer is not None:
            found["label"] = self.transfer.label
            found["unit"] = str(self.transfer.dimension)
            found["values in SI units"] = {name: str(value) for name, value in self.transfer.values.items()}
            found["network"] = self.transfer.network.to_text()
        return found

    def __repr__(self) -> str:
        label = "" if self.transfer is None else f" of {self.transfer.label}"
        return f"<Export{label}: degree {max(0, len(self.ratio.num) - 1)}/{len(self.ratio.den) - 1}>"


def export(H: Transfer | Ratio) -> Export:
    """H for other programs; see :class:`Export` for what it can become.

    Raises MissingValueError while a name of H has no number.

    >>> import symnet as sn
    >>> H = sn.derive(sn.network("in -- R1 = 1k -- out -- C1 = 1 uF -- gnd; drive in; read out"))
    >>> b, a = sn.export(H).ba()
    >>> b.tolist(), a.tolist()
    ([1000.0], [1.0, 1000.0])
    """
    return Export(in_numbers(H), None if isinstance(H, Ratio) else H)


def _hertz(text: str) -> float:
    quantity = read_quantity(text)
    if quantity.dimension != HERTZ or "rad" in text:
        raise DimensionError(Fault(f"{text} is no frequency in Hz", "write for example 48 kHz"))
    return float(quantity.value)


def _controllable(h: Ratio) -> tuple[Floats, Floats, Floats, Floats]:
    """The chain of the factors' state spaces; each is scaled by its own frequency, so that its entries are of one size."""
    gain, factors = factors_of(h)
    a, b, c, d = (np.zeros((0, 0)), np.zeros((0, 1)), np.zeros((1, 0)), np.array([[gain]]))
    waiting = [list(each.b) for each in factors if each.a == (1.0, 0.0, 0.0)]
    for each in factors:
        den = list(each.a)
        num = list(each.b)
        if den == [1.0, 0.0, 0.0]:
            continue
        order = 2 if den[2] else 1
        while waiting and _degree(num) + _degree(waiting[-1]) <= order:
            num = list(np.convolve(num, waiting.pop())[:3])
            num += [0.0] * (3 - len(num))
        a2, b2, c2, d2 = _block(num, den, order)
        a = np.block([[a, np.zeros((len(a), order))], [b2 @ c, a2]])
        b = np.vstack([b, b2 @ d])
        c = np.hstack([d2 @ c, c2])
        d = d2 @ d
    return a, b, c, d


def _degree(polynomial: list[float]) -> int:
    return max((k for k, value in enumerate(polynomial) if value), default=0)


def _block(num: list[float], den: list[float], order: int) -> tuple[Floats, Floats, Floats, Floats]:
    lead = den[order]
    n, q = [x / lead for x in num[: order + 1]], [x / lead for x in den[: order + 1]]
    direct = n[order]
    rest = [n[k] - direct * q[k] for k in range(order)]
    if order == 1:
        return np.array([[-q[0]]]), np.array([[1.0]]), np.array([[rest[0]]]), np.array([[direct]])
    w = float(np.sqrt(abs(q[0]))) or 1.0
    a = np.array([[0.0, w], [-q[0] / w, -q[1]]])
    return a, np.array([[0.0], [1.0]]), np.array([[rest[0] / w, rest[1]]]), np.array([[direct]])
