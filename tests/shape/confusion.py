"""How often recognition is right: prototypes whose poles were shaken, and polynomials drawn at random.

Run as ``python -m tests.shape.confusion [prototypes [polynomials]]``; the tables that it prints stand in
DEVELOPERS.md. The suite runs a smaller share of the same draws (``test_confusion.py``).

A prototype is drawn evenly over the families of an order from 3 to 8, its parameters evenly between the values that
tables offer. Shaking multiplies each pole, its conjugate alike, by 1 + r e^(jt), r the shake and t evenly drawn (a real
pole by 1 +- r); finite zeros keep their place on the jw axis and move by a factor 1 +- r. "Apart" counts draws in which
the nearest member of any other family is more than twice the shake away: in the pole error as recognition reports it
(largest relative distance of a pair of poles, or of zeros, each set divided by its own w0), the smaller one of the
members that response and poles choose. The shake is a distance in the same measure, and matches by poles are ranked in
it.

A random polynomial of order n has (n - k)/2 pairs of poles, k of 0 to 2 real poles to make the order; magnitudes are
log-uniform within a factor of 4, the Q of pairs log-uniform between 0.5 and 10. All are stable.
"""

from __future__ import annotations

import math
import sys
from collections import Counter
from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from symnet.shape.families import CATALOGUE, Prototype
from symnet.shape.families.family import Family, build
from symnet.shape.matching import fits, fits_by_poles
from symnet.shape.recognise import Recognition, recognise
from symnet.shape.undoing import views

SHAKES = (0.001, 0.01, 0.03)
ORDERS = tuple(range(3, 9))

#: Between which values parameters are drawn, by their name in the family; others from the middle half of their range.
TYPICAL = {"ripple": (0.01, 3.0), "attenuation": (25.0, 80.0), "phase error": (0.05, 0.5)}


@dataclass(frozen=True, slots=True)
class Draw:
    """A prototype, what recognition said of it when shaken, and how far the nearest other family is."""

    prototype: Prototype
    shake: float
    found: Recognition
    other: float

    @property
    def first(self) -> str:
        """The family named first."""
        return self.found.candidates[0].prototype.family if self.found.candidates else "none"

    @property
    def is_apart(self) -> bool:
        """Whether no other family is within twice the shake."""
        return self.other > 2 * self.shake


def prototypes(count: int, seed: int) -> Iterator[Prototype]:
    """Members of every family in turn."""
    rng = np.random.default_rng(seed)
    made = 0
    while made < count:
        order = int(rng.choice(ORDERS))
        families = [f for f in CATALOGUE if f.has_order(order)]
        family = families[int(rng.integers(len(families)))]
        yield build(family, order, tuple(_value(rng, family, order)), exact=False)
        made += 1


def _value(rng: np.random.Generator, family: Family, order: int) -> Iterator[float]:
    for parameter in family.parameters(order):
        low, high = TYPICAL.get(parameter.name, (parameter.at(0.25), parameter.at(0.75)))
        low, high = max(low, parameter.lower), min(high, parameter.upper)
        if low > 0:
            yield float(np.exp(rng.uniform(np.log(low), np.log(high))))
        else:
            yield float(rng.uniform(low, high))


def shaken(prototype: Prototype, r: float, rng: np.random.Generator) -> tuple[list[complex], list[complex]]:
    """Poles and zeros of the prototype, moved."""
    poles: list[complex] = []
    for p in prototype.poles:
        if p.imag > 0:
            moved = p * (1 + r * np.exp(2j * np.pi * rng.random()))
            poles += [complex(moved), complex(moved).conjugate()]
        elif not p.imag:
            poles.append(p * (1 + r * rng.choice([-1, 1])))
    zeros: list[complex] = []
    for z in prototype.zeros:
        if z.imag > 0:
            moved = z * (1 + r * rng.choice([-1, 1]))
            zeros += [complex(moved), complex(moved).conjugate()]
    return poles, zeros


