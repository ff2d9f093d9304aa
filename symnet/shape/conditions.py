"""Which filter family H(s) can be, in symbols: the exact conditions on the parts, and what they assume.

A family is given by polynomials in the coefficients of D that no frequency scale and no gain can change; each
family brings its own (:meth:`~symnet.shape.families.family.Family.conditions`). With the coefficients of a network
put in they are polynomials in its parts. For Butterworth that is |D(jw)|^2 having no term between the first and
the last, which stays rational at every order, unlike the coefficients of the Butterworth polynomial; for Bessel
a_k/a_0 = T^k b_k/b_0. A band-pass, a band-stop and an all-pass are asked for the low-pass behind them
(:mod:`symnet.shape.transformed`). :mod:`symnet.shape.judging` solves what comes of it and says why it cannot be;
:mod:`symnet.shape.topology` knows what no values can change. Parts are taken to be positive throughout, names that
have a number keep it, and every answer says so.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from fractions import Fraction
from typing import TYPE_CHECKING

from symnet.errors import Fault, NotationError, UndefinedError, UnknownNameError, nearest
from symnet.exact.polynomials import by_powers_of_s
from symnet.quantities import HERTZ, Dimension, read_number, read_quantity
from symnet.shape.asking import Question, band_in_symbols
from symnet.shape.designing import Figures, designed
from symnet.shape.families.family import LARGEST_ORDER
from symnet.shape.given import Given
from symnet.shape.judging import written
from symnet.shape.positive import as_squares, sign_of
from symnet.shape.stated import Alternative, Condition, Conditions, Formula
from symnet.shape.topology import where_poles_are
from symnet.shape.worked import with_numbers
from symnet.shape.zeros import quality as quality_of_poles

if TYPE_CHECKING:
    from sympy.polys.rings import PolyElement

    from symnet.exact.transfer import Transfer

__all__ = ["Alternative", "Condition", "Conditions", "Formula", "conditions", "conditions_of"]


def conditions(
    H: Transfer,
    q: str | Fraction | None = None,
    *,
    solve: str = "",
    f0: str | None = None,
    gain: str | Fraction | None = None,
) -> Conditions:
    """The exact conditions on the parts under which H belongs to each family of the catalogue, or has a given Q.

    Parameters
    ----------
    H
        A transfer function with symbols. Names that have a number keep it: no condition asks for another one.
    q
        A quality such as "2" or Fraction(1, 3), for an H of order 2.
    solve
        The parts to solve for, as in "R1 R2"; a number that they have is forgotten. An H of order 2 has three
        figures, Q, f0 and the gain: one part is solved for Q, two for Q and f0, three for all of them, which stand
        as symbols Q, w0 = 2 pi f0 and H0 = |gain| in the answer, beside the inequality under which the values are
        real. At higher orders as many parts are chosen as the family has conditions.
    f0, gain
        A number for f0, such as "1 kHz", and for |gain|, with ``solve``.

    Raises
    ------
    NotationError
        A q that is no positive number.
    UndefinedError
        A q for an H whose order is not 2.
    UnknownNameError
        A part to solve for that H does not hold.

    Examples
    --------
    >>> from symnet.exact.polynomials import make_ring
    >>> s, R, C1, C2 = make_ring(["R", "C1", "C2"]).gens
    >>> found = conditions_of(s.ring.one, 1 + 2*s*R*C2 + s**2*R**2*C1*C2, q="2")
    >>> for label, text in found.rows():
    ...     if label.startswith(("Q", "Butterworth", "Chebyshev", "assumption")):
    ...         print(f"{label}: {text}")
    Q: sqrt(C1/C2)/2
    Butterworth, order 2, low-pass: if and only if C1 = 2*C2, then f0 = f3dB = 1/(2*pi*R*sqrt(C1*C2))
    Chebyshev of some ripple, order 2, low-pass: if and only if C1 > 2*C2
    Q = 2: if and only if C1 = 16*C2, then f0 = 1/(2*pi*R*sqrt(C1*C2))
    assumption: R, C1, C2 > 0

    The unity-gain section, whose resistors are asked for:

    >>> s, R1, R2, C1, C2 = make_ring(["R1", "R2", "C1", "C2"]).gens
    >>> D = 1 + s*C2*(R1 + R2) + s**2*R1*R2*C1*C2
    >>> for condition in conditions_of(s.ring.one, D, solve=["R1", "R2"]).conditions[1:3]:
    ...     print(condition)
    Butterworth, order 2, low-pass (Q = 0.7071): if and only if C1 >= 2*C2
    Bessel, order 2, low-pass (Q = 0.5774): if and only if 3*C1 >= 4*C2
    """
    negative = [name for name in H.names if H.values.get(name, 1) < 0]
    chosen = tuple(solve.replace(",", " ").split())
    for name in chosen:
        if name not in H.names:
            close = nearest(name, H.names)
            hint = f"did you mean {close[0]}?" if close else "H holds: " + ", ".join(H.names)
            raise UnknownNameError(Fault(f"H holds no part called {name}", hint))
    network = getattr(H, "network", None)
    return conditions_of(
        H.numerator,
        H.denominator,
        q,
        negative=[name for name in negative if name not in chosen],
        values={name: H.values[name] for name in H.names if name in H.values and name not in chosen},
        units={name: str(d) for name in H.names if (d := H.dimensions.get(name)) is not None},
        solve=chosen,
        f0=f0,
        gain=gain,
        places=("", "") if network is None or negative else where_poles_are(network),
    )


def conditions_of(
    numerator: PolyElement,
    denominator: PolyElement,
    q: str | Fraction | None = None,
    *,
    negative: Sequence[str] = (),
    values: Mapping[str, Fraction] | None = None,
    units: Mapping[str, str] | None = None,
    solve: Sequence[str] = (),
    f0: str | None = None,
    gain: str | Fraction | None = None,
    places: tuple[str, str] = ("", ""),
) -> Conditions:
    """The same from numerator and denominator, elements of one ring whose first generator is s.

    ``negative`` are names that are known to be negative, for which nothing is assumed and so nothing is solved;
    ``values`` (SI) and ``units`` those of the names, ``places`` what is known of the poles of such a network
    (:func:`~symnet.shape.topology.where_poles_are`).
    """
    top, a = by_powers_of_s(numerator), by_powers_of_s(denominator)
    order = len(a) - 1
    quality = None if q is None else _square_of_quality(q, order)
    ring = denominator.ring
    names = [str(x) for x in ring.symbols]
    used = [name for k, name in enumerate(names[1:], 1) if any(m[k] for p in (*top, *a) for m in p)]
    refusal = _not_compared(top, a)
    if refusal:
        return Conditions(order, "", (), "", None, "", refusal)
    band = band_in_symbols(top, a)
    if negative:
        note = f"{', '.join(negative)} negative as given: conditions are stated for positive parts only"
        return Conditions(order, band, (), "", None, "", note)
    if sign_of(a[0]) == -1:
        top, a = tuple(-c for c in top), tuple(-c for c in a)
    values = {name: x for name, x in (values or {}).items() if name in used}
    given = Given({names.index(name): x for name, x in values.items()}, units or {})
    ask = Question(top, a, band, given, frozenset(names.index(name) for name in solve), places, quality, q)
    free = [name for name in used if name not in values]
    assumption = f"{', '.join(free)} > 0" if free else ""
    notes = ask.notes()
    if solve and order == 2:
        figures = Figures(
            None if quality is None else (str(q), quality),
            None if f0 is None else _positive_number(f0, HERTZ, "f0"),
            None if gain is None else _positive_number(str(gain), None, "a gain to solve for"),
        )
        found = list(designed(top, a, band, solve, given=given, figures=figures))
        chosen = [name for name in free if name not in solve]
        symbols = ("Q", "w0 = 2*pi*f0 in rad/s", "H0 = |gain|")[1 : len(solve)]
        notes = [*symbols, f"free to choose: {', '.join(chosen)}" if chosen else "nothing is left to choose"]
    elif f0 is not None or gain is not None:
        raise UndefinedError(
            Fault(
                "f0 and the gain are solved for at order 2",
                'name the parts: solve="R1 R2"; at other orders only the shape is',
            )
        )
    else:
        found = [with_numbers(condition, values, given.units) for condition in ask.rows()]
    bound = _quality_bound(a) if order == 2 and not solve else ""
    shown = quality_of_poles(a) if order == 2 and not solve else None
    return Conditions(order, band, tuple(found), assumption, shown, bound, "; ".join(notes))


def _positive_number(text: str, dimension: Dimension | None, what: str) -> Fraction:
    value = read_quantity(text, dimension).value if dimension is not None else read_number(text)
    if value <= 0:
        raise NotationError(Fault(f"{what} is positive, not {text}"))
    return value


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
    if len(top) - 1 > order:
        return "improper: H grows towards high frequencies, which no filter family does"
    return ""


def _quality_bound(a: Sequence[PolyElement]) -> str:
    """Whether the poles are always real, with the proof."""
    discriminant = a[1] ** 2 - 4 * a[0] * a[2]
    squares = as_squares(discriminant) if discriminant else None
    if squares is None:
        return ""
    bound = "Q < 1/2" if squares.is_positive else "Q <= 1/2"
    return f"{bound} always, because a1^2 - 4*a0*a2 = {written(squares.tree(), discriminant)}"
