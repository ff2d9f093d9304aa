"""What the words and numbers mean, in one table; a brief prints the rows that concern what it shows."""

from __future__ import annotations

from collections.abc import Collection
from typing import Final

from symnet.present.blocks import Table
from symnet.shape.normal import CONVENTIONS

__all__ = ["WORDS", "conventions"]

#: word -> meaning, in the order of printing
WORDS: Final[dict[str, str]] = {
    "H": "the read divided by the drive, every other drive at zero; s in rad/s, parts in ohm, henry, farad",
    "frequency": "f in Hz, w in rad/s, w = 2 pi f; each number says which it is",
    **dict(CONVENTIONS),
    "hidden mode": "a factor with s that cancels between numerator and denominator; never dropped in silence",
    "section": "a complex pair as s^2/w0^2 + s/(Q w0) + 1, a real pole or zero as s/w0 + 1; with symbols, factors over "
    "the rationals only",
    "f3dB": "where |H| is 1/sqrt(2) (-3.0103 dB) of the stated reference; every such frequency is listed",
    "dB": "20 log10 |H|, for H as a ratio of like quantities",
    "distance": "poles: the largest distance of a pole from its place, both sets divided by w0, in per cent of the "
    "pole's magnitude; pass band: the largest difference of |H| in dB, of the group delay in per cent",
    "current": "through a part, positive in the direction in which its chain was written",
    "positivity": "part values are taken to be positive; every condition that needs it says so",
    "tolerance": "a limit to either side of the value, not a standard deviation; no figure above includes it",
}


def conventions(words: Collection[str]) -> Table:
    """The rows for these words, in the order of the whole table; KeyError for a word that it does not hold."""
    for word in words:
        WORDS[word]
    return Table(("word", "meaning"), tuple(row for row in WORDS.items() if row[0] in words))
