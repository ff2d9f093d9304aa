"""The equations as an engineer would set them up: modified nodal analysis, labelled, in sympy.

Unknowns are the node voltages, then the currents of the parts that need one: drives, voltage laws, op amps,
inductors and impedances (C.-W. Ho, A. E. Ruehli, P. A. Brennan, The modified nodal approach to network
analysis, IEEE Trans. CAS 22, 1975). Rows are Kirchhoff's current law at each node (currents leaving, equal to
zero) and the law of each of those parts.

The same stamping serves any arithmetic, so that it can also confirm an H modulo a prime. It shares nothing
with the determinants: a law is read off by putting single unknowns to one, not by expanding it.
"""

from __future__ import annotations

from collections.abc import Callable, Container, Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import TYPE_CHECKING, Any

from symnet.circuit.network import Network
from symnet.circuit.parts import (
    GROUND,
    Branch,
    CurrentDrive,
    CurrentLaw,
    OpAmp,
    VoltageDrive,
    VoltageLaw,
)
from symnet.circuit.wiring import check_wiring
from symnet.expressions import Expression, Name, Number, Product, Sum, evaluate
from symnet.typeset.displayed import Displayed

if TYPE_CHECKING:
    from sympy import Matrix

__all__ = ["Arithmetic", "Equation", "Equations", "Stamped", "equations", "stamp"]


@dataclass(frozen=True, slots=True)
class Arithmetic:
    """Where the coefficients live: what a number and a name are, and 0 and 1."""

    number: Callable[[Fraction], Any]
    name: Callable[[str], Any]

    def of(self, expression: Expression) -> Any:
        """The value of an expression without voltages and currents."""
        return evaluate(expression, lambda n: self.name(n.name), lambda n: self.number(n.value))


@dataclass(frozen=True)
class Stamped:
    """``matrix`` times unknowns = ``sources[drive]`` for a drive of value 1; ``rows`` and ``unknowns`` say which.

    Each row of ``matrix``, and each source, maps the numbers of its columns (rows) to what stands there.
    """

    rows: tuple[str, ...]
    unknowns: tuple[tuple[str, str], ...]
    matrix: list[dict[int, Any]]
    sources: dict[str, dict[int, Any]]
    _arithmetic: Arithmetic
    _network: Network

    def weights(self, expression: Expression) -> dict[int, Any]:
        """The factor of each unknown in an expression of voltages and currents (a read, say), by its number."""
        place = {unknown: k for k, unknown in enumerate(self.unknowns)}
        found = _weights(self._network, self._arithmetic, expression, place)
        return {place[unknown]: weight for unknown, weight in found.items()}


