"""Equations and inequalities in positive parts, judged: always, never and why, or if and only if.

:mod:`symnet.shape.solving` finds the values that parts must have; here what is left over becomes a relation, a
square root that needs its radicand positive brings that inequality with it, and what cannot be is said with the
proof: a sum of positive terms, or the numbers that stand against it.
"""

from __future__ import annotations

from collections.abc import Collection, Iterator, Sequence
from fractions import Fraction
from typing import TYPE_CHECKING, Final, TypeAlias

from symnet.exact.readable.forms import readable, readable_ratio
from symnet.shape.given import NOTHING, Given
from symnet.shape.positive import Squares, as_squares, content, divide_content, sign_of
from symnet.shape.quadratic import Quadratic, quadratic_roots
from symnet.shape.radicals import root
from symnet.shape.solving import Branch, Solved, kernel, put_in, solve, vanishing
from symnet.shape.stated import Alternative, Condition, Formula, Relation
from symnet.typeset.numbers import plain_number
from symnet.typeset.tree import Atom, Tree, minus, names_of, number, over, plus
from symnet.typeset.writing import to_text

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

__all__ = ["alternatives", "judged", "written"]

_Ratio: TypeAlias = "tuple[PolyElement, PolyElement]"

#: Terms of an equation beyond which it is neither solved nor of any use to a reader.
_LARGEST_EQUATION: Final = 60
#: Terms of an equation, and of a proof, that is written out; of a longer one only the terms are counted.
_MOST_WRITTEN: Final = 16
_MOST_PROVEN: Final = 40


def judged(
    name: str,
    equations: Sequence[PolyElement],
    positives: Sequence[PolyElement] = (),
    *,
    given: Given = NOTHING,
    wanted: Collection[int] = (),
    formulas: tuple[Formula, ...] = (),
    quality: tuple[Sequence[PolyElement], Fraction] | None = None,
    figures: Collection[int] = (),
) -> Condition:
    """Never, always or if: all equations 0 and all positives above 0.

    ``quality`` holds the coefficients of D and Q^2 where that Q is all that is asked; ``figures`` are symbols that
    are no parts, by index.
    """
    wanting = []
    for e in equations:
        if given.at(e):
            if not vanishing(e, given):
                return Condition(name, "never", reason=_never_zero(e, given))
            wanting.append(divide_content(e, *content(e)))
    undecided = [divide_content(p, *content(p)) if p else p for p in positives if given.sign(p) != 1]
    for p in undecided:
        squares = as_squares(-given.at(p)) if p else None
        if not given.at(p) or squares is not None:
            return Condition(name, "never", reason=_never_positive(p, squares, given))
    longest = max(map(len, wanting), default=0)
    if longest > _LARGEST_EQUATION:
        reason = f"its equations have up to {longest} terms in these parts; give values to most of them"
        return Condition(name, "open", reason=reason)
    if not wanting and not undecided:
        return Condition(name, "always", formulas=formulas)
    by_root = _through_root(*quality, given, wanted) if quality is not None and len(wanting) == 1 else None
    if by_root is not None:
        return Condition(name, "if", (by_root,), formulas=formulas)
    if not wanting:
        relations = tuple(_relation(p, ">") for p in undecided)
        return Condition(name, "if", (Alternative((), relations),), formulas=formulas)
    refused: list[str] = []
    ways = tuple(
        way
        for branch in solve(wanting, given, wanted)
        for way in alternatives(
            branch, undecided, given=given, wanted=wanted, refused=refused, figures=figures
        )
    )
    if not ways:
        reason = refused[0] if refused else "no positive parts fulfil all it needs"
        if not refused and given.numbers:
            told = ", ".join(filter(None, dict.fromkeys(given.told(e) for e in wanting)))
            reason += f" (with {told})" if told else ""
        return Condition(name, "never", reason=reason)
    return Condition(name, "if", ways, formulas=formulas)


def _through_root(
    a: Sequence[PolyElement], quality: Fraction, given: Given, wanted: Collection[int]
) -> Alternative | None:
    """a_1 = sqrt(a_0 a_2)/Q for a name that only a_1 contains, where squaring would admit the a_1 of wrong sign.

    Only used when a_1 can be negative, as with positive feedback.
    """
    if given.sign(a[1]) is not None:
        return None
    ring = a[1].ring
    for index in range(1, ring.ngens):
        if index in given or (wanted and index not in wanted):
            continue
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


