"""Every response prototype by its name, each loaded when it is first used.

>>> import symnet as sn
>>> print(sn.prototypes.gaussian(4).at(f3dB="20 kHz"))
Gaussian, order 4, low-pass
>>> print(sn.prototypes.linkwitz_riley(4).at(f6dB="2.2 kHz").high_pass())
Linkwitz-Riley, order 4, high-pass

What they give is a :class:`~symnet.shape.families.prototype.Prototype`: poles, zeros and every frequency that a table
may be normalised to. ``at`` puts it at a frequency, ``high_pass``, ``band_pass`` and ``band_stop`` move it to
another band. ``table_section`` takes the coefficients of a printed table, ``table_sections`` gives them.
"""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from symnet.shape.families.bessel import bessel
    from symnet.shape.families.butterworth import butterworth
    from symnet.shape.families.butterworth_thomson import butterworth_thomson
    from symnet.shape.families.chebyshev import chebyshev
    from symnet.shape.families.critically_damped import critically_damped
    from symnet.shape.families.delays import (
        bessel_all_pass,
        first_order_all_pass,
        pade_delay,
        second_order_all_pass,
    )
    from symnet.shape.families.elliptic import elliptic
    from symnet.shape.families.gaussian import gaussian
    from symnet.shape.families.inverse_chebyshev import inverse_chebyshev
    from symnet.shape.families.legendre import legendre
    from symnet.shape.families.linear_phase import linear_phase
    from symnet.shape.families.linkwitz_riley import linkwitz_riley
    from symnet.shape.families.second_order import first_order, second_order
    from symnet.shape.families.tabled import table_section, table_sections
    from symnet.shape.families.transitional_gaussian import gaussian_to_6db, gaussian_to_12db

__all__ = [
    "bessel",
    "bessel_all_pass",
    "butterworth",
    "butterworth_thomson",
    "chebyshev",
    "critically_damped",
    "elliptic",
    "first_order",
    "first_order_all_pass",
    "gaussian",
    "gaussian_to_6db",
    "gaussian_to_12db",
    "inverse_chebyshev",
    "legendre",
    "linear_phase",
    "linkwitz_riley",
    "pade_delay",
    "second_order",
    "second_order_all_pass",
    "table_section",
    "table_sections",
]

#: file of the family -> the names that it defines, where they are not its own
_WHERE = {
    "delays": "bessel_all_pass first_order_all_pass pade_delay second_order_all_pass",
    "second_order": "first_order second_order",
    "tabled": "table_section table_sections",
    "transitional_gaussian": "gaussian_to_6db gaussian_to_12db",
}

_FILE_OF = {name: file for file, names in _WHERE.items() for name in names.split()}


def __getattr__(name: str) -> Any:
    if name not in __all__:
        raise AttributeError(f"there is no prototype {name!r}; there are {', '.join(__all__)}")
    module = import_module(f"symnet.shape.families.{_FILE_OF.get(name, name)}")
    value = globals()[name] = getattr(module, name)
    return value


def __dir__() -> list[str]:
    return [*__all__]
