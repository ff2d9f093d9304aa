"""Which filter family H(s) can be, in symbols: the exact conditions on the parts, and what they assume.

A family is given by polynomials in the coefficients of D that no frequency scale and no gain can change; each
family brings its own (:meth:`~symnet.shape.families.family.Family.conditions`). With the coefficients of a network
put in they are polynomials in its parts. For Butterworth that is |D(jw)|^2 having no term between the first and
the last, which stays rational at every order, unlike the coefficients of the Butterworth polynomial; for Bessel
a_k/a_0 = T^k b_k/b_0. Then :mod:`symnet.shape.solving` solves them for parts where that can be read, and
:mod:`symnet.shape.positive` proves, where it can, that they cannot hold. Parts are taken to be positive
throughout, and every answer says so.
"""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction
from typing import TYPE_CHECKING, Final

from symnet.errors import Fault, NotationError, UndefinedError
from symnet.exact.polynomials import by_powers_of_s
from symnet.exact.readable.forms import readable, readable_ratio
from symnet.shape.families import CATALOGUE
from symnet.shape.families.family import LARGEST_ORDER, Family
from symnet.shape.families.prototype import HIGH_PASS, LOW_PASS, W0, W3DB
from symnet.shape.positive import Squares, as_squares, content, divide_content, sign_of
from symnet.shape.radicals import outside, radical, root
from symnet.shape.solving import Branch, Solved, kernel, put_in, solve, vanishing
from symnet.shape.stated import Alternative, Condition, Conditions, Formula, Relation
from symnet.typeset.tree import Atom, Tree, minus, number, over, plus, times
from symnet.typeset.writing import to_text

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

    from symnet.exact.transfer import Transfer

__all__ = ["Alternative", "Condition", "Conditions", "Formula", "alternative", "conditions", "conditions_of"]

#: Terms of one product of two coefficients; beyond it the conditions would be pages long.
_MOST_TERMS: Final = 3000
#: Terms of an equation beyond which it is neither solved nor of any use to a reader.
_LARGEST_EQUATION: Final = 60
#: Terms of an equation, and of a proof, that is written out; of a longer one only the terms are counted.
_MOST_WRITTEN: Final = 16
_MOST_PROVEN: Final = 40


def conditions(H: Transfer, q: str | Fraction | None = None) -> Conditions:
    """The exact conditions on the parts under which H is a Butterworth, Bessel or Chebyshev filter, or has a given Q.

    Parameters
    ----------
    H
        A transfer function with symbols; numbers that they may have are not used.
    q
        A quality such as "2" or Fraction(1, 3), for an H of order 2.

    Raises
    ------
    NotationError
        A q that is no positive number.
    UndefinedError
        A q for an H whose order is not 2.

    Examples
    --------
    >>> from symnet.exact.polynomials import make_ring
    >>> s, R, C1, C2 = make_ring(["R", "C1", "C2"]).gens
    >>> found = conditions_of(s.ring.one, 1 + 2*s*R*C2 + s**2*R**2*C1*C2, q="2")
    >>> for label, text in [*found.rows()[:4], *found.rows()[-3::2]]:
    ...     print(f"{label}: {text}")
    Q: sqrt(C1/C2)/2
    Butterworth, order 2, low-pass: if and only if C1 = 2*C2, then f0 = f3dB = 1/(2*pi*R*sqrt(C1*C2))
    Bessel, order 2, low-pass: if and only if C1 = 4*C2/3, then f0 = 1/(2*pi*R*sqrt(C1*C2)), f3dB = 0.78615*f0, T = 2*R*C2
    Chebyshev of some ripple, order 2, low-pass: if and only if C1 > 2*C2
    Q = 2: if and only if C1 = 16*C2, then f0 = 1/(2*pi*R*sqrt(C1*C2))
    assumption: R, C1, C2 > 0
    """
    negative = [name for name in H.names if H.values.get(name, 1) < 0]
    return conditions_of(H.numerator, H.denominator, q, negative=negative)