def _never_zero(e: PolyElement, given: Given) -> str:
    """Why the polynomial cannot be 0."""
    rest = divide_content(e, *content(e))
    if len(rest) == 1:
        return f"it would need {to_text(readable(e))} = 0"
    can = vanishing(rest)
    if can:  # so the numbers forbid it
        needs = " or ".join(_told(_relation(f, "=")) for f in can)
        told = ", ".join(filter(None, dict.fromkeys(given.told(f) for f in can)))
        return f"it would need {needs}; here {told}"
    squares = as_squares(rest) or as_squares(-rest)
    if squares is None:
        return "its equation is a product of factors that cannot be 0"
    return f"it would need {written(squares.tree(), rest)} = 0, and no term of that is negative"


def _never_positive(p: PolyElement, squares: Squares | None, given: Given) -> str:
    by_signs = as_squares(-p) if p else None
    if by_signs is None and given.numbers and p:
        return f"it would need {_told(_relation(p, '>'))}; here {given.told(p)}"
    if squares is None or by_signs is None:
        return "it would need 0 > 0"
    return f"it would need {written(by_signs.tree(), p)} < 0, and no term of that is negative"


def written(tree: Tree, p: PolyElement) -> str:
    """A proof that a polynomial keeps its sign as text, or how long it would be."""
    return to_text(tree) if len(p) <= _MOST_PROVEN else f"a sum of {len(p)} terms"


def _told(relation: Relation) -> str:
    left, sign, right = relation
    return f"{to_text(left)} {sign} {to_text(right)}"


def _relation(p: PolyElement, sign: str, figures: Collection[int] = ()) -> Relation:
    """The relation p = 0, p > 0 or p >= 0 with the negative terms on the other side."""
    number_, exponents = content(p)
    p = divide_content(p, number_, exponents)
    if len(p) > _MOST_WRITTEN:
        return Atom(f"(a polynomial of {len(p)} terms)"), sign, number(0)
    left, right = _sides(p, figures)
    return _tree(left), sign, _tree(right)


def _sides(p: PolyElement, figures: Collection[int]) -> tuple[_Ratio, _Ratio]:
    """The positive terms and the negated negative ones.

    ``figures`` are generators that are no parts, such as Q: where the right side has them and the left has not, the
    ratio of parts stands on the left, as in C1/C2 >= 4 Q^2.
    """
    one = p.ring.one
    left = p.ring.from_dict({m: c for m, c in p.items() if c > 0})
    right = p.ring.from_dict({m: -c for m, c in p.items() if c < 0})
    inside = [any(m[k] for m in side for k in figures) for side in (left, right)]
    if inside != [False, True]:
        return (left, one), (right, one)
    _, common = content(right)
    parts = tuple(0 if k in figures else e for k, e in enumerate(common))
    return left.cancel(p.ring.from_dict({parts: p.ring.domain.one})), (divide_content(right, 1, parts), one)


def _tree(ratio: _Ratio) -> Tree:
    """The ratio of two polynomials as a formula."""
    top, bottom = ratio
    return (
        number(0) if not top else readable(top) if bottom == bottom.ring.one else readable_ratio(top, bottom)
    )


