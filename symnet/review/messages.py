"""What to say when a line of a hand derivation cannot be parsed.

The slips it shares with the network notation are told apart there (:mod:`symnet.circuit.messages`).
"""

from __future__ import annotations

from typing import Final

from symnet.circuit.clues import Clue
from symnet.circuit.messages import DIAGNOSES as SHARED
from symnet.circuit.messages import Diagnoses, Said

__all__ = ["DIAGNOSES"]

_USAGE: Final = {
    "let": "write: let g = 1 + s*R1*C1",
    "given": "write: given R2 = R1, C2 = 2*C1",
    "node": "write: node x: (x - in)/R1 + s*C1*x = 0",
}


def _sentence(clue: Clue) -> Said | None:
    first = clue.words[0].text if clue.words else ""
    if first not in _USAGE or clue.index == 0:
        return None
    if clue.index <= 2 or (first != "node" and clue.text() != "=" and clue.found is None):
        return Said(f"this line does not say what its {first} is", _USAGE[first])
    return None


def _arrow(clue: Clue) -> Said | None:
    if "->" not in {word.text for word in clue.words} and "\u2192" not in {word.text for word in clue.words}:
        return None
    if clue.found is None or clue.text() in {"->", "\u2192"}:
        return Said("a limit says of what and for what", "write: out/in -> -R2/R1 as s -> 0")
    return None


def _about(clue: Clue) -> Said | None:
    about = any(
        word.text in {"\u2248", "\u2243"} or (word.text == "~" and clue.words[k + 1 : k + 2])
        for k, word in enumerate(clue.words)
    )
    if not about or clue.text() not in {"~", "=", "\u2248", "\u2243", "."}:
        return None
    return Said("an approximation has two sides", "write: left ~= right for f = 10 Hz .. 1 kHz within 1 %")


def _root(clue: Clue) -> Said | None:
    if clue.text() == "\N{SQUARE ROOT}" or (clue.text() == "sqrt" and clue.text(1) != "("):
        return Said("a root is written with parentheses", "write sqrt(R1*R2)")
    return None


def _relation(clue: Clue) -> Said | None:
    if clue.text() in {"<", ">", "\u2264", "\u2265", "\u2260", "!"}:
        return Said("a line is an equation, a limit, an approximation or a claim", "write one =")
    return None


def _alone(clue: Clue) -> Said | None:
    if clue.found is None and clue.words and not any(word.text in {"=", ":", "is"} for word in clue.words):
        return Said("this line has no =", "write an equation: out/in = ...; node x: ... needs none", -1)
    return None


#: In order: the first that recognises the slip speaks.
DIAGNOSES: Final[Diagnoses] = (
    _sentence,
    _arrow,
    _about,
    _root,
    _relation,
    *SHARED[:-1],
    _alone,
    SHARED[-1],
)
