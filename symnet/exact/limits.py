"""What H does at DC and at high frequency, once from H and once from the network itself.

From H: the lowest powers of s in N and D for s -> 0, the highest for s -> infinity. From the network: at DC
capacitors are open and inductors shorted, at high frequency the other way round, and the resistive network that
remains is derived afresh. The two must agree; that they do proves little about the powers between.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from fractions import Fraction
from typing import TYPE_CHECKING, Final, overload

from symnet.circuit.network import Network
from symnet.circuit.parts import GROUND, Branch, Part, Value, VoltageLaw
from symnet.circuit.series import spoken
from symnet.errors import NotationError, SingularError, WiringError
from symnet.exact.derive import derive_from
from symnet.exact.naming import Naming
from symnet.exact.ports.extremes import Extremes, extremes
from symnet.expressions import Expression, Name, Number, Power, Product, Sum, names_in
from symnet.quantities import NUMBER
from symnet.typeset.displayed import Displayed

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

    from symnet.exact.transfer import Transfer

__all__ = ["Limit", "Limits", "limits"]

_MOST_TERMS_CANCELLED: Final = 1000


@dataclass(frozen=True, slots=True)
class Limit:
    """H near one end of the frequency axis: H ~ numerator/denominator * s^power.

    ``numerator`` and ``denominator`` hold no s. ``slope`` is the slope of |H| there in dB per decade, 20 per power. ``reason`` says
    what becomes of the parts; ``from_network`` is None when the network could not be taken to this limit
    (``reason`` says why), else whether it agrees with H.
    """

    where: str
    numerator: PolyElement
    denominator: PolyElement
    power: int
    reason: str
    from_network: bool | None

    @property
    def slope(self) -> int:
        """The slope of |H| there, in dB per decade."""
        return 20 * self.power

    @property
    def is_zero(self) -> bool:
        """Whether H tends to zero there."""
        return not self.numerator or (self.power != 0 and (self.power > 0) == (self.where == "DC"))

    @property
    def is_infinite(self) -> bool:
        """Whether H grows without bound there."""
        return bool(self.numerator) and self.power != 0 and not self.is_zero


@dataclass(frozen=True, slots=True)
class Limits(Displayed):
    """H at DC (s -> 0) and at high frequency (s -> infinity)."""

    dc: Limit
    high: Limit


@overload
def limits(transfer: Transfer) -> Limits: ...
@overload
def limits(transfer: Transfer, name: str) -> Extremes: ...
def limits(transfer: Transfer, name: str | None = None) -> Limits | Extremes:
    """The limits of H at DC and at high frequency, with the reason, from H and from the network itself.

    With the ``name`` of a part or symbol: H as it goes to zero and to infinity, a part shorted, removed, made ideal.

    >>> import symnet as sn
    >>> ends = sn.limits(sn.derive(sn.network("in -- R1 -- out -- C1 || R2 -- gnd; drive in; read out")))
    >>> ends.dc.numerator, ends.dc.denominator, ends.dc.reason
    (R2, R1 + R2, 'C1 open')
    >>> ends.high.slope, ends.high.from_network
    (-20, True)
    >>> sn.limits(sn.derive(sn.network("in -- R1 -- out -- C1 || R2 -- gnd; drive in; read out")), "R2")
    <H for R2 -> 0: 0; R2 -> infinity: 1/(1 + s*R1*C1)>
    """
    if name is not None:
        return extremes(transfer, name)
    return Limits(_limit(transfer, "DC"), _limit(transfer, "high frequency"))


def _limit(transfer: Transfer, where: str) -> Limit:
    n, d = transfer.numerator, transfer.denominator
    top, n_power = _end(n, where)
    bottom, d_power = _end(d, where)
    if top and len(top) + len(bottom) <= _MOST_TERMS_CANCELLED:
        top, bottom = top.cancel(bottom)
    limit = Limit(where, top, bottom, n_power - d_power if n else 0, "", None)
    resistive, changes = _resistive(transfer.network, where)
    said = ", ".join(changes) or "no part changes"
    if resistive is None:
        return replace(limit, reason=f"{said}; from H alone")
    try:
        known = set(resistive.symbols())
        kept = [name for name in transfer.names if name in known]
        there = derive_from(resistive, transfer.drive, transfer.read, kept)
    except (WiringError, SingularError) as error:
        return replace(
            limit,
            reason=f"{said}; {_obstacle(error)}, so from H alone",
            from_network=limit.is_infinite or None,
        )
    except NotationError:
        return replace(limit, reason=f"{said}; from H alone")
    if limit.is_zero:
        agrees = not there.numerator
    elif limit.is_infinite:
        agrees = False
    else:
        agrees = _equal(transfer, limit, there)
    return replace(limit, reason=said, from_network=agrees)


def _obstacle(error: WiringError | SingularError) -> str:
    """Why the resistive network has no solution, in the words of the drawing."""
    fault = error.faults[0]
    if isinstance(error, WiringError) and "loop of ideal voltage sources" in fault.message:
        return "then the drive is shorted"
    places = ", ".join(spoken(node) for node in fault.nodes if node != GROUND)
    return f"then {places or 'a voltage'} is left open"


def _end(polynomial: PolyElement, where: str) -> tuple[PolyElement, int]:
    """The coefficient of the power of s that decides at DC (the lowest) or at high frequency, and that power."""
    if not polynomial:
        return polynomial, 0
    powers = [monomial[0] for monomial in polynomial]
    power = min(powers) if where == "DC" else max(powers)
    part = {(0, *m[1:]): c for m, c in polynomial.items() if m[0] == power}
    return polynomial.ring.from_dict(part), power


def _equal(transfer: Transfer, limit: Limit, there: Transfer) -> bool:
    """Whether the limit of H is the H of the resistive network, by cross-multiplication in H's ring."""
    ring = transfer.ring
    place = {str(symbol): k for k, symbol in enumerate(ring.symbols)}

    def moved(polynomial: PolyElement) -> PolyElement:
        names = [str(symbol) for symbol in polynomial.ring.symbols]
        out = {}
        for monomial, coefficient in polynomial.items():
            exponents = [0] * ring.ngens
            for name, exponent in zip(names, monomial, strict=True):
                if exponent:
                    exponents[place[name]] = exponent
            out[tuple(exponents)] = coefficient
        return ring.from_dict(out)

    product = limit.numerator * moved(there.denominator) - moved(there.numerator) * limit.denominator
    return not product


