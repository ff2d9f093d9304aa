"""The catalogue of filter families: one file for each, one line here, and the matcher knows it.

Order matters only between families that fit equally well with equally many fitted parameters: the earlier is
named first.
"""

from __future__ import annotations

from typing import Final

from symnet.shape.families.bessel import BESSEL, bessel
from symnet.shape.families.butterworth import BUTTERWORTH, butterworth
from symnet.shape.families.chebyshev import CHEBYSHEV, chebyshev
from symnet.shape.families.family import Family, Parameter
from symnet.shape.families.prototype import Prototype, Reference, Setting

__all__ = [
    "CATALOGUE",
    "Family",
    "Parameter",
    "Prototype",
    "Reference",
    "Setting",
    "bessel",
    "butterworth",
    "chebyshev",
]

CATALOGUE: Final[tuple[Family, ...]] = (BUTTERWORTH, BESSEL, CHEBYSHEV)
