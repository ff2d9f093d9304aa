"""The preferred values of IEC 60063, and lists of values that a part may be chosen from.

The series are lists and not a formula: eight members of E24 are not the rounded powers of 10^(1/24), and 920 of E192 is
not that of 10^(1/192). E12, E6 and E3 are every second, fourth and eighth member of E24; E96 and E48 every second and
fourth of E192. E24 is no part of E192: 270, 330, 470 ... are not there. Values are exact fractions.

A :class:`Preferred` is a list of values between two limits, each of which knows what it is made of: one part, or two
in series or in parallel. A list without limits goes on through all decades; only its nearest value can be asked for.
"""

from __future__ import annotations

from bisect import bisect_left
from collections.abc import Iterator
from dataclasses import dataclass, field, replace
from fractions import Fraction
from typing import Final, Literal, TypeAlias

from symnet.errors import Fault, LimitError, NotationError, UnknownNameError, nearest
from symnet.quantities import NUMBER, Dimension, Quantity, engineering, in_words, read_quantity
from symnet.typeset.displayed import Displayed

__all__ = ["MOST_VALUES", "SERIES", "Entry", "Preferred", "preferred"]

#: The longest list that a part is chosen from; pairs of two hundred values are 40 000.
MOST_VALUES: Final = 100_000

_E24: Final = "10 11 12 13 15 16 18 20 22 24 27 30 33 36 39 43 47 51 56 62 68 75 82 91"
_E192: Final = """
100 101 102 104 105 106 107 109 110 111 113 114 115 117 118 120 121 123 124 126 127 129 130 132 133 135 137 138 140
142 143 145 147 149 150 152 154 156 158 160 162 164 165 167 169 172 174 176 178 180 182 184 187 189 191 193 196 198
200 203 205 208 210 213 215 218 221 223 226 229 232 234 237 240 243 246 249 252 255 258 261 264 267 271 274 277 280
284 287 291 294 298 301 305 309 312 316 320 324 328 332 336 340 344 348 352 357 361 365 370 374 379 383 388 392 397
402 407 412 417 422 427 432 437 442 448 453 459 464 470 475 481 487 493 499 505 511 517 523 530 536 542 549 556 562
569 576 583 590 597 604 612 619 626 634 642 649 657 665 673 681 690 698 706 715 723 732 741 750 759 768 777 787 796
806 816 825 835 845 856 866 876 887 898 909 920 931 942 953 965 976 988
"""


def _decade(text: str, step: int) -> tuple[Fraction, ...]:
    figures = text.split()
    return tuple(Fraction(int(figure), 10 ** (len(figure) - 1)) for figure in figures[::step])


#: One decade of every series, from 1 up to but without 10 (IEC 60063:2015).
SERIES: Final[dict[str, tuple[Fraction, ...]]] = {
    **{f"E{24 // step}": _decade(_E24, step) for step in (8, 4, 2, 1)},
    **{f"E{192 // step}": _decade(_E192, step) for step in (4, 2, 1)},
}

How: TypeAlias = Literal["series", "parallel"]


@dataclass(frozen=True, slots=True, order=True)
class Entry:
    """One value of a list: ``value`` in SI units, and the one or two parts that make it, joined as ``how`` says.

    ``labels`` are the names that a stock list has for the parts.
    """

    value: Fraction
    parts: tuple[Fraction, ...]
    how: How | None = None
    labels: tuple[str, ...] = ()

    def text(self, dimension: Dimension) -> str:
        """The value with its unit, and what it is made of.

        >>> from symnet.quantities import OHM
        >>> Entry(Fraction(750), (Fraction(1000), Fraction(3000)), "parallel").text(OHM)
        '1 kohm || 3 kohm = 750 ohm'
        """
        named = [engineering(part, dimension) for part in self.parts]
        if self.labels:
            named = [f"{text} ({label})" for text, label in zip(named, self.labels, strict=True)]
        if self.how is None:
            return named[0]
        sign = " + " if self.how == "series" else " || "
        return f"{sign.join(named)} = {engineering(self.value, dimension)}"


