"""From the parser's tree of one statement to parts, drives and reads."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction
from typing import TYPE_CHECKING, Any, Final

from symnet.circuit.chains import Chains
from symnet.circuit.devices import OPAMP_TERMINALS
from symnet.circuit.drafts import Header, Placement, RightSide, node_named
from symnet.circuit.formulas import Formed
from symnet.circuit.meanings import is_part_name
from symnet.circuit.parts import (
    GROUND,
    Coupling,
    CurrentDrive,
    CurrentLaw,
    OpAmp,
    VoltageDrive,
    VoltageLaw,
    class_letter,
    dimension_of_class,
)
from symnet.circuit.series import Leaf
from symnet.errors import Span
from symnet.expressions import Expression, Name, Number, Sum
from symnet.quantities import NUMBER, TWO_PI, Dimension, read_unit

if TYPE_CHECKING:
    from lark import Token, Tree

__all__ = ["Statements"]

_OPAMP: Final = "opamp(plus=p, minus=m, out=o)"


class Statements(Chains):
    """Adds one statement to a draft."""

    def build(self, tree: Tree[Token]) -> Any:
        """What the statement comes to; the properties of a device may be given in Hz."""
        if tree.data == "device":
            self.in_hertz = TWO_PI
        return super().build(tree)

    def on_free(self, children: Sequence[Any]) -> None:
        """Symbols that are free on purpose."""
        unit = children[-1] if isinstance(children[-1], Dimension) else None
        names = [child for child in children[1:] if getattr(child, "type", "") == "NAME"]
        for token in names:
            name, span = self.name(token), self.span_of(token)
            self.plain(name, span, "a free symbol")
            own = dimension_of_class(name)
            if own is not None and unit is not None and own != unit:
                self.fault(
                    f"{name} is in {own} by its first letter", f"leave out the unit, or write in {own}", span
                )
            self.draft.free.append((name, unit, span))

    def on_unit(self, children: Sequence[Any]) -> Dimension:
        """The unit of a free symbol."""
        total: Dimension = children[0]
        for sign, dimension in zip(children[1::2], children[2::2], strict=True):
            total = total / dimension if sign == "/" else total * dimension
        return total

    def on_factor(self, children: Sequence[Any]) -> Dimension:
        """One unit with its power."""
        word, _, power = children
        known = read_unit(str(word))
        span = self.span_of(word)
        if word.type == "NUMBER":
            known = (Fraction(1), NUMBER) if word == "1" else None
        elif str(word) not in {"s", "Hz"} and known is not None and known[0] != 1:
            self.fault(f"{word} has a prefix", "a dimension is given by its unit alone: in S", span)
        if known is None:
            self.fault(f"{word} is not a unit", "units: ohm, S, F, H, V, A, s, V/V", span)
            return NUMBER
        if power is not None and (not power.isdigit() or len(power) > 2):
            self.fault("an exponent is a whole number", "such as s^2", self.span_of(power))
            return NUMBER
        return known[1] ** int(power or 1)

    # -- sentences ---------------------------------------------------------------------------------------------------

    def on_as(self, children: Sequence[Token]) -> Token:
        """The name that a sentence gives."""
        return children[1]

    def on_pair(self, children: Sequence[Any]) -> tuple[Leaf, Leaf]:
        """One node against gnd, or one against another."""
        first, _, second = children
        if second is not None and first.name == second.name:
            self.fault(f"both nodes are {first.name}", "name two different nodes", second.span)
        elif second is None and first.name == GROUND:
            self.fault(f"{GROUND} against {GROUND} is nothing", "name another node", first.span)
        return first, second or Leaf(GROUND)

    def on_ends(self, children: Sequence[Any]) -> tuple[Leaf, Leaf]:
        """Where a current leaves the network and where it enters again."""
        words = [child for child in children if isinstance(child, Leaf)]
        if len(words) == 1:
            words.insert(0, Leaf(GROUND))
        if words[0].name == words[1].name:
            self.fault(
                f"both nodes are {words[1].name}", "a current needs two different nodes", words[1].span
            )
        return words[0], words[1]

    def on_drive_voltage(self, children: Sequence[Any]) -> None:
        """Drive a - b as Vs."""
        _, (plus, minus), name = children
        label = self.label(name, "the name of a drive") if name else None
        self.draft.drives.append(
            VoltageDrive(self.node(plus), self.node(minus), label, span=self.whole_line())
        )

    def on_drive_current(self, children: Sequence[Any]) -> None:
        """Drive current from a to b as Is."""
        *_, (start, end), name = children
        label = self.label(name, "the name of a drive") if name else None
        self.draft.drives.append(
            CurrentDrive(self.node(start), self.node(end), label, span=self.whole_line())
        )

    def on_hold(self, children: Sequence[Any]) -> None:
        """Hold out = mu*(p - m) as amp1."""
        _, (plus, minus), _, value, name = children
        label = self.label(name, "the name of a law") if name else ""
        law = VoltageLaw(label, self.node(plus), self.node(minus), self.law(value), span=self.whole_line())
        self.draft.parts.append(law)

    def on_push(self, children: Sequence[Any]) -> None:
        """Push from d to c = gm*(g - c) as amp1."""
        _, (start, end), _, value, name = children
        label = self.label(name, "the name of a law") if name else ""
        law = CurrentLaw(label, self.node(start), self.node(end), self.law(value), span=self.whole_line())
        self.draft.parts.append(law)

    def on_couple(self, children: Sequence[Any]) -> None:
        """Couple L1 to L2 with k = 0.98."""
        _, first, _, second, _, token, _, side = children
        one, two, name = self.name(first), self.name(second), self.name(token)
        for coil, word in ((one, first), (two, second)):
            if class_letter(coil) != "L":
                self.fault(f"{coil} is no coil", "inductors are coupled: couple L1 to L2", self.span_of(word))
        if one == two:
            self.fault(f"{one} is coupled to itself", "name two coils", self.span_of(second))
        span = self.span_of(token)
        self.plain(name, span, "a coupling")
        if class_letter(name) not in {"k", "M"}:
            hint = "write k or k12 for the coefficient, M or M12 for the mutual inductance"
            self.fault(f"{name} says not whether it is k or M", hint, span)
        self.draft.couplings.append(Coupling(name, one, two, span=self.whole_line()))
        if side is not None:
            self.draft.values.append((name, side, span))

    def law(self, formed: Formed) -> Expression:
        """The right-hand side of a law."""
        self.must_not_be_code(formed)
        return self.whole(formed).expression

    def on_read(self, children: Sequence[Any]) -> None:
        """Read out, a - b, i_R1; here, where no number can be meant, a whole number is a node."""
        formed: Formed = children[1]
        self.must_not_be_code(formed)
        self.draft.reads.append(self.reading(formed))

    def reading(self, formed: Formed) -> Expression:
        """What is read: the expression, or the node or pair of nodes that it names."""
        expression = formed.expression
        match expression:
            case Number():
                return self._numbered(expression)
            case Sum(terms=((1, first), (-1, second))) if isinstance(first, Number) or isinstance(
                second, Number
            ):
                pair = [self._numbered(x) if isinstance(x, Number) else x for x in (first, second)]
                if all(isinstance(x, Name) for x in pair):
                    return Sum(((1, pair[0]), (-1, pair[1])), formed.span)
        if isinstance(expression, Sum):
            kept = [term for term in expression.terms if not _is_ground(term[1])]
            if len(kept) == 1 and kept[0][0] == 1 and len(expression.terms) == 2:
                return kept[0][1]
        return self.whole(formed).expression

    def _numbered(self, number: Number) -> Expression:
        if number.dimension == NUMBER and number.value.denominator == 1 and number.value > 0:
            return Name(f"v_{number.value}", number.span)
        return number

    def on_notation(self, children: Sequence[Token]) -> None:
        """The version of the notation."""
        version = children[1]
        if version != "1":
            hint = "this release of symnet reads notation 1"
            self.fault(f"notation {version} is not known", hint, self.span_of(version))

    # -- sections and devices ----------------------------------------------------------------------------------------

    def on_define(self, children: Sequence[Any]) -> None:
        """Define divider(in, out; R, C = 10 nF)."""
        kind = self.label(children[1], "the name of a section")
        words = [child for child in children if isinstance(child, Leaf)]
        for k, word in enumerate(words):
            if word.name == GROUND:
                self.fault(f"{GROUND} is the same inside and needs no terminal", "leave it out", word.span)
            elif any(word.name == other.name for other in words[:k]):
                self.fault(f"{word.name} is a terminal twice", "name it once", word.span)
        terminals = tuple(self.node(word) for word in words)
        parameters = tuple(child for child in children if isinstance(child, tuple))
        for k, (name, _, span) in enumerate(parameters):
            if any(name == other for other, *_ in parameters[:k]):
                self.fault(f"{name} is a parameter twice", "name it once", span)
        self.draft.header = Header(kind, terminals, parameters, self.whole_line())

    def on_parameter(self, children: Sequence[Any]) -> tuple[str, RightSide | None, Span]:
        """One parameter, with its default."""
        token, _, side = children
        name, span = self.name(token), self.span_of(token)
        if not is_part_name(name):
            self.plain(name, span, "a parameter")
        return name, side, span

    def on_done(self, _: Sequence[Token]) -> None:
        """The end of a definition."""
        self.draft.is_done = True

    def on_argument(self, children: Sequence[Any]) -> tuple[Token | None, RightSide]:
        """One terminal or property of a device."""
        return (children[0], children[2]) if len(children) == 3 else (None, children[0])

    def on_device(self, children: Sequence[Any]) -> None:
        """U1: opamp(plus=p, minus=m, out=o); A1: my_section(in=a, out=b, R=2 kohm)."""
        token, _, kind, *arguments = children
        name = self.label(token, "the name of a device")
        named: list[tuple[str, RightSide | None, Span]] = []
        for argument in arguments:
            if not isinstance(argument, tuple):
                continue
            word, side = argument
            if word is not None:
                named.append((str(word), side, self.span_of(word)))
            elif isinstance(side.formed.expression, Name) and side.tolerance is None:
                named.append((side.formed.expression.name, None, side.formed.span))
            else:
                hint = f"write {kind}(name=..., ...), such as {_OPAMP}"
                self.fault("terminals and values of a device are named", hint, side.formed.span)
        ends = {word: side for word, side, _ in named if side is not None and node_named(side)}
        if kind == "opamp" and len(named) == 3 and {*ends} == {*OPAMP_TERMINALS}:
            words = (Leaf(node_named(ends[t]) or "", ends[t].formed.span) for t in OPAMP_TERMINALS)
            plus, minus, out = map(self.node, words)
            self.draft.parts.append(OpAmp(name, plus, minus, out, span=self.whole_line()))
            return
        place = self.span_of(kind)
        self.draft.parts.append(Placement(name, str(kind), tuple(named), place, self.whole_line()))

    def whole_line(self) -> Span:
        """The place of the whole statement."""
        return self.line.span(0, len(self.line.text))


def _is_ground(expression: Expression) -> bool:
    return isinstance(expression, Name) and expression.name == GROUND
