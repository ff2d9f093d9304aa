"""The network as far as it has been read, and how a right-hand side becomes the value of a name.

Values wait in the draft until all statements are known, since a ``free`` further down may give a symbol its
dimension.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from fractions import Fraction

from symnet.circuit.clues import words_of
from symnet.circuit.formulas import Formed, spelled
from symnet.circuit.parts import Coupling, CurrentLaw, Drive, Part, Value, VoltageLaw
from symnet.errors import DimensionError, Fault, Span
from symnet.expressions import Expression, Name, Number, names_in
from symnet.quantities import NUMBER, Dimension, read_code

__all__ = ["Draft", "Header", "Placement", "RightSide", "all_names", "mentioned", "node_named", "value_of"]


@dataclass(frozen=True, slots=True)
class RightSide:
    """What stands right of an equals sign, before it is known whose value it is."""

    formed: Formed
    tolerance: Fraction | None = None


@dataclass(frozen=True, slots=True)
class Placement:
    """``A1: kind(in=a, out=b, R=2 kohm, C)`` before it is known what ``kind`` is: each argument with name and place.

    An argument without a value, as C here, is a parameter that is left a symbol.
    """

    name: str
    kind: str
    arguments: tuple[tuple[str, RightSide | None, Span], ...]
    kind_span: Span
    span: Span


@dataclass(frozen=True, slots=True)
class Header:
    """``define kind(in, out; R, C = 10 nF)``: what a section is called from outside."""

    kind: str
    terminals: tuple[str, ...]
    parameters: tuple[tuple[str, RightSide | None, Span], ...]
    span: Span


@dataclass(slots=True)
class Draft:
    """The network as far as it has been read. A law without a name has an empty one until all names are known."""

    parts: list[Part | Placement] = field(default_factory=list)
    couplings: list[Coupling] = field(default_factory=list)
    drives: list[Drive] = field(default_factory=list)
    reads: list[Expression] = field(default_factory=list)
    values: list[tuple[str, RightSide, Span]] = field(default_factory=list)
    free: list[tuple[str, Dimension | None, Span]] = field(default_factory=list)
    header: Header | None = None
    """The ``define`` that this statement is."""
    is_done: bool = False
    """Whether this statement is ``done``."""

    def take(self, other: Draft) -> None:
        """Add what another draft holds."""
        self.parts += other.parts
        self.couplings += other.couplings
        self.drives += other.drives
        self.reads += other.reads
        self.values += other.values
        self.free += other.free


def value_of(name: str, side: RightSide, dimension: Dimension | None) -> Value:
    """The value of a name, once its dimension is known: a bare number takes it, a code is read by it.

    Raises DimensionError when a quantity has another dimension.
    """
    formed = side.formed
    expression, worth = formed.expression, formed.worth
    if formed.code:
        worth = read_code(formed.code, dimension) or worth
    if worth is not None:
        own = worth.dimension
        if own == NUMBER and dimension is not None:
            own = dimension
        if dimension is not None and own != dimension:
            message = f"{name} is in {dimension}, its value is in {own}"
            if dimension == NUMBER:
                message = f"{name} is a number, its value is in {own}"
            raise DimensionError(Fault(message, f"give {name} in {dimension}", formed.span, parts=(name,)))
        expression = Number(worth.value, own, formed.span)
    return Value(expression, side.tolerance, span=formed.span)


def node_named(side: RightSide) -> str | None:
    """The node that an argument names, or None when it is something else."""
    if side.tolerance is None and not side.formed.code:
        match side.formed.expression:
            case Name(name=node):
                return node
            case Number(value=number) if side.formed.rule == "number":
                return str(number)
    return None


def mentioned(text: str) -> set[str]:
    """The words of a broken line: what they are cannot be known, so nothing is said about them elsewhere."""
    return {spelled(word.text) for word in words_of(text) if word.kind != "sign"}


def all_names(draft: Draft) -> set[str]:
    """Every name in a draft, whatever it stands for."""
    found: set[str] = {name for name, _, _ in draft.values} | {name for name, _, _ in draft.free}
    found |= {coupling.name for coupling in draft.couplings}
    expressions = list(draft.reads) + [side.formed.expression for _, side, _ in draft.values]
    for part in draft.parts:
        found.add(part.name)
        if isinstance(part, Placement):
            expressions += [side.formed.expression for _, side, _ in part.arguments if side is not None]
            continue
        found.update(part.nodes)
        if isinstance(part, VoltageLaw | CurrentLaw):
            expressions.append(part.value)
    for drive in draft.drives:
        found |= {drive.name or "", *drive.nodes}
    for expression in expressions:
        for name in names_in(expression):
            found.add(name.name)
    return found
