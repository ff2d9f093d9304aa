"""Text to exact value with dimension: decimal numbers, prefixes, units, codes of IEC 60062.

Values are :class:`fractions.Fraction`, never floats: the text ``4.7 nF`` is 47/10^10 farad and nothing near it.
"""

from __future__ import annotations

import re
from fractions import Fraction
from typing import Final

from symnet.errors import DimensionError, Fault, LimitError, NotationError, Span
from symnet.quantities.dimension import (
    AMPERE,
    FARAD,
    HENRY,
    HERTZ,
    NUMBER,
    OHM,
    SECOND,
    SIEMENS,
    VOLT,
    Dimension,
    in_words,
)
from symnet.quantities.engineering import MOST_DIGITS, Quantity

__all__ = [
    "CODE",
    "LEADING_CODE",
    "MOST_EXPONENT",
    "PREFIXES",
    "TWO_PI",
    "UNITS",
    "read_code",
    "read_number",
    "read_quantity",
    "read_unit",
    "spread_code",
    "unit_hint",
]

MOST_EXPONENT: Final = 99

#: 2 pi to 40 digits: what a frequency in Hz is multiplied by where exact arithmetic needs an angular one.
TWO_PI: Final = Fraction("6.283185307179586476925286766559005768394")

#: Units that may follow a number, without prefix.
UNITS: Final[dict[str, Dimension]] = {
    **dict.fromkeys(("ohm", "Ohm", "ohms", "Ohms", "\N{OHM SIGN}", "\N{GREEK CAPITAL LETTER OMEGA}"), OHM),
    "F": FARAD,
    "H": HENRY,
    "S": SIEMENS,
    "Hz": HERTZ,
    "s": SECOND,
    "V": VOLT,
    "A": AMPERE,
    "rad/s": HERTZ,
    "V/V": NUMBER,
    "A/A": NUMBER,
    "V/A": OHM,
    "A/V": SIEMENS,
}

PREFIXES: Final[dict[str, int]] = {
    "f": -15,
    "p": -12,
    "n": -9,
    "u": -6,
    "\N{MICRO SIGN}": -6,
    "\N{GREEK SMALL LETTER MU}": -6,
    "m": -3,
    "k": 3,
    "K": 3,
    "M": 6,
    "G": 9,
    "T": 12,
}

_NUMBER: Final = re.compile(
    r"(?P<sign>[+-]?)(?P<digits>\d+(?:\.\d*)?|\.\d+)(?:[eE](?P<exponent>[+-]?\d+))?", re.ASCII
)


def read_number(text: str, span: Span | None = None) -> Fraction:
    """The exact value of decimal text such as ``-4.7e-9``; a power of ten may follow an ``e``.

    Raises NotationError when it is no number, LimitError when it is longer or larger than symnet takes.

    >>> read_number("4.7e-9")
    Fraction(47, 10000000000)
    """
    found = _NUMBER.fullmatch(text)
    if found is None:
        raise NotationError(Fault(f"{_shown(text)} is not a number", "write 4700, 4.7e3 or 4.7 k", span))
    if len(found["digits"]) > MOST_DIGITS:
        raise LimitError(Fault(f"a number has at most {MOST_DIGITS} digits", "give fewer digits", span))
    exponent = found["exponent"] or "0"
    if len(exponent) > 6 or abs(int(exponent)) > MOST_EXPONENT:
        limit = f"the power of ten of a number lies between -{MOST_EXPONENT} and {MOST_EXPONENT}"
        raise LimitError(Fault(limit, "use a unit with a prefix, such as 10 pF", span))
    value = Fraction(found["digits"]) * Fraction(10) ** int(exponent)
    return -value if found["sign"] == "-" else value


def read_unit(text: str) -> tuple[Fraction, Dimension] | None:
    """The factor and dimension of a unit with or without prefix, or of a prefix alone; None if there is none.

    >>> read_unit("nF")
    (Fraction(1, 1000000000), Dimension(v=-1, a=1, t=1))
    """
    if text in UNITS:
        return Fraction(1), UNITS[text]
    power = PREFIXES.get(text[:1])
    if power is None:
        return None
    rest = text[1:]
    dimension = UNITS.get(rest, NUMBER if not rest else None)
    # K is written for kilo with resistors; before other units it is too easily taken for kelvin.
    if dimension is None or (text[0] == "K" and dimension not in {OHM, NUMBER}):
        return None
    return Fraction(10) ** power, dimension


_MISSPELT: Final[dict[str, str]] = {
    **dict.fromkeys(("meg", "Meg", "MEG", "mega", "Mega"), "M"),
    **dict.fromkeys(("kilo", "Kilo"), "k"),
    **dict.fromkeys(("mic", "micro", "mu"), "u"),
    **dict.fromkeys(("Farad", "farad", "farads", "Farads"), "F"),
    **dict.fromkeys(("Henry", "henry", "henries", "Henries"), "H"),
    **dict.fromkeys(("mho", "siemens", "Siemens"), "S"),
    **dict.fromkeys(("sec", "second", "seconds"), "s"),
    **dict.fromkeys(("volt", "Volt", "volts"), "V"),
    **dict.fromkeys(("amp", "amps", "ampere"), "A"),
}