def alternatives(
    branch: Branch,
    positives: Sequence[PolyElement] = (),
    *,
    given: Given = NOTHING,
    wanted: Collection[int] = (),
    refused: list[str] | None = None,
    figures: Collection[int] = (),
) -> Iterator[Alternative]:
    """The branch with what must be positive besides, in the symbols that stay free; nothing if that cannot be.

    With ``wanted`` symbols a last equation of the second degree is solved too, one way for each of its positive
    roots. Why a way is none is added to ``refused``.
    """
    values = [(_name(s), readable_ratio(s.numerator, s.denominator)) for s in branch.solved]
    left = list(branch.left)
    needed = [
        s.numerator * s.denominator for s in branch.solved if given.sign(s.numerator * s.denominator) != 1
    ]
    for p in positives:
        for solution in branch.solved:
            if given.sign(solution.denominator) == 1:
                p = put_in(p, solution)
        needed.append(p)
    ends: list[tuple[list[tuple[str, Tree]], list[tuple[PolyElement, str]]]] = [([], [])]
    if len(left) == 1 and (pure := _pure_root(left[0], given, wanted)) is not None:
        ends, left = [([pure], [])], []
    elif (
        (wanted or given.numbers)
        and len(left) == 1
        and (found := _quadratic(left, given, wanted)) is not None
    ):
        left = [e for e in left if e is not found.equation]
        ends = [([(found.name, tree)], list(needs)) for tree, needs in found.roots]
        if not ends and refused is not None:
            refused.append(f"{found.name} would be negative")
    relations = [_relation(p, "=", figures) for p in left]
    for more, needs in ends:
        found_relations = list(relations)
        for p, sign in (*((p, ">") for p in needed), *needs):
            relation = _required(p, sign, given, figures)
            if isinstance(relation, str):
                if refused is not None:
                    refused.append(relation)
                break
            found_relations += relation
        else:
            ordered = (*more, *values) if wanted else (*values, *more)
            yield Alternative(ordered, tuple(dict.fromkeys(found_relations)))


def _quadratic(left: Sequence[PolyElement], given: Given, wanted: Collection[int]) -> Quadratic | None:
    return quadratic_roots(left, given, wanted or range(1, left[0].ring.ngens))


def _required(p: PolyElement, sign: str, given: Given, figures: Collection[int]) -> list[Relation] | str:
    """What has to be true for p > 0 or p >= 0: nothing or a relation; a text that says why it cannot be."""
    core = kernel(p) if p else p
    there = given.at(core)
    if not there:
        return [] if sign == ">=" else "no positive parts fulfil all it needs"
    known = sign_of(there)
    if known == 1:
        return []
    if known is None:
        squares = as_squares(there)
        if squares is not None and (sign == ">=" or squares.is_positive):
            return []
        if as_squares(-there) is None:
            known_squares = Given(squares=given.squares)
            return [_relation(known_squares.at(core), sign, figures)]
    if sign_of(core) == -1 or as_squares(-core) is not None:
        return "no positive parts fulfil all it needs"
    told = given.told(core)
    if not told:
        return f"it would need {_told(_relation(there, sign, figures))}"
    text = f"it would need {_told(_relation(core, sign, figures))}"
    return text + (_beside(core, given, figures) or f"; here {told}")


def _beside(core: PolyElement, given: Given, figures: Collection[int]) -> str:
    """Both sides as numbers where they have no unit, as in "needs C1/C2 >= 4*Q^2 = 2; you have C1/C2 = 1"."""
    if not figures:
        return ""
    left, right = _sides(core, figures)
    if any(given.units.get(name) for name in names_of(_tree(right))):
        return ""
    values = [(given.value(top), given.value(bottom)) for top, bottom in (left, right)]
    shown = [plain_number(top / bottom) for top, bottom in values if top is not None and bottom]
    if len(shown) < len(values):
        return ""
    return f" = {shown[1]}; you have {to_text(_tree(left))} = {shown[0]}"


def _pure_root(p: PolyElement, given: Given, wanted: Collection[int]) -> tuple[str, Tree] | None:
    """A root x = (c/b)^(1/k) for an equation b x^k = c with b and c of one sign, for the symbol with the shortest one."""
    ring = p.ring
    best: tuple[tuple[int, int], str, Tree] | None = None
    for index in range(1, ring.ngens):
        powers = sorted({m[index] for m in p})
        if len(powers) != 2 or powers[0] or index in given or (wanted and index not in wanted):
            continue
        above = ring.from_dict({m: -c for m, c in p.items() if not m[index]})
        below = ring.from_dict({(*m[:index], 0, *m[index + 1 :]): c for m, c in p.items() if m[index]})
        sign = given.sign(above)
        if sign not in {1, -1} or sign != given.sign(below):
            continue
        if sign == -1:
            above, below = -above, -below
        c, b = above.cancel(below)
        tree = root(c, b, powers[1])
        size = max(abs(int(c)) for c in below.values())
        if best is None or (len(p), size) < best[0]:
            best = (len(p), size), str(ring.symbols[index]), tree
    return None if best is None else best[1:]


def _name(solution: Solved) -> str:
    return str(solution.numerator.ring.symbols[solution.index])
