"""Devices and sections that ship with symnet, written in its own notation.

Those with one drawing stand in the files of the folder ``shipped``, each definition under a line that names its
source. The others are *models*: each property that is given adds what it stands for and nothing else, so that a
simpler model is the exact limit of a richer one. An op amp with only its terminals is ideal and a part by itself;
``gain`` is A0, ``gbw`` the gain-bandwidth product, A(s) = gbw/s, or gain/(1 + s*gain/gbw) with both; ``pole2`` is
one more pole. Frequencies are angular, in rad/s; given in Hz they are multiplied by 2 pi.
"""

from __future__ import annotations

import re
from collections.abc import Collection
from dataclasses import dataclass, field
from functools import lru_cache
from pathlib import Path
from typing import Final

__all__ = ["OPAMP_TERMINALS", "device_names", "device_parameters", "device_source"]

OPAMP_TERMINALS: Final = ("plus", "minus", "out")


@dataclass(frozen=True, slots=True)
class _Model:
    """A device of several models.

    ``lines`` are statements with what they need: properties that must be given, and ``!`` before one that must
    not. ``inner`` names nodes, {o} say, that are the second name when the property is given and else the third.
    """

    terminals: tuple[str, ...]
    properties: tuple[str, ...]
    lines: tuple[tuple[str, str], ...]
    inner: dict[str, tuple[str, str, str]] = field(default_factory=dict)
    source: str = "common practice, no source"

    def definition(self, kind: str, given: Collection[str]) -> str:
        """The definition of the model with these properties."""
        nodes = {key: inner if name in given else outer for key, (name, inner, outer) in self.inner.items()}
        body = [line.format(**nodes) for needs, line in self.lines if _met(needs, given)]
        held = set(re.findall(r"\w+", " ".join(body)))
        names = [name for name in self.properties if name in given and name in held]
        parameters = f"; {', '.join(names)}" if names else ""
        return "\n".join([f"define {kind}({', '.join(self.terminals)}{parameters})", *body, "done"])


def _met(needs: str, given: Collection[str]) -> bool:
    return all((word[1:] not in given) if word[0] == "!" else word in given for word in needs.split())


