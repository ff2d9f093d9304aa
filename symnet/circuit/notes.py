"""What looks odd in a network without being wrong: values out of the ordinary, nodes with one part only.

The ranges are those of parts one can buy (common practice, no source). A network whose values are all near one
is a normalised prototype: it gets one remark instead of one for every part.
"""

from __future__ import annotations

from collections import Counter
from fractions import Fraction
from typing import TYPE_CHECKING, Final

from symnet.circuit.meanings import Meanings, NearNames, uses
from symnet.circuit.parts import CLASS_LETTERS, GROUND, class_letter, dimension_of_class
from symnet.circuit.series import is_hidden
from symnet.expressions import Number, names_in
from symnet.quantities import LEADING_CODE, Quantity, engineering, read_code

if TYPE_CHECKING:
    from symnet.circuit.drawing import Drawing

__all__ = ["UnusualValueWarning", "code_note", "notes"]

_RANGES: Final = {
    "R": (Fraction("1e-3"), Fraction("1e12")),
    "L": (Fraction("1e-10"), Fraction(1000)),
    "C": (Fraction("1e-14"), Fraction("5e-2")),
}
_WORDS: Final = {"R": "a resistor", "L": "an inductor", "C": "a capacitor"}
_NORMALISED: Final = {
    "R": (Fraction("0.1"), Fraction(10)),
    "L": (Fraction("0.01"), Fraction(100)),
    "C": (Fraction("0.01"), Fraction(100)),
}


def notes(net: Drawing) -> tuple[str, ...]:
    """Remarks on a network, each one sentence; none of them stops a derivation.

    >>> from symnet.circuit.reading import read_drawing
    >>> notes(read_drawing("in -- R1 = 1k -- out -- C1 = 0.1 -- gnd; drive in; read out"))
    ('C1 = 100 mF is much for a capacitor; did you mean 0.1 uF?',)
    """
    return (*_values(net), *_couplings(net), *_nodes(net))


def _couplings(net: Drawing) -> list[str]:
    """Couplings with a negative sign, which the drawing would rather show by its dots; a perfect one."""
    found: list[str] = []
    for each in net.couplings:
        value = net.value(each.name)
        if value is None or not isinstance(value.expression, Number):
            continue
        number, pair = value.expression.value, f"{each.first} and {each.second}"
        if number < 0:
            found.append(
                f"{each.name} is negative: the dots of {pair} are reversed against the direction of their chains; "
                f"write {each.second} the other way round to draw it so"
            )
        if each.is_coefficient and abs(number) == 1:
            found.append(f"{pair} are coupled perfectly ({each.name} = {number}): the order is lower by one")
    return found


def _values(net: Drawing) -> list[str]:
    found: list[str] = []
    branches = {branch.name for branch in net.branches()}
    numbers = {name: value.expression for name, value in net.values if isinstance(value.expression, Number)}
    valued = {
        name: number.value
        for name, number in numbers.items()
        if name in branches and class_letter(name) in _RANGES
    }
    normalised = any(class_letter(name) in "LC" for name in valued) and all(
        _within(abs(value), _NORMALISED[class_letter(name)]) for name, value in valued.items()
    )
    if normalised:
        found.append("all values are near 1: this looks like a normalised prototype (1 ohm, 1 rad/s)")
    for name, value in valued.items():
        if value == 0:
            found.append(
                f"{name} = 0: {'an open circuit' if class_letter(name) == 'C' else 'a short circuit'}"
            )
        elif value < 0:
            found.append(f"{name} is negative: conditions that take parts as positive do not hold")
        elif not normalised and not _within(value, _RANGES[class_letter(name)]):
            found.append(_unlikely(name, value))
    used = {name.name for use in uses(net) for name in names_in(use.expression)}
    used |= {coupling.name for coupling in net.couplings}
    found += [
        f"{name} has a value and is used nowhere"
        for name, _ in net.values
        if name not in branches and name not in used
    ]
    return found


def _within(value: Fraction, limits: tuple[Fraction, Fraction]) -> bool:
    return limits[0] <= value <= limits[1]


def _unlikely(name: str, value: Fraction) -> str:
    kind = class_letter(name)
    dimension = CLASS_LETTERS[kind]
    much = "much" if value > _RANGES[kind][1] else "little"
    text = f"{name} = {engineering(value, dimension)} is {much} for {_WORDS[kind]}"
    # The number as it may have been typed, with the prefix that was forgotten or mistaken for another.
    for typed in (value, value / 10**6):
        for prefix, power in (("u", -6), ("n", -9), ("p", -12), ("m", -3), ("k", 3), ("M", 6)):
            meant = typed * Fraction(10) ** power
            if meant != value and Fraction("0.01") <= typed < 1000 and _usual(kind, meant):
                return f"{text}; did you mean {engineering(typed)} {prefix}{dimension}?"
    return text


def _usual(kind: str, value: Fraction) -> bool:
    low, high = {"R": ("1", "1e7"), "L": ("1e-7", "1"), "C": ("1e-12", "1e-3")}[kind]
    return Fraction(low) <= value <= Fraction(high)


def _nodes(net: Drawing) -> list[str]:
    """Nodes with one part only; nodes that differ from another by one letter or by case."""
    count: Counter[str] = Counter()
    only: dict[str, str] = {}
    for piece in (*net.parts, *net.drives):
        for node in piece.nodes:
            count[node] += 1
            only[node] = piece.name or "a drive"
    meanings = Meanings(net)
    for use in uses(net):
        if use.is_law:
            for name in names_in(use.expression):
                node = name.name.removeprefix("v_") if name.name not in meanings.nodes else name.name
                count[node] += node in meanings.nodes
    shown = [node for node in meanings.nodes if not is_hidden(node)]
    near = NearNames(node for node in [*shown, GROUND] if not node.isdigit())
    found: list[str] = []
    for node in shown:
        close = [] if node.isdigit() else [n for n in near.to(node) if _same_but_slip(n, node)]
        if count[node] == 1:
            question = f"; did you mean {close[0]}?" if close else ""
            found.append(f"node {node} has only {only[node]}{question}")
        elif close and close[0].lower() == node.lower() and close[0] > node and count[close[0]] > 1:
            found.append(f"nodes {node} and {close[0]} differ in case only")
    return found


def _same_but_slip(one: str, two: str) -> bool:
    """Short names such as a and b are one edit apart by nature; those that differ in case are not."""
    return one.lower() == two.lower() or min(len(one), len(two)) >= 3


class UnusualValueWarning(UserWarning):
    """A code was read in a way that is legal and unusual for its part."""


def code_note(text: str, name: str) -> str:
    """How a code that begins with its letter was read, and whether that is unusual; empty for other texts.

    >>> code_note("M47", "R1")
    'M47 for R1 is read as 470 kohm'
    >>> code_note("m47", "C1")
    'm47 for C1 is read as 470 uF, which is unusual; please confirm'
    """
    dimension = dimension_of_class(name)
    code = text.strip()
    worth = read_code(code, dimension, leading=True) if LEADING_CODE.fullmatch(code) else None
    if worth is None:
        return ""
    usual = {"R": "RkKMG", "L": "num", "C": "pnuU\N{MICRO SIGN}\N{GREEK SMALL LETTER MU}"}.get(
        class_letter(name)
    )
    said = f"{code} for {name} is read as {Quantity(worth.value, worth.dimension)}"
    return said if usual is None or code[0] in usual else f"{said}, which is unusual; please confirm"
