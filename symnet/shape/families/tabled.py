"""Coefficients as filter tables print them, 1 + a S + b S^2, that know the frequency they are normalised to.

In a table S is s divided by the angular frequency w1 at which the table has 1; the numbers mean nothing without
knowing which frequency that is. A set typed here carries it, and a set that was taken from an H(s) in rad/s is
refused: its numbers are thousands or thousandths, and a formula for table coefficients makes nonsense of them.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from fractions import Fraction
from typing import Final

from symnet.errors import Fault, NotationError
from symnet.quantities import HERTZ, engineering, read_number
from symnet.shape.families.prototype import W3DB, Prototype
from symnet.shape.families.references import read_frequency
from symnet.typeset.displayed import Displayed

__all__ = ["TableSection", "table_section", "table_sections"]

#: Tables reach from w0 = 0.2 w1 (high ripple, unit delay) to w0 = 5 w1 (Bessel of order 20); beyond ten times that
#: the numbers are no table's.
_FARTHEST: Final = 50.0


@dataclass(frozen=True, slots=True, repr=False)
class TableSection(Displayed):
    """A factor K/(1 + a S + b S^2) of H with S = s/w1: ``w`` is w1 in rad/s and ``reference`` says what it is.

    b is 0 for a first-order factor. ``gain`` is K, None where nothing is said of it.
    """

    a: float
    b: float
    w: float
    reference: str
    gain: float | None = None

    @property
    def w0(self) -> float:
        """The magnitude of the poles in rad/s: w1/sqrt(b), or w1/a."""
        return self.w / (math.sqrt(self.b) if self.b else self.a)

    @property
    def q(self) -> float | None:
        """Q = sqrt(b)/a; None for a first-order factor."""
        return math.sqrt(self.b) / self.a if self.b else None

    def denormalised(self) -> tuple[float, float]:
        """a/w1 in s and b/w1^2 in s^2, the coefficients of s and s^2 themselves."""
        return self.a / self.w, self.b / self.w**2

    def at(self, *, f: str = "", w: str = "") -> TableSection:
        """The same factor with its reference at another frequency, in hertz as ``f`` or in rad/s as ``w``.

        >>> table_section("1.4142", "1", f="1 kHz").at(f="20 kHz").w0.__round__(3)
        125663.706
        """
        return TableSection(self.a, self.b, _unit(f, w), self.reference, self.gain)

    def rows(self) -> tuple[tuple[str, str], ...]:
        """Every figure with its unit and with what it is normalised to."""
        unit = f"w1 = {self.w:.6g} rad/s, f1 = {engineering(Fraction(self.w / math.tau), HERTZ, digits=5)}"
        rows = [("factor", "1/(1 + a S + b S^2), S = s/w1"), ("w1", f"{unit} ({self.reference})")]
        rows += [("a", f"{self.a:.6g}"), ("b", f"{self.b:.6g}")]
        rows += [] if self.gain is None else [("K", f"{self.gain:.6g}")]
        rows.append(
            ("w0", f"{self.w0:.6g} rad/s, {engineering(Fraction(self.w0 / math.tau), HERTZ, digits=5)}")
        )
        return (*rows, ("Q", f"{self.q:.5g}")) if self.q is not None else tuple(rows)

    def __str__(self) -> str:
        return f"1 + {self.a:.6g} S + {self.b:.6g} S^2, S = s/({self.w:.6g} rad/s), {self.reference}"

    def __repr__(self) -> str:
        return f"<TableSection: {self}>"


def table_section(
    a: str | float | Fraction,
    b: str | float | Fraction = 0,
    gain: str | float | Fraction | None = None,
    *,
    f: str = "",
    w: str = "",
) -> TableSection:
    """The factor gain/(1 + a S + b S^2) of a filter table, S = s/w1, with the frequency w1 that the table has as its 1.

    w1 is given in hertz as ``f`` or in rad/s as ``w``: the ripple edge, the -3 dB frequency, ..., whatever the table
    is normalised to.

    Raises :class:`~symnet.errors.NotationError` for coefficients that are not positive, a frequency without its
    unit, and coefficients that are no table's: those of s^2 + a s + b or of 1 + a s + b s^2 with s in rad/s. It then
    says what they are when normalised.

    >>> print(table_section("0.91094", "1.41253", f="1.5 kHz"))
    1 + 0.91094 S + 1.41253 S^2, S = s/(9424.78 rad/s), as typed
    >>> table_section(6078.04, 62884481, -44518803, f="1.5 kHz")
    Traceback (most recent call last):
    symnet.errors.NotationError: these look denormalised (w0 = 7930 rad/s); normalised they are a = 0.91094, b = 1.41253, gain = -0.70795
        they are the coefficients of s^2 + a s + b with s in rad/s; a table has 1 + a S + b S^2, S = s/(9424.8 rad/s)
    """
    unit = _unit(f, w)
    a_value, b_value = (float(_number(name, x)) for name, x in (("a", a), ("b", b)))
    k = None if gain is None else float(read_number(gain.strip()) if isinstance(gain, str) else gain)
    if a_value <= 0 or b_value < 0:
        raise NotationError(
            Fault(
                f"a factor 1 + a S + b S^2 of a filter has a above 0 and b not below, not a = {a}, b = {b}",
                hint="with a minus sign its poles lie in the right half plane",
            )
        )
    section = TableSection(a_value, b_value, unit, "as typed", k)
    if 1 / _FARTHEST < section.w0 / unit < _FARTHEST:
        return section
    raise _denormalised(section)


def _denormalised(typed: TableSection) -> NotationError:
    """The error that says what the coefficients are when normalised, read in the way that makes sense."""
    a, b, w = typed.a, typed.b, typed.w
    shapes = [("1 + a s + b s^2" if b else "1 + a s", TableSection(a * w, b * w * w, w, "", typed.gain))]
    if b:
        gain = None if typed.gain is None else typed.gain / b
        shapes.append(("s^2 + a s + b", TableSection(a * w / b, w * w / b, w, "", gain)))
    shape, section = min(shapes, key=lambda s: abs(math.log(s[1].w0 / w)))
    if abs(math.log(section.w0 / w)) > math.log(_FARTHEST):
        return NotationError(
            Fault(
                f"a = {a:.5g}, b = {b:.5g} put w0 at {typed.w0 / w:.3g} times the frequency of the table",
                hint="no table is that far off; is the frequency of the table right?",
            )
        )
    figures = [f"a = {section.a:.5f}"] + ([f"b = {section.b:.5f}"] if b else [])
    figures += [] if section.gain is None else [f"gain = {section.gain:.5f}"]
    return NotationError(
        Fault(
            f"these look denormalised (w0 = {section.w0:.4g} rad/s); normalised they are {', '.join(figures)}",
            hint=f"they are the coefficients of {shape} with s in rad/s; a table has 1 + a S + b S^2, S = s/({w:.5g} rad/s)",
        )
    )


def _unit(f: str, w: str) -> float:
    if bool(f) == bool(w):
        raise NotationError(
            Fault(
                "a table is normalised to one frequency, and its coefficients mean nothing without it",
                hint='write f="1.5 kHz" or w="9.42 krad/s"',
            )
        )
    return read_frequency("f", f) if f else read_frequency("w", w)


def _number(name: str, value: str | float | Fraction) -> Fraction:
    if isinstance(value, str):
        return read_number(value.strip())
    if not math.isfinite(value):
        raise NotationError(f"{name} is a number, not {value}")
    return Fraction(value)


def table_sections(prototype: Prototype, reference: str = W3DB) -> tuple[TableSection, ...]:
    """The factors 1 + a S + b S^2 of a prototype by growing Q, normalised to one of its references.

    They are the rows of a printed table; each knows the frequency in rad/s at which the reference now is. Raises
    :class:`~symnet.errors.UnknownNameError` for a reference that it does not have.

    >>> from symnet.shape.families.bessel import bessel
    >>> for section in table_sections(bessel(3).at(f3dB="20 kHz")):
    ...     print(section)
    1 + 0.756043 S + 0 S^2, S = s/(125664 rad/s), -3.0103 dB relative to DC
    1 + 0.999629 S + 0.477191 S^2, S = s/(125664 rad/s), -3.0103 dB relative to DC
    """
    unit = prototype.reference(reference)
    found = []
    for w0, q in prototype.sections():
        ratio = unit.w / w0
        a, b = (ratio, 0.0) if q is None else (ratio / q, ratio * ratio)
        found.append(TableSection(a, b, unit.w, unit.label))
    return tuple(found)
