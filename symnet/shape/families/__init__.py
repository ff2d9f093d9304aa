"""The catalogue of filter families: one file for each, one line here, and the matcher knows it.

Order matters only between families that fit equally well with equally many fitted parameters: the earlier is
named first. A constructor such as ``butterworth`` is taken from the file of that name.
"""

from __future__ import annotations

from typing import Final

from symnet.shape.families.bessel import BESSEL
from symnet.shape.families.butterworth import BUTTERWORTH
from symnet.shape.families.chebyshev import CHEBYSHEV
from symnet.shape.families.elliptic import ELLIPTIC, ELLIPTIC_B, ELLIPTIC_C
from symnet.shape.families.family import Family, Parameter
from symnet.shape.families.inverse_chebyshev import INVERSE_CHEBYSHEV
from symnet.shape.families.legendre import LEGENDRE
from symnet.shape.families.linear_phase import LINEAR_PHASE
from symnet.shape.families.prototype import Prototype, Reference, Setting

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
    LEGENDRE,
    CHEBYSHEV,
    LINEAR_PHASE,
    INVERSE_CHEBYSHEV,
    ELLIPTIC,
    ELLIPTIC_B,
    ELLIPTIC_C,
)
