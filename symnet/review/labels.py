"""What stands before a line of a hand derivation and is no part of it: its number, so, hence, from 1 and 2:."""

from __future__ import annotations

import re
from typing import Final

__all__ = ["strip_label"]

# Behind a label something begins; an operator would show that the label was the first thing of the line.
_BEGINS: Final = r"(?=\s*[^\s=*/^|+,):~>])"
_NUMBER: Final = re.compile(
    rf"\s*(?:\((?P<a>\d{{1,6}}[a-z]?)\)(?=\s+[\w(\u221a])|(?P<b>\d{{1,6}}[a-z]?)[.):](?=\s){_BEGINS}"
    rf"|(?:line|eq\.?)\s+\(?(?P<c>\d{{1,6}}[a-z]?)\)?\s*[:.]{_BEGINS})"
)
_WORD: Final = re.compile(
    r"\s*(?:so that|so|hence|therefore|thus|then|and|also|but|because|since|now|finally|that is)\b"
    rf"(?:\s*[:,])?(?=\s){_BEGINS}(?!\s*-\s)"
)
_FROM: Final = re.compile(r"\s*(?:from|by|with|using)\s[\w\s,().]{1,80}:(?=\s)")


def strip_label(line: str) -> tuple[str, int]:
    """The number or letter a line is called by (empty without one), and where its statement begins.

    >>> strip_label("2. so a = b"), strip_label("hence: out = 2*a"), strip_label("from 1 and 2: a = b")
    (('2', 6), ('', 7), ('', 14))
    >>> strip_label("2*a = b"), strip_label("(1) x = in")
    (('', 0), ('1', 4))
    """
    label, at = "", 0
    found = _NUMBER.match(line)
    if found:
        label, at = found["a"] or found["b"] or found["c"], found.end()
    while True:
        more = _WORD.match(line, at) or _FROM.match(line, at)
        if more is None:
            break
        at = more.end()
    while at < len(line) and line[at] == " ":
        at += 1
    return label, at
