"""What a table of ladder elements claims, held against the derived H."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from functools import cache
from math import pi

import numpy as np
from numpy.typing import ArrayLike, NDArray

from symnet.exact.ratio import Ratio
from tests.reference import closed_forms as closed
from tests.reference.cases import Ladder
from tests.reference.comparing import numeric, poles

__all__ = ["derived", "relative_db", "scale_free", "wanted_poles"]

_FAMILIES: dict[str, Callable[[Ladder], Sequence[complex]]] = {
    "butterworth": lambda case: closed.butterworth(case.order),
    "butterworth1^2": lambda _: closed.butterworth(1) * 2,
    "butterworth2^2": lambda _: closed.butterworth(2) * 2,
    "bessel_mag": lambda case: closed.bessel_mag(case.order),
    "papoulis": lambda _: closed.papoulis_4(),
    "chebyshev": lambda case: closed.chebyshev(case.order, case.ripple_db or 0),
    "chebyshev_3db": lambda case: closed.chebyshev_3db(case.order, case.ripple_db or 0, from_dc=False),
    "chebyshev_3db_dcref": lambda case: closed.chebyshev_3db(case.order, case.ripple_db or 0, from_dc=True),
    "inverse_chebyshev": lambda case: closed.inverse_chebyshev(case.order, case.stop_db or 0, at_3db=False),
    "inverse_chebyshev_3db": lambda case: closed.inverse_chebyshev(
        case.order, case.stop_db or 0, at_3db=True
    ),
}


@cache
def derived(case: Ladder) -> tuple[Ratio, tuple[complex, ...]]:
    """H with its numbers, and its poles in units of the nominal frequency (1 rad/s, or 1 Hz for crossovers)."""
    H = numeric(case)
    unit = 2 * pi * case.nominal_f if case.nominal_f else 1.0
    return H, tuple(p / unit for p in poles(H))


def wanted_poles(case: Ladder) -> tuple[complex, ...]:
    """The poles that the family has by its closed form; turned over, s -> 1/s, for a high-pass."""
    found = _FAMILIES[case.family](case)
    return tuple(1 / p for p in found) if "-hp-" in case.id else tuple(found)


def scale_free(found: Sequence[complex]) -> tuple[tuple[complex, ...], float]:
    """The poles divided by the geometric mean of their magnitudes, and that mean: the shape, and w0."""
    w0 = float(np.exp(np.mean(np.log(np.abs(np.array(found))))))
    return tuple(p / w0 for p in found), w0


def relative_db(H: Ratio, w: ArrayLike) -> NDArray[np.float64]:
    """20 log10 |H(jw)/H(0)| for w in rad/s."""
    return np.asarray(H.decibels(1j * np.asarray(w)) - H.decibels(0j), dtype=np.float64)