def conditions_of(
    numerator: PolyElement,
    denominator: PolyElement,
    q: str | Fraction | None = None,
    *,
    negative: Sequence[str] = (),
) -> Conditions:
    """The same from numerator and denominator, elements of one ring whose first generator is s.

    ``negative`` are names that are known to be negative, for which nothing is assumed and so nothing is solved.
    """
    top, a = by_powers_of_s(numerator), by_powers_of_s(denominator)
    order = len(a) - 1
    quality = None if q is None else _square_of_quality(q, order)
    ring = denominator.ring
    used = [str(x) for k, x in enumerate(ring.symbols[1:], 1) if any(m[k] for p in (*top, *a) for m in p)]
    assumption = f"{', '.join(used)} > 0" if used else ""
    refusal = _not_compared(top, a)
    if refusal:
        return Conditions(order, "", (), "", None, "", refusal)
    band = LOW_PASS if len(top) == 1 else HIGH_PASS
    if band == HIGH_PASS:
        a = a[::-1]
    if negative:
        note = f"{', '.join(negative)} negative as given: conditions are stated for positive parts only"
        return Conditions(order, band, (), "", None, "", note)
    if sign_of(a[0]) == -1:
        a = tuple(-c for c in a)
    if order == 1:
        formula = Formula("f0 = f3dB", _f0(a, band))
        return Conditions(
            1, band, (Condition(f"first order, {band}", "always", formulas=(formula,)),), assumption
        )
    families = [f for f in CATALOGUE if f.has_order(order) and not f.finite_zeros(order)]
    open_ones = [f.name for f in families if f.conditions((1,) * (order + 1)) is None]
    found = [_of_family(f, a, band) for f in families if f.name not in open_ones]
    if quality is not None:
        equation = quality.denominator * a[0] * a[2] - quality.numerator * a[1] ** 2
        found.append(_judged(f"Q = {q}", [equation], [], a, quality, formulas=(Formula("f0", _f0(a, band)),)))
    notes = []
    if order > 3 or any(sign_of(c) != 1 for c in a):
        notes.append(
            "all of this for a stable H: the equations fix |H(jw)|, which an unstable H can have too"
        )
    if open_ones:
        notes.append(f"no polynomial condition in symbols, only with values: {', '.join(open_ones)}")
    note = "; ".join(notes)
    if order > 2:
        return Conditions(order, band, tuple(found), assumption, note=note)
    return Conditions(order, band, tuple(found), assumption, _quality(a), _quality_bound(a), note)


def _square_of_quality(q: str | Fraction, order: int) -> Fraction:
    try:
        value = Fraction(q)
    except (ValueError, ZeroDivisionError):
        value = Fraction(0)
    if value <= 0:
        raise NotationError(
            Fault(f"Q is a positive number, not {q!r}", hint='write "0.707" or Fraction(1, 3)')
        )
    if order != 2:
        raise UndefinedError(f"Q was asked for, but H has order {order}: Q belongs to one pair of poles")
    return value**2


def _not_compared(top: Sequence[PolyElement], a: Sequence[PolyElement]) -> str:
    """Why there is nothing to compare, or an empty text."""
    order = len(a) - 1
    if not top:
        return "H is 0: there is no response to recognise"
    if not order:
        return "H has no poles: no filter family"
    if order > LARGEST_ORDER:
        return f"order {order}: shapes are compared up to order {LARGEST_ORDER}"
    if not a[0]:
        return "a pole at s = 0 (an integrator): no filter family has one"
    low_pass, high_pass = len(top) == 1, len(top) == order + 1 and not any(top[:-1])
    if not (low_pass or high_pass):
        return "not a low-pass or high-pass without finite zeros, so not compared in this release"
    return ""


def _of_family(family: Family, a: Sequence[PolyElement], band: str) -> Condition:
    """The condition for one family on the coefficients of the low-pass (ascending)."""
    order = len(a) - 1
    parameters = family.parameters(order)
    some = f" of some {' and '.join(p.name for p in parameters)}" if parameters else ""
    name = f"{family.name}{some}, order {order}, {band}"
    work = max(len(x) * len(y) for x in a for y in a)
    if work > _MOST_TERMS:
        reason = f"products of {work} terms would have to be written out; give values to most of the parts"
        return Condition(name, "open", reason=reason)
    equations = family.conditions(a) or ()
    if parameters:
        return _judged(name, equations, family.positives(a), a, None)
    shape = family.prototype(order)
    ratio = shape.reference(W3DB).w / shape.reference(W0).w
    ratio = ratio if band == LOW_PASS else 1 / ratio
    same = abs(ratio - 1) < 1e-12
    formulas = [Formula("f0 = f3dB" if same else "f0", _f0(a, band))]
    if not same:
        formulas.append(Formula("f3dB", Atom("f0"), ratio))
        formulas += [Formula("T", readable_ratio(*a[1].cancel(a[0])))] if band == LOW_PASS else []
    quality = None
    if order == 2 and shape.exact is not None:
        b = shape.exact
        quality = Fraction(str(b[0] * b[2] / b[1] ** 2))
    return _judged(name, equations, family.positives(a), a, quality, formulas=tuple(formulas))