@dataclass(frozen=True, slots=True, repr=False)
class Preferred(Displayed):
    """Values that a part may be chosen from, made by :func:`preferred`.

    ``name`` is the series or where the list is from; ``decade`` the members of a series from 1 to 10, empty for a
    list of one's own; ``entries`` the values in rising order, empty for a series without limits. Iterating gives
    quantities.
    """

    name: str
    dimension: Dimension = NUMBER
    decade: tuple[Fraction, ...] = field(default=(), repr=False)
    entries: tuple[Entry, ...] = field(default=(), repr=False)

    @property
    def values(self) -> tuple[Fraction, ...]:
        """The values in SI units, in rising order."""
        return tuple(entry.value for entry in self.entries)

    def __iter__(self) -> Iterator[Quantity]:
        return (Quantity(value, self.dimension) for value in self.values)

    def __len__(self) -> int:
        return len(self.entries)

    def __repr__(self) -> str:
        return f"<Preferred: {self}>"

    def __str__(self) -> str:
        if not self.entries:
            listed = " ".join(engineering(figure) for figure in self.decade[:8])
            return (
                f"{self.name}, {len(self.decade)} values a decade: {listed}{' ...' * (len(self.decade) > 8)}"
            )
        low, high = (engineering(self.entries[k].value, self.dimension) for k in (0, -1))
        count = f"{len(self)} value{'s' if len(self) > 1 else ''}"
        return f"{self.name}, {count} from {low} to {high}"

    def between(self, low: str | Fraction | int, high: str | Fraction | int) -> Preferred:
        """The values of the list from ``low`` to ``high``, both included: text with a unit, or a number in SI units.

        Raises NotationError for limits that are not positive or leave no value, DimensionError for other units.

        >>> [str(value) for value in preferred("E6").between("4.7 nF", "20 nF")]
        ['4.7 nF', '6.8 nF', '10 nF', '15 nF']
        """
        wanted = None if self.dimension == NUMBER and self.decade else self.dimension
        first = _limit(low, wanted)
        last = _limit(high, wanted or (None if first.dimension == NUMBER else first.dimension))
        dimension = last.dimension
        if first.dimension not in {dimension, NUMBER}:
            raise NotationError(f"{low} is in {first.dimension} and {high} in {dimension}")
        if not 0 < first.value <= last.value:
            raise NotationError(
                Fault(f"a range runs from a positive value upwards, not from {low} to {high}")
            )
        if self.entries:
            kept = tuple(entry for entry in self.entries if first.value <= entry.value <= last.value)
        else:
            kept = tuple(Entry(value, (value,)) for value in self._decades(first.value, last.value))
        if not kept:
            raise NotationError(Fault(f"{self.name} has no value from {low} to {high}", "widen the range"))
        return replace(self, dimension=dimension, entries=kept)

    def _decades(self, low: Fraction, high: Fraction) -> Iterator[Fraction]:
        power = _power_of_ten(low)
        while Fraction(10) ** power <= high:
            for figure in self.decade:
                if low <= figure * Fraction(10) ** power <= high:
                    yield figure * Fraction(10) ** power
            power += 1

    def nearest(self, value: str | Fraction | int) -> Quantity:
        """The value of the list that is nearest by ratio; of two equally near the smaller one.

        >>> print(preferred("E12").nearest("7.333 kohm"), preferred("E3").nearest("999 ohm"))
        6.8 kohm 1 kohm
        """
        asked = _limit(value, self.dimension if self.dimension != NUMBER else None)
        if asked.value <= 0:
            raise NotationError(f"{value} is not positive; preferred values are")
        known = self.values or tuple(
            self._decades(asked.value / 10, asked.value * 10)  # a decade to each side holds both neighbours
        )
        place = bisect_left(known, asked.value)
        around = known[max(0, place - 1) : place + 1]
        best = min(around, key=lambda v: max(v / asked.value, asked.value / v))
        return Quantity(best, asked.dimension)

    def with_pairs(self, *how: How) -> Preferred:
        """The list with two of its parts in series, in parallel, or both, beside the single ones.

        A value that can be made in several ways keeps the one of fewest parts; pairs that leave the range are left
        out. Raises LimitError beyond 100 000 values, NotationError for a series without limits.

        >>> pairs = preferred("E3", "1 kohm", "10 kohm").with_pairs("parallel")
        >>> [entry.text(pairs.dimension) for entry in pairs.entries][:2]
        ['1 kohm', '2.2 kohm || 2.2 kohm = 1.1 kohm']
        """
        if not self.entries:
            raise NotationError(Fault(f"{self.name} has no end", 'give limits: .between("1 kohm", "1 Mohm")'))
        if not how or set(how) - {"series", "parallel"}:
            raise NotationError(Fault("pairs stand in series or in parallel", 'with_pairs("series")'))
        single = [entry for entry in self.entries if entry.how is None]
        if len(how) * len(single) ** 2 // 2 > MOST_VALUES:
            raise LimitError(
                Fault(f"pairs of {len(single)} values are more than {MOST_VALUES}", "narrow the range")
            )
        found = {entry.value: entry for entry in self.entries}
        low, high = self.entries[0].value, self.entries[-1].value
        for k, first in enumerate(single):
            for second in single[k:]:
                a, b = first.value, second.value
                for word in how:
                    value = a + b if word == "series" else a * b / (a + b)
                    if low <= value <= high and value not in found:
                        found[value] = Entry(value, (a, b), word, first.labels + second.labels)
        joined = " or ".join(how)
        entries = tuple(found[value] for value in sorted(found))
        return replace(self, name=f"{self.name} and pairs in {joined}", decade=(), entries=entries)