def stamp(network: Network, arithmetic: Arithmetic) -> Stamped:
    """The modified nodal equations of a network in this arithmetic."""
    one = arithmetic.number(Fraction(1))
    nodes = network.nodes
    carriers: list[tuple[str, Any]] = [
        (name, drive)
        for name, drive in zip(network.drive_names, network.drives, strict=True)
        if isinstance(drive, VoltageDrive)
    ]
    carriers += [
        (part.name, part)
        for part in network.parts
        if isinstance(part, VoltageLaw | OpAmp)
        or (isinstance(part, Branch) and _needs_current(part, arithmetic))
    ]
    carried = {name for name, _ in carriers}
    unknowns = tuple([("v", node) for node in nodes] + [("i", name) for name, _ in carriers])
    place = {unknown: k for k, unknown in enumerate(unknowns)}
    size = len(unknowns)
    matrix: list[dict[int, Any]] = [{} for _ in range(size)]

    def add(row: tuple[str, str], column: tuple[str, str], value: Any) -> None:
        if row in place and column in place:
            at, here = matrix[place[row]], place[column]
            at[here] = at[here] + value if here in at else value

    def add_law(name: str, plus: str, minus: str) -> None:
        here = ("i", name)
        add(("v", plus), here, one)
        add(("v", minus), here, -one)
        add(here, ("v", plus), one)
        add(here, ("v", minus), -one)

    s = arithmetic.name("s")
    for name, carrier in carriers:
        here = ("i", name)
        match carrier:
            case OpAmp():
                add(("v", carrier.out), here, -one)
                add(here, ("v", carrier.plus), one)
                add(here, ("v", carrier.minus), -one)
            case Branch():
                add_law(name, carrier.start, carrier.end)
                value = arithmetic.name(name)
                add(here, here, -(s * value) if carrier.kind == "L" else -value)
            case VoltageDrive() | VoltageLaw():
                add_law(name, carrier.plus, carrier.minus)
    for part in network.parts:
        if isinstance(part, Branch) and part.name not in carried:
            value = arithmetic.name(part.name)
            admittance = {"R": lambda v: one / v, "C": lambda v: s * v, "Y": lambda v: v}[part.kind](value)
            mutual = -admittance
            a, b = ("v", part.start), ("v", part.end)
            add(a, a, admittance)
            add(b, b, admittance)
            add(a, b, mutual)
            add(b, a, mutual)
    for part in network.parts:
        if isinstance(part, VoltageLaw | CurrentLaw):
            for unknown, weight in _weights(network, arithmetic, part.value, place).items():
                if isinstance(part, VoltageLaw):
                    add(("i", part.name), unknown, -weight)
                else:
                    add(("v", part.start), unknown, weight)
                    add(("v", part.end), unknown, -weight)
    for coupling in network.couplings:
        one_coil, other, mutual = (
            ("i", coupling.first),
            ("i", coupling.second),
            arithmetic.name(coupling.mutual),
        )
        add(one_coil, other, -(s * mutual))
        add(other, one_coil, -(s * mutual))
    sources: dict[str, dict[int, Any]] = {}
    for name, drive in zip(network.drive_names, network.drives, strict=True):
        if isinstance(drive, VoltageDrive):
            sources[name] = {place["i", name]: one}
        else:
            entering = {
                node: value for node, value in ((drive.end, one), (drive.start, -one)) if ("v", node) in place
            }
            sources[name] = {place["v", node]: value for node, value in entering.items()}
    rows = tuple(f"KCL at {name}" if kind == "v" else f"law of {name}" for kind, name in unknowns)
    return Stamped(rows, unknowns, matrix, sources, arithmetic, network)


def _needs_current(part: Branch, arithmetic: Arithmetic) -> bool:
    """Inductors and impedances have a row of their own, and so has a resistance that is exactly zero."""
    return part.kind in "LZ" or (part.kind == "R" and not arithmetic.name(part.name))


def _weights(
    network: Network, arithmetic: Arithmetic, expression: Expression, unknowns: Container[tuple[str, str]]
) -> dict[tuple[str, str], Any]:
    """The factor of each unknown that an expression names: its value with that unknown one and all others zero."""
    zero, one = arithmetic.number(Fraction(0)), arithmetic.number(Fraction(1))
    lookup = _Electric(network, arithmetic, zero)

    def value(values: dict[tuple[str, str], Any]) -> Any:
        lookup.values = values
        return evaluate(expression, lookup.value, lambda n: arithmetic.number(n.value))

    asked: dict[tuple[str, str], Any] = _Asked(zero)
    value(asked)
    return {unknown: value({unknown: one}) for unknown in asked if unknown in unknowns}


class _Asked(dict[tuple[str, str], Any]):
    """Remembers which unknowns an expression asks for; all are zero."""

    def __init__(self, zero: Any) -> None:
        super().__init__()
        self._zero = zero

    def get(self, unknown: tuple[str, str], default: Any = None) -> Any:  # noqa: ARG002 - the default is our zero
        self[unknown] = self._zero
        return self._zero


