"""Devices: sections that ship with symnet, drawn in its own notation.

An op amp with only its terminals is ideal and is a part by itself. Each property that is given adds what it
stands for and nothing else, so that a simpler model is the exact limit of a richer one:

================  ===============================================================================
``gain``          A0: the output follows ``gain*(plus - minus)``; to infinity: the ideal op amp
``gbw``           gain-bandwidth product: A(s) = gbw/s, or gain/(1 + s*gain/gbw) with both
``pole2``         a second pole of the gain: A(s)/(1 + s/pole2); to infinity: none
``Rin``, ``Cin``  between the inputs; to infinity, to zero: none
``Rout``          in series with the output; to zero: none
================  ===============================================================================

A gain-bandwidth product and a pole are angular frequencies in rad/s; given in Hz they are multiplied by 2 pi.
"""

from __future__ import annotations

from collections.abc import Collection
from functools import lru_cache
from typing import Final

__all__ = ["OPAMP_TERMINALS", "device_names", "device_parameters", "device_source"]

OPAMP_TERMINALS: Final = ("plus", "minus", "out")
_OPAMP_PROPERTIES: Final = ("gain", "gbw", "pole2", "Rin", "Cin", "Rout")
_GAINS: Final = {(): "", ("gain",): "gain", ("gbw",): "gbw/s", ("gain", "gbw"): "gain/(1 + s*gain/gbw)"}


def device_names() -> tuple[str, ...]:
    """The devices and sections that ship with symnet."""
    return ("opamp", *_library())


def device_parameters(kind: str) -> tuple[str, ...]:
    """All the properties that a device with several models may be given; empty for any other."""
    return _OPAMP_PROPERTIES if kind == "opamp" else ()


def device_source(kind: str, given: Collection[str]) -> str | None:
    """The definition that ships under this name, with those that it places, or None.

    ``given`` are the names of the arguments, which choose the model of an op amp.
    """
    if kind == "opamp":
        return _opamp(tuple(name for name in _OPAMP_PROPERTIES if name in given))
    return _library().get(kind)


def _opamp(given: tuple[str, ...]) -> str:
    """The op amp with these properties."""
    gain = _GAINS[tuple(name for name in given if name in {"gain", "gbw"})]
    output = "o" if "Rout" in given else "out"
    if gain:
        second = "/(1 + s/pole2)" if "pole2" in given else ""
        lines = [f"hold {output} = {gain}{second}*(plus - minus) as amp"]
    else:
        given = tuple(name for name in given if name != "pole2")  # an infinite gain has no pole
        lines = [f"amp: opamp(plus=plus, minus=minus, out={output})"]
    lines += [f"plus -- {name} -- minus" for name in ("Rin", "Cin") if name in given]
    lines += [f"{output} -- Rout -- out"] if "Rout" in given else []
    parameters = f"; {', '.join(given)}" if given else ""
    return "\n".join([f"define opamp(plus, minus, out{parameters})", *lines, "done"])


@lru_cache(maxsize=1)
def _library() -> dict[str, str]:
    """Each definition of the files that ship, by name."""
    return {}
