"""A claimed H whose coefficients were compared: the terms in which it is wrong, as an explanation."""

from __future__ import annotations

from typing import TYPE_CHECKING

from symnet.review.diagnosis.explanation import Explanation, Slip
from symnet.typeset.tree import Atom, Tree, minus, power, times
from symnet.typeset.writing import to_text

if TYPE_CHECKING:
    from symnet.review.coefficients import Coefficient, Comparison

__all__ = ["of_comparison"]


def of_comparison(comparison: Comparison) -> Explanation | None:
    """What is missing, too much or of the wrong sign, named term by term; None where nothing differs."""
    wrong = comparison.wrong
    if not wrong:
        return None
    words = "; ".join(_differs(coefficient) for coefficient in wrong)
    slips = {_slip(coefficient) for coefficient in wrong}
    agreeing = [f"{_place(c)}" for c in comparison.coefficients if c.agrees]
    evidence = (f"agreeing: {', '.join(agreeing)}",) if agreeing else ()
    return Explanation(slips.pop() if len(slips) == 1 else Slip.DIFFERENT, words, evidence)


def _place(coefficient: Coefficient) -> str:
    of = {0: "the constant term", 1: "the coefficient of s"}.get(
        coefficient.power, f"the coefficient of s^{coefficient.power}"
    )
    return f"{of} in the {coefficient.side}"


def _term(coefficient: Coefficient, tree: Tree) -> str:
    return to_text(times(power(Atom("s"), coefficient.power), tree))


def _differs(coefficient: Coefficient) -> str:
    missing = ", ".join(_term(coefficient, tree) for tree in coefficient.missing)
    extra = ", ".join(_term(coefficient, tree) for tree in coefficient.extra)
    where = _place(coefficient)
    if _slip(coefficient) is Slip.SIGN:
        return f"{where}: the sign of {extra} is wrong"
    if missing and extra:
        return f"{where}: {missing} instead of {extra}"
    return f"{where}: {missing} is missing" if missing else f"{where}: {extra} is too much"


def _slip(coefficient: Coefficient) -> Slip:
    missing, extra = coefficient.missing, coefficient.extra
    if missing and len(missing) == len(extra):
        turned = [to_text(minus(tree)) for tree in extra]
        return Slip.SIGN if [to_text(tree) for tree in missing] == turned else Slip.DIFFERENT
    return Slip.DIFFERENT if missing and extra else Slip.MISSING_TERM if missing else Slip.EXTRA_TERM