class _Electric:
    """The value of any name in a law, when the unknowns have the given ``values`` and all others are zero."""

    def __init__(self, network: Network, arithmetic: Arithmetic, zero: Any) -> None:
        self.network, self.arithmetic, self.zero = network, arithmetic, zero
        self.values: Mapping[tuple[str, str], Any] = {}
        self._nodes, self._symbols = frozenset(network.nodes), frozenset(network.symbols())

    def unknown(self, unknown: tuple[str, str]) -> Any:
        return self.values.get(unknown, self.zero)

    def value(self, name: Name) -> Any:
        word = name.name
        if word == GROUND or word in self._nodes:
            return self.voltage(word)
        if word not in self._symbols and word != "s":
            kind, _, rest = word.partition("_")
            if kind == "v" and (rest in self._nodes or rest == GROUND):
                return self.voltage(rest)
            if kind in {"v", "i"}:
                return self.of_part(kind, rest)
        return self.arithmetic.name(word)

    def voltage(self, node: str) -> Any:
        return self.zero if node == GROUND else self.unknown(("v", node))

    def of_part(self, kind: str, name: str) -> Any:
        for known, drive in zip(self.network.drive_names, self.network.drives, strict=True):
            if known == name:
                return self.unknown(("i", name)) if kind == "i" else self.across(drive.nodes)
        part = self.network[name]
        if kind == "v":
            return self.across(part.nodes[:2])
        match part:
            case VoltageLaw() | OpAmp():
                return self.unknown(("i", name))
            case CurrentLaw():
                return evaluate(part.value, self.value, lambda n: self.arithmetic.number(n.value))
            case Branch() if _needs_current(part, self.arithmetic):
                return self.unknown(("i", name))
            case Branch(kind="R"):
                return self.across(part.nodes) / self.arithmetic.name(name)
            case Branch(kind="C"):
                return self.arithmetic.name("s") * self.arithmetic.name(name) * self.across(part.nodes)
            case _:
                return self.arithmetic.name(name) * self.across(part.nodes)

    def across(self, nodes: tuple[str, ...]) -> Any:
        return self.voltage(nodes[0]) - self.voltage(nodes[1])


@dataclass(frozen=True, slots=True)
class Equation:
    """One equation as a person writes it: a label such as ``KCL at a``, a left and a right side."""

    label: str
    left: Expression
    right: Expression


@dataclass(frozen=True, repr=False)
class Equations(Displayed):
    """The modified nodal equations of a network.

    ``lines`` are the equations as written by hand; ``unknowns`` the names of node voltages (V) and currents (A)
    in the order of the columns of ``matrix`` (square, sympy, rows in the order of ``lines``); ``sources`` gives
    the right-hand side for each drive of value 1.
    """

    network: Network
    lines: tuple[Equation, ...]
    unknowns: tuple[str, ...]
    matrix: Matrix
    sources: Mapping[str, Matrix]

    def __repr__(self) -> str:
        return f"<Equations: {len(self.lines)} in the unknowns {_listed(self.unknowns)}>"


def _listed(names: Sequence[str], most: int = 8) -> str:
    rest = len(names) - most
    return ", ".join(names[:most]) + (f" and {rest} more" if rest > 0 else "")


def equations(network: Network) -> Equations:
    """The modified nodal equations of a network, as lines and as a labelled sympy system.

    Rows: Kirchhoff's current law at each node (sum of the currents that leave, in A), then the law of every
    part that has a current of its own (in V). Raises WiringError when the network cannot be solved.

    >>> import symnet as sn
    >>> system = sn.equations(sn.network("in -- R1 -- out -- C1 -- gnd; drive in; read out"))
    >>> system.matrix[1, :]
    Matrix([[-1/R1, C1*s + 1/R1, 0]])
    """
    from sympy import Matrix, Rational

    from symnet.exact.naming import Naming

    check_wiring(network)
    naming = Naming.of(network)
    symbols = dict(zip(naming.generators.names, naming.ring.symbols, strict=True))

    def name(word: str) -> Any:
        return symbols[word] if word in symbols else naming.value(word).as_expr()

    system: Stamped = stamp(
        network, Arithmetic(lambda number: Rational(number.numerator, number.denominator), name)
    )
    columns = range(len(system.unknowns))
    return Equations(
        network,
        tuple(_lines(network, system)),
        tuple(unknown_name(unknown) for unknown in system.unknowns),
        Matrix([[row.get(k, 0) for k in columns] for row in system.matrix]),
        {drive: Matrix([column.get(k, 0) for k in columns]) for drive, column in system.sources.items()},
    )


def unknown_name(unknown: tuple[str, str]) -> str:
    """How an unknown is written: a node by its name, ``v_1`` for node 1, ``i_L1`` for a current."""
    kind, name = unknown
    return f"i_{name}" if kind == "i" else _node(name)


