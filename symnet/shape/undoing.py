"""The low-pass behind a high-pass, band-pass or band-stop: the frequency transformation undone.

Of a low-pass with poles q the usual transformations make, with everything divided by the centre frequency,

* the high-pass: p = 1/q;
* the band-pass of bandwidth B: p + 1/p = B q, two poles p for each q, whose product is 1;
* the band-stop: p + 1/p = B/q.

So each pole (and zero) of H gives back its q by one formula, whatever the bandwidth, real poles of a wide band-pass
included; the centre is the geometric mean of the magnitudes of all poles, which these transformations keep. In a
transformed low-pass the q come in equal pairs. How far the two of a pair are apart is the figure that says whether H
is one: an H whose lower and upper slope differ has no low-pass behind it.

Everything in a :class:`View` is free of scale: H is divided by its centre and the q by their geometric mean.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from typing import Final, TypeAlias

import numpy as np
from numpy.typing import NDArray

from symnet.shape.families.curves import geometric_mean, last_crossing
from symnet.shape.families.prototype import BAND_PASS, BAND_STOP, HIGH_PASS, LOW_PASS

__all__ = ["View", "omega", "views", "w_of"]

Floats: TypeAlias = NDArray[np.float64]
Complexes: TypeAlias = NDArray[np.complex128]

#: A zero of a band-stop whose low-pass zero would lie this many times w0 away counts as one at infinity: parts of a
#: few per cent move the notches of a band-stop by that much, and no family has zeros so far out and needs them.
_FAR: Final = 12.0
_FARTHEST: Final = 1e3
#: Nearer to +-j than rounding can tell.
_AT_CENTRE: Final = 1e-9


@dataclass(frozen=True, slots=True)
class View:
    """H seen as a low-pass under one transformation.

    ``poles`` and ``zeros`` are those of H divided by ``w0`` in rad/s, zeros at the origin apart as ``at_origin``; a
    high-pass stands here as the low-pass that s -> 1/s makes of it. ``low_poles`` and ``low_zeros`` are the q, for a
    band-pass and a band-stop two for each pole of the low-pass, divided by their geometric mean; ``width`` is the B
    that goes with them, in units of w0 (1 for low-pass and high-pass). ``prototype`` is the low-pass itself, pairs
    averaged, ``misfit_percent`` the largest distance within a pair, and ``edge`` its -3.0103 dB frequency.
    """

    band: str
    w0: float
    poles: Complexes
    zeros: Complexes
    at_origin: int
    low_poles: Complexes
    low_zeros: Complexes
    width: float
    prototype: Complexes
    prototype_zeros: Complexes
    misfit_percent: float
    edge: float

    @property
    def order(self) -> int:
        """The order of the low-pass."""
        return len(self.prototype)

    @property
    def is_two_sided(self) -> bool:
        """Whether there is a lower and an upper side of the centre."""
        return self.band in {BAND_PASS, BAND_STOP}


def views(poles: Sequence[complex], zeros: Sequence[complex]) -> Iterator[View]:
    """Every way to see H as a low-pass, from its poles and finite zeros in rad/s, repeated ones repeated.

    By the zeros at the origin and at infinity; where there is none at either end, by the levels there. Ways in which
    the response never comes down to half power are left out.
    """
    p, z = np.asarray(poles, dtype=complex), np.asarray([z for z in zeros if z], dtype=complex)
    n, origin = len(p), len(zeros) - len(z)
    infinity = n - len(zeros)
    falls = np.sum(np.log(np.abs(p))) - np.sum(np.log(np.abs(z))) if not origin and not infinity else 0.0
    if not origin and (infinity or falls < 0):
        yield from _one_sided(LOW_PASS, p, z)
    if not infinity and (origin or falls > 0):
        yield from _one_sided(HIGH_PASS, p, z)
    if origin == infinity and n % 2 == 0:
        if origin or n > 2:
            yield from _two_sided(BAND_PASS, p, z, origin)
        if not origin:
            yield from _two_sided(BAND_STOP, p, z, 0)


def _one_sided(band: str, p: Complexes, z: Complexes) -> Iterator[View]:
    w0 = geometric_mean(p)
    p, z = p / w0, z / w0
    if band == HIGH_PASS:
        p, z = 1 / p.conj(), 1 / z.conj()
    p, z = _in_order(p), _in_order(z)
    edge = last_crossing(p, z)
    if edge is not None:
        yield View(band, w0, p, z, 0, p, z, 1.0, p, z, 0.0, edge)


def _two_sided(band: str, p: Complexes, z: Complexes, origin: int) -> Iterator[View]:
    w0 = geometric_mean(p)
    p, z = p / w0, z / w0
    q, r = p + 1 / p, z + 1 / z
    if np.abs(q).min() < _AT_CENTRE:  # a pole on the jw axis at the centre
        return
    if band == BAND_STOP:
        width = 1 / geometric_mean(1 / q)
        r = r[np.abs(r) * _FAR > width]  # the others are zeros of the low-pass at infinity
        q, r = width / q, width / r
    else:
        width = geometric_mean(q)
        if len(r) and np.abs(r).min() < _AT_CENTRE:  # it stops its own centre
            return
        q, r = q / width, r / width
    low, apart = _halves(q)
    low_zeros, zeros_apart = _halves(r)
    if low is None or low_zeros is None or (len(low_zeros) and np.abs(low_zeros).min() < _AT_CENTRE):
        return
    edge = last_crossing(low, low_zeros)
    if edge is not None:
        misfit = 100 * max(apart, zeros_apart)
        yield View(
            band,
            w0,
            p,
            z,
            origin,
            _in_order(q),
            _in_order(r),
            width,
            _in_order(low),
            _in_order(low_zeros),
            misfit,
            edge,
        )


def _halves(q: Complexes) -> tuple[Complexes | None, float]:
    """One for each pair of nearest neighbours, and the largest relative distance within a pair.

    Pairs are taken in the upper half plane and mirrored; what is left there without a partner makes a real root
    with its own conjugate.
    """
    if len(q) % 2:
        return None, 0.0
    upper = q[q.imag > 0]
    real = np.sort(q[q.imag == 0].real)
    pairs, alone, apart = _nearest_pairs(upper)
    found: list[complex] = []
    for a, b in pairs:
        found += [(a + b) / 2, ((a + b) / 2).conjugate()]
    lines = [*(a.real for a in alone), *((x + y) / 2 for x, y in zip(real[::2], real[1::2], strict=False))]
    apart = max([apart, *(2 * abs(a.imag) / abs(a) for a in alone)])
    apart = max([apart, *(abs(x - y) * 2 / abs(x + y) for x, y in zip(real[::2], real[1::2], strict=False))])
    return np.asarray([*found, *lines], dtype=complex), float(apart)


def _nearest_pairs(upper: Complexes) -> tuple[list[tuple[complex, complex]], list[complex], float]:
    """Pairs by growing distance; one that lies nearer to its own conjugate than to any other stays alone."""
    left = list(range(len(upper)))
    distance = np.abs(upper[:, None] - upper[None, :]) / np.abs(upper)[:, None]
    own = 2 * upper.imag / np.abs(upper)
    np.fill_diagonal(distance, own)
    pairs, alone, apart = [], [], 0.0
    for flat in np.argsort(distance, axis=None, kind="stable").tolist():
        i, j = divmod(flat, len(upper))
        if i not in left or j not in left:
            continue
        if i == j:
            alone.append(complex(upper[i]))
            left.remove(i)
            continue
        apart = max(apart, float(distance[i, j]))
        pairs.append((complex(upper[i]), complex(upper[j])))
        left.remove(i)
        left.remove(j)
    return pairs, alone, apart


def _in_order(roots: Complexes) -> Complexes:
    """By growing imaginary part, so that members of a family and H are lined up alike."""
    return roots[np.lexsort((roots.real, roots.imag))]


def omega(view: View, w: Floats, centre: Floats | float = 0.0) -> tuple[Floats, Floats]:
    """The low-pass frequency W at w (in units of w0), and dW/d(centre).

    ``centre`` is the logarithm by which the centre is moved. W is signed: below the centre of a band-pass negative.
    """
    if not view.is_two_sided:
        return w, np.zeros_like(w)
    moved = w * np.exp(-np.asarray(centre))
    if view.band == BAND_PASS:
        return (moved - 1 / moved) / view.width, -(moved + 1 / moved) / view.width
    opening = 1 / moved - moved
    least = view.width / _FARTHEST  # a fit may carry the centre over a point
    opening = np.where(np.abs(opening) < least, np.copysign(least, opening), opening)
    return view.width / opening, -view.width * (1 / moved + moved) / opening**2


def w_of(view: View, low: Floats, centre: Floats | float = 0.0) -> tuple[Floats, Floats]:
    """The frequencies w where the low-pass frequency is ``low`` > 0, and dw/dW there: one, or on a new last axis two."""
    if not view.is_two_sided:
        return low, np.ones_like(low)
    pull = np.exp(np.asarray(centre))[..., None]
    half = view.width * low / 2 if view.band == BAND_PASS else view.width / (2 * low)
    slope = half / low  # but for the sign, which is lost below
    root = np.sqrt(half**2 + 1)
    upper = half + root
    rate = slope * upper / root
    w = np.stack([1 / upper, upper], axis=-1) * pull
    return w, np.abs(np.stack([rate / upper**2, rate], axis=-1)) * pull