def _resistive(network: Network, where: str) -> tuple[Network | None, list[str]]:
    """The network at one end of the frequency axis, and what became of its parts; None if a law holds s."""
    opened, shorted, changed = [], [], []
    parts: list[Part] = []
    values = dict(network.values)
    joined: dict[str, str] = {}
    naming: Naming | None = None
    possible = True

    def root(node: str) -> str:
        while node in joined:
            node = joined[node]
        return node

    def short(part: Branch) -> None:
        shorted.append(part.name)
        a, b = root(part.start), root(part.end)
        if a != b:  # a second short beside the first changes nothing
            joined[a] = b
            parts.append(VoltageLaw(part.name, part.start, part.end, Number(Fraction(0))))

    for part in network.parts:
        if isinstance(part, Branch) and part.kind in "LC":
            if (part.kind == "C") == (where == "DC"):
                opened.append(part.name)
            else:
                short(part)
            values.pop(part.name, None)
        elif isinstance(part, Branch) and part.kind in "ZY" and _holds_s(network, part.name):
            naming = naming or Naming.of(network)
            take, leave = _ends(naming, part, where)
            if part.kind == "Z":
                take, leave = leave, take
            values.pop(part.name, None)
            if not take:
                opened.append(part.name)
            elif not leave:
                short(part)
            else:
                changed.append(part.name)
                ratio = (take, leave) if part.kind == "Y" else (leave, take)
                value = Product(((1, _written(ratio[0])), (-1, _written(ratio[1]))))
                values[part.name] = Value(value)
                parts.append(part)
        else:
            if not isinstance(part, Branch) and hasattr(part, "value"):
                possible = possible and all(name.name != "s" for name in names_in(part.value))
            parts.append(part)
    said = [f"{', '.join(names)} {word}" for names, word in ((opened, "open"), (shorted, "shorted")) if names]
    if changed:
        said.append(f"{', '.join(changed)} at the limit of its expression")
    if not possible:
        return None, [*said, "a law holds s"]
    if network.couplings and where != "DC":  # coils without current still pass voltage to one another
        return None, ["coupled coils pass voltage to one another though no current flows"]
    kept = {each.name for each in network.couplings}
    worth = tuple((name, value) for name, value in values.items() if name not in kept)
    return replace(network, parts=tuple(parts), values=worth, couplings=(), instances=(), text=None), said


def _holds_s(network: Network, name: str) -> bool:
    """Whether the value of a part hangs on s, through ties too."""
    seen: set[str] = set()
    waiting = [name]
    while waiting:
        value = network.value(waiting.pop())
        for inner in names_in(value.expression) if value is not None else ():
            if inner.name == "s":
                return True
            if inner.name not in seen:
                seen.add(inner.name)
                waiting.append(inner.name)
    return False


def _ends(naming: Naming, part: Branch, where: str) -> tuple[PolyElement, PolyElement]:
    """Numerator and denominator of a part's value at the limit, one of them zero if it is 0 or infinite."""
    value = naming.value(part.name)
    (top, n_power), (bottom, d_power) = _end(value.numer, where), _end(value.denom, where)
    zero = naming.ring.zero
    rises = (n_power > d_power) == (where == "DC")
    if n_power == d_power or not value:
        return top, bottom
    return (zero, bottom) if rises else (top, zero)


def _written(polynomial: PolyElement) -> Expression:
    """A ring element as an expression tree."""
    names = [str(symbol) for symbol in polynomial.ring.symbols]
    terms: list[tuple[int, Expression]] = []
    for monomial, coefficient in polynomial.terms():
        factors: list[tuple[int, Expression]] = [(1, Number(Fraction(int(coefficient)), NUMBER))]
        factors += [(1, Power(Name(n), e)) for n, e in zip(names, monomial, strict=True) if e]
        terms.append((1, Product(tuple(factors))))
    return Sum(tuple(terms))
