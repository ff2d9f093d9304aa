"""A second order solved for chosen parts: from Q, f0 and gain to values, with what must hold for them to be real.

H of order 2 has three figures that its parts set: Q, w0 and the gain K at DC, at infinite frequency or at w0. They stand
as symbols Q, w0 and H0 = |K| beside the names of the parts:

    Q w0 a_1 = a_0,    w0^2 a_2 = a_0,    n_0 = +-H0 a_0   (n_2 = +-H0 a_2 of a high-pass, n_1 = +-H0 a_1 of a band-pass)

One chosen part is solved for Q alone (Q^2 a_1^2 = a_0 a_2), two for Q and w0, three for all. What is linear goes first;
the last equation is nearly always one of the second degree, whose discriminant is the condition that designers meet as
complex resistors: C1/C2 >= 4 Q^2 of the unity-gain section.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from math import sqrt
from typing import TYPE_CHECKING, Final

from symnet.errors import Fault, NotationError, UndefinedError
from symnet.exact.polynomials import make_ring
from symnet.shape.families import CATALOGUE
from symnet.shape.given import Given
from symnet.shape.judging import judged
from symnet.shape.positive import sign_of
from symnet.shape.quadratic import quadratic_roots
from symnet.shape.solving import solve
from symnet.shape.stated import Alternative, Condition
from symnet.shape.worked import with_numbers
from symnet.typeset.numbers import complex_quantity, plain_number

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

__all__ = ["Figures", "designed"]

_SYMBOLS: Final = ("Q", "w0", "H0")
#: 2 pi to sixty digits: no polynomial of a network is zero at it unless it is zero for every w0.
_TWO_PI: Final = Fraction(628318530717958647692528676655900576839433879875021164194988918461563281257, 10**74)


@dataclass(frozen=True, slots=True)
class Figures:
    """What is known of Q^2 (with its text), f0 in Hz and |gain|; None stands for a symbol."""

    quality: tuple[str, Fraction] | None = None
    f0: Fraction | None = None
    gain: Fraction | None = None


def designed(
    top: Sequence[PolyElement],
    a: Sequence[PolyElement],
    band: str,
    chosen: Sequence[str],
    *,
    given: Given,
    figures: Figures,
) -> tuple[Condition, ...]:
    """The values of the chosen parts in Q, w0, H0 and the other parts, and for each family whether they exist."""
    if len(chosen) > len(_SYMBOLS):
        hint = "choose one part for Q, two for Q and f0, three for Q, f0 and the gain"
        raise UndefinedError(Fault(f"an H of order 2 sets three figures, not {len(chosen)}", hint))
    ring = a[0].ring
    names = [str(x) for x in ring.symbols]
    for symbol in _SYMBOLS[: len(chosen)]:
        if symbol in names:
            raise NotationError(
                Fault(f"{symbol} is a name in H and would stand for a figure too", "rename it")
            )
    wide = make_ring([*names[1:], *_SYMBOLS])
    (q, w, h), first = wide.gens[ring.ngens :], ring.ngens
    n, d = [[c.set_ring(wide) if c else wide.zero for c in side] for side in (top, a)]
    if len(chosen) == 1:
        equations = [q**2 * d[1] ** 2 - d[0] * d[2]]
    else:
        equations = [q * w * d[1] - d[0], w**2 * d[2] - d[0]]
    if len(chosen) == 3:
        place = len(n) - 1 if len([c for c in n if c]) == 1 else 0
        negative = sign_of(n[place]) == -1
        equations.append((-n[place] if negative else n[place]) - h * d[place])
    numbers = dict(given.numbers)
    if figures.f0 is not None:
        numbers[first + 1] = _TWO_PI * figures.f0
    if figures.gain is not None:
        numbers[first + 2] = figures.gain
    task = _Task(tuple(equations), tuple(names.index(name) for name in chosen), given.units, numbers, first)
    name = f"second order, {band}, solved for {', '.join(chosen)}"
    if figures.quality is not None:
        text, square = figures.quality
        return (task.condition(f"{name}, Q = {text}", square),)
    found = [task.condition(name, None)]
    for family in CATALOGUE:
        shape = family.prototype(2) if family.has_order(2) and not family.parameters(2) else None
        if shape is None or shape.exact is None or shape.zeros:
            continue
        b = shape.exact
        ratio = b[0] * b[2] / b[1] ** 2
        if ratio.is_Rational:
            square = Fraction(str(ratio))
            label = f"{family.name}, order 2, {band} (Q = {plain_number(sqrt(square))})"
            found.append(_without_values(task.condition(label, square)))
    return tuple(found)


def _without_values(condition: Condition) -> Condition:
    """The relations alone; the values are those of the row above."""
    if condition.status != "if":
        return condition
    ways = tuple(dict.fromkeys(Alternative((), way.relations) for way in condition.alternatives))
    if any(not way.relations for way in ways):
        return replace(condition, status="always", alternatives=())
    return replace(condition, alternatives=ways)


@dataclass(frozen=True, slots=True)
class _Task:
    """The equations with what is wanted and known; ``first`` is the place of Q among the generators."""

    equations: tuple[PolyElement, ...]
    wanted: tuple[int, ...]
    units: Mapping[str, str]
    numbers: dict[int, Fraction]
    first: int

    def condition(self, name: str, square: Fraction | None) -> Condition:
        units = {**self.units, "w0": "rad/s"}
        squares = {} if square is None else {self.first: square}
        given = Given(self.numbers, units, squares)
        figures = range(self.first, self.first + 3)
        found = judged(name, self.equations, given=given, wanted=self.wanted, figures=figures)
        if found.status == "never":
            return replace(found, reason=found.reason + self.would_be(given))
        symbols = [str(x) for x in self.equations[0].ring.symbols]
        known = {symbols[k]: value for k, value in self.numbers.items()}
        if square is not None:
            known["Q"] = Fraction(sqrt(square))
        return with_numbers(found, known, units)

    def would_be(self, given: Given) -> str:
        """The complex values that the formulas give where no real ones exist, if everything has a number."""
        ring = self.equations[0].ring
        point = {k: complex(x) for k, x in given.numbers.items()}
        point |= {k: complex(sqrt(x)) for k, x in given.squares.items()}
        for branch in solve(self.equations, given, self.wanted):
            found = quadratic_roots(branch.left, given, self.wanted)
            if found is None:
                continue
            coefficients = [_at(p, point) for p in found.coefficients]
            if any(c is None for c in coefficients):
                continue
            a, b, c = (complex(x) for x in coefficients if x is not None)
            inner = b * b - 4 * a * c
            if inner.real >= 0:
                continue
            values = {found.name: (-b + inner**0.5) / (2 * a)}
            here = point | {[str(x) for x in ring.symbols].index(found.name): values[found.name]}
            for solved in branch.solved:
                above, below = _at(solved.numerator, here), _at(solved.denominator, here)
                if above is not None and below:
                    values[str(ring.symbols[solved.index])] = above / below
            told: dict[str, list[str]] = {}
            for name, x in sorted(values.items()):
                text = str(complex_quantity(x, given.units.get(name, ""), pair=True))
                told.setdefault(text, []).append(name)
            said = ", ".join(f"{' and '.join(names)} would be {text}" for text, names in told.items())
            return f" ({said})"
        return ""


def _at(polynomial: PolyElement, point: dict[int, complex]) -> complex | None:
    total = 0j
    for m, c in polynomial.items():
        term = complex(int(c))
        for index, exponent in enumerate(m):
            if exponent:
                if index not in point:
                    return None
                term *= point[index] ** exponent
        total += term
    return total
