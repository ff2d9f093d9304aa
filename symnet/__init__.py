"""symnet: exact transfer functions of networks typed as they are traced on paper.

>>> import symnet as sn
>>> net = sn.network("in -- R1 -- out -- C1 -- gnd; drive in; read out")
>>> H = sn.derive(net)

Everything public is a name of this module; each is loaded when it is first used.
"""

from __future__ import annotations

from importlib import import_module
from typing import Any

__version__ = "0.1.0"

#: public name -> module that defines it
_WHERE = {
    "network": "symnet.network.build",
    "load": "symnet.network.build",
    "resistor": "symnet.network.build",
    "inductor": "symnet.network.build",
    "capacitor": "symnet.network.build",
    "impedance": "symnet.network.build",
    "admittance": "symnet.network.build",
    "opamp": "symnet.network.build",
    "hold": "symnet.network.build",
    "push": "symnet.network.build",
    "drive": "symnet.network.build",
    "read": "symnet.network.build",
    "equations": "symnet.exact.mna",
    "derive": "symnet.exact.derive",
    "derive_all": "symnet.exact.derive",
    "normalise": "symnet.shape.normal",
    "form": "symnet.shape.forms",
    "sections": "symnet.shape.sections",
    "limits": "symnet.exact.limits",
    "recognise": "symnet.shape.recognise",
    "butterworth": "symnet.shape.families.butterworth",
    "bessel": "symnet.shape.families.bessel",
    "chebyshev": "symnet.shape.families.chebyshev",
    "brief": "symnet.present.brief",
    "SymnetError": "symnet.errors",
}

__all__ = sorted(_WHERE)  # noqa: PLE0605


def __getattr__(name: str) -> Any:
    where = _WHERE.get(name)
    if where is None:
        raise AttributeError(f"module 'symnet' has no attribute {name!r}")
    value = getattr(import_module(where), name)
    globals()[name] = value
    return value


def __dir__() -> list[str]:
    return [*__all__, "__version__"]
