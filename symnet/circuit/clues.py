"""The words of a line around the place where parsing stopped: what a diagnosis looks at."""

from __future__ import annotations

import re
from dataclasses import dataclass, replace
from typing import Final

from symnet.circuit.lines import SENTENCE_WORDS
from symnet.quantities import read_unit

__all__ = ["Clue", "Word", "clue_at", "words_of"]

_WORD: Final = re.compile(
    r"(?P<number>(?:\d+(?:\.\d*)?|\.\d+)(?:[eE][+-]?\d+)?)|(?P<word>[^\W\d_²³](?:(?![²³])\w)*)|(?P<sign>--|\u2014|\|\||\*\*|==|\+/-|->|.)",
    re.DOTALL,
)
_LONGEST_SHOWN: Final = 40  # characters of a word inside a message


@dataclass(frozen=True, slots=True)
class Word:
    """A number, a word or a sign, where it stands in its line."""

    text: str
    kind: str
    start: int
    end: int


@dataclass(frozen=True, slots=True)
class Clue:
    """The place where parsing stopped: the words before it, the word there (None at the end), those after it."""

    kind: str
    words: tuple[Word, ...]
    index: int

    @property
    def found(self) -> Word | None:
        """The word that does not fit; None when the line ended too early."""
        return self.words[self.index] if self.index < len(self.words) else None

    def near(self, step: int) -> Word | None:
        """The word so many places further on (or back)."""
        place = self.index + step
        return self.words[place] if 0 <= place < len(self.words) else None

    def text(self, step: int = 0) -> str:
        """The text of the word so many places further on, empty where there is none."""
        word = self.near(step)
        return word.text if word else ""

    def is_kind(self, step: int, *kinds: str) -> bool:
        """Whether the word there is of one of these kinds."""
        word = self.near(step)
        return word is not None and word.kind in kinds

    def quantity(self) -> str:
        """The number found, with the unit that follows it."""
        unit = f" {self.text(1)}" if self.is_kind(1, "word") and read_unit(self.text(1)) else ""
        return self.text() + unit

    @property
    def after_unit(self) -> bool:
        """Whether the word before is one that follows a number, as a unit does."""
        return self.is_kind(-1, "word") and self.is_kind(-2, "number")


def words_of(text: str) -> tuple[Word, ...]:
    """The words, numbers and signs of a line, for messages only."""
    found = _WORD.finditer(text)
    return tuple(Word(m[0], m.lastgroup or "sign", *m.span()) for m in found if not m[0].isspace())


def _short(word: Word) -> Word:
    return (
        word if len(word.text) <= _LONGEST_SHOWN else replace(word, text=word.text[:_LONGEST_SHOWN] + "...")
    )


def clue_at(text: str, at: int, start: str) -> Clue:
    """The clue for a parser that began with the rule ``start`` and stopped at character ``at``."""
    words = tuple(_short(word) for word in words_of(text))
    index = next((k for k, word in enumerate(words) if word.end > at), len(words))
    return Clue(_kind(words) if start == "statement" else start, words, index)


def _kind(words: tuple[Word, ...]) -> str:
    """What kind of statement the writer had in mind."""
    if not words:
        return "other"
    first = words[0].text
    if first in SENTENCE_WORDS and not (len(words) > 1 and words[1].text in {"--", "="}):
        return first
    device = len(words) > 1 and words[1].text == ":"
    for word in words:
        if word.text in {"--", "\N{EM DASH}", "->"}:
            return "chain"
        if word.text in {"=", "=="}:
            return "device" if device else "assignment"
    return "device" if device else "other"
