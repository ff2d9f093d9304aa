"""The moves of an elimination told as lines on paper: the equation, what is put in, terms collected, the result.

Every line is an equation with one left side and one right side. Nothing is told that is not used: a step that
changes nothing on paper is left out.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from dataclasses import dataclass, replace
from fractions import Fraction
from typing import TYPE_CHECKING, Literal, TypeAlias

from symnet.circuit.parts import GROUND
from symnet.circuit.spelling import write_expression
from symnet.exact.byhand.currents import Equation, Link, Term
from symnet.exact.byhand.elimination import Carried, Elimination, Solved, Updated
from symnet.exact.byhand.forms import Form, add, times
from symnet.exact.byhand.frame import Frame
from symnet.exact.byhand.writing import coefficient, combination, expression_of, factors_of, over
from symnet.exact.readable.forms import readable_transfer
from symnet.expressions import Expression, Name, Number, Parallel, Product, Sum, names_in, negative

if TYPE_CHECKING:
    from symnet.exact.transfer import Transfer

__all__ = ["Kind", "Step", "narrate"]

#: given: what the drawing says; let: an abbreviation; node: an equation of the network; put in, collect: on the way;
#: result: a voltage in terms of the base; final: H.
Kind: TypeAlias = Literal["given", "let", "law", "node", "put in", "collect", "result", "final"]


@dataclass(frozen=True, slots=True)
class Step:
    """``left = right``: one line, with the node or part it is about and the reason.

    ``goes_on`` says that the left side is that of the line before.
    """

    kind: Kind
    left: Expression
    right: Expression
    label: str = ""
    reason: str = ""
    goes_on: bool = False

    def __str__(self) -> str:
        return f"{write_expression(self.left)} = {write_expression(self.right)}"


def narrate(elimination: Elimination, transfer: Transfer) -> tuple[Step, ...]:
    """All lines of the derivation, from what the drawing gives to H in its readable form."""
    return tuple(_without_repeats(_Teller(elimination, transfer).steps()))


def _without_repeats(steps: Iterator[Step]) -> Iterator[Step]:
    """The lines without those that say the line before again; a left side that stays is not written again."""
    before: Step | None = None
    for step in steps:
        if before is not None and (step.left, step.right) == (before.left, before.right):
            if step.kind in {"result", "final"} and before.kind not in {"node", "law"}:
                before = replace(before, kind=step.kind)
            continue
        if before is not None:
            yield before
        before = replace(
            step, goes_on=before is not None and step.left == before.left and step.kind != "node"
        )
    if before is not None:
        yield before


class _Teller:
    def __init__(self, elimination: Elimination, transfer: Transfer) -> None:
        self.e, self.transfer = elimination, transfer
        self.frame: Frame = elimination.frame
        self.one = self.frame.field.one
        base, source = elimination.base, self.frame.source
        self.order = {source: 0, base: 1}
        self.waiting = ""
        self.has_said_kirchhoff = False

    def steps(self) -> Iterator[Step]:
        yield from self._given()
        for move in self.e.moves:
            match move:
                case Carried(voltage):
                    self.waiting = f"{voltage} is kept for now"
                case Updated(voltage, value, by):
                    yield Step("result", Name(voltage), self._combined(value), reason=f"{by} put in")
                case Solved():
                    yield from self._solved(move)
        yield from self._final()

    def _combined(self, form: Form) -> Expression:
        return combination(form, self.order)

    def _given(self) -> Iterator[Step]:
        network = self.frame.network
        used = {part.name for part in network.parts}
        for name, value in network.values:
            if name in used and any(True for _ in names_in(value.expression)):
                yield Step("given", Name(name), value.expression, reason="given with the network")
        for left, right, why in self.frame.joined():
            yield Step("given", left, right, reason=why)

    # -- one elimination -----------------------------------------------------------------------------------------

    def _solved(self, move: Solved) -> Iterator[Step]:
        equation, voltage = move.equation, move.voltage
        known = {name: form for name, form in move.known.items() if form != {name: self.one}}
        yield self._equation(equation)
        if equation.is_law:
            equation = self._spelled(equation)
            yield Step("put in", *self._sides(equation), reason="currents and voltages of parts written out")
        if equation.is_law and [term.written for term in equation.left] == [Name(voltage)]:
            put_in = self._put_in([(1, term) for term in equation.right], known)
            yield Step("put in", Name(voltage), put_in, reason=self._naming(equation.right, known))
        elif (alone := self._alone(equation, voltage, known)) is not None:
            if voltage == self.frame.source and (grounded := self._divider(equation, *alone)) is not None:
                yield from self._thevenin(equation, alone[1], *grounded, known)
            else:
                yield from self._through_one_branch(equation, *alone, voltage, known)
        else:
            yield from self._collected(equation, voltage, known)
        if move.let is not None:
            name, meaning = move.let
            yield Step("let", Name(name), coefficient(self.frame.field(meaning)), reason="for short")
        yield Step("result", Name(voltage), self._combined(move.value), reason=_by_powers(move.value))

    def _equation(self, equation: Equation) -> Step:
        kind: Kind = "law" if equation.is_law else "node"
        reasons = []
        if kind == "node" and not self.has_said_kirchhoff:
            self.has_said_kirchhoff = True
            reasons.append("currents in = currents out")
        if self.waiting:
            reasons.append(self.waiting)
            self.waiting = ""
        return Step(kind, *self._sides(equation), equation.label, "; ".join(reasons))

    def _sides(self, equation: Equation) -> tuple[Expression, Expression]:
        left, right = (_sum([term.signed() for term in side]) for side in (equation.left, equation.right))
        return left, right

    def _spelled(self, equation: Equation) -> Equation:
        """A law with the currents of branches written in voltages."""
        left, right = (
            tuple(replace(term, written=self.frame.spelled(term.written)) for term in side)
            for side in (equation.left, equation.right)
        )
        return replace(equation, left=left, right=right)

    def _worth(self, term: Term, known: dict[str, Form]) -> Form:
        total: Form = {}
        for name, weight in term.form.items():
            total = add(total, times(weight, known.get(name, {name: self.one})))
        return times(term.sign * self.one, total)

    def _total(self, terms: Iterable[tuple[int, Term]], known: dict[str, Form]) -> Form:
        total: Form = {}
        for sign, term in terms:
            total = add(total, times(sign * self.one, self._worth(term, known)))
        return total

    def _put_in(self, terms: Iterable[tuple[int, Term]], known: dict[str, Form]) -> Expression:
        """The sum of the terms, those with a voltage that is known written with what they are worth."""
        shown: list[tuple[int, Expression]] = []
        for sign, term in terms:
            if any(name in known for name in term.form):
                shown.append((1, self._combined(times(sign * self.one, self._worth(term, known)))))
            else:
                shown.append(term.signed(sign))
        return _sum(shown)

    def _naming(self, terms: Iterable[Term], known: dict[str, Form]) -> str:
        """Which voltages are put in, in words."""
        names = list(dict.fromkeys(name for term in terms for name in term.form if name in known))
        return f"{_listed(names)} put in" if names else ""

    def _alone(self, equation: Equation, voltage: str, known: dict[str, Form]) -> tuple[Term, Link] | None:
        """The one branch through which the voltage enters the equation, if it does so nowhere else."""
        terms = [term for term in (*equation.left, *equation.right) if voltage in term.form]
        if len(terms) != 1 or terms[0].link is None:
            return None
        reaching = (known.get(name, {}) for term in (*equation.left, *equation.right) for name in term.form)
        return None if any(voltage in form for form in reaching) else (terms[0], terms[0].link)

    def _through_one_branch(
        self, equation: Equation, alone: Term, link: Link, voltage: str, known: dict[str, Form]
    ) -> Iterator[Step]:
        """(a - b)/R = I gives a = b + R*I: no fraction has to be cleared."""
        here, there = equation.left, equation.right
        if alone in there:
            here, there = there, here
        sign = alone.sign
        rest = [(sign, term) for term in there] + [(-sign, term) for term in here if term is not alone]
        if sign < 0 or len(here) > 1:
            raw = _sum([term.signed(k) for k, term in rest])
            yield Step("put in", alone.written, raw, reason="solved for this current")
        flow = self._total(rest, known)
        told = self._naming([term for _, term in rest], known)
        if told:
            yield Step("put in", alone.written, self._put_in(rest, known), reason=told)
            yield Step("collect", alone.written, self._combined(flow))
        other = link.minus if link.plus == voltage else link.plus
        if other != GROUND:
            drop = times((self.one if link.plus == voltage else -self.one) / link.admittance, flow)
            yield Step("collect", Name(voltage), _sum([(1, Name(other)), (1, self._combined(drop))]))

    def _divider(self, equation: Equation, alone: Term, link: Link) -> tuple[Term, Link] | None:
        """The resistor to gnd that makes a divider of the one through which the source enters, and is loaded."""
        if not link.resistor or link.plus != self.frame.source or len(equation.right) < 2 or alone.sign < 0:
            return None
        for term in equation.right if equation.left == (alone,) else ():
            other = term.link
            if other is not None and other.resistor and (other.plus, other.minus) == (link.minus, GROUND):
                return term, other
        return None

    def _thevenin(
        self, equation: Equation, link: Link, grounded: Term, shunt: Link, known: dict[str, Form]
    ) -> Iterator[Step]:
        """A loaded divider as one source, in*R2/(R1 + R2), behind R1||R2."""
        r1, r2 = Name(link.resistor), Name(shunt.resistor)
        source = Product(((1, Name(link.plus)), (1, r2), (-1, Sum(((1, r1), (1, r2))))))
        behind = Parallel((r1, r2))
        node = Name(link.minus)
        current = Product(((1, Sum(((1, source), (-1, node)))), (-1, behind)))
        load = [(1, term) for term in equation.right if term is not grounded]
        why = f"Thevenin: {link.plus}, {r1.name} and {r2.name} as one source behind {r1.name}||{r2.name}"
        yield Step("put in", current, _sum([term.signed() for _, term in load]), reason=why)
        flow = self._total(load, known)
        if told := self._naming([term for _, term in load], known):
            yield Step("put in", current, self._put_in(load, known), reason=told)
            yield Step("collect", current, self._combined(flow))
        drop = Product(((1, behind), *factors_of(self._combined(flow))))
        yield Step("collect", source, Sum(((1, node), (1, drop))))

    def _collected(self, equation: Equation, voltage: str, known: dict[str, Form]) -> Iterator[Step]:
        """Everything put in, the voltage on the left, all else on the right, over one denominator."""
        left, right = ([(1, term) for term in side] for side in (equation.left, equation.right))
        if told := self._naming((*equation.left, *equation.right), known):
            yield Step("put in", self._put_in(left, known), self._put_in(right, known), reason=told)
        total = add(self._total(right, known), times(-self.one, self._total(left, known)))
        factor = -total[voltage]
        rest = {name: weight for name, weight in total.items() if name != voltage}
        if len(factor.numer) == 1:
            return  # dividing by a single product is done in the head
        common = factor.denom
        for weight in rest.values():
            common = common.lcm(weight.denom)
        scale = self.frame.field(common)
        reason = "collected"
        if common != self.frame.ring.one:
            reason += f", times {write_expression(coefficient(scale))}"
        if all(c < 0 for c in (factor * scale).numer.values()):
            scale = -scale
        left_side = self._combined({voltage: factor * scale})
        yield Step("collect", left_side, self._combined(times(scale, rest)), reason=reason)

    # -- the end -------------------------------------------------------------------------------------------------

    def _final(self) -> Iterator[Step]:
        frame, e, H = self.frame, self.e, self.transfer
        read, source, base = frame.read, frame.source, e.base
        form = frame.linear(read)
        if form != {base: self.one}:
            raw = self._combined(form)
            if raw != read:
                yield Step("put in", read, raw, reason="what is read")
            if len(form) > 1 or next(iter(form), base) not in e.known or raw != read:
                told = [name for name in form if e.known.get(name) != {name: self.one}]
                reason = f"{_listed(told)} put in" if told else ""
                yield Step("result", read, self._combined(e.read), reason=reason)
        above = e.read.get(base, e.read.get(source, frame.field.zero))
        below = self.one if source in e.read else e.known[source].get(base, self.one)
        ratio = over(read, frame.over())
        same = form == {base: self.one}
        reason = "" if same or source in e.read else f"the ratio of the two, in which {base} cancels"
        quotient = above / below
        yield Step("final", ratio, coefficient(quotient), reason=reason)
        symbols = list(map(str, frame.ring.symbols))
        monomials = [*quotient.numer, *quotient.denom]
        kept = [name for name in frame.kept if any(m[symbols.index(name)] for m in monomials)]
        lets = [*e.lets, *kept]
        written_out = f"{_listed(lets)} written out" if lets else ""
        yield Step("final", ratio, coefficient(e.expanded(quotient)), reason=written_out)
        grouped = expression_of(readable_transfer(H.numerator, H.denominator))
        yield Step("final", ratio, grouped, reason="grouped")


def _listed(names: list[str]) -> str:
    return " and ".join([", ".join(names[:-1]), names[-1]] if len(names) > 1 else names)


def _by_powers(value: Form) -> str:
    powers = {monomial[0] for weight in value.values() for monomial in weight.numer}
    return "collected by powers of s" if len(powers) > 1 else ""


def _sum(terms: list[tuple[int, Expression]]) -> Expression:
    """A sum, sums among its terms joined in, zeros left out."""
    joined: list[tuple[int, Expression]] = []
    for sign, term in terms:
        if isinstance(term, Sum):
            joined += [(sign * inner_sign, inner) for inner_sign, inner in term.terms]
        elif not (isinstance(term, Number) and term.value == 0):
            joined.append((sign, term))
    if not joined:
        return Number(Fraction(0))
    if len(joined) == 1:
        sign, term = joined[0]
        return term if sign > 0 else negative(term)
    return Sum(tuple(joined))
