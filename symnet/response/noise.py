"""Noise at a read: what each resistor and op amp makes there, over all frequencies or in a band, ranked.

Conventions. Densities are one-sided, over f from 0 upwards: S in V^2/Hz and its root in V/rtHz (A for a current).
Sources are independent of each other, so that their densities and mean squares add. A resistor has 4kTR at every
frequency, with the k of the SI, exact since 2019; T is 300 K unless another temperature is given. Voltage drives are
shorts and current drives are open, and make no noise. Mean squares over all frequencies are exact fractions, found in
closed form (:mod:`symnet.response.noise_integrals`); in a band they are good to 20 digits.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property
from typing import TYPE_CHECKING, Any

import numpy as np

from symnet.circuit.wiring import check_wiring
from symnet.errors import Fault, MissingValueError, UndefinedError, WiringError
from symnet.exact.derive import derive_from, dimension_of_read, driven_by, read_of
from symnet.exact.ratio import Ratio
from symnet.exact.roots import roots
from symnet.exact.superposition import superposition
from symnet.quantities import AMPERE, TWO_PI, VOLT, Dimension
from symnet.response.axis import squared
from symnet.response.frequency import Floats, squared_magnitude
from symnet.response.noise_data import (
    Band,
    Signal,
    read_amplifier,
    read_band,
    read_signal,
    read_temperature,
)
from symnet.response.noise_formula import NoiseFormula, noise_formula
from symnet.response.noise_integrals import antiderivative_between, moments
from symnet.response.noise_sources import Source, amplifiers_of, sources_of
from symnet.response.noise_spectrum import Spectrum, improper, spectrum
from symnet.typeset.displayed import Displayed
from symnet.typeset.numbers import quantity

if TYPE_CHECKING:
    from symnet.circuit.network import Network
    from symnet.exact.superposition import Superposition
    from symnet.exact.transfer import Transfer
    from symnet.expressions import Expression
    from symnet.response.noise_sources import Sources

__all__ = ["Contributor", "Noise", "Reference", "noise"]


@dataclass(frozen=True, slots=True)
class Contributor:
    """One source and what it makes at the read.

    ``density`` is the white part of the spectral density there, in V^2/Hz (A^2/Hz), an exact function of x = w^2 in the
    place of s; the whole is ``density * (1 + corner/f)``. ``own`` is the density of the source itself, in V^2/Hz or
    A^2/Hz, where it is white; ``mean_square`` in V^2 (A^2).
    """

    source: Source
    own: Fraction | None
    density: Ratio
    mean_square: Fraction

    @property
    def name(self) -> str:
        """``R1``, ``en of U1``, ``in of U1, plus``."""
        return self.source.name

    @property
    def rms(self) -> float:
        """The root of the mean square, in V (A)."""
        return root(self.mean_square)

    def __repr__(self) -> str:
        return f"<{self.name}: mean square {float(self.mean_square):.6g}>"


@dataclass(frozen=True, slots=True)
class Reference:
    """Where the gain is stated: ``where`` in words, ``f`` in Hz (infinite without end), ``squared`` = |H|^2 there."""

    where: str
    f: float
    squared: Fraction

    @property
    def gain(self) -> float:
        """|H| there."""
        return root(self.squared)


@dataclass(frozen=True, eq=False, repr=False)
class Noise(Displayed):
    """The noise of a network at one read; made by :func:`symnet.noise`.

    ``contributors`` come largest first. ``label`` says what is read, ``dimension`` whether in volt or ampere;
    ``temperature`` is in kelvin, ``band`` None for all frequencies; ``gain`` is H from the drive to the read, where there
    is one drive; ``assumptions`` are sentences.
    """

    network: Network
    label: str
    dimension: Dimension
    temperature: Fraction
    band: Band | None
    contributors: tuple[Contributor, ...]
    assumptions: tuple[str, ...]
    gain: Transfer | None
    signal: Signal | None
    _found: Sources
    _superposed: Superposition

    @property
    def mean_square(self) -> Fraction:
        """The mean square of all sources together in V^2 (A^2); exact where the band is None."""
        return sum((c.mean_square for c in self.contributors), Fraction(0))

    @property
    def rms(self) -> float:
        """The root of the mean square, in V (A)."""
        return root(self.mean_square)

    def peak_to_peak(self, factor: float) -> float:
        """``factor`` times the rms value: noise has no peak, so that the factor is to be stated with the figure.

        Gaussian noise lies outside of +-factor/2 times its rms value for the fraction erfc(factor/2/sqrt(2)) of the
        time: 0.27 % for 6, 0.097 % for 6.6.
        """
        return factor * self.rms

    def share(self, contributor: Contributor) -> float:
        """The part of a contributor in the mean square, from 0 to 1."""
        return float(contributor.mean_square / self.mean_square) if self.mean_square else 0.0

    def density(self, f: Any, of: str | None = None) -> Any:
        """The density at the read in V/rtHz (A/rtHz) at frequencies f in Hz; ``of`` names one contributor.

        A float for a number, an array for an array; infinite at f = 0 where there is 1/f noise.
        """
        return np.sqrt(self._power(f, of)) if np.ndim(f) else math.sqrt(self._power(f, of))

    def input_density(self, f: Any) -> Any:
        """The density at the drive that would make the same at the read, in V/rtHz (A/rtHz): density/|H|.

        UndefinedError without a single drive; infinite where H is zero.
        """
        h = self._transfer.numeric()
        size = np.abs(h(2j * math.pi * np.asarray(f, dtype=np.float64)))
        with np.errstate(divide="ignore"):
            found = self.density(f) / size
        return found if np.ndim(f) else float(found)

    @cached_property
    def reference(self) -> Reference:
        """Where the gain is stated: at DC, unless H is zero or infinite there; else at the highest |H|."""
        return _reference(self._transfer.numeric())

    @cached_property
    def bandwidth(self) -> float:
        """The noise bandwidth of H in Hz: the integral of |H|^2 over f, divided by |H|^2 at :attr:`reference`.

        pi/2 times f3dB for first order. UndefinedError when H is not stable or does not fall off.
        """
        h = self._transfer.numeric()
        if any(pole.real >= 0 for pole in h.poles()) or len(h.num) >= len(h.den):
            raise UndefinedError(
                Fault("H does not fall off at high frequencies, or is not stable: no noise bandwidth")
            )
        return float(_everywhere(squared(h.num), moments(h.den)) / self.reference.squared)

    @property
    def input_rms(self) -> float:
        """The rms value at the drive that would make the same at the read, with the gain at :attr:`reference`."""
        return self.rms / self.reference.gain

    @property
    def signal_at_read(self) -> float:
        """The rms value of the stated signal at the read; without a drive it is stated there."""
        if self.signal is None:
            raise UndefinedError(Fault("no signal is stated", 'noise(net, signal="1 V at 1 kHz")'))
        if self.gain is None:
            return float(self.signal.rms)
        if self.signal.f is None:
            return float(self.signal.rms) * self.reference.gain
        return float(self.signal.rms) * abs(self._transfer.numeric()(2j * math.pi * float(self.signal.f)))

    @property
    def signal_to_noise(self) -> float:
        """The rms of the signal at the read over that of the noise, in dB."""
        level = self.signal_at_read
        if not level or not self.rms:
            return -math.inf if not level else math.inf
        return 20 * math.log10(level / self.rms)

    @cached_property
    def formula(self) -> NoiseFormula:
        """The mean square over all frequencies in symbols; LimitError above order 4, UndefinedError if infinite."""
        return noise_formula(self._found, self._superposed, self.label, self.dimension, self.temperature)

    @property
    def _transfer(self) -> Transfer:
        if self.gain is None:
            hint = "give the network one drive, or say which: noise(net, drive=...)"
            raise UndefinedError(Fault("there is no drive to refer the noise to", hint))
        return self.gain

    def _power(self, f: Any, of: str | None) -> Floats:
        chosen = [c for c in self.contributors if of is None or c.name == of]
        if of is not None and not chosen:
            raise self.network.unknown(of, [c.name for c in self.contributors], "contributor")
        at = np.asarray(f, dtype=np.float64)
        x = (2 * math.pi * at) ** 2
        total = np.zeros(at.shape)
        for each in chosen:
            flicker: Any = 1.0
            if each.source.corner:
                with np.errstate(divide="ignore"):
                    flicker = 1 + float(each.source.corner) / at
            total = total + each.density(x.astype(np.complex128)).real * flicker
        return total if np.ndim(f) else float(total)  # type: ignore[return-value]

    def __repr__(self) -> str:
        unit = str(self.dimension)
        first = ", ".join(f"{c.name} {100 * self.share(c):.3g} %" for c in self.contributors[:3])
        return f"<Noise at {self.label}: {quantity(self.rms, unit)} rms {self.where}; {first}>"

    @property
    def where(self) -> str:
        """The frequencies that are counted, in words."""
        if self.band is None:
            return "over all frequencies"
        low = quantity(self.band.low, "Hz")
        return (
            f"from {low} up" if self.band.high is None else f"from {low} to {quantity(self.band.high, 'Hz')}"
        )


def noise(
    network: Network,
    read: str | None = None,
    *,
    drive: str | None = None,
    temperature: str | int | Fraction = "300 K",
    band: str | None = None,
    signal: str | None = None,
    amplifiers: Mapping[str, str] | None = None,
    **named: str,
) -> Noise | NoiseFormula:
    """The noise at a read: of every resistor, and of the op amps whose noise is given.

    ``temperature`` is that of all resistors, ``"300 K"`` or ``"27 degC"``. ``band``, ``"20 Hz to 20 kHz"``, ``"from 0.1 Hz"``
    or ``"up to 1 MHz"``, limits the integral, which else goes over all frequencies. Op amps are given by name,
    ``U1="en = 5 nV/rtHz, in = 1 pA/rtHz, corner = 100 Hz"`` (:mod:`symnet.response.noise_data`), in ``amplifiers`` where
    the name has a dot; the others are noiseless, and the result says so. ``signal`` is a sine at the drive by its rms
    value, ``"100 mV at 1 kHz"``. ``read`` and ``drive`` are as in :func:`symnet.derive`; no drive is needed.

    A network with symbols gives a :class:`~symnet.response.noise_formula.NoiseFormula`: mean squares over all
    frequencies in symbols, up to order 4.

    Raises UndefinedError for a network that is not stable, for noise that reaches the read at infinite frequency and for
    1/f noise down to 0 Hz, none of which has an rms value; WiringError, SingularError and NotationError as
    :func:`symnet.derive` does.

    >>> import symnet as sn
    >>> found = sn.noise(sn.network("in -- R1 = 10k -- out -- C1 = 1 nF -- gnd; drive in; read out"))
    >>> found
    <Noise at out: 2.035 uV rms over all frequencies; R1 100 %>
    >>> found.mean_square == Fraction("1.380649e-23")*300/Fraction("1e-9")        # kT/C
    True
    >>> print(found.formula.total)
    mean square at out = k_B*T/C1
    """
    if drive is not None:
        network, chosen = driven_by(network, drive)
    elif len(network.drives) == 1:
        chosen = network.drives[0]
    else:
        chosen = None
    expression = _the_read(network, read)
    check_wiring(network)
    data = {**(amplifiers or {}), **named}
    known = amplifiers_of(network)
    for name in data:
        if name not in known:
            raise network.unknown(name, known or ("no op amp",), "op amp")
    found = sources_of(network, expression, {name: read_amplifier(text) for name, text in data.items()})
    if not found.sources:
        raise UndefinedError(
            Fault("nothing in this network makes noise", "resistors do, and op amps with noise data")
        )
    kelvin, limits = read_temperature(temperature), None if band is None else read_band(band)
    superposed = superposition(found.network, found.read)
    label, dimension = _label(expression), dimension_of_read(superposed.naming, network, expression)
    if superposed.missing:
        if limits is not None or signal is not None:
            missing = superposed.missing
            raise MissingValueError(
                Fault(f"no value for {', '.join(missing)}", "a band and a signal need numbers", parts=missing)
            )
        return noise_formula(found, superposed, label, dimension, kelvin)
    densities = spectrum(found, superposed, kelvin)
    gain = None if chosen is None else derive_from(network, chosen, expression)
    at_drive = dimension if gain is None else VOLT if gain.dimension == dimension / VOLT else AMPERE
    return Noise(
        network,
        label,
        dimension,
        kelvin,
        limits,
        _ranked(densities, limits),
        (*_conventions(kelvin, limits), *found.remarks, *densities.remarks),
        gain,
        None if signal is None else read_signal(signal, at_drive),
        found,
        superposed,
    )


def _the_read(network: Network, read: str | None) -> Expression:
    if read is not None:
        return read_of(network, read)
    if len(network.reads) != 1:
        said = "several reads" if network.reads else "no read"
        raise WiringError(Fault(f"the network has {said}", 'say which: noise(net, read="out")'))
    return network.reads[0]


def _label(read: Expression) -> str:
    from symnet.circuit.spelling import write_expression

    return write_expression(read)


def _conventions(kelvin: Fraction, band: Band | None) -> tuple[str, ...]:
    return (
        f"all resistors at {quantity(kelvin, 'K')}, each 4kTR with k = 1.380649e-23 J/K exactly; sources independent",
        "densities are one-sided, f from 0 up; drives are ideal and noiseless",
        "all frequencies are counted"
        if band is None
        else "only the stated band is counted, with sharp edges",
    )


def _ranked(densities: Spectrum, band: Band | None) -> tuple[Contributor, ...]:
    below = squared(densities.d)
    found = []
    shared = _shared_moments(densities) if band is None else None
    for source, top, own in zip(densities.sources, densities.numerators, densities.own, strict=True):
        ratio = Ratio.of(top, below)
        if shared is not None:
            mean = _everywhere(top, shared)
        elif band is not None:
            mean = _within(ratio, source, band)
        found.append(Contributor(source, own, ratio, mean))
    return tuple(sorted(found, key=lambda c: -c.mean_square))


def _shared_moments(densities: Spectrum) -> list[Fraction]:
    for source, top in zip(densities.sources, densities.numerators, strict=True):
        if source.corner:
            raise UndefinedError(
                Fault(
                    f"1/f noise ({source.name}) has no rms value over all frequencies: its integral diverges at 0 Hz",
                    'state a band, as in noise(net, band="0.1 Hz to 10 Hz")',
                    parts=(source.part,),
                )
            )
        if len(top) > densities.order:
            raise improper(source)
    return moments(densities.d)


def _everywhere(top: list[Fraction], shared: list[Fraction]) -> Fraction:
    """The integral over f from 0 up: half of that over w from end to end, divided by 2 pi."""
    return sum((c * moment for c, moment in zip(top, shared, strict=False)), Fraction(0)) / 2


def _within(density: Ratio, source: Source, band: Band) -> Fraction:
    """The integral over a band: of S dw/(2 pi), and of S corner df/f = S corner dx/(2x)."""
    if band.high is None and len(density.num) >= len(density.den):
        raise improper(source)
    if source.corner and not band.low:
        raise UndefinedError(
            Fault(
                f"1/f noise ({source.name}) has no rms value down to 0 Hz: its integral diverges there",
                'state where the band begins, as in noise(net, band="0.1 Hz to 10 Hz")',
                parts=(source.part,),
            )
        )
    low, high = TWO_PI * band.low, None if band.high is None else TWO_PI * band.high
    in_w = Ratio.of(_spread(density.num), _spread(density.den))
    total = antiderivative_between(in_w, low, high) / TWO_PI
    if source.corner:
        over_x = Ratio.of(density.num, [Fraction(0), *(2 * c for c in density.den)])
        total += source.corner * antiderivative_between(over_x, low**2, None if high is None else high**2)
    return total


def _spread(coefficients: tuple[Fraction, ...]) -> list[Fraction]:
    """A polynomial in x = w^2 as one in w."""
    return [c if k == 0 else Fraction(0) for c in coefficients for k in (0, 1)][:-1]


def _reference(h: Ratio) -> Reference:
    """DC, or the highest |H|."""
    if h.is_zero:
        raise UndefinedError(
            Fault("H = 0: nothing of the drive reaches the read, so that noise has no equal there")
        )
    size = squared_magnitude(h)
    if size.num[0] and size.den[0]:
        return Reference("at DC", 0.0, size.num[0] / size.den[0])
    if any(pole.is_imaginary for pole in h.poles()):
        raise UndefinedError(
            Fault("H is infinite at a pole on the jw axis: there is no gain to refer noise to")
        )
    best = Reference("", 0.0, Fraction(0))
    slope = _slope(size)
    for each in roots(slope) if len(slope) > 1 else ():
        if each.is_real and each.real > 0 and (here := size.at(each.real)) > best.squared:
            f = math.sqrt(each.real) / (2 * math.pi)
            best = Reference(f"at its peak, {quantity(f, 'Hz')}", f, here)
    if len(size.num) == len(size.den) and size.num[-1] / size.den[-1] > best.squared:
        return Reference("at high frequencies", math.inf, size.num[-1] / size.den[-1])
    if len(size.num) > len(size.den):
        raise UndefinedError(Fault("H grows without end: there is no gain to refer noise to"))
    return best


def _slope(size: Ratio) -> list[Fraction]:
    """The numerator of the derivative by x."""
    from symnet.response.axis import added, product, trimmed

    top, below = ([k * c for k, c in enumerate(side)][1:] for side in (size.num, size.den))
    return trimmed(added(product(top, size.den), product(size.num, below), -1))


def root(square: Fraction) -> float:
    """The square root as a float, also where the square is too small for one.

    >>> root(Fraction(4, 10**400))
    2e-200
    """
    if not square:
        return 0.0
    shift = (square.denominator.bit_length() - square.numerator.bit_length()) // 2
    scaled = square * Fraction(4) ** shift
    return math.ldexp(math.sqrt(scaled), -shift)
