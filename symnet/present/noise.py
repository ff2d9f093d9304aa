"""Noise as blocks: who makes how much of it, the totals with what they are referred to, and what was assumed."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator
from typing import TYPE_CHECKING, Final

from symnet.errors import SymnetError
from symnet.present.blocks import Block, Heading, Items, Line, Paragraph, Table
from symnet.quantities import AMPERE, VOLT, Dimension
from symnet.response.noise import root
from symnet.typeset.numbers import Written, plain_number, quantity

if TYPE_CHECKING:
    from symnet.response.noise import Contributor, Noise
    from symnet.response.noise_formula import NoiseFormula

__all__ = ["formula_blocks", "noise_blocks"]

_MOST_ROWS: Final = 40
_FACTOR: Final = 6.6
_LONGEST_FORMULA: Final = 80  # terms of numerator and denominator together


def noise_blocks(found: Noise) -> tuple[Block, ...]:
    """The contributors, largest first, then the totals, then the assumptions."""
    f, where = _shown_at(found)
    rows = tuple(_contributor(found, each, f) for each in found.contributors)
    header = ("source", "its own density", f"at the read, white, {where}", "rms at the read", "share")
    return (
        Heading("Noise"),
        Paragraph((f"At {found.label}: ", _quantity(found.rms, found.dimension), f" rms {found.where}.")),
        Table(header, rows[:_MOST_ROWS], max(0, len(rows) - _MOST_ROWS)),
        Table(("figure", "value", "remark"), tuple(_totals(found, f, where))),
        Items(found.assumptions),
    )


def formula_blocks(found: NoiseFormula) -> tuple[Block, ...]:
    """The closed forms, the whole first, and where they hold."""
    from symnet.exact.readable.forms import readable

    unit = str(found.total.dimension)
    rows = [("all sources", found.total.tree, unit)]
    if len(found.contributors) > 1:
        rows += [(name, each.tree, unit) for name, each in found.contributors]
    blocks: list[Block] = [
        Heading("Noise"),
        Paragraph(f"{found.total.label.capitalize()}, over all frequencies; order {found.order}."),
        Table(("source", "mean square", "unit"), tuple(rows)),
    ]
    if found.conditions:
        conditions: list[Line] = [(readable(each), " > 0") for each in found.conditions]
        blocks += [Paragraph("Stable, and the formulas hold, if and only if"), Items(tuple(conditions))]
    return (*blocks, Items(found.assumptions))


def _shown_at(found: Noise) -> tuple[float, str]:
    """The frequency at which densities are listed: where the gain is stated, else DC."""
    try:
        reference = found.reference
    except SymnetError:
        return 0.0, "at DC"
    if math.isinf(reference.f):
        return 0.0, "at DC"
    return reference.f, reference.where


def _contributor(found: Noise, each: Contributor, f: float) -> tuple[Line, ...]:
    own: Line = "not white"
    if each.own is not None:
        own = _density(root(each.own), _own_dimension(each))
    if each.source.corner:
        own = (own, ", corner ", quantity(each.source.corner, "Hz")) if isinstance(own, Written) else own
    x = (2 * math.pi * f) ** 2
    at_read = math.sqrt(abs(each.density(complex(x))))
    return (
        each.name,
        own,
        _density(at_read, found.dimension),
        _quantity(each.rms, found.dimension),
        quantity(100 * found.share(each), "%", 3),
    )


def _own_dimension(each: Contributor) -> Dimension:
    return AMPERE if each.source.kind == "in" or each.source.part.rpartition(".")[2][:1] == "Y" else VOLT


def _totals(found: Noise, f: float, where: str) -> Iterator[tuple[Line, ...]]:
    unit = found.dimension
    formula: Line = ""
    if found.band is None and found.contributors:
        formula = _formula(found)
    yield "mean square", quantity(found.mean_square, f"{unit}^2"), formula
    yield "rms", _quantity(found.rms, unit), found.where
    outside = 100 * math.erfc(_FACTOR / 2 / math.sqrt(2))
    yield (
        "peak to peak",
        _quantity(found.peak_to_peak(_FACTOR), unit),
        (
            "the factor ",
            plain_number(_FACTOR),
            ", outside of it ",
            plain_number(outside, 2),
            " % of the time",
        ),
    )
    if found.gain is not None:
        at_drive = _drive_dimension(found)
        asked: tuple[tuple[str, Callable[[], tuple[Line, Line]]], ...] = (
            (
                f"|H| of {found.gain.label}",
                lambda: (_ratio(found.reference.gain, found), found.reference.where),
            ),
            (
                "noise bandwidth of H",
                lambda: (quantity(found.bandwidth, "Hz"), f"to |H| {found.reference.where}"),
            ),
            (
                "density at the drive, white",
                lambda: (
                    _density(_white_at_drive(found, f), at_drive),
                    f"{where}; the density at the read over |H|",
                ),
            ),
            (
                "rms at the drive",
                lambda: (
                    _quantity(found.input_rms, at_drive),
                    f"the rms at the read over |H| {found.reference.where}",
                ),
            ),
        )
        for name, figure in asked:
            try:
                yield (name, *figure())
            except SymnetError as error:
                yield name, "none", error.faults[0].message
    if found.signal is not None:
        yield "signal to noise", quantity(found.signal_to_noise, "dB"), _signal(found)


def _signal(found: Noise) -> Line:
    assert found.signal is not None  # noqa: S101 - asked for where there is one
    at = "" if found.signal.f is None else f", at {quantity(found.signal.f, 'Hz')}"
    where = "read" if found.gain is None else "drive"
    unit = found.dimension if found.gain is None else _drive_dimension(found)
    return ("for ", _quantity(float(found.signal.rms), unit), f" rms at the {where}{at}")


def _drive_dimension(found: Noise) -> Dimension:
    assert found.gain is not None  # noqa: S101 - asked for where there is one
    return VOLT if found.gain.dimension == found.dimension / VOLT else AMPERE


def _white_at_drive(found: Noise, f: float) -> float:
    assert found.gain is not None  # noqa: S101 - asked for where there is one
    w = 2 * math.pi * f
    total = sum(each.density(complex(w**2)).real for each in found.contributors)
    size = abs(found.gain.numeric()(1j * w))
    return math.sqrt(total) / size if size else math.inf


def _formula(found: Noise) -> Line:
    try:
        total = found.formula.total
    except SymnetError:
        return ""
    if len(total.numerator) + len(total.denominator) > _LONGEST_FORMULA:
        return ""
    return ("= ", total.tree)


def _ratio(gain: float, found: Noise) -> Written:
    unit = str(found.gain.dimension) if found.gain is not None else ""
    return quantity(gain, "V/V" if unit == "1" else unit)


def _quantity(value: float, dimension: Dimension) -> Written:
    return quantity(value, str(dimension))


def _density(value: float, dimension: Dimension) -> Written:
    return quantity(value, f"{dimension}/rtHz")
