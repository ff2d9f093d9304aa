"""Linear forms of voltages and currents, added and multiplied within the length that anybody reads."""

from __future__ import annotations

from typing import TYPE_CHECKING, Final, TypeAlias

from symnet.errors import Fault, LimitError

if TYPE_CHECKING:
    from sympy.polys.fields import FracElement

__all__ = ["Form", "add", "times"]

#: a linear form: voltage (or current) by its name -> factor
Form: TypeAlias = "dict[str, FracElement]"

# A product or sum of fractions that would be longer is not multiplied out.
_MOST_TERMS: Final = 300


def add(one: Form, other: Form) -> Form:
    """The sum of two linear forms, without zeros; LimitError for what nobody would read."""
    total = dict(one)
    for name, weight in other.items():
        if name in total:
            a, b = total[name], weight
            _refuse_beyond(len(a.numer) * len(b.denom) + len(b.numer) * len(a.denom))
            total[name] = a + b
        else:
            total[name] = weight
    return {name: weight for name, weight in total.items() if weight}


def times(factor: FracElement, form: Form) -> Form:
    """A linear form times a factor; LimitError for what nobody would read."""
    for weight in form.values():
        _refuse_beyond(len(factor.numer) * len(weight.numer))
        _refuse_beyond(len(factor.denom) * len(weight.denom))
    return {name: factor * weight for name, weight in form.items()} if factor else {}


def _refuse_beyond(terms: int) -> None:
    if terms > _MOST_TERMS:
        raise LimitError(
            Fault(
                f"a line of this derivation would have {terms} terms or more, which nobody can read",
                "tie equal parts together (R2 = R1), or read a node nearer the drive",
            )
        )
