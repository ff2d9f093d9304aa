"""The poles of H as one part or gain changes, and the exact values at which something happens to them.

D is a polynomial in s and the one name k, with exact coefficients. Two poles meet where its discriminant in s is zero; a
pair lies on the jw axis only where the even and the odd part of D have a common root in w^2, so where their resultant
is zero; a pole passes the origin where the constant coefficient is zero and infinity where the highest one is. All four
are polynomials in k, whose real roots are found with proof. Between two neighbouring ones of them the number of poles in
the right half plane cannot change: it is counted exactly at one point of each interval, and a value is reported as a
crossing only where the counts on its two sides differ, or the pole is exactly there. So no sampling decides anything.

The poles at the values asked for are certified; which is which from one value to the next is settled by making the step
shorter until every pole is nearer to where it was than to any other. Beyond a meeting the names are a matter of choice.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from fractions import Fraction
from itertools import pairwise
from typing import Any, Final, Literal, TypeAlias

from symnet.circuit.network import ValueLike
from symnet.errors import Fault, LimitError, MissingValueError, UndefinedError
from symnet.exact.derive import derive_from
from symnet.exact.doubles import double
from symnet.exact.polynomials import by_powers_of_s, make_ring
from symnet.exact.roots import Root, roots
from symnet.exact.surds import Surd
from symnet.exact.transfer import Transfer
from symnet.quantities import Dimension
from symnet.shape.routh import HalfPlanes, half_planes
from symnet.typeset.displayed import Displayed
from symnet.typeset.length import length
from symnet.typeset.tree import Root as Radical
from symnet.typeset.tree import Tree, minus, number, plus

__all__ = ["Happening", "Locus", "Range", "locus"]

Kind: TypeAlias = Literal["poles meet", "on the jw axis", "at the origin", "at infinity"]

_DIGITS: Final = 40  # of a value at which something happens
_LONGEST_EXACT: Final = 60  # of a formula that is shown beside its number
_HIGHEST_ORDER: Final = 12
_MOST_HALVINGS: Final = 8
_USUAL: Final = 21  # values, over two decades around the present one


@dataclass(frozen=True, slots=True)
class Happening:
    """A value of the name at which poles meet, lie on the jw axis or at the origin, or go to infinity.

    ``exact`` is the value as a formula, where it is rational or a square root and short; ``value`` is in SI units.
    ``place`` is where in the s plane, in rad/s, with a positive imaginary part for a pair; None at infinity.
    """

    kind: Kind
    value: float
    exact: Tree | None
    place: complex | None

    def __repr__(self) -> str:
        return f"<{self.kind}: at {self.value:.6g}{'' if self.place is None else f', s = {self.place:.6g} rad/s'}>"


@dataclass(frozen=True, slots=True)
class Range:
    """Values of the name, ends not counted, over which ``right`` poles lie in the right half plane and ``axis`` on the jw axis."""

    lower: float
    upper: float
    right: int
    axis: int


@dataclass(frozen=True, slots=True)
class Locus(Displayed):
    """The poles of ``label`` for each value of ``name``.

    ``branches[k][i]`` is where pole k lies at ``values[i]``, in rad/s, None where it has gone to infinity.
    ``happenings`` and ``ranges`` hold for all values, positive ones only where no negative one was asked for.
    """

    label: str
    name: str
    dimension: Dimension | None
    values: tuple[Fraction, ...]
    branches: tuple[tuple[complex | None, ...], ...]
    happenings: tuple[Happening, ...]
    ranges: tuple[Range, ...]

    def __repr__(self) -> str:
        found = ", ".join(f"{each.kind} at {each.value:.6g}" for each in self.happenings[:6])
        return f"<Locus: {len(self.branches)} poles of {self.label} for {len(self.values)} values of {self.name}; {found or 'nothing happens'}>"


def locus(H: Transfer, name: str, values: Iterable[ValueLike] | None = None) -> Locus:
    """The poles of H for values of one name, each followed from value to value, and where they meet or cross.

    ``values`` as for :meth:`Transfer.with_values`; without any, 21 over two decades around the present value. Hidden
    modes are no poles of H. Raises UnknownNameError for a name that H does not hold, MissingValueError while another
    name has no value, LimitError above order 12, UndefinedError where H has no poles.

    >>> import symnet as sn
    >>> H = sn.derive(sn.network('''
    ...     in -- R1 -- x -- R2 -- p -- C2 -- gnd;  x -- C1 -- out;  hold out = K*p
    ...     R1, R2 = 1 kohm;  C1, C2 = 1 nF;  drive in;  read out
    ... '''))
    >>> found = locus(H, "K", [0, 1, 2, 3, 4])
    >>> found.happenings
    (<poles meet: at 1, s = -1e+06+0j rad/s>, <on the jw axis: at 3, s = 0+1e+06j rad/s>, <poles meet: at 5, s = 1e+06+0j rad/s>)
    >>> [(each.lower, each.upper, each.right) for each in found.ranges]
    [(0.0, 3.0, 0), (3.0, inf, 2)]
    """
    D = _in_one_name(H, name)
    asked = _asked(H, name, values)
    if D.order < 1:
        raise UndefinedError(Fault(f"{H.label} has no poles", "a locus needs at least one"))
    if D.order > _HIGHEST_ORDER:
        raise LimitError(
            Fault(
                f"{H.label} is of order {D.order}; a locus is made up to order {_HIGHEST_ORDER}",
                "derive a part of the network on its own",
            )
        )
    happenings, ranges = _happenings(D, positive=all(value >= 0 for value in asked))
    rows = _followed(D, asked)
    branches = tuple(zip(*rows, strict=True))
    return Locus(H.label, name, H.dimensions.get(name), asked, branches, happenings, ranges)


@dataclass(frozen=True, slots=True)
class _Plane:
    """D in s and k: ``coefficients[i][j]`` belongs to s^i k^j."""

    coefficients: tuple[tuple[int, ...], ...]

    @property
    def order(self) -> int:
        return len(self.coefficients) - 1

    def at(self, k: Fraction) -> list[Fraction]:
        """The coefficients in s at one value."""
        return [_horner(c, k) for c in self.coefficients]

    def planes(self, k: Fraction) -> HalfPlanes:
        return half_planes(self.at(k))

    def poles(self, k: Fraction) -> tuple[Root, ...]:
        found = self.at(k)
        if not any(found):
            raise UndefinedError(
                Fault("for one of these values D is 0 at every s: the network has no solution")
            )
        return roots(found)


def _horner(p: Sequence[int], x: Fraction) -> Fraction:
    total = Fraction(0)
    for c in reversed(p):
        total = total * x + c
    return total


def _in_one_name(H: Transfer, name: str) -> _Plane:
    H.symbol(name)
    missing = [other for other in H.names if other != name and other not in H.values]
    if missing:
        hint = f'give it one: H.with_values({missing[0]}="...")'
        raise MissingValueError(Fault(f"no value for {', '.join(missing)}", hint, parts=tuple(missing)))
    # derived anew with one symbol: H in all its names may be too long to be written out
    alone = derive_from(H.network, H.drive, H.read, [name])
    place = [str(symbol) for symbol in alone.ring.symbols].index(name)
    found = []
    for coefficient in by_powers_of_s(alone.denominator):
        row = [0] * (max((m[place] for m in coefficient), default=0) + 1)
        for m, c in coefficient.items():
            row[m[place]] += int(c)
        found.append(tuple(row))
    return _Plane(tuple(found))


def _asked(H: Transfer, name: str, values: Iterable[ValueLike] | None) -> tuple[Fraction, ...]:
    if values is not None:
        found = tuple(H.with_values({name: value}).values[name] for value in values)
        if found:
            return found
        raise UndefinedError(
            Fault(f"no value of {name} is given", "give at least one, or none at all for two decades")
        )
    if name not in H.values:
        raise MissingValueError(
            Fault(f"{name} has no value to start from", f'locus(H, "{name}", [...])', parts=(name,))
        )
    start = H.values[name]
    return tuple(start * Fraction(10 ** (k / 10 - 1)) for k in range(_USUAL))


# -- what happens ----------------------------------------------------------------------------------------------


def _happenings(D: _Plane, *, positive: bool) -> tuple[tuple[Happening, ...], tuple[Range, ...]]:
    meeting, crossing, origin, infinity = _deciding(D)
    candidates: dict[Fraction, tuple[Root, set[Kind]]] = {}
    kinds: tuple[tuple[Kind, list[int]], ...] = (
        ("poles meet", meeting),
        ("on the jw axis", crossing),
        ("at the origin", origin),
        ("at infinity", infinity),
    )
    for kind, polynomial in kinds:
        for root in roots(polynomial, _DIGITS) if any(polynomial[1:]) else ():
            if root.is_real and (root.real > 0 or not positive):
                candidates.setdefault(root.real, (root, set()))[1].add(kind)
    order = sorted(candidates)
    points = _between(order, positive=positive)
    counts = [D.planes(point) for point in points]
    found: list[Happening] = []
    ranges: list[Range] = []
    lower = 0.0 if positive else -math.inf
    for i, k in enumerate(order):
        root, here = candidates[k]
        before, after = counts[i], counts[i + 1]
        happened = [
            event
            for kind in ("poles meet", "on the jw axis", "at the origin", "at infinity")
            if kind in here
            for event in _happening(D, kind, root, before, after)
        ]
        found += happened
        if (before.right, before.axis) != (after.right, after.axis):
            ranges.append(Range(lower, double(k), before.right, before.axis))
            lower = double(k)
    ranges.append(Range(lower, math.inf, counts[-1].right, counts[-1].axis))
    return tuple(found), tuple(ranges)


def _happening(D: _Plane, kind: Kind, root: Root, before: HalfPlanes, after: HalfPlanes) -> list[Happening]:
    value, exact = double(root.real), _written(root.closed)
    if kind == "at infinity":
        return [Happening(kind, value, exact, None)]
    poles = [pole for pole in D.poles(root.real) for _ in range(pole.multiplicity)]
    if kind == "at the origin":
        return [Happening(kind, value, exact, 0j)]
    rational = root.exact is not None
    if kind == "poles meet":
        pairs = [(abs(a.value - b.value), a.value, b.value) for i, a in enumerate(poles) for b in poles[:i]]
        if not pairs:
            return []
        distance, one, other = min(pairs, key=lambda pair: pair[0])
        size = max(abs(one), abs(other))
        if distance > (0 if rational else 1e-6 * size):
            return []
        place = (one + other) / 2
        if abs(place.imag) <= 1e-9 * size:
            place = complex(place.real, 0.0)
        return [Happening(kind, value, exact, complex(place.real, abs(place.imag)))]
    on_axis = [pole.value for pole in poles if pole.is_imaginary and pole.value] if rational else []
    if on_axis and D.planes(root.real).axis <= min(before.axis, after.axis):
        return []  # a pair that is there for all values
    if not on_axis and before.right != after.right:
        on_axis = [
            min((pole.value for pole in poles if pole.value.imag > 0), key=lambda p: abs(p.real), default=0j)
        ]
    return [Happening(kind, value, exact, complex(0.0, place.imag)) for place in on_axis if place.imag > 0]


def _between(order: Sequence[Fraction], *, positive: bool) -> list[Fraction]:
    """A point in every interval that the values cut the line into."""
    if not order:
        return [Fraction(1)]
    first = order[0] / 2 if positive else order[0] - abs(order[0]) - 1
    last = order[-1] * 2 if order[-1] > 0 else order[-1] / 2 + 1
    return [first, *((a + b) / 2 for a, b in pairwise(order)), last]


def _deciding(D: _Plane) -> tuple[list[int], list[int], list[int], list[int]]:
    """The polynomials in k whose roots are the only values at which anything can happen, in the order of the kinds."""
    ring: Any = make_ring(["k"])  # its s is s or w^2
    whole = ring.from_dict(
        {(i, j): ring.domain(c) for i, row in enumerate(D.coefficients) for j, c in enumerate(row) if c}
    )
    common = whole.gcd(whole.diff(ring.gens[0]))
    simple = whole.exquo(common) if common.degree(0) else whole
    meeting = simple.discriminant() if simple.degree(0) > 1 else None
    parts = by_powers_of_s(whole)
    x = ring.gens[0]
    even, odd = (
        sum(((-1) ** i * c * x**i for i, c in enumerate(parts[start::2])), ring.zero) for start in (0, 1)
    )
    crossing = None
    if even and odd and even.degree(0) > 0 and odd.degree(0) >= 0:
        shared = even.gcd(odd)
        if shared.degree(0) > 0:  # a pair in mirror images for all values: it crosses nowhere
            even, odd = even.exquo(shared), odd.exquo(shared)
        if max(even.degree(0), odd.degree(0)) > 0:
            crossing = even.resultant(odd)
    return (
        _in_k(meeting),
        _in_k(crossing),
        list(D.coefficients[0]),
        list(D.coefficients[-1]),
    )


def _in_k(polynomial: Any) -> list[int]:
    """Coefficients, ascending, of a polynomial that has no s any more."""
    if polynomial is None or not hasattr(polynomial, "terms"):
        return [1]
    found: list[int] = []
    for m, c in polynomial.terms():
        found += [0] * (m[-1] + 1 - len(found))
        found[m[-1]] += int(c)
    return found or [1]


def _written(closed: Surd | None) -> Tree | None:
    if closed is None or closed.radicand < 0:
        return None
    tree: Tree = number(closed.rational)
    if closed.sign:
        root = Radical(number(closed.radicand), 2)
        tree = plus(*([tree] if closed.rational else []), root if closed.sign > 0 else minus(root))
    return tree if length(tree) <= _LONGEST_EXACT else None


# -- from value to value ---------------------------------------------------------------------------------------


def _followed(D: _Plane, values: Sequence[Fraction]) -> list[list[complex | None]]:
    rows = [_padded(D, values[0])]
    for a, b in pairwise(values):
        rows.append(_step(D, a, rows[-1], b, _MOST_HALVINGS))
    return rows


def _padded(D: _Plane, k: Fraction) -> list[complex | None]:
    found: list[complex | None] = [pole.value for pole in D.poles(k) for _ in range(pole.multiplicity)]
    return found + [None] * (D.order - len(found))


def _step(
    D: _Plane, a: Fraction, before: list[complex | None], b: Fraction, halvings: int
) -> list[complex | None]:
    after = _padded(D, b)
    if a == b:
        return list(before)
    chosen, sure = _matched(before, after)
    if sure or not halvings:
        return chosen
    middle = (a + b) / 2
    return _step(D, middle, _step(D, a, before, middle, halvings - 1), b, halvings - 1)


def _matched(
    before: Sequence[complex | None], after: Sequence[complex | None]
) -> tuple[list[complex | None], bool]:
    """The new places in the order of the old ones, nearest first, and whether nothing else came near."""
    far = 2 * max((abs(p) for p in (*before, *after) if p is not None), default=1.0) + 1.0
    distances = sorted(
        (far if (p is None) != (q is None) else 0.0 if p is None or q is None else abs(p - q), i, j)
        for i, p in enumerate(before)
        for j, q in enumerate(after)
    )
    partner: dict[int, int] = {}
    moved: dict[int, float] = {}
    for distance, i, j in distances:
        if i not in partner and j not in partner.values():
            partner[i], moved[i] = j, distance
    sure = True
    for i, p in enumerate(before):
        others = [abs(p - q) for j, q in enumerate(before) if j != i and p is not None and q is not None]
        if moved[i] > 0.3 * min(others, default=math.inf):
            sure = False
    return [after[partner[i]] for i in range(len(before))], sure
