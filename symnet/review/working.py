"""A hand derivation as values: lines in the order of writing, each with what it says and where it stands.

Nothing here knows a network. A working is read by :func:`symnet.review.reading.read_working` and judged by
:func:`symnet.review.verify.verify`.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, field
from fractions import Fraction
from typing import Final, TypeAlias

from symnet.errors import Span
from symnet.expressions import Expression

__all__ = [
    "FIGURES",
    "Approximation",
    "Assumption",
    "Definition",
    "Equation",
    "Family",
    "Infinite",
    "Limit",
    "Line",
    "Statement",
    "Working",
    "expressions_of",
]

#: Every spelling of a figure, with the figure: w in rad/s, f in Hz, tau in seconds.
FIGURES: Final = {
    **dict.fromkeys(("w0", "w_0", "omega0", "omega_0"), "w0"),
    **dict.fromkeys(("f0", "f_0"), "f0"),
    **dict.fromkeys(("Q",), "Q"),
    **dict.fromkeys(("zeta",), "zeta"),
    **dict.fromkeys(("tau",), "tau"),
    **dict.fromkeys(("f3dB", "f_3dB"), "f3dB"),
    **dict.fromkeys(("w3dB", "w_3dB", "omega3dB", "omega_3dB"), "w3dB"),
}


@dataclass(frozen=True, slots=True)
class Definition:
    """``let g = 1 + s*Rs*C1``: from here on the name stands for the expression."""

    name: str
    value: Expression


@dataclass(frozen=True, slots=True)
class Assumption:
    """``given R2 = R1, C2 = 2*C1``: from here on the network is the one with these values."""

    ties: tuple[tuple[str, Expression], ...]


@dataclass(frozen=True, slots=True)
class Equation:
    """``a = b = c``, two sides or more; with ``node`` the currents at that node.

    ``of`` says which transfer the figures (w0, Q, ...) on its sides belong to; None is the one that is read.
    """

    sides: tuple[Expression, ...]
    node: str | None = None
    of: Expression | None = None


@dataclass(frozen=True, slots=True)
class Infinite:
    """Infinity as the value or the end of a limit; ``sign`` is -1 for minus infinity."""

    sign: int = 1


@dataclass(frozen=True, slots=True)
class Limit:
    """``value -> end as name -> toward``."""

    value: Expression
    end: Expression | Infinite
    name: str
    toward: Expression | Infinite


@dataclass(frozen=True, slots=True)
class Approximation:
    """``left ~= right for name = low .. high within 1 %``: |left/right - 1| is at most ``within`` all over the range.

    ``name`` is f (Hz) or w (rad/s), or empty where no s occurs. With ``decibels`` the magnitudes differ by at
    most so many dB.
    """

    left: Expression
    right: Expression
    name: str
    low: Expression | None
    high: Expression | None
    within: Fraction
    decibels: bool = False


@dataclass(frozen=True, slots=True)
class Family:
    """``out/in is butterworth 3 with f3dB = 20 kHz``: a family, an order, and its figures or parameters."""

    value: Expression
    name: str
    order: int
    settings: tuple[tuple[str, Expression], ...] = ()


Statement: TypeAlias = Definition | Assumption | Equation | Limit | Approximation | Family


@dataclass(frozen=True, slots=True)
class Line:
    """One line of a working: its number (from 1), what it is called, its text, its place, what it says.

    ``label`` is the one it was given (``3``, ``2a``) or its number; ``text`` is what was typed, without label.
    """

    number: int
    label: str
    text: str
    statement: Statement
    span: Span = field(compare=False, repr=False)


@dataclass(frozen=True, slots=True)
class Working:
    """The lines of a hand derivation, and the text they stand in."""

    lines: tuple[Line, ...]
    text: str = field(compare=False, repr=False)

    def __iter__(self) -> Iterator[Line]:
        return iter(self.lines)

    def __len__(self) -> int:
        return len(self.lines)


def expressions_of(statement: Statement) -> tuple[Expression, ...]:
    """Every expression that a statement holds, in the order of writing."""
    match statement:
        case Definition(value=value):
            return (value,)
        case Assumption(ties=ties):
            return tuple(value for _, value in ties)
        case Equation(sides=sides, of=of):
            return sides if of is None else (of, *sides)
        case Limit(value=value, end=end, toward=toward):
            return tuple(part for part in (value, end, toward) if not isinstance(part, Infinite))
        case Approximation(left=left, right=right, low=low, high=high):
            return tuple(part for part in (left, right, low, high) if part is not None)
        case Family(value=value, settings=settings):
            return (value, *(setting for _, setting in settings))
