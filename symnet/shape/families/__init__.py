"""The catalogue of filter families: one file for each, one line here, and the matcher knows it.

Order matters only between families that fit equally well with equally many fitted parameters: the earlier is
named first. A constructor such as ``butterworth`` is taken from the file of that name.
"""

from __future__ import annotations

from typing import Final

from symnet.shape.families.bessel import BESSEL
from symnet.shape.families.butterworth import BUTTERWORTH
from symnet.shape.families.butterworth_thomson import BUTTERWORTH_THOMSON
from symnet.shape.families.chebyshev import CHEBYSHEV
from symnet.shape.families.critically_damped import CRITICALLY_DAMPED
from symnet.shape.families.elliptic import ELLIPTIC, ELLIPTIC_B, ELLIPTIC_C
from symnet.shape.families.family import Family, Parameter
from symnet.shape.families.gaussian import GAUSSIAN
from symnet.shape.families.inverse_chebyshev import INVERSE_CHEBYSHEV
from symnet.shape.families.legendre import LEGENDRE
from symnet.shape.families.linear_phase import LINEAR_PHASE
from symnet.shape.families.linkwitz_riley import LINKWITZ_RILEY
from symnet.shape.families.prototype import Prototype, Reference, Setting
from symnet.shape.families.transitional_gaussian import GAUSSIAN_TO_6_DB, GAUSSIAN_TO_12_DB

__all__ = [
    "CATALOGUE",
    "Family",
    "Parameter",
    "Prototype",
    "Reference",
    "Setting",
]

CATALOGUE: Final[tuple[Family, ...]] = (
    BUTTERWORTH,
    BESSEL,
    CHEBYSHEV,
    LINKWITZ_RILEY,
    CRITICALLY_DAMPED,
    LEGENDRE,
    GAUSSIAN,
    GAUSSIAN_TO_6_DB,
    GAUSSIAN_TO_12_DB,
    LINEAR_PHASE,
    BUTTERWORTH_THOMSON,
    INVERSE_CHEBYSHEV,
    ELLIPTIC,
    ELLIPTIC_B,
    ELLIPTIC_C,
)