def nearest_other(prototype: Prototype) -> float:
    """The smallest distance in poles and zeros to a member of another family, as a fraction."""
    view = next(v for v in views(prototype.poles, prototype.zeros) if v.band == "low-pass")
    found = [*fits(view), *fits_by_poles(view)]
    apart = [
        max(f.pole_error_percent, f.zero_error_percent) / 100
        for f in found
        if f.family.name != prototype.family
    ]
    return min(apart, default=math.inf)


def draws(count: int, shakes: tuple[float, ...] = SHAKES, seed: int = 20) -> Iterator[Draw]:
    """Every prototype with every shake; poles that would cross the jw axis are drawn again."""
    rng = np.random.default_rng(seed + 1)
    for prototype in prototypes(count, seed):
        other = nearest_other(prototype)
        for r in shakes:
            poles, zeros = shaken(prototype, r, rng)
            while max(p.real / abs(p) for p in poles) > -1e-3:
                poles, zeros = shaken(prototype, r, rng)
            found = recognise(poles=poles, zeros=zeros)
            assert isinstance(found, Recognition)
            yield Draw(prototype, r, found, other)


def random_poles(order: int, rng: np.random.Generator) -> list[complex]:
    """Stable poles, distributed as the head of this file says."""
    real = int(rng.choice([k for k in (0, 1, 2) if (order - k) % 2 == 0]))
    poles: list[complex] = [complex(-np.exp(rng.uniform(-1, 1) * math.log(2))) for _ in range(real)]
    for _ in range((order - real) // 2):
        w, q = np.exp(rng.uniform(-1, 1) * math.log(2)), np.exp(rng.uniform(math.log(0.5), math.log(10)))
        p = complex(-w / (2 * q), w * math.sqrt(max(0.0, 1 - 1 / (4 * q * q))))
        poles += [p, p.conjugate()]
    return poles


def random_verdicts(order: int, count: int, seed: int = 5) -> Iterator[Recognition]:
    """What is said of polynomials drawn at random."""
    rng = np.random.default_rng((seed, order))
    for _ in range(count):
        found = recognise(poles=random_poles(order, rng))
        assert isinstance(found, Recognition)
        yield found


def _print_confusion(count: int) -> None:
    all_draws = list(draws(count))
    for r in SHAKES:
        table = Counter((d.prototype.family, d.first) for d in all_draws if d.shake == r)
        apart = Counter(
            (d.prototype.family, d.first == d.prototype.family)
            for d in all_draws
            if d.shake == r and d.is_apart
        )
        names = [f.name for f in CATALOGUE if any(f.name in pair for pair in table)]
        print(f"\npoles shaken by {100 * r:g} %, {count} prototypes\n")
        print(
            f"| drawn | {' | '.join(str(k + 1) for k in range(len(names)))} | apart: right | apart: wrong |"
        )
        print(f"|---|{'---|' * (len(names) + 2)}")
        for k, name in enumerate(names):
            cells = " | ".join(str(table[name, other] or "") for other in names)
            print(f"| {k + 1} {name} | {cells} | {apart[name, True]} | {apart[name, False]} |")


def _print_random(count: int) -> None:
    print(f"\nrandom polynomials, {count} of each order\n")
    print("| order | none of these | called nearest | called exact |")
    print("|---|---|---|---|")
    for order in ORDERS:
        found = list(random_verdicts(order, count))
        exact = sum("exactly" in f.verdict for f in found)
        named = sum(bool(f) for f in found) - exact
        print(f"| {order} | {100 * (count - named - exact) / count:.1f} % | {named} | {exact} |")


if __name__ == "__main__":
    given = [int(a) for a in sys.argv[1:]]
    if not given or given[0]:
        _print_confusion(given[0] if given else 1000)
    if len(given) < 2 or given[1]:
        _print_random(given[1] if len(given) > 1 else 500)
