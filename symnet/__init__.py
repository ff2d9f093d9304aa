"""symnet: exact transfer functions of networks typed as they are traced on paper.

>>> import symnet as sn
>>> net = sn.network("in -- R1 -- out -- C1 -- gnd; drive in; read out")
>>> sn.derive(net).denominator
s*R1*C1 + 1

Everything public is a name of this module. Each is loaded when it is first used, so that importing symnet costs
next to nothing.
"""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from symnet.carry.export import export
    from symnet.circuit.build import (
        admittance,
        capacitor,
        define,
        drive,
        hold,
        impedance,
        inductor,
        load,
        network,
        opamp,
        place,
        push,
        read,
        resistor,
    )
    from symnet.circuit.network import Network
    from symnet.errors import SymnetError
    from symnet.exact.derive import derive, derive_all
    from symnet.exact.limits import limits
    from symnet.exact.mna import equations
    from symnet.exact.ports.element import extra_element
    from symnet.exact.ports.impedance import driving_point
    from symnet.exact.ports.modes import common_mode
    from symnet.exact.ports.twoport import two_port
    from symnet.exact.scaling import scale
    from symnet.exact.transfer import Transfer
    from symnet.present.brief import brief
    from symnet.present.explain import explain
    from symnet.response.frequency import group_delay, phase
    from symnet.response.noise import noise
    from symnet.response.time import step
    from symnet.review.verify import verify
    from symnet.shape import prototypes
    from symnet.shape.difference import compare
    from symnet.shape.dominant import dominant
    from symnet.shape.families.bessel import bessel
    from symnet.shape.families.butterworth import butterworth
    from symnet.shape.families.chebyshev import chebyshev
    from symnet.shape.families.elliptic import elliptic
    from symnet.shape.figures import f3db
    from symnet.shape.forms import form
    from symnet.shape.locus import locus
    from symnet.shape.loop import loop_gain
    from symnet.shape.normal import normalise
    from symnet.shape.real import real_opamps
    from symnet.shape.recognise import recognise
    from symnet.shape.sections import sections
    from symnet.shape.split import split_poles
    from symnet.shape.stability import stability
    from symnet.values.choosing import choose
    from symnet.values.preferred import preferred

__version__ = "0.1.0"

__all__ = [
    "Network",
    "SymnetError",
    "Transfer",
    "admittance",
    "bessel",
    "brief",
    "butterworth",
    "capacitor",
    "chebyshev",
    "choose",
    "common_mode",
    "compare",
    "define",
    "derive",
    "derive_all",
    "dominant",
    "drive",
    "driving_point",
    "elliptic",
    "equations",
    "explain",
    "export",
    "extra_element",
    "f3db",
    "form",
    "group_delay",
    "hold",
    "impedance",
    "inductor",
    "limits",
    "load",
    "locus",
    "loop_gain",
    "network",
    "noise",
    "normalise",
    "opamp",
    "phase",
    "place",
    "preferred",
    "prototypes",
    "push",
    "read",
    "real_opamps",
    "recognise",
    "resistor",
    "scale",
    "sections",
    "split_poles",
    "stability",
    "step",
    "two_port",
    "verify",
]

#: module -> the public names that it defines
_WHERE = {
    "symnet.carry.export": "export",
    "symnet.circuit.build": "admittance capacitor define drive hold impedance inductor load network opamp place push read resistor",
    "symnet.circuit.network": "Network",
    "symnet.errors": "SymnetError",
    "symnet.exact.derive": "derive derive_all",
    "symnet.exact.limits": "limits",
    "symnet.exact.mna": "equations",
    "symnet.exact.ports.element": "extra_element",
    "symnet.exact.ports.impedance": "driving_point",
    "symnet.exact.ports.modes": "common_mode",
    "symnet.exact.ports.twoport": "two_port",
    "symnet.exact.scaling": "scale",
    "symnet.exact.transfer": "Transfer",
    "symnet.present.brief": "brief",
    "symnet.present.explain": "explain",
    "symnet.response.frequency": "group_delay phase",
    "symnet.response.time": "step",
    "symnet.response.noise": "noise",
    "symnet.review.verify": "verify",
    "symnet.shape.difference": "compare",
    "symnet.shape.dominant": "dominant",
    "symnet.shape.families.bessel": "bessel",
    "symnet.shape.families.butterworth": "butterworth",
    "symnet.shape.families.chebyshev": "chebyshev",
    "symnet.shape.families.elliptic": "elliptic",
    "symnet.shape.figures": "f3db",
    "symnet.shape.forms": "form",
    "symnet.shape.locus": "locus",
    "symnet.shape.loop": "loop_gain",
    "symnet.shape.normal": "normalise",
    "symnet.shape.real": "real_opamps",
    "symnet.shape.recognise": "recognise",
    "symnet.shape.sections": "sections",
    "symnet.shape.split": "split_poles",
    "symnet.shape.stability": "stability",
    "symnet.values.choosing": "choose",
    "symnet.values.preferred": "preferred",
}

#: public names that are modules
_MODULES = {"prototypes": "symnet.shape.prototypes"}

_MODULE_OF = {name: module for module, names in _WHERE.items() for name in names.split()}


def __getattr__(name: str) -> Any:
    module = _MODULES.get(name) or _MODULE_OF.get(name)
    if module is None:
        raise AttributeError(f"module 'symnet' has no attribute {name!r}")
    found: Any = import_module(module)
    value = globals()[name] = found if name in _MODULES else getattr(found, name)
    return value


def __dir__() -> list[str]:
    return [*__all__, "__version__"]