def _judged(
    name: str,
    equations: Sequence[PolyElement],
    positives: Sequence[PolyElement],
    a: Sequence[PolyElement],
    quality: Fraction | None,
    *,
    formulas: tuple[Formula, ...] = (),
) -> Condition:
    """Never, always or if: all equations 0 and all positives above 0, ``quality`` being Q^2 where that is all."""
    wanted = [divide_content(e, *content(e)) for e in equations if e]
    for e in wanted:
        if not vanishing(e):
            return Condition(name, "never", reason=_never_zero(e))
    undecided = [divide_content(p, *content(p)) if p else p for p in positives if sign_of(p) != 1]
    for p in undecided:
        squares = as_squares(-p)
        if not p or squares is not None:
            return Condition(name, "never", reason=_never_positive(p, squares))
    longest = max(map(len, wanted), default=0)
    if longest > _LARGEST_EQUATION:
        reason = f"its equations have up to {longest} terms in these parts; give values to most of them"
        return Condition(name, "open", reason=reason)
    if not wanted and not undecided:
        return Condition(name, "always", formulas=formulas)
    relations = tuple(_relation(p, ">") for p in undecided)
    by_root = _through_root(a, quality) if quality is not None and len(wanted) == 1 else None
    if by_root is not None:
        return Condition(name, "if", (by_root,), formulas=formulas)
    if not wanted:
        return Condition(name, "if", (Alternative((), relations),), formulas=formulas)
    ways = [alternative(branch, undecided) for branch in solve(wanted)]
    alternatives = tuple(way for way in ways if way is not None)
    if not alternatives:
        return Condition(name, "never", reason="no positive parts fulfil all it needs")
    return Condition(name, "if", alternatives, formulas=formulas)


def _through_root(a: Sequence[PolyElement], quality: Fraction) -> Alternative | None:
    """a_1 = sqrt(a_0 a_2)/Q for a name that only a_1 contains, where squaring would admit the a_1 of wrong sign.

    Only used when a_1 can be negative, as with positive feedback.
    """
    if sign_of(a[1]) is not None:
        return None
    ring = a[1].ring
    for index in range(1, ring.ngens):
        if {m[index] for m in a[1]} != {0, 1} or any(m[index] for c in (a[0], a[2]) for m in c):
            continue
        above = ring.from_dict({m: c for m, c in a[1].items() if not m[index]})
        below = ring.from_dict({(*m[:index], 0, *m[index + 1 :]): c for m, c in a[1].items() if m[index]})
        if sign_of(below) is None:
            continue
        # x*below + above = r, so x = (above - r)/(-below) or (r - above)/below
        size = root(a[0] * a[2] * quality.denominator, ring.one * quality.numerator, 2)
        turned = sign_of(below) == -1
        value = plus(readable(above), minus(size)) if turned else plus(size, minus(readable(above)))
        name = str(ring.symbols[index])
        return Alternative(((name, over(value, readable(-below if turned else below))),), needed=(name,))
    return None


def _never_zero(e: PolyElement) -> str:
    """Why the polynomial cannot be 0."""
    rest = divide_content(e, *content(e))
    if len(rest) == 1:
        return "it would need a part to be 0"
    squares = as_squares(rest) or as_squares(-rest)
    if squares is None:
        return "its equation is a product of factors that cannot be 0"
    return f"it would need {_written(squares.tree(), rest)} = 0, and no term of that is negative"


def _never_positive(p: PolyElement, squares: Squares | None) -> str:
    if squares is None:
        return "it would need 0 > 0"
    return f"it would need {_written(squares.tree(), p)} < 0, and no term of that is negative"


