"""The shapes that published truth comes in: an exact formula, an element table, a response table.

This folder holds networks and figures that were published, in symnet's own notation, each beside its source;
the data modules import nothing of symnet, the tests beside them hold the library to them. Every case carries its network as symnet text, its source as found, and whether the print was seen or is
quoted from memory. ``note`` says what a reader of the source would otherwise stumble over.
"""

from __future__ import annotations

from dataclasses import dataclass, field

__all__ = ["Case", "Formula", "Ladder", "Response"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Case:
    """A network in symnet's notation with what was published about it; the print was seen unless said otherwise."""

    id: str
    source: str
    text: str
    from_memory: bool = False
    title: str = ""
    note: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Formula(Case):
    """A network with its published H(s) in part names; ``facts`` are further published relations."""

    formula: str
    facts: dict[str, str] = field(default_factory=dict)


@dataclass(frozen=True, slots=True, kw_only=True)
class Ladder(Case):
    """A network of published element values with the family that the table claims, and how far it may be off.

    ``tol_pole`` and ``tol_zero``: distance from the family's closed form, relative to the pole or zero.
    ``tol_db``: difference of response in dB. ``tol_shape`` and ``tol_scale``: pole distance once the frequency
    scale is fitted, and that scale. ``tol_value``: the printed values against the family's own closed form.
    """

    family: str
    order: int
    ripple_db: float | None = None
    stop_db: float | None = None
    stop_w: float | None = None
    nominal_f: float | None = None
    q: float | None = None
    published: tuple[float, ...] = ()
    tol_pole: float = 0.0
    tol_zero: float = 0.0
    tol_db: float = 0.0
    tol_ripple_db: float = 0.0
    tol_shape: float = 0.0
    tol_scale: float = 0.0
    tol_value: float = 0.0


@dataclass(frozen=True, slots=True, kw_only=True)
class Response(Case):
    """A network with a published table of (f in Hz, dB relative to the value at ``ref_f``)."""

    rows: tuple[tuple[float, float], ...]
    ref_f: float
    tol_db: float