def preferred(
    series: str, low: str | Fraction | int | None = None, high: str | Fraction | int | None = None
) -> Preferred:
    """The preferred values of IEC 60063, series E3 to E192: all decades, or those from ``low`` to ``high``.

    Limits are text with a unit, or numbers in SI units. Values of E3 to E24 belong to tolerances from above 20 % down
    to 5 %, those of E48, E96 and E192 to 2 %, 1 % and below (IEC 60063:2015, from memory).

    Raises UnknownNameError for a series that the standard has not, NotationError for limits that are no range.

    >>> print(preferred("E24").nearest("4.25 kohm"), preferred("E24").nearest("12.682 kohm"))
    4.3 kohm 13 kohm
    >>> preferred("E6", "1 nF", "1 uF")
    <Preferred: E6, 19 values from 1 nF to 1 uF>
    """
    name = str(series).strip().upper()
    if name not in SERIES:
        close = nearest(name, SERIES)
        hint = f"did you mean {close[0]}?" if close else f"there are {', '.join(SERIES)}"
        raise UnknownNameError(Fault(f"IEC 60063 has no series {str(series)[:20]!r}", hint))
    found = Preferred(name, decade=SERIES[name])
    if low is None and high is None:
        return found
    if low is None or high is None:
        raise NotationError(Fault("a range has two limits", f'preferred("{name}", "1 kohm", "100 kohm")'))
    return found.between(low, high)


def _limit(given: str | Fraction | int, dimension: Dimension | None) -> Quantity:
    if isinstance(given, str):
        return read_quantity(given, dimension)
    if isinstance(given, float):
        given = Fraction(repr(given))
    if isinstance(given, bool) or not isinstance(given, int | Fraction):
        raise NotationError(
            Fault(f"{given!r} is no value", f"write text with its unit ({in_words(dimension or NUMBER)})")
        )
    return Quantity(Fraction(given), dimension or NUMBER)


def _power_of_ten(value: Fraction) -> int:
    """The largest power of ten that is not above the value."""
    power = len(str(value.numerator)) - len(str(value.denominator))
    return power if Fraction(10) ** power <= value else power - 1
