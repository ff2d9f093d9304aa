"""A network between two ports, as six polynomials that exist whatever its parameters do.

With the matrix A of the nodal equations, b_k the column of a current driven into port k and r_k the row that reads
its voltage, the bordered determinants

    open = det A,   z_jk = det [A, -b_k; r_j, 0],   short = det [A, -b_1, -b_2; r_1, 0, 0; r_2, 0, 0]

are polynomials, and every set of parameters is made of them: Z_jk = z_jk/open, det Z = short/open, Y_11 =
z_22/short, the chain parameters A = z_11/z_21, B = short/z_21, C = open/z_21, D = z_22/z_21, and S with the
reference resistances in between. Where a set does not exist its denominator is zero, and nothing else is lost: a
series impedance has no Z, a shunt one no Y, and both have a chain matrix. A common factor is a mode that no port sees.

Jacobi's identity for the minors of an inverse, open*short = z_11 z_22 - z_12 z_21, is checked in exact arithmetic
before anything is shown.

Conventions: the current into the first terminal of a port is positive, except i_2 of the chain matrix, which leaves
port 2, so that chain matrices multiply in a cascade (K. Kurokawa, Power waves and the scattering matrix, IEEE Trans.
Microwave Theory and Techniques 13, 1965, for S; V. Belevitch, Classical Network Theory, Holden-Day 1968, ch. 3, from
memory, for the rest).
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from typing import TYPE_CHECKING, Any, Final, TypeAlias

from symnet.circuit.network import Network, read_network
from symnet.circuit.parts import GROUND, VoltageDrive
from symnet.circuit.reading import read_expression
from symnet.circuit.wiring import check_wiring
from symnet.errors import DimensionError, Fault, NotationError, SingularError
from symnet.exact.determinant import Determinant
from symnet.exact.linear import fraction_of
from symnet.exact.mutual import root
from symnet.exact.pieces import Pieces
from symnet.exact.polynomials import ONE, make_ring, negated
from symnet.exact.ports.common import common_factor
from symnet.exact.ports.figures import Parameter, Worth
from symnet.exact.trees import Piece, build
from symnet.expressions import Expression, dimension_of, names_in
from symnet.quantities import NUMBER, OHM, SIEMENS, Dimension
from symnet.typeset.displayed import Displayed

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement, PolyRing

__all__ = ["Matrix", "TwoPort", "two_port"]

_Pair = tuple[str, str]
_Fraction: TypeAlias = "tuple[PolyElement, PolyElement]"
_PARTS: Final = ("open", "z11", "z12", "z21", "z22", "short")


@dataclass(frozen=True, eq=False)
class Matrix(Displayed):
    """Four parameters with what they mean: ``m[0, 1]`` is the one of row 1, column 2."""

    name: str
    meaning: str
    rows: tuple[tuple[Parameter, Parameter], tuple[Parameter, Parameter]]

    def __getitem__(self, place: tuple[int, int]) -> Parameter:
        return self.rows[place[0]][place[1]]

    def __iter__(self) -> Any:
        return iter(self.rows)

    def __eq__(self, other: object) -> bool:
        return isinstance(other, Matrix) and self.name == other.name and self.rows == other.rows

    def __hash__(self) -> int:
        return hash((self.name, self.rows))

    def __repr__(self) -> str:
        return f"<{self.name}: {'; '.join(str(entry) for row in self.rows for entry in row)}>"


@dataclass(frozen=True, eq=False)
class TwoPort(Displayed):
    """A network seen from two ports.

    ``open`` is its determinant with both ports open, ``z11`` to ``z22`` and ``short`` are what stands in the head of
    this module; all six are in one ring, without a common factor.
    """

    ports: tuple[_Pair, _Pair]
    open: PolyElement
    z11: PolyElement
    z12: PolyElement
    z21: PolyElement
    z22: PolyElement
    short: PolyElement
    worth: Worth

    @classmethod
    def of(cls, ports: tuple[_Pair, _Pair], parts: Sequence[PolyElement], worth: Worth) -> TwoPort:
        """The two-port of six polynomials (open, z11, z12, z21, z22, short), their common factor taken out."""
        six = dict(zip(_PARTS, _without_common(parts), strict=True))
        return cls(ports, **six, worth=worth)

    @property
    def ring(self) -> PolyRing:
        """The ring of s and the names of the parts."""
        return self.open.ring

    @property
    def is_reciprocal(self) -> bool:
        """Whether both directions pass the same: z_12 = z_21, for all values."""
        return bool(self.z12 == self.z21)

    @property
    def is_symmetric(self) -> bool:
        """Whether the ports can be exchanged: reciprocal, and z_11 = z_22."""
        return self.is_reciprocal and bool(self.z11 == self.z22)

    def z(self) -> Matrix:
        """The impedance matrix, in ohm: v_j over i_k, the other port open. SingularError where it does not exist."""
        self._exists(self.open, "Z", "with both ports open the network has no solution")
        meaning = "v_j over i_k with the other port open, in ohm; currents into the ports"
        above = {"z11": self.z11, "z12": self.z12, "z21": self.z21, "z22": self.z22}
        return Matrix("Z", meaning, self._rows(above, self.open, OHM, OHM, OHM, OHM))

    def y(self) -> Matrix:
        """The admittance matrix, in siemens: i_j over v_k, the other port shorted. SingularError if there is none."""
        self._exists(self.short, "Y", "with both ports shorted the network has no solution")
        meaning = "i_j over v_k with the other port shorted, in siemens; currents into the ports"
        above = {"y11": self.z22, "y12": -self.z12, "y21": -self.z21, "y22": self.z11}
        return Matrix("Y", meaning, self._rows(above, self.short, SIEMENS, SIEMENS, SIEMENS, SIEMENS))

    def chain(self) -> Matrix:
        """The chain matrix, v_1 = A v_2 + B i_2 and i_1 = C v_2 + D i_2, with i_2 leaving port 2.

        SingularError where nothing passes from port 1 to port 2.
        """
        self._exists(self.z21, "chain", "nothing passes from port 1 to port 2")
        meaning = (
            "v1 = A v2 + B i2, i1 = C v2 + D i2; i1 enters port 1, i2 leaves port 2; B in ohm, C in siemens"
        )
        above = {"A": self.z11, "B": self.short, "C": self.open, "D": self.z22}
        return Matrix("chain matrix", meaning, self._rows(above, self.z21, NUMBER, OHM, SIEMENS, NUMBER))

    def s(self, reference: str, second: str | None = None) -> Matrix:
        """The scattering matrix for real reference resistances, in text: ``"50 ohm"``, ``"Z0"``, ``"Rs"``.

        ``second`` is that of port 2 when it is another. S_21 needs the root of their product: of two different ones
        that is exact only where the product of numbers is a square, else to 60 digits; two different symbols are
        refused with NotationError, as is anything that is no resistance (DimensionError).
        """
        texts = (reference, reference if second is None else second)
        wide, (one, two) = self._ended(*texts)
        if not one[0] or not two[0]:
            raise NotationError(Fault("a reference resistance of zero", "write a reference such as 50 ohm"))
        both, under = _root(one, two)
        o, a, b, c, d, h = wide._parts  # noqa: SLF001 - of the same class
        # every product times the denominators of both references
        aa, dd, oo, hh = a * two[0] * one[1], d * one[0] * two[1], o * one[0] * two[0], h * one[1] * two[1]
        below = hh + aa + dd + oo
        if not below:
            raise SingularError(
                Fault("with these terminations the network has no solution", "change a reference")
            )
        through = 2 * both * one[1] * two[1]
        above = {
            "s11": (hh + aa - dd - oo) * under,
            "s12": b * through,
            "s21": c * through,
            "s22": (hh - aa + dd - oo) * under,
        }
        said = texts[0] if texts[0] == texts[1] else f"{texts[0]} at port 1, {texts[1]} at port 2"
        meaning = f"b_j over a_k, the other port ended in its reference; reference {said}"
        return Matrix("S", meaning, wide._rows(above, below * under, NUMBER, NUMBER, NUMBER, NUMBER))  # noqa: SLF001

    def voltage_ratio(self, source: str, load: str) -> Parameter:
        """v_2 over the voltage of a source behind ``source`` (text, ohm), with port 2 ended in ``load``.

        ZL/(A ZL + B + Zs (C ZL + D)). A resistance of zero is an ideal source: ``"0 ohm"``.
        """
        return self._voltage_ratio("v2/vs", source, load)

    def insertion_gain(self, source: str, load: str) -> Parameter:
        """The voltage at the load with the two-port over that without it, source and load joined directly.

        1 at DC for a doubly terminated ladder of coils and capacitors, where the voltage ratio is ZL/(Zs + ZL).
        """
        return self._voltage_ratio("insertion gain", source, load, over_direct=True)

    def _voltage_ratio(self, label: str, source: str, load: str, *, over_direct: bool = False) -> Parameter:
        wide, (zs, zl) = self._ended(source, load)
        o, a, _, c, d, h = wide._parts  # noqa: SLF001 - of the same class
        top = c * zl[0] * zs[1]
        bottom = h * zs[1] * zl[1] + a * zl[0] * zs[1] + d * zs[0] * zl[1] + o * zs[0] * zl[0]
        if over_direct:  # times (Zs + ZL)/ZL
            top *= zs[0] * zl[1] + zl[0] * zs[1]
            bottom *= zl[0] * zs[1]
        return Parameter.of(label, top, bottom, NUMBER, wide.worth)

    def input_impedance(self, load: str) -> Parameter:
        """The impedance at port 1 with port 2 ended in ``load`` (text, ohm)."""
        wide, (zl,) = self._ended(load)
        top = wide.short * zl[1] + wide.z11 * zl[0]
        return Parameter.of("z_in", top, wide.z22 * zl[1] + wide.open * zl[0], OHM, wide.worth)

    def output_impedance(self, source: str) -> Parameter:
        """The impedance at port 2 with port 1 ended in ``source`` (text, ohm)."""
        wide, (zs,) = self._ended(source)
        top = wide.short * zs[1] + wide.z22 * zs[0]
        return Parameter.of("z_out", top, wide.z11 * zs[1] + wide.open * zs[0], OHM, wide.worth)

    def __matmul__(self, other: TwoPort) -> TwoPort:
        """The cascade: port 2 of this one joined to port 1 of the other. A name in both is the same symbol.

        Raises NotationError where the two give a name different values.
        """
        for name in self.worth.numbers.keys() & other.worth.numbers.keys():
            if self.worth.numbers[name] != other.worth.numbers[name]:
                raise NotationError(
                    Fault(f"{name} has two different values in the two networks", parts=(name,))
                )
        names = dict.fromkeys(str(symbol) for ring in (self.ring, other.ring) for symbol in ring.symbols[1:])
        ring = make_ring(names)
        o, a, b, c, d, h = (part.set_ring(ring) for part in self._parts)
        o2, a2, b2, c2, d2, h2 = (part.set_ring(ring) for part in other._parts)
        parts = (
            o * a2 + d * o2,
            a * a2 + h * o2,
            b * b2,
            c * c2,
            o * h2 + d * d2,
            a * h2 + h * d2,
        )
        worth = Worth(
            {**self.worth.numbers, **other.worth.numbers}, {**self.worth.squares, **other.worth.squares}
        )
        return TwoPort.of((self.ports[0], other.ports[1]), parts, worth)

    def __repr__(self) -> str:
        one, two = (_named(port) for port in self.ports)
        kind = "symmetric" if self.is_symmetric else "reciprocal" if self.is_reciprocal else "not reciprocal"
        return f"<TwoPort from {one} to {two}: {kind}>"

    # -- inside --------------------------------------------------------------------------------------------------

    @property
    def _parts(self) -> tuple[PolyElement, ...]:
        return tuple(getattr(self, name) for name in _PARTS)

    def _exists(self, below: PolyElement, what: str, why: str) -> None:
        if not below:
            others = "Y, chain or S" if what == "Z" else "Z, chain or S" if what == "Y" else "Z, Y or S"
            raise SingularError(Fault(f"this two-port has no {what} parameters: {why}", f"take {others}"))

    def _rows(
        self, above: Mapping[str, PolyElement], below: PolyElement, *dimensions: Dimension
    ) -> tuple[tuple[Parameter, Parameter], tuple[Parameter, Parameter]]:
        one, two, three, four = (
            Parameter.of(label, part, below, dimension, self.worth)
            for (label, part), dimension in zip(above.items(), dimensions, strict=True)
        )
        return (one, two), (three, four)

    def _widened(self, expressions: Iterable[Expression]) -> TwoPort:
        """The same in a ring that also has the names of these expressions."""
        names = [str(symbol) for symbol in self.ring.symbols[1:]]
        wanted = dict.fromkeys([*names, *(n.name for e in expressions for n in names_in(e) if n.name != "s")])
        if len(wanted) == len(names):
            return self
        ring = make_ring(wanted)
        parts = tuple(part.set_ring(ring) for part in self._parts)
        return replace(self, **dict(zip(_PARTS, parts, strict=True)))

    def _ended(self, *texts: str) -> tuple[TwoPort, tuple[_Fraction, ...]]:
        """The same with the names of these impedances in its ring, and each impedance as a fraction."""
        expressions = [read_expression(text) for text in texts]
        for text, expression in zip(texts, expressions, strict=True):
            if (dimension_of(expression, {}) or OHM) != OHM:
                raise DimensionError(Fault(f"{text} is no resistance", "write one such as 50 ohm, or RL"))
        wide = self._widened(expressions)
        field = wide.ring.to_field()
        known = {str(symbol): gen for symbol, gen in zip(wide.ring.symbols, field.gens, strict=True)}
        made = (fraction_of(e, field, lambda n: known[n.name], "the impedance") for e in expressions)
        return wide, tuple((value.numer, value.denom) for value in made)


def two_port(network: Network, port1: str, port2: str) -> TwoPort:
    """A network as a two-port between two nodes, or pairs of nodes (``"a - b"``); what drives it is left out.

    Raises NotationError or UnknownNameError for a port that the network does not have, WiringError when part of the
    network hangs on neither port, SingularError when no parameters exist at all.

    >>> import symnet as sn
    >>> pad = sn.two_port(sn.network("in -- R1 -- a -- R2 -- out; a -- R3 -- gnd"), "in", "out")
    >>> pad
    <TwoPort from in to out: reciprocal>
    >>> print(pad.chain()[0, 0])
    A = 1 + R1/R3
    """
    ports = (_port(network, port1), _port(network, port2))
    bare = replace(network, drives=(), reads=(), text=None)
    ended = bare.add(*(f"{a} -- R_port{k} -- {b}" for k, (a, b) in enumerate(ports, 1)))
    check_wiring(ended)
    pieces = Pieces.of(bare)
    size, own = pieces.size, list(pieces.pieces)
    rows = [(pieces.nodes.get(a), pieces.nodes.get(b)) for a, b in ports]

    def bordered(drives: tuple[int, ...], reads: tuple[int, ...]) -> PolyElement:
        """The determinant with these ports driven and read, written out."""
        border = [Piece(size + k, None, *rows[port]) for k, port in enumerate(reads)]
        border += [Piece(*rows[port], size + k, None) for k, port in enumerate(drives)]
        takes = (*pieces.take, *(ONE for _ in reads), *(negated(ONE) for _ in drives))
        leaves = (*pieces.leave, *(ONE for _ in border))
        diagram = build(size + len(drives), (*own, *border))
        determinant = Determinant(pieces.naming.generators, diagram, takes, leaves)
        return determinant.written().to_element(pieces.naming.ring)

    parts = (
        bordered((), ()),
        bordered((0,), (0,)),
        bordered((1,), (0,)),
        bordered((0,), (1,)),
        bordered((1,), (1,)),
        bordered((0, 1), (0, 1)),
    )
    if not any(parts):
        raise SingularError(
            Fault("the network has no solution whatever its ports are ended in", "check its sources and laws")
        )
    o, a, b, c, d, h = parts
    if o * h != a * d - b * c:  # Jacobi; never seen to fail, and nothing may be shown if it does
        raise SingularError(Fault("the determinants contradict each other: please report this network"))
    naming = pieces.naming
    worth = Worth(naming.numbers, naming.irrational)
    return TwoPort.of(ports, parts, worth)


def _without_common(parts: Sequence[PolyElement]) -> tuple[PolyElement, ...]:
    """Six polynomials without their common factor, signed so that the first that is there begins with plus."""
    first = next((part for part in parts if part), None)
    if first is None:
        return tuple(parts)
    common = common_factor(parts)
    if first.LC < 0:
        common = -common
    return tuple(part.exquo(common) for part in parts)


def _port(network: Network, text: str) -> _Pair:
    """The two nodes of a port that is written as what drives is written."""
    drive = read_network(f"drive {text}").drives[0]
    if not isinstance(drive, VoltageDrive):
        raise NotationError(Fault(f"{text} is no port", 'a port is a node, or a pair of nodes: "a - b"'))
    for node in drive.nodes:
        if node != GROUND and node not in network.nodes:
            raise network.unknown(node, network.nodes, "node")
    return drive.nodes


def _named(port: _Pair) -> str:
    return port[0] if port[1] == GROUND else f"{port[0]} - {port[1]}"


def _root(one: _Fraction, two: _Fraction) -> _Fraction:
    """The root of the product of two reference resistances, as a fraction."""
    ring = one[0].ring
    if one == two:
        return one
    top, bottom = one[0] * two[0], one[1] * two[1]
    if top.is_ground and bottom.is_ground:
        number = root(Fraction(int(top.LC), int(bottom.LC)))
        return ring(number.numerator), ring(number.denominator)
    halves = []
    for part in (top, bottom):
        number, factors = part.factor_list()
        square = root(Fraction(int(number)))
        if square.denominator != 1 or any(exponent % 2 for _, exponent in factors):
            raise NotationError(
                Fault(
                    "the two references are different symbols, and the root of their product is no fraction",
                    "give both ports the same reference, or numbers",
                )
            )
        half = ring(square.numerator)
        for factor, exponent in factors:
            half *= factor ** (exponent // 2)
        halves.append(half)
    return halves[0], halves[1]
