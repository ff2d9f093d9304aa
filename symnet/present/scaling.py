"""A scaling as blocks: the factors, every value before and after, and the identity that was checked."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from fractions import Fraction
from typing import TYPE_CHECKING, Final

from symnet.circuit.names import dimensions
from symnet.circuit.parts import CurrentLaw, VoltageLaw
from symnet.circuit.scaling import TWO_PI
from symnet.exact.naming import Naming
from symnet.expressions import Expression, names_in
from symnet.present.blocks import Block, Items, Line, Paragraph, Table
from symnet.present.formulas import amount
from symnet.quantities import HERTZ, Dimension
from symnet.typeset.notation import tree_of
from symnet.typeset.numbers import Written, plain_number
from symnet.typeset.tree import Tree

if TYPE_CHECKING:
    from symnet.exact.scaling import Identity, Scaling

__all__ = ["scaling_blocks"]

_DIGITS: Final = 5
_MOST_ROWS: Final = 60


def scaling_blocks(scaling: Scaling) -> tuple[Block, ...]:
    """What was multiplied by what, the values, and H_scaled(s) = k H(s/k_f) for every drive and read."""
    blocks: list[Block] = [Paragraph(_factors(scaling))]
    rows = list(_rows(scaling))
    if rows:
        header = ("name", "before", "after", "tolerance")
        blocks.append(Table(header, tuple(rows[:_MOST_ROWS]), max(0, len(rows) - _MOST_ROWS)))
    lines: list[Line] = [_identity(identity) for identity in scaling.identities]
    blocks.append(Items(tuple(lines or [f"identity: {scaling.note}"])))
    return tuple(blocks)


def _factors(scaling: Scaling) -> Line:
    f, z = scaling.factors.frequency, scaling.factors.impedance
    said: tuple[str | Tree | Written, ...] = ("Frequencies stay",)
    if f != 1:
        hertz = amount(f / TWO_PI, HERTZ, _DIGITS, angular=False)
        said = (
            "Frequencies times ",
            plain_number(f, 6),
            ": 1 rad/s goes to ",
            amount(f, HERTZ, 6),
            ", f = ",
            hertz,
        )
    return (
        (*said, "; impedances times ", plain_number(z, 6), ".") if z != 1 else (*said, "; impedances stay.")
    )


def _rows(scaling: Scaling) -> Iterator[tuple[Line, ...]]:
    numbers = [Naming.of(net).numbers for net in (scaling.before, scaling.network)]
    units = dimensions(scaling.before)
    pairs = zip(scaling.before.values, scaling.network.values, strict=True)
    for (name, old), (_, new) in pairs:
        cells = [
            _value(name, value.expression, known, units.get(name))
            for value, known in zip((old, new), numbers, strict=True)
        ]
        tolerance = "" if old.tolerance is None else f"±{plain_number(100 * old.tolerance)} %"
        yield (name, cells[0], cells[1], tolerance)
    valueless = [part.name for part in scaling.before.branches() if scaling.before.value(part.name) is None]
    if valueless:
        yield (
            ", ".join(valueless[:8]) + " ..." * (len(valueless) > 8),
            "symbol",
            "symbol, the scaled part",
            "",
        )
    for before, after in zip(scaling.before.parts, scaling.network.parts, strict=True):
        if isinstance(before, VoltageLaw | CurrentLaw) and before != after:
            assert isinstance(after, VoltageLaw | CurrentLaw)  # noqa: S101 - scaling keeps the kind
            yield (before.name, ("= ", tree_of(before.value)), ("= ", tree_of(after.value)), "")


def _value(
    name: str, expression: Expression, numbers: Mapping[str, Fraction], unit: Dimension | None
) -> Line:
    if name not in numbers or next(names_in(expression), None) is not None:
        return ("= ", tree_of(expression))
    return amount(numbers[name], unit, _DIGITS)


def _identity(identity: Identity) -> Line:
    factor: tuple[str | Tree | Written, ...] = ()
    if identity.factor != 1:
        factor = (plain_number(identity.factor, 6), " ")
    inside: tuple[str | Written, ...] = ("H(s)",)
    if identity.frequency != 1:
        inside = ("H(s/", plain_number(identity.frequency, 6), ")")
    state = {
        True: f", checked: {identity.how}",
        False: f" was checked and DOES NOT HOLD: {identity.how}",
        None: f", not checked: {identity.how}",
    }[identity.holds]
    return (f"{identity.before.label}: H_scaled(s) = ", *factor, *inside, state)