def unit_hint(text: str) -> str:
    """The unit that was probably meant by this word, or an empty text.

    >>> unit_hint("nf"), unit_hint("Megohm"), unit_hint("R1")
    ('nF', 'Mohm', '')
    """
    if text in _MISSPELT:
        return _MISSPELT[text]
    for head, prefix in _MISSPELT.items():
        rest = text.removeprefix(head)
        if rest != text and len(prefix) == 1 and prefix in PREFIXES and rest.lower() in {"ohm", "ohms", "hz"}:
            return prefix + ("Hz" if rest.lower() == "hz" else "ohm")
    if text[:1] in PREFIXES and text[1:] in _MISSPELT:
        return text[:1] + _MISSPELT[text[1:]]
    for prefix in ("", *PREFIXES):
        for unit in UNITS:
            # Only the case differs; a prefix keeps its case where m and M would both do.
            if (prefix + unit).lower() == text.lower() and read_unit(prefix + unit) is not None:
                if text[:1] in PREFIXES and prefix and prefix != text[:1] and text[0] != "K":
                    continue
                return prefix + unit
    return ""


# -- codes of IEC 60062 ---------------------------------------------------------------------------------------

_LETTERS: Final[dict[str, tuple[int, Dimension | None]]] = {
    "R": (0, OHM),
    "K": (3, OHM),
    "F": (0, FARAD),
    "U": (-6, None),  # common on drawings for micro, where no mu can be typed
    **{letter: (power, None) for letter, power in PREFIXES.items() if letter not in "Kf"},
}
_CODE_LETTERS: Final = "".join(_LETTERS)
#: A code such as 4K7, 2R2 or 47R: the letter stands for the decimal point and for the prefix (IEC 60062).
CODE: Final = re.compile(rf"(\d+)([{_CODE_LETTERS}])(\d*)", re.ASCII)
#: A code that begins with its letter: u47, R47, M47.
LEADING_CODE: Final = re.compile(rf"()([{_CODE_LETTERS}])(\d+)", re.ASCII)


def read_code(text: str, dimension: Dimension | None, *, leading: bool = False) -> Quantity | None:
    """The value of an IEC 60062 code for a part of this dimension; None when the text is no code.

    A letter that belongs to one kind of part (R and K to resistors, F to capacitors) gives its own dimension,
    so that ``4R7`` for a capacitor can be seen to be wrong; other letters take the dimension given, or are
    plain numbers when it is None.

    >>> print(read_code("4K7", OHM), read_code("4u7", FARAD), read_code("u47", FARAD, leading=True))
    4.7 kohm 4.7 uF 470 nF
    """
    found = CODE.fullmatch(text) or (LEADING_CODE.fullmatch(text) if leading else None)
    if found is None:
        return None
    power, own = _LETTERS[found[2]]
    if found[2] == "K" and dimension in {None, NUMBER}:
        own = NUMBER
    value = read_number(f"{found[1] or '0'}.{found[3] or '0'}") * Fraction(10) ** power
    return Quantity(value, own or dimension or NUMBER)


def spread_code(text: str) -> str:
    """The code as a number with prefix or unit.

    >>> spread_code("4K7"), spread_code("2R2"), spread_code("u47")
    ('4.7 K', '2.2 ohm', '0.47 u')
    """
    found = CODE.fullmatch(text) or LEADING_CODE.fullmatch(text)
    if found is None:
        return text
    unit = {"R": "ohm", "F": "F", "U": "u"}.get(found[2], found[2])
    return f"{found[1] or '0'}{'.' * bool(found[3])}{found[3]} {unit}"


def read_quantity(text: str, dimension: Dimension | None = None) -> Quantity:
    """The exact value of one quantity such as ``20 kHz``, ``4k7`` or ``600 ohm``.

    With a dimension given, a bare number takes it and any other dimension is refused with DimensionError.
    NotationError when the text is no quantity.

    >>> read_quantity("20 kHz").value, read_quantity("4k7", OHM).value
    (Fraction(20000, 1), Fraction(4700, 1))
    """
    text = text.strip().replace("\N{MINUS SIGN}", "-").replace("\N{NO-BREAK SPACE}", " ")
    code = read_code(text, dimension)
    if code is None:
        number = _NUMBER.match(text)
        if number is None:
            raise NotationError(
                Fault(f"{_shown(text)} is not a quantity", "write a number and a unit: 4.7 kohm")
            )
        unit = text[number.end() :].strip()
        known = read_unit(unit) if unit else (Fraction(1), NUMBER)
        if known is None:
            meant = unit_hint(unit)
            hint = f"did you mean {meant}?" if meant else "units: ohm, F, H, S, Hz, s, V, A, rad/s"
            raise NotationError(Fault(f"{_shown(unit)} is not a unit", hint))
        code = Quantity(read_number(number[0]) * known[0], known[1])
    if dimension is None or dimension == code.dimension:
        return code
    if code.dimension == NUMBER:
        return Quantity(code.value, dimension)
    raise DimensionError(Fault(f"{text} is in {code.dimension}; {in_words(dimension)} is needed here"))


def _shown(text: str) -> str:
    """A foreign text inside a message: printable and short."""
    text = "".join(c if c.isprintable() else "?" for c in text[:41])
    return repr(text if len(text) <= 40 else text[:37] + "...")
