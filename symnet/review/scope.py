"""What each name of a hand derivation means, and the value of its expressions in the unknowns of the network.

A name is, in this order: one that the working has introduced by ``let``; a node, a part, ``i_R1``, ``v_R1``, ``s`` or
a symbol of the network; one of the words below. Voltages and the currents that no voltage gives stay unknowns, the
current of a branch is its voltage times its admittance: so two lines can be compared before the solution is put in.

======================  ===========================================================================
word                    meaning
======================  ===========================================================================
``pi``, ``j``           3.14159..., the root of -1
``w`` (``omega``)       s/j in rad/s; ``jw`` is s
``f``                   w/(2*pi) in Hz
``H``                   the transfer that the network reads: its first read over its first drive
``D``                   the denominator of H in lowest terms, its first coefficient made 1
``w0`` (rad/s) ``f0``   of D, as in :mod:`symnet.shape.normal`: the geometric mean of the poles
``Q``, ``zeta``         of a second-order D; Q = 1/(2*zeta)
``tau`` (s)             1/w0
======================  ===========================================================================
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field
from fractions import Fraction
from typing import TYPE_CHECKING, Final

from symnet.circuit.network import Network
from symnet.circuit.parts import GROUND, Branch, CurrentDrive, CurrentLaw, OpAmp, VoltageLaw
from symnet.errors import Fault, SymnetError, UndefinedError, nearest
from symnet.expressions import Expression, Name, Number, evaluate, names_in
from symnet.review.algebra import Value
from symnet.review.figures import figure
from symnet.review.solution import Solution, generator_of
from symnet.review.working import FIGURES, Assumption, Definition, Equation, Line, Working, expressions_of

if TYPE_CHECKING:
    from symnet.errors import Span
    from symnet.exact.readable.packed import Polynomial

__all__ = ["WORDS", "Scope", "name_faults"]

#: Words that mean something unless the network or the working gives them another meaning.
WORDS: Final = ("pi", "j", "w", "omega", "jw", "jomega", "f", "H", "D", *FIGURES)


@dataclass(eq=False)
class Scope:
    """The meaning of names at one place of a working: the solution of the network there, and what ``let`` gave.

    ``own_equations`` are the equations of the network itself, common factors apart: they hold without further proof,
    however long the network is.
    """

    solution: Solution
    definitions: Mapping[str, Expression] = field(default_factory=dict)
    own_equations: set[frozenset[tuple[int, int]]] = field(default_factory=set, repr=False)
    _known: dict[str, Value] = field(default_factory=dict, repr=False)

    @property
    def network(self) -> Network:
        """The network that the names belong to."""
        return self.solution.network

    def number(self, value: int | Fraction) -> Value:
        """A rational number."""
        return self.solution.algebra.number(value)

    def value(
        self, expression: Expression, of: Expression | None = None, rounded: Rounded | None = None
    ) -> Value:
        """The value of an expression; ZeroDivisionError with the place where it divides by zero.

        With ``rounded``, numbers that were rounded get a generator for what was lost.
        """

        def number(given: Number) -> Value:
            return rounded(given) if rounded is not None else self.number(given.value)

        def name(given: Name) -> Value:
            if rounded is not None and given.name in self.definitions:
                inner: Value = evaluate(self.definitions[given.name], name, number)
                return inner
            return self.of_name(given.name, of)

        found: Value = evaluate(expression, name, number)
        return found

    def of_name(self, name: str, of: Expression | None = None) -> Value:
        """What one name stands for."""
        if of is not None and self.is_figure(name):
            return self._figure(FIGURES[name], of)
        known = self._known.get(name)
        if known is None:
            known = self._known[name] = self._meaning(name)
        return known

    def is_figure(self, name: str) -> bool:
        """Whether a name is a figure such as Q here, and not one of the network or of the working."""
        return name in FIGURES and name not in self.definitions and name not in self.network.symbols()

    def know(self, polynomial: Polynomial) -> None:
        """Take in an equation of the network."""
        self.own_equations.add(self._primitive(polynomial))

    def knows(self, polynomial: Polynomial) -> bool:
        """Whether a polynomial is an equation of the network, times a number and names."""
        return bool(polynomial) and self._primitive(polynomial) in self.own_equations

    def _primitive(self, polynomial: Polynomial) -> frozenset[tuple[int, int]]:
        _, _, rest = self.solution.algebra.space.content(polynomial)
        sign = 1 if rest[max(rest)] > 0 else -1
        return frozenset((m, sign * c) for m, c in rest.items())

    def _meaning(self, name: str) -> Value:
        solution, algebra = self.solution, self.solution.algebra
        if name in self.definitions:
            return self.value(self.definitions[name])
        if name == "s":
            return algebra.generator("s")
        if name == GROUND or name in self.network.nodes:
            return self.voltage(name)
        if name in self.network.symbols() or solution.naming.knows(name):  # such as M_k of a coupling by k
            return solution.worth(name)
        kind, _, rest = name.partition("_")
        if kind == "v" and rest:
            return self.voltage(rest) if rest in {*self.network.nodes, GROUND} else self._across(rest)
        if kind == "i" and rest:
            return self.current(rest)
        if name in self.network.drive_names:
            return self._driven(name)
        return self._word(name)

    # -- voltages and currents -------------------------------------------------------------------------------------------

    def voltage(self, node: str) -> Value:
        """The voltage of a node against gnd."""
        if node == GROUND:
            return self.number(0)
        return self.solution.algebra.generator(generator_of(("v", node)))

    def between(self, plus: str, minus: str) -> Value:
        """The voltage from one node to another."""
        return self.voltage(plus) - self.voltage(minus)

    def _across(self, name: str) -> Value:
        if name in self.network.drive_names:
            return self.between(*self.network.drives[self.network.drive_names.index(name)].nodes)
        return self.between(*self.network[name].nodes[:2])

    def current(self, name: str) -> Value:
        """The current through a part or a drive."""
        network, algebra = self.network, self.solution.algebra
        if name in network.drive_names:
            drive = network.drives[network.drive_names.index(name)]
            return algebra.generator(generator_of(("x" if isinstance(drive, CurrentDrive) else "i", name)))
        part = network[name]
        match part:
            case VoltageLaw() | OpAmp():
                return algebra.generator(generator_of(("i", name)))
            case CurrentLaw():
                return self.in_network(part.value)
            case Branch() if any(name in (c.first, c.second) for c in network.couplings):
                return algebra.generator(generator_of(("i", name)))
            case Branch(kind="Y"):
                return self.solution.worth(name) * self.between(*part.nodes)
            case Branch(kind="C"):
                return algebra.generator("s") * self.solution.worth(name) * self.between(*part.nodes)
            case Branch(kind="L"):
                return self.between(*part.nodes) / (algebra.generator("s") * self.solution.worth(name))
            case _:
                return self.between(*part.nodes) / self.solution.worth(name)

    def in_network(self, expression: Expression) -> Value:
        """An expression of the network itself: a law, a read."""
        plain = Scope(self.solution) if self.definitions else self
        return plain.value(expression)

    def _driven(self, name: str) -> Value:
        drive = self.network.drives[self.network.drive_names.index(name)]
        if isinstance(drive, CurrentDrive):
            return self.solution.algebra.generator(generator_of(("x", name)))
        return self.between(*drive.nodes)

    # -- words -------------------------------------------------------------------------------------------------------------

    def transfer(self) -> Value:
        """H: the first read over the first drive, in unknowns."""
        if not self.network.reads:
            raise UndefinedError(
                Fault("nothing is read, so that there is no H", "write for example: read out")
            )
        return self.in_network(self.network.reads[0]) / self._driven(self.network.drive_names[0])

    def _word(self, name: str) -> Value:
        algebra = self.solution.algebra
        match name:
            case "pi":
                return algebra.generator("pi")
            case "j":
                return algebra.imaginary()
            case "w" | "omega":
                return algebra.generator("s") / algebra.imaginary()
            case "jw" | "jomega":
                return algebra.generator("s")
            case "f":
                two_pi = self.number(2) * algebra.generator("pi")
                return algebra.generator("s") / algebra.imaginary() / two_pi
            case "H":
                return self.transfer()
            case "D":
                return figure(self.solution, self.transfer(), "D")
        return self._figure(FIGURES[name], None)

    def _figure(self, name: str, of: Expression | None) -> Value:
        return figure(self.solution, self.transfer() if of is None else self.value(of), name)


class Rounded:
    """Gives each rounded number of a line a generator that runs from -1 to 1, times what the rounding may be.

    A whole number without unit is exact; a decimal number is good to half a unit of its last digit, a whole number
    with a unit to that of its third digit at least.
    """

    def __init__(self, scope: Scope, text: str) -> None:
        self.scope, self.text = scope, text
        self.generators: dict[tuple[Span | None, Fraction], str] = {}

    def __call__(self, number: Number) -> Value:
        """The number with its rounding."""
        from symnet.review.digits import half_unit

        value = self.scope.number(number.value)
        written = self.text[number.span.start : number.span.end] if number.span else ""
        half = half_unit(written, number.value)
        if not half:
            return value
        key = (number.span, number.value)
        if key not in self.generators:
            self.generators[key] = f"rounded:{len(self.generators)}"
        return value + self.scope.solution.algebra.generator(self.generators[key]) * self.scope.number(half)


# -- faults of names -------------------------------------------------------------------------------------------------------


def name_faults(network: Network, working: Working) -> Iterator[Fault]:
    """Every name of a working that means nothing, or that is introduced although it means something already."""
    own = {*network.nodes, *network.electric_names(), *network.symbols(), *network.drive_names, "s"}
    own |= {coupling.mutual for coupling in network.couplings}
    known = set(own)
    for line in working:
        yield from _line_faults(line, known, network)
        match line.statement:
            case Definition(name=name):
                if name in own:
                    yield Fault(
                        f"{name} means something in the network and cannot be introduced anew",
                        "choose another name",
                        line.span,
                    )
                elif name in known:
                    yield Fault(f"{name} is introduced twice", "choose another name", line.span)
                known.add(name)
            case Assumption(ties=ties):
                for name, value in ties:
                    if name not in network.symbols():
                        close = nearest(name, network.symbols())
                        hint = (
                            f"did you mean {close[0]}?"
                            if close
                            else "given is for parts and symbols: given R2 = R1"
                        )
                        yield Fault(f"{name} is no part or symbol of the network", hint, line.span)
                    known |= {inner.name for inner in names_in(value)}


def _line_faults(line: Line, known: set[str], network: Network) -> Iterator[Fault]:
    statement = line.statement
    if isinstance(statement, Assumption):
        electric = {*network.nodes, *network.electric_names(), "s"}
        for expression in expressions_of(statement):
            for name in names_in(expression):
                if name.name in electric:
                    yield Fault(
                        f"{name.name} stands in the value of a part",
                        "values are numbers and names of parts",
                        name.span,
                    )
        return
    if isinstance(statement, Equation) and statement.node is not None and statement.node not in network.nodes:
        close = nearest(statement.node, network.nodes)
        hint = f"did you mean {close[0]}?" if close else f"nodes: {', '.join(network.nodes)}"
        if statement.node == GROUND:
            hint = "the equation at gnd follows from those at the other nodes"
        yield Fault(f"the network has no node {statement.node}", hint, line.span)
    told: set[str] = set()
    for expression in expressions_of(statement):
        for name in names_in(expression):
            if name.name not in known and name.name not in WORDS and name.name not in told:
                told.add(name.name)
                yield Fault(f"{name.name} is not known here", _meant(name.name, known, network), name.span)


def _meant(name: str, known: set[str], network: Network) -> str:
    product = _as_product(name, known)
    if product:
        return f"a product is written {product}"
    lower = name.lstrip("vVuU").lstrip("_")
    node = next((node for node in network.nodes if lower and node.lower() == lower.lower()), None)
    if node is not None and name[0] in "vVuU":
        return f"write {node}, or introduce it: let {name} = {node}"
    close = nearest(name, {*known, *WORDS})
    return f"did you mean {close[0]}?" if close else f"introduce it: let {name} = ..."


def _as_product(name: str, known: set[str]) -> str:
    """The name cut into known names: sR1C1 is s*R1*C1."""
    best: list[list[str] | None] = [[]] + [None] * len(name)
    for end in range(1, len(name) + 1):
        for start in range(end):
            head = best[start]
            if head is not None and name[start:end] in known:
                found = [*head, name[start:end]]
                kept = best[end]
                if kept is None or len(found) < len(kept):
                    best[end] = found
    whole = best[-1]
    return "*".join(whole) if whole else ""


def given_network(network: Network, assumption: Assumption) -> Network:
    """The network with the values that an assumption gives; the errors of the network notation at its place."""
    from symnet.circuit.spelling import write_expression

    try:
        return network.with_values({name: f"({write_expression(value)})" for name, value in assumption.ties})
    except SymnetError as error:
        faults = [Fault(fault.message, fault.hint) for fault in error.faults]
        raise type(error)(faults) from None
