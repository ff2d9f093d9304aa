"""w0, f0, Q, zeta, tau and D of a transfer, as exact values with square roots.

D is the denominator in lowest terms without its powers of s, its first coefficient made 1:
1 + s/(Q*w0) + s^2/w0^2 for order 2, 1 + s*tau for order 1.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from symnet.errors import Fault, LimitError, UndefinedError
from symnet.review.algebra import Value

if TYPE_CHECKING:
    from symnet.exact.readable.packed import Polynomial
    from symnet.review.solution import Solution

__all__ = ["denominator_of", "figure", "lowest"]

_MOST_TERMS = 2000


def figure(solution: Solution, transfer: Value, name: str) -> Value:
    """One figure of a transfer; UndefinedError where its order has none."""
    coefficients = denominator_of(solution, transfer)
    algebra = solution.algebra
    values = [Value(algebra, coefficient) for coefficient in coefficients]
    order = len(values) - 1
    if name == "D":
        s, total = algebra.generator("s"), algebra.number(0)
        for k, value in enumerate(values):
            total = total + value * s**k
        return total / values[0]
    if order == 0:
        raise UndefinedError(Fault(f"this transfer has no pole beside s = 0, so that it has no {name}"))
    if name in {"f3dB", "w3dB"}:
        raise LimitError(Fault(f"{name} is compared by itself only", f"write {name} = ..."))
    if order > 2 or (order == 1 and name in {"Q", "zeta"}):
        message = f"D has order {order}: {name} belongs to a section of order {'1 or 2' if name not in {'Q', 'zeta'} else '2'}"
        hint = (
            f"{name} = ... is compared alone"
            if name in {"w0", "f0", "tau"}
            else "say of which: Q of x/in = ..."
        )
        raise UndefinedError(Fault(message, hint))
    first, last = values[0], values[-1]
    w0 = first / last if order == 1 else (first / last).root()
    two = algebra.number(2)
    match name:
        case "w0":
            return w0
        case "f0":
            return w0 / (two * algebra.generator("pi"))
        case "tau":
            return w0.inverse()
        case "Q":
            return first / (values[1] * w0)
        case _:
            return values[1] * w0 / (two * first)


def denominator_of(solution: Solution, transfer: Value) -> list[Polynomial]:
    """The coefficients of s^0, s^1, ... of the denominator in lowest terms, powers of s that stand alone left out."""
    top, bottom = solution.substituted(transfer)
    algebra = solution.algebra
    _, bottom = lowest(solution, top, bottom)
    parts = algebra.split(bottom, ("s",))
    low, high = min(k for (k,) in parts), max(k for (k,) in parts)
    return [parts.get((k,), {}) for k in range(low, high + 1)]


def lowest(solution: Solution, top: Polynomial, bottom: Polynomial) -> tuple[Polynomial, Polynomial]:
    """Numerator and denominator without what they have in common; LimitError when they are too long for that."""
    if max(len(top), len(bottom)) > _MOST_TERMS:
        raise LimitError(
            Fault(
                f"this transfer has {max(len(top), len(bottom))} terms; figures of it are not looked for",
                "give some of the parts values",
            )
        )
    from sympy import ZZ, symbols
    from sympy.polys.rings import PolyRing

    space = solution.algebra.space
    used = sorted({*space.used(top), *space.used(bottom)})
    ring = PolyRing(symbols(f"x:{len(used)}"), ZZ)
    n, d = (
        ring.from_dict({tuple(space.unpack(m)[k] for k in used): ZZ(c) for m, c in side.items()})
        for side in (top, bottom)
    )
    _, n, d = n.cofactors(d)
    if d.LC < 0:
        n, d = -n, -d
    units = [space.unit(k) for k in used]
    above, below = (
        {sum(e * u for e, u in zip(m, units, strict=True)): int(c) for m, c in side.items()}
        for side in (n, d)
    )
    return above, below