def _written(tree: Tree, p: PolyElement) -> str:
    return to_text(tree) if len(p) <= _MOST_PROVEN else f"a sum of {len(p)} terms"


def _relation(p: PolyElement, sign: str) -> Relation:
    """The relation p = 0 or p > 0 with the negative terms on the other side."""
    number_, exponents = content(p)
    p = divide_content(p, number_, exponents)
    if len(p) > _MOST_WRITTEN:
        return Atom(f"(a polynomial of {len(p)} terms)"), sign, number(0)
    left = p.ring.from_dict({m: c for m, c in p.items() if c > 0})
    right = p.ring.from_dict({m: -c for m, c in p.items() if c < 0})
    return readable(left), sign, readable(right) if right else number(0)


def alternative(branch: Branch, positives: Sequence[PolyElement]) -> Alternative | None:
    """The branch with what must be positive besides, in the symbols that stay free; None if that cannot be."""
    values = [(_name(s), readable_ratio(s.numerator, s.denominator)) for s in branch.solved]
    relations = []
    left = list(branch.left)
    if len(left) == 1 and (pure := _pure_root(left[0])) is not None:
        values.append(pure)
        left = []
    relations = [_relation(p, "=") for p in left]
    needed = [s.numerator * s.denominator for s in branch.solved if not s.positive]
    for p in positives:
        for solution in branch.solved:
            if sign_of(solution.denominator) == 1:
                p = put_in(p, solution)
        needed.append(p)
    for p in needed:
        core = kernel(p) if p else p
        if sign_of(core) in {0, -1} or as_squares(-core) is not None:
            return None
        if sign_of(core) is None:
            relations.append(_relation(core, ">"))
    return Alternative(tuple(values), tuple(dict.fromkeys(relations)))


def _pure_root(p: PolyElement) -> tuple[str, Tree] | None:
    """A root x = (c/b)^(1/k) for an equation b x^k = c with b and c of one sign, for the symbol with the shortest one."""
    ring = p.ring
    best: tuple[tuple[int, int], str, Tree] | None = None
    for index in range(1, ring.ngens):
        powers = sorted({m[index] for m in p})
        if len(powers) != 2 or powers[0]:
            continue
        above = ring.from_dict({m: -c for m, c in p.items() if not m[index]})
        below = ring.from_dict({(*m[:index], 0, *m[index + 1 :]): c for m, c in p.items() if m[index]})
        sign = sign_of(above)
        if sign is None or sign != sign_of(below):
            continue
        c, b = above.cancel(below)
        tree = root(c, b, powers[1])
        size = max(abs(int(c)) for c in below.values())
        if best is None or (len(p), size) < best[0]:
            best = (len(p), size), str(ring.symbols[index]), tree
    return None if best is None else best[1:]


def _name(solution: Solved) -> str:
    return str(solution.numerator.ring.symbols[solution.index])


def _quality(a: Sequence[PolyElement]) -> Tree:
    """Q = sqrt(a_0 a_2)/a_1, cancelled where the sign of a_1 is sure."""
    if sign_of(a[1]) != 1:
        return over(root(a[0] * a[2], a[1].ring.one, 2), readable(a[1]))
    top, bottom = (a[0] * a[2]).cancel(a[1] ** 2)
    return root(top, bottom, 2)


def _quality_bound(a: Sequence[PolyElement]) -> str:
    """Whether the poles are always real, with the proof."""
    discriminant = a[1] ** 2 - 4 * a[0] * a[2]
    squares = as_squares(discriminant) if discriminant else None
    if squares is None:
        return ""
    bound = "Q < 1/2" if squares.is_positive else "Q <= 1/2"
    return f"{bound} always, because a1^2 - 4*a0*a2 = {_written(squares.tree(), discriminant)}"


def _f0(a: Sequence[PolyElement], band: str) -> Tree:
    """f0 = (a_0/a_n)^(1/n)/(2 pi) of the low-pass, (a_n/a_0)^(1/n)/(2 pi) of the high-pass that a belongs to."""
    if band == HIGH_PASS:
        a = a[::-1]
    order = len(a) - 1
    top, bottom = a[-1].cancel(a[0])
    above, below = outside(top, order), outside(bottom, order)
    rest = times(number(2), Atom("pi"), above[0], radical(above[1], below[1], order))
    return over(below[0], rest)
