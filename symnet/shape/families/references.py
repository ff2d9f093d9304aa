"""The frequencies that a filter table may be normalised to, each with its name, its figure and its label.

Tables disagree about what "unit frequency" means, so a prototype carries every one of them as data. The labels of
a high-pass, band-pass or band-stop follow from those of the low-pass it comes from: what is DC for one is infinite
frequency or the centre for another. Frequencies typed by a person carry their unit in the text; one without a
unit is refused, since hertz and rad/s differ by 2 pi and nothing else would tell.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace
from typing import Final

import numpy as np

from symnet.errors import Fault, NotationError, UnknownNameError, nearest
from symnet.quantities import HERTZ, NUMBER, SECOND, in_words, read_quantity
from symnet.shape.families.curves import geometric_mean, group_delay, last_crossing

__all__ = [
    "ALL_PASS",
    "BAND_PASS",
    "BAND_STOP",
    "CENTRE",
    "HIGH_PASS",
    "LOW_PASS",
    "PASS_BAND",
    "PHASE_EDGE",
    "PHASE_LINE",
    "RIPPLE_EDGE",
    "STOP_EDGE",
    "UNIT_DELAY",
    "W0",
    "W3DB",
    "W3DB_PEAK",
    "W6DB",
    "Reference",
    "angular",
    "of_band",
    "read_band",
    "read_frequency",
    "unknown",
    "with_common_references",
]

LOW_PASS: Final = "low-pass"  # noqa: S105 - a band
HIGH_PASS: Final = "high-pass"  # noqa: S105
BAND_PASS: Final = "band-pass"  # noqa: S105
BAND_STOP: Final = "band-stop"
ALL_PASS: Final = "all-pass"  # noqa: S105

#: Where the level of the pass band is counted from.
PASS_BAND: Final = {
    LOW_PASS: "DC",
    HIGH_PASS: "infinite frequency",
    BAND_PASS: "the centre",
    BAND_STOP: "DC",
    ALL_PASS: "every frequency",
}

W0: Final = "w0"
W3DB: Final = "w3dB"
W3DB_PEAK: Final = "w3dB_peak"
W6DB: Final = "w6dB"
RIPPLE_EDGE: Final = "ripple_edge"
STOP_EDGE: Final = "stop_edge"
PHASE_LINE: Final = "phase_line"
PHASE_EDGE: Final = "phase_edge"
UNIT_DELAY: Final = "unit_delay"
CENTRE: Final = "centre"

_LABELS: Final = {
    W0: "w0, geometric mean of the pole magnitudes",
    W3DB: "-3.0103 dB relative to DC",
    W3DB_PEAK: "-3.0103 dB relative to the ripple peak",
    W6DB: "-6.0206 dB relative to DC",
    RIPPLE_EDGE: "ripple edge",
    STOP_EDGE: "stop-band edge",
    PHASE_LINE: "1/T, T the slope of the straight line that the phase keeps to",
    PHASE_EDGE: "edge of the linear phase",
    UNIT_DELAY: "unit-delay frequency 1/T, T the group delay at DC",
}
_IN_HIGH_PASS: Final = _LABELS | {
    W3DB: "-3.0103 dB relative to infinite frequency",
    W6DB: "-6.0206 dB relative to infinite frequency",
    PHASE_LINE: "1/T of the low-pass it comes from, turned over (T the slope of its line of phase)",
    PHASE_EDGE: "edge of the linear phase of the low-pass it comes from, turned over",
    UNIT_DELAY: "1/T of the low-pass it comes from, turned over (T its group delay at DC)",
}
_DELAY: Final = "delay"


@dataclass(frozen=True, slots=True)
class Reference:
    """One frequency that a table may be normalised to: its name, the angular frequency w in rad/s, its label."""

    name: str
    w: float
    label: str

    @classmethod
    def named(cls, name: str, w: float, note: str = "", band: str = LOW_PASS) -> Reference:
        """The reference of that name with its usual label, and a note in brackets where there is more to say."""
        label = (_IN_HIGH_PASS if band == HIGH_PASS else _LABELS)[name]
        return cls(name, w, label + (f" ({note})" if note else ""))

    @property
    def f(self) -> float:
        """The frequency in Hz."""
        return self.w / (2 * math.pi)

    def scaled(self, k: float) -> Reference:
        """The same reference where every frequency is k times as high."""
        return replace(self, w=self.w * k)

    def inverted(self, unit: float) -> Reference:
        """The same reference of the high-pass that s -> unit^2/s gives."""
        usual = _LABELS.get(self.name, self.label)
        label = self.label.replace(usual, _IN_HIGH_PASS.get(self.name, self.label))
        return Reference(self.name, unit * (unit / self.w), label)

    def edges(self, band: str, centre: float, width: float) -> tuple[Reference, Reference, Reference]:
        """Bandwidth and both edges in rad/s, from the reference of the low-pass: lower * upper = centre^2."""
        upper = math.hypot(width / 2, centre) + width / 2
        label = self.label.replace("DC", PASS_BAND[band])
        return (
            Reference(f"{self.name}_bandwidth", width, f"bandwidth, {label}"),
            Reference(f"{self.name}_lower", centre * (centre / upper), f"lower edge, {label}"),
            Reference(f"{self.name}_upper", upper, f"upper edge, {label}"),
        )


def angular(name: str, known: Sequence[str]) -> str:
    """The name of a reference as it is kept: f3dB is w3dB in Hz, delay is T of unit_delay.

    >>> angular("f3dB", ["w0", "w3dB"])
    'w3dB'
    """
    if name == _DELAY:
        return UNIT_DELAY
    if name in {"f0", W0} and CENTRE in known:
        return CENTRE
    if name not in known and name[:1] == "f" and "w" + name[1:] in known:
        return "w" + name[1:]
    return name


def read_frequency(name: str, text: str) -> float:
    """The angular frequency in rad/s that is written for a reference: "20 kHz", "125.7 krad/s"; a time for a delay.

    A name that begins with f takes hertz, one that begins with w takes rad/s; the others take either. The unit
    delay may be given as the delay itself, "50 us".

    Raises :class:`~symnet.errors.NotationError` for anything without its unit, in the wrong one of the two, or not
    positive.

    >>> round(read_frequency("f3dB", "20 kHz"), 3)
    125663.706
    >>> read_frequency("delay", "50 us")
    20000.0
    """
    example = {_DELAY: "50 us"}.get(name, "125 krad/s" if name[:1] == "w" else "20 kHz")
    if not isinstance(text, str):
        raise NotationError(
            Fault(f"{name} = {text!r} carries no unit", hint=f'write it as text: {name}="{example}"')
        )
    quantity = read_quantity(text)
    if quantity.value <= 0:
        raise NotationError(f"{name} is positive, not {text}")
    value = float(quantity.value)
    if quantity.dimension == SECOND and name in {_DELAY, UNIT_DELAY}:
        return 1 / value
    if quantity.dimension != HERTZ or name == _DELAY:
        what = "no unit" if quantity.dimension == NUMBER else f"{in_words(quantity.dimension)} as its unit"
        raise NotationError(Fault(f"{name} = {text} has {what}", hint=f'write {name}="{example}"'))
    in_rad = text.strip().endswith("rad/s")
    if in_rad and name[:1] == "f":
        raise NotationError(
            Fault(f"{name} is in Hz, not in rad/s", hint=f'for rad/s write w{name[1:]}="{text.strip()}"')
        )
    if not in_rad and name[:1] == "w":
        raise NotationError(
            Fault(f"{name} is in rad/s, not in Hz", hint=f'for Hz write f{name[1:]}="{text.strip()}"')
        )
    return value if in_rad else 2 * math.pi * value


def read_band(bandwidth: str, f0: str, w0: str) -> tuple[float, float]:
    """Centre and width of a band in rad/s: the centre in hertz or in rad/s, the width likewise or as "10 %" of it.

    Raises :class:`~symnet.errors.NotationError` for anything without its unit, or not just one centre.

    >>> read_band("10 %", "", "62.8 krad/s")
    (62800.0, 6280.0)
    """
    if bool(f0) == bool(w0):
        raise NotationError(
            Fault("a band has one centre frequency", hint='write f0="10 kHz" or w0="62.8 krad/s"')
        )
    centre = read_frequency("f0", f0) if f0 else read_frequency("w0", w0)
    if not str(bandwidth).strip().endswith("%"):
        return centre, read_frequency("bandwidth", bandwidth)
    part = read_quantity(bandwidth.strip().removesuffix("%"), NUMBER).value / 100
    if part <= 0:
        raise NotationError(f"a bandwidth is positive, not {bandwidth}")
    return centre, float(part) * centre


def of_band(references: Sequence[Reference], band: str, centre: float, ratio: float) -> tuple[Reference, ...]:
    """The references of a band-pass or band-stop from those of the low-pass it comes from.

    A low-pass frequency r becomes the edges of a band of the width ratio * r, in a band-stop of ratio/r. The delay is
    that of the low-pass times the slope of the transformation, at the centre or at DC. A phase does not stay linear
    in a band, and w0 becomes the centre.
    """
    found = [Reference(CENTRE, centre, "centre, geometric mean of the edges and of the pole magnitudes")]
    for reference in references:
        width = ratio * reference.w if band == BAND_PASS else ratio / reference.w
        if reference.name == UNIT_DELAY:
            w = width / 2 if band == BAND_PASS else centre * (centre / width)
            label = f"unit-delay frequency 1/T, T the group delay at {PASS_BAND[band]}"
            found.append(Reference(UNIT_DELAY, w, label))
        elif reference.name not in {W0, PHASE_LINE, PHASE_EDGE}:
            found += reference.edges(band, centre, width)
    return tuple(found)


def unknown(owner: str, name: str, known: Sequence[str]) -> UnknownNameError:
    """The error that says which references there are."""
    guess = nearest(name, [*known, *("f" + k[1:] for k in known if k[0] == "w")])
    hint = f"did you mean {guess[0]}? It" if guess else "it"
    return UnknownNameError(
        Fault(f"{owner} has no frequency reference {name!r}", hint=f"{hint} has {', '.join(known)}")
    )


def with_common_references(
    poles: tuple[complex, ...], zeros: tuple[complex, ...], own: tuple[Reference, ...]
) -> tuple[Reference, ...]:
    """The references that every low-pass has (w0, -3.0103 dB, unit delay) and the family's own, in a fixed order.

    A family that knows one of the common ones in closed form gives it among its own.
    """
    found = {reference.name: reference for reference in own}
    if W0 not in found:
        found[W0] = Reference.named(W0, geometric_mean(poles))
    if W3DB not in found and (w := last_crossing(poles, zeros)) is not None:
        found[W3DB] = Reference.named(W3DB, w)
    if UNIT_DELAY not in found and (delay := float(group_delay(np.asarray(0.0), poles, zeros))) > 0:
        found[UNIT_DELAY] = Reference.named(UNIT_DELAY, 1 / delay)
    return tuple(found[name] for name in _LABELS if name in found)
