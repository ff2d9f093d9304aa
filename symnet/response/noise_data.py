"""What is typed about noise: the data of an op amp, a temperature, a band, a signal.

An op amp is given as its data sheet has it: ``"en = 5 nV/rtHz, in = 1 pA/rtHz, corner = 100 Hz"``. ``en`` is the voltage
noise density in series with its inputs, ``in`` the current noise density of each input (``in_plus`` and ``in_minus``
where they differ), both for white noise, rms in a bandwidth of 1 Hz; rtHz is the square root of Hz, also typed
sqrt(Hz). Below ``corner`` the 1/f noise is the larger: the square of the density is multiplied by 1 + corner/f, for
voltage and current alike, or each with its own, ``en_corner`` and ``in_corner``.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from fractions import Fraction
from typing import Final

from symnet.errors import Fault, NotationError, Span, SymnetError, nearest
from symnet.quantities import AMPERE, HERTZ, TWO_PI, VOLT, Dimension, read_quantity

__all__ = ["Amplifier", "Band", "Signal", "read_amplifier", "read_band", "read_signal", "read_temperature"]


@dataclass(frozen=True, slots=True)
class Amplifier:
    """The noise of an op amp: densities in V/rtHz and A/rtHz, corner frequencies in Hz; 0 for none."""

    en: Fraction = Fraction(0)
    in_plus: Fraction = Fraction(0)
    in_minus: Fraction = Fraction(0)
    en_corner: Fraction = Fraction(0)
    in_corner: Fraction = Fraction(0)


@dataclass(frozen=True, slots=True)
class Band:
    """From ``low`` to ``high`` in Hz; None for ``high`` means without end."""

    low: Fraction
    high: Fraction | None


@dataclass(frozen=True, slots=True)
class Signal:
    """A sine: ``rms`` in V (A), at ``f`` in Hz; None for ``f`` is the frequency at which the gain is stated."""

    rms: Fraction
    f: Fraction | None = None


_WORDS: Final = {
    "en": ("V/rtHz", ("en",)),
    "in": ("A/rtHz", ("in_plus", "in_minus")),
    "in_plus": ("A/rtHz", ("in_plus",)),
    "in_minus": ("A/rtHz", ("in_minus",)),
    "corner": ("Hz", ("en_corner", "in_corner")),
    "en_corner": ("Hz", ("en_corner",)),
    "in_corner": ("Hz", ("in_corner",)),
}
_EXAMPLE: Final = '"en = 5 nV/rtHz, in = 1 pA/rtHz, corner = 100 Hz"'
_PER_ROOT: Final = re.compile(r"\s*/\s*(?:rtHz|rt\(Hz\)|sqrt\(Hz\)|\u221aHz)\s*$")
_ABSOLUTE_ZERO: Final = Fraction("273.15")  # of Celsius, in kelvin


def read_amplifier(text: str) -> Amplifier:
    """The noise data of an op amp. NotationError with the place in the text where it cannot be read.

    >>> read_amplifier("en = 5 nV/rtHz, in = 1 pA/rtHz").in_minus
    Fraction(1, 1000000000000)
    """
    found: dict[str, Fraction] = {}
    faults: list[Fault] = []
    for match in re.finditer(r"[^,;\n]+", text):
        if not match[0].strip():
            continue
        start = match.start() + len(match[0]) - len(match[0].lstrip())
        span = Span(start, start + len(match[0].strip()))
        word, equals, worth = (piece.strip() for piece in match[0].partition("="))
        if not equals:
            faults.append(Fault("name, = and value are needed", f"write {_EXAMPLE}", span))
        elif word not in _WORDS:
            close = nearest(word, _WORDS)
            hint = f"did you mean {close[0]}?" if close else f"known: {', '.join(_WORDS)}"
            faults.append(Fault(f"{word} is no noise figure of an op amp", hint, span))
        else:
            unit, fields = _WORDS[word]
            try:
                value = _worth(worth, unit)
                for field in fields:
                    if field in found:
                        faults.append(Fault(f"{word} is given twice", "leave one of them out", span))
                    found[field] = value
            except SymnetError as error:
                faults.append(Fault(error.faults[0].message, error.faults[0].hint, span))
    if not faults and not any(found.get(field) for field in ("en", "in_plus", "in_minus")):
        faults.append(Fault("no noise is given", f"write {_EXAMPLE}", Span(0, len(text))))
    if faults:
        raise NotationError(faults, text=text)
    return Amplifier(**found)


def _worth(text: str, unit: str) -> Fraction:
    if unit == "Hz":
        return _positive(read_quantity(text, HERTZ).value, text)
    per_root = _PER_ROOT.search(text)
    if per_root is None:
        raise NotationError(Fault(f"{text!r} is no noise density", f"its unit is {unit}, such as 5 n{unit}"))
    return _positive(read_quantity(text[: per_root.start()], _dimension(unit)).value, text)


def _dimension(unit: str) -> Dimension:
    return VOLT if unit[0] == "V" else AMPERE


def _positive(value: Fraction, text: str) -> Fraction:
    if value < 0:
        raise NotationError(Fault(f"{text} is negative", "densities and frequencies are positive"))
    return value


def read_temperature(text: str | int | Fraction) -> Fraction:
    """A temperature in kelvin: ``"300 K"``, ``"27 degC"``, or a number of kelvin. NotationError otherwise.

    >>> read_temperature("27 degC"), read_temperature(290)
    (Fraction(6003, 20), Fraction(290, 1))
    """
    if not isinstance(text, str):
        return _warm(Fraction(text), str(text))
    found = re.fullmatch(
        r"\s*([+-]?(?:\d+\.?\d*|\.\d+))\s*(K|degC|\N{DEGREE SIGN}C|C)?\s*",
        text.replace("\N{MINUS SIGN}", "-"),
        re.ASCII,
    )
    if found is None:
        raise NotationError(Fault(f"{text!r} is no temperature", 'write "300 K" or "27 degC"'))
    value = Fraction(found[1])
    return _warm(value + _ABSOLUTE_ZERO if (found[2] or "K") != "K" else value, text)


def _warm(value: Fraction, text: str) -> Fraction:
    if value < 0:
        raise NotationError(Fault(f"{text} is below absolute zero", 'write "300 K" or "27 degC"'))
    return value


def read_band(text: str) -> Band:
    """A band of frequencies: ``"20 Hz to 20 kHz"``, ``"from 0.1 Hz"``, ``"up to 1 MHz"``; NotationError otherwise.

    Frequencies are in Hz; rad/s is taken where it is written.

    >>> read_band("20 Hz to 20 kHz"), read_band("from 0.1 Hz")
    (Band(low=Fraction(20, 1), high=Fraction(20000, 1)), Band(low=Fraction(1, 10), high=None))
    """
    low, to, high = (piece.strip() for piece in re.sub(r"^\s*(?:from|up)\b", "", text).partition("to"))
    limits = [_hertz(end) if end else None for end in (low, high)]
    if not (low or high) or (to and not high):
        raise NotationError(
            Fault(f"{text!r} is no band", 'write "20 Hz to 20 kHz", "from 0.1 Hz" or "up to 1 MHz"')
        )
    if not to and not text.strip().startswith("from"):
        raise NotationError(
            Fault(f"{text!r} is one frequency", f'write "from {low}", "up to {low}" or both limits')
        )
    band = Band(limits[0] or Fraction(0), limits[1])
    if band.high is not None and band.high <= band.low:
        raise NotationError(Fault(f"the band {text!r} is empty", "the lower frequency comes first"))
    return band


def read_signal(text: str, dimension: Dimension) -> Signal:
    """A sine by its rms value, ``"100 mV"`` or ``"100 mV at 1 kHz"``.

    >>> read_signal("100 mV at 1 kHz", VOLT)
    Signal(rms=Fraction(1, 10), f=Fraction(1000, 1))
    """
    size, _, at = (piece.strip() for piece in text.partition(" at "))
    value = read_quantity(size.removesuffix("rms").strip(), dimension).value
    if value <= 0:
        raise NotationError(Fault(f"a signal of {size}", "give the rms value of a sine: 100 mV at 1 kHz"))
    return Signal(value, _hertz(at) if at else None)


def _hertz(text: str) -> Fraction:
    value = _positive(read_quantity(text, HERTZ).value, text)
    return value / TWO_PI if text.endswith("rad/s") else value
