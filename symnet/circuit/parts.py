"""The parts of a drawing as frozen values: branches, laws, op amps, drives, and what is read.

Each part knows its name and its nodes; what its value is stands in the network, since a tie such as
``R2 = R1`` concerns more than one part. The current of a two-terminal part is positive from ``start`` to
``end``, the direction in which the pencil passed.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from fractions import Fraction
from typing import Any, Final, TypeAlias

from symnet.errors import Span
from symnet.expressions import Expression
from symnet.quantities import FARAD, HENRY, NUMBER, OHM, SIEMENS, Dimension

__all__ = [
    "CLASS_LETTERS",
    "GROUND",
    "Branch",
    "Coupling",
    "CurrentDrive",
    "CurrentLaw",
    "Drive",
    "OpAmp",
    "Part",
    "Value",
    "VoltageDrive",
    "VoltageLaw",
    "class_letter",
    "dimension_of_class",
]

GROUND: Final = "gnd"

#: Class letters of IEEE 315 / IEC 81346 that make a name a part, with the dimension of its value.
CLASS_LETTERS: Final[dict[str, Dimension]] = {"R": OHM, "L": HENRY, "C": FARAD, "Z": OHM, "Y": SIEMENS}


def class_letter(name: str) -> str:
    """The first letter of a name, that of R1 for ``A1.R1``, the R1 inside the section A1."""
    return name[name.rfind(".") + 1 :][:1]


def dimension_of_class(name: str) -> Dimension | None:
    """The dimension that the class letter of a name gives it: R1 is ohm, C1 farad; None for other letters."""
    return CLASS_LETTERS.get(class_letter(name))


def _span() -> Any:
    return field(default=None, compare=False, repr=False, kw_only=True)


@dataclass(frozen=True, slots=True)
class Branch:
    """A resistor, inductor, capacitor, impedance Z or admittance Y between two nodes; the first letter says which."""

    name: str
    start: str
    end: str
    span: Span | None = _span()

    @property
    def kind(self) -> str:
        """The class letter: R, L, C, Z or Y."""
        return class_letter(self.name)

    @property
    def nodes(self) -> tuple[str, str]:
        """Its terminals in the order of writing."""
        return (self.start, self.end)


@dataclass(frozen=True, slots=True)
class Coupling:
    """``couple L1 to L2 with k = 0.98``: two coils share flux; each has its dot where the pencil entered it.

    A name that begins with k is the coupling coefficient, k = M/sqrt(L1 L2); one that begins with M the mutual
    inductance itself. The equations hold M, a symbol of its own called ``M_k`` where k was given.
    """

    name: str
    first: str
    second: str
    span: Span | None = _span()

    @property
    def is_coefficient(self) -> bool:
        """Whether k was given, and not M."""
        return class_letter(self.name) == "k"

    @property
    def mutual(self) -> str:
        """The symbol of the mutual inductance."""
        path, dot, own = self.name.rpartition(".")
        return f"{path}{dot}M_{own}" if self.is_coefficient else self.name

    @property
    def dimension(self) -> Dimension:
        """That of the value: henry for M, none for k."""
        return NUMBER if self.is_coefficient else HENRY


@dataclass(frozen=True, slots=True)
class VoltageLaw:
    """``hold plus - minus = value``: an ideal voltage source that follows a linear expression of voltages and currents."""

    name: str
    plus: str
    minus: str
    value: Expression
    span: Span | None = _span()

    @property
    def nodes(self) -> tuple[str, str]:
        """Its output terminals."""
        return (self.plus, self.minus)


@dataclass(frozen=True, slots=True)
class CurrentLaw:
    """``push from start to end = value``: an ideal current source that follows a linear expression."""

    name: str
    start: str
    end: str
    value: Expression
    span: Span | None = _span()

    @property
    def nodes(self) -> tuple[str, str]:
        """Its output terminals."""
        return (self.start, self.end)


@dataclass(frozen=True, slots=True)
class OpAmp:
    """An ideal op amp: no input current, no voltage between plus and minus, any current out of ``out``."""

    name: str
    plus: str
    minus: str
    out: str
    span: Span | None = _span()

    @property
    def nodes(self) -> tuple[str, str, str]:
        """Its terminals: plus, minus, out."""
        return (self.plus, self.minus, self.out)


@dataclass(frozen=True, slots=True)
class VoltageDrive:
    """``drive plus - minus``: the ideal voltage source whose transfer is asked for."""

    plus: str
    minus: str = GROUND
    name: str | None = None
    span: Span | None = _span()

    @property
    def nodes(self) -> tuple[str, str]:
        """Its terminals."""
        return (self.plus, self.minus)


@dataclass(frozen=True, slots=True)
class CurrentDrive:
    """``drive current from start to end``: the ideal current source whose transfer is asked for."""

    start: str
    end: str
    name: str | None = None
    span: Span | None = _span()

    @property
    def nodes(self) -> tuple[str, str]:
        """Its terminals."""
        return (self.start, self.end)


Part: TypeAlias = Branch | VoltageLaw | CurrentLaw | OpAmp
Drive: TypeAlias = VoltageDrive | CurrentDrive


@dataclass(frozen=True, slots=True)
class Value:
    """What a name is worth: an expression, exact, and a relative tolerance (1 % is 1/100) when one was given.

    An expression without names is a number and the name stays a symbol with that value; an expression with
    names ties the name to them (``C2 = 2*C1``), so that the tied name no longer appears in H.
    """

    expression: Expression
    tolerance: Fraction | None = None
    span: Span | None = _span()