_HELD: Final = "*(plus - minus) as amp"
_MODELS: Final = {
    "opamp": _Model(
        OPAMP_TERMINALS,
        ("gain", "gbw", "pole2", "Rin", "Cin", "Rout"),
        (
            ("gain !gbw !pole2", f"hold {{o}} = gain{_HELD}"),
            ("gbw !gain !pole2", f"hold {{o}} = gbw/s{_HELD}"),
            ("gain gbw !pole2", f"hold {{o}} = gain/(1 + s*gain/gbw){_HELD}"),
            ("gain pole2 !gbw", f"hold {{o}} = gain/(1 + s/pole2){_HELD}"),
            ("gbw pole2 !gain", f"hold {{o}} = gbw/s/(1 + s/pole2){_HELD}"),
            ("gain gbw pole2", f"hold {{o}} = gain/(1 + s*gain/gbw)/(1 + s/pole2){_HELD}"),
            ("!gain !gbw", "amp: opamp(plus=plus, minus=minus, out={o})"),  # an infinite gain has no pole
            ("Rin", "plus -- Rin -- minus"),
            ("Cin", "plus -- Cin -- minus"),
            ("Rout", "{o} -- Rout -- out"),
        ),
        {"o": ("Rout", "o", "out")},
    ),
    "ota": _Model(
        OPAMP_TERMINALS,
        ("gm", "Rin", "Cin", "Rout", "Cout"),
        (
            ("", "push into out = gm*(plus - minus) as amp"),
            ("Rin", "plus -- Rin -- minus"),
            ("Cin", "plus -- Cin -- minus"),
            ("Rout", "out -- Rout -- gnd"),
            ("Cout", "out -- Cout -- gnd"),
        ),
    ),
    "cfa": _Model(
        OPAMP_TERMINALS,
        ("Rt", "Ct", "Rx"),
        (
            ("", "hold {x} = plus as buffer"),
            ("Rx", "x -- Rx -- minus"),
            ("Rt !Ct", "hold out = -Rt*i_buffer as amp"),
            ("Ct !Rt", "hold out = -i_buffer/(s*Ct) as amp"),
            ("Rt Ct", "hold out = -Rt/(1 + s*Rt*Ct)*i_buffer as amp"),
        ),
        {"x": ("Rx", "x", "minus")},
    ),
    "bjt": _Model(
        ("collector", "base", "emitter"),
        ("gm", "Rpi", "Ro", "Rb", "Cpi", "Cmu"),
        (
            ("", "push from collector to emitter = gm*({b} - emitter) as source"),
            ("Rb", "base -- Rb -- b"),
            ("Rpi", "{b} -- Rpi -- emitter"),
            ("Cpi", "{b} -- Cpi -- emitter"),
            ("Cmu", "{b} -- Cmu -- collector"),
            ("Ro", "collector -- Ro -- emitter"),
        ),
        {"b": ("Rb", "b", "base")},
        "P. R. Gray, P. J. Hurst, S. H. Lewis, R. G. Meyer, Analysis and Design of Analog Integrated Circuits, "
        "section 1.4 (from memory)",
    ),
    "fet": _Model(
        ("drain", "gate", "source"),
        ("gm", "Ro", "Rg", "Cgs", "Cgd", "Cds"),
        (
            ("", "push from drain to source = gm*({g} - source) as channel"),
            ("Rg", "gate -- Rg -- g"),
            ("Cgs", "{g} -- Cgs -- source"),
            ("Cgd", "{g} -- Cgd -- drain"),
            ("Cds", "drain -- Cds -- source"),
            ("Ro", "drain -- Ro -- source"),
        ),
        {"g": ("Rg", "g", "gate")},
        "P. R. Gray, P. J. Hurst, S. H. Lewis, R. G. Meyer, Analysis and Design of Analog Integrated Circuits, "
        "section 1.6 (from memory)",
    ),
}

#: Properties without which a device is nothing: they are there, as symbols, even if they are not given.
_NEEDED: Final = {"ota": ("gm",), "bjt": ("gm",), "fet": ("gm",)}


def device_names() -> tuple[str, ...]:
    """The devices and sections that ship with symnet."""
    return (*_MODELS, *_library())


def device_parameters(kind: str) -> tuple[str, ...]:
    """All the properties that a device with several models may be given; empty for any other."""
    model = _MODELS.get(kind)
    return model.properties if model else ()


def device_source(kind: str, given: Collection[str]) -> tuple[str, str] | None:
    """The definition that ships under this name and where it comes from, or None.

    ``given`` are the names of the arguments, which choose the model of a device.
    """
    model = _MODELS.get(kind)
    if model is None:
        return _library().get(kind)
    given = {*given, *_NEEDED.get(kind, ())}
    if kind == "cfa" and not {"Rt", "Ct"} & given:
        given |= {"Rt"}
    return model.definition(kind, given), model.source


_DEFINITION: Final = re.compile(r"^((?:#[^\n]*\n)+)(define (\w+)\(.*?^done$)", re.MULTILINE | re.DOTALL)


@lru_cache(maxsize=1)
def _library() -> dict[str, tuple[str, str]]:
    """Each definition of the shipped files, with its source, by name."""
    found: dict[str, tuple[str, str]] = {}
    for file in sorted((Path(__file__).resolve().parent / "shipped").glob("*.symnet")):
        for match in _DEFINITION.finditer(file.read_text(encoding="utf-8")):
            notes, text, name = match.groups()
            source = " ".join(line.removeprefix("#").strip() for line in notes.splitlines())
            found[name] = (text, source.partition("source: ")[2])
    return found
