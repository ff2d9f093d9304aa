"""From what was typed to what is aimed at: a prototype, an H, or f0 and Q, set beside the order of the network."""

from __future__ import annotations

import math
from dataclasses import dataclass
from fractions import Fraction
from typing import TYPE_CHECKING, Final

from symnet.errors import Fault, NotationError
from symnet.exact.ratio import Ratio
from symnet.quantities import HERTZ, engineering
from symnet.shape.families.prototype import Prototype
from symnet.shape.families.references import read_frequency
from symnet.values.choosing_aim import Aim, Objective

if TYPE_CHECKING:
    from symnet.exact.transfer import Transfer
    from symnet.values.choosing_model import Model

__all__ = ["Wanted", "aim_of", "goal_of"]

_OBJECTIVES: Final = ("poles", "f0/Q", "dB")


@dataclass(frozen=True, slots=True)
class Wanted:
    """What :func:`symnet.choose` was asked for, as it was typed."""

    target: Prototype | Transfer | Ratio | None
    f0: str | None
    Q: float | None
    K: float | str | None
    objective: Objective | None
    band: tuple[str, str] | None


def aim_of(model: Model, wanted: Wanted) -> Aim:
    """The poles, zeros, gain and objective; NotationError for a target that this H cannot have by its order."""
    objective, band = _objective(wanted)
    top, bottom, z, m = model.layout
    gain: float | None = None
    poles: tuple[complex, ...]
    zeros: tuple[complex, ...]
    target = wanted.target
    if wanted.f0 is not None or wanted.Q is not None:
        if target is not None:
            raise NotationError("give a target, or f0 and Q, not both")
        poles, zeros = _poles_of(wanted.f0, wanted.Q, bottom), ()
        if top:
            raise NotationError(
                Fault(
                    "this H has finite zeros, which f0 and Q do not place",
                    "give an H or a prototype as target",
                )
            )
    elif isinstance(target, Prototype):
        poles = target.poles
        zeros = tuple(zero for zero in target.zeros if zero != 0)
        if len(target.zeros) - len(zeros) != z - m:
            raise NotationError(
                Fault(f"{target} has {len(target.zeros) - len(zeros)} zeros at the origin, and H {z - m}")
            )
    else:
        h = model.H if target is None else target
        poles, zeros, gain = _of_ratio(h if isinstance(h, Ratio) else h.numeric(), z - m)
        if target is None and (len(poles), len(zeros)) != (bottom, top):
            poles, zeros = model.roots()  # a pole and a zero of these very values cancel, which no others do
    if (len(poles), len(zeros)) != (bottom, top):
        raise NotationError(
            Fault(
                f"the target has {len(poles)} poles and {len(zeros)} finite zeros away from the origin,"
                f" and {model.H.label} has {bottom} and {top}",
                "another target, or another network",
            )
        )
    if wanted.K == "free":
        gain = None
    elif wanted.K is not None:
        gain = _number(wanted.K)
    return Aim(poles, zeros, gain, objective, band)


def _number(K: float | str) -> float:
    try:
        gain = float(K)
    except (TypeError, ValueError):
        gain = 0.0
    if not gain or not math.isfinite(gain):
        raise NotationError(Fault(f"a gain to aim at is not {K!r}", 'give a number, or K="free"'))
    return gain


def _objective(wanted: Wanted) -> tuple[Objective, tuple[float, float] | None]:
    """The objective, and the edges of its band in Hz."""
    objective, band = wanted.objective, wanted.band
    if objective is not None and objective not in _OBJECTIVES:
        raise NotationError(
            Fault(f"there is no objective {objective!r}", f"there are {', '.join(_OBJECTIVES)}")
        )
    if (objective == "dB" and band is None) or (band is not None and objective not in {None, "dB"}):
        raise NotationError(
            Fault("a band belongs to the objective dB, and dB to a band", 'band=("20 Hz", "20 kHz")')
        )
    if band is not None:
        low, high = (read_frequency("f", edge) / (2 * math.pi) for edge in band)
        if not low < high:
            raise NotationError(Fault(f"a band runs upwards, not from {band[0]} to {band[1]}"))
        return "dB", (low, high)
    return objective or ("poles" if wanted.f0 is None else "f0/Q"), None


def _poles_of(f0: str | None, Q: float | None, order: int) -> tuple[complex, ...]:
    if f0 is None:
        raise NotationError(Fault("Q alone leaves the frequency open", 'give f0="1 kHz" as well'))
    w0 = read_frequency("f0", f0)
    if Q is None:
        if order != 1:
            raise NotationError(
                Fault(f"f0 alone says what an H of order {order} is to be only at order 1", "give Q")
            )
        return (complex(-w0),)
    quality = float(Q)
    if not (quality > 0 and math.isfinite(quality)):
        raise NotationError(f"a Q to aim at is positive, not {Q}")
    if order != 2:
        raise NotationError(
            Fault(f"f0 and Q are those of one section, and H has order {order}", "give a prototype or an H")
        )
    real, square = -w0 / (2 * quality), 1 / (2 * quality) ** 2 - 1
    if square < 0:
        return (complex(real, w0 * math.sqrt(-square)), complex(real, -w0 * math.sqrt(-square)))
    far = real - w0 * math.sqrt(square)
    return (complex(w0 * w0 / far), complex(far))


def _of_ratio(wanted: Ratio, power: int) -> tuple[tuple[complex, ...], tuple[complex, ...], float]:
    if not wanted.num:
        raise NotationError("a target H = 0 is nothing to choose values for")
    z, m = (next(k for k, c in enumerate(p) if c) for p in (wanted.num, wanted.den))
    if z - m != power:
        raise NotationError(f"the target goes as s^{z - m} at low frequency, and H as s^{power}")
    poles, zeros = (
        tuple(root.value for root in roots for _ in range(root.multiplicity) if root.value)
        for roots in (wanted.poles(), wanted.zeros())
    )
    return poles, zeros, float(wanted.num[z] / wanted.den[m])


def goal_of(aim: Aim) -> str:
    """The objective in words."""
    gain = " and K" if aim.gain is not None else ""
    zeros = " and zeros" if aim.zeros else ""
    if aim.objective == "dB":
        low, high = (engineering(Fraction(f), HERTZ) for f in aim.frequencies[[0, -1]])
        of = "20 log10 |H|" if gain else "20 log10 |H/K|"
        return f"largest error of {of} from {low} to {high}"
    if aim.objective == "f0/Q":
        return (
            f"largest error of f0 and Q{zeros}{gain}" if len(aim.poles) > 1 else f"error of f0{zeros}{gain}"
        )
    return f"largest error of the poles{zeros}{gain}"
