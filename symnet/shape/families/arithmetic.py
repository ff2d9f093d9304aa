"""One formula, any number of digits: what the families compute with.

A closed form is written once, over a namespace ``m`` that has ``sin``, ``asinh``, ``expm1``, ``pi`` ...: the
module :mod:`math` gives doubles, an mpmath context of its own gives as many digits as are asked for. Nothing is
global: a precision that one caller asks for is never seen by another.
"""

from __future__ import annotations

import re
from typing import Any, Final

import mpmath

from symnet.errors import Fault, LimitError, NotationError

__all__ = ["MOST_DIGITS", "as_typed", "context", "measured"]

#: The most digits that are computed on request.
MOST_DIGITS: Final = 500

_NUMBER: Final = r"\s*\+?((?:\d+\.?\d*|\.\d+)(?:[eE][-+]?\d+)?)\s*"


def context(digits: int) -> Any:
    """An mpmath context with so many decimal digits (17 is full double precision).

    Raises :class:`~symnet.errors.LimitError` for a number of digits that is not from 1 to :data:`MOST_DIGITS`.
    """
    if not 1 <= digits <= MOST_DIGITS:
        raise LimitError(Fault(f"{digits} digits; between 1 and {MOST_DIGITS} can be asked for"))
    own = mpmath.MPContext()
    own.dps = digits
    return own


def as_typed(m: Any, value: float) -> Any:
    """The decimal number that was typed, 0.1 being one tenth in every precision and not the double next to it.

    >>> context(25).nstr(as_typed(context(25), 0.1), 20)
    '0.1'
    """
    return value if isinstance(m.pi, float) else m.mpf(repr(value))


def measured(text: str, unit: str, *, what: str, above: float, up_to: float, at_zero: str = "") -> float:
    """The number in a text such as "0.5 dB", which lies above one bound and does not exceed the other.

    Raises :class:`~symnet.errors.NotationError` for anything else; ``what`` is the parameter in the engineer's
    words ("a ripple"), ``at_zero`` what the family becomes there.

    >>> measured("0.5 dB", "dB", what="a ripple", above=0, up_to=12)
    0.5
    """
    found = re.fullmatch(_NUMBER + re.escape(unit) + r"\s*", str(text), re.ASCII)
    if found is None:
        example = f"{0.5 if above < 0.5 else 50} {unit}"
        raise NotationError(
            Fault(
                f"{what} is a positive number of {unit}, not {text!r}",
                hint=f'write it with its unit: "{example}"',
            )
        )
    value = float(found.group(1))
    if not above < value <= up_to:
        raise NotationError(
            Fault(
                f"{what} lies above {above:.5g} {unit} and up to {up_to:g} {unit}, not at {value:g} {unit}",
                hint=at_zero if value == 0 else "",
            )
        )
    return value