def _node(node: str) -> str:
    return node if node[:1].isalpha() and "+" not in node else f"v_{node}"


def _lines(network: Network, system: Stamped) -> list[Equation]:
    carried = {name for kind, name in system.unknowns if kind == "i"}
    lines = []
    for label, unknown in zip(system.rows, system.unknowns, strict=True):
        if unknown[0] == "v":
            lines.append(Equation(label, _leaving(network, unknown[1], carried), Number(Fraction(0))))
        else:
            lines.append(_law(network, unknown[1], label))
    return lines


def _voltage(node: str) -> Expression:
    return Number(Fraction(0)) if node == GROUND else Name(_node(node))


def _difference(plus: str, minus: str) -> Expression:
    if minus == GROUND:
        return Name(_node(plus))
    if plus == GROUND:
        return Sum(((-1, Name(_node(minus))),))
    return Sum(((1, Name(_node(plus))), (-1, Name(_node(minus)))))


def _leaving(network: Network, node: str, carried: set[str]) -> Expression:
    terms: list[tuple[int, Expression]] = []
    for part in network.parts:
        match part:
            case Branch() if part.name not in carried and node in part.nodes and part.start != part.end:
                other = part.end if node == part.start else part.start
                terms.append((1, _branch_current(part, _difference(node, other))))
            case Branch():
                terms += _signed(Name(f"i_{part.name}"), node, part.start, part.end)
            case VoltageLaw():
                terms += _signed(Name(f"i_{part.name}"), node, part.plus, part.minus)
            case CurrentLaw():
                terms += _signed(part.value, node, part.start, part.end)
            case OpAmp() if part.out == node:
                terms.append((-1, Name(f"i_{part.name}")))
            case _:
                pass
    for name, drive in zip(network.drive_names, network.drives, strict=True):
        if isinstance(drive, CurrentDrive):
            terms += _signed(Name(name), node, drive.start, drive.end)
        else:
            terms += _signed(Name(f"i_{name}"), node, drive.plus, drive.minus)
    return Sum(tuple(terms)) if terms else Number(Fraction(0))


def _signed(current: Expression, node: str, start: str, end: str) -> list[tuple[int, Expression]]:
    out: list[tuple[int, Expression]] = []
    if node == start != end:
        out.append((1, current))
    if node == end != start:
        out.append((-1, current))
    return out


def _branch_current(part: Branch, voltage: Expression) -> Expression:
    value = Name(part.name)
    match part.kind:
        case "R":
            return Product(((1, voltage), (-1, value)))
        case "C":
            return Product(((1, Name("s")), (1, value), (1, voltage)))
        case _:
            return Product(((1, value), (1, voltage)))


def _law(network: Network, name: str, label: str) -> Equation:
    for known, drive in zip(network.drive_names, network.drives, strict=True):
        if known == name:
            return Equation(label, _difference(*drive.nodes), Name(name))
    part = network[name]
    match part:
        case VoltageLaw():
            return Equation(label, _difference(part.plus, part.minus), part.value)
        case OpAmp():
            return Equation(label, _voltage(part.minus), _voltage(part.plus))
        case _:
            if coupled := _coupled(network, name):
                return Equation(label, _difference(*part.nodes[:2]), coupled)
            factors = ((1, Name("s")),) if isinstance(part, Branch) and part.kind == "L" else ()
            right = Product((*factors, (1, Name(name)), (1, Name(f"i_{name}"))))
            return Equation(label, _difference(*part.nodes), right)


def _coupled(network: Network, coil: str) -> Expression | None:
    """S L i plus s M i for every coil that shares flux; None for a coil that shares none."""
    terms = [(Name(coil), coil)]
    for coupling in network.couplings:
        if coil in (coupling.first, coupling.second):
            other = coupling.second if coil == coupling.first else coupling.first
            terms.append((Name(coupling.mutual), other))
    if len(terms) == 1:
        return None
    return Sum(
        tuple((1, Product(((1, Name("s")), (1, value), (1, Name(f"i_{other}"))))) for value, other in terms)
    )
