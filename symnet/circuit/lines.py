"""From a typed or pasted text to logical lines: one statement each, every character at its old place.

A logical line ends at a newline or a semicolon, but not while a parenthesis is open. Comments are blanked and
foreign characters are replaced one for one, so that character k of a line is always character ``start + k`` of
the text and every fault can be drawn where it was typed. One pass matches the parentheses, a second one cuts;
both are linear. A parenthesis that nothing closes ends with its own line, so that it cannot swallow the rest.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import Final

from symnet.errors import Fault, LimitError, Span

__all__ = [
    "MOST_CHARACTERS",
    "MOST_DEPTH",
    "SENTENCE_WORDS",
    "Line",
    "check_length",
    "logical_lines",
    "single_line",
]

MOST_CHARACTERS: Final = 1_000_000
MOST_DEPTH: Final = 100  # parentheses inside one another

#: Words that begin a statement, those of later releases among them.
SENTENCE_WORDS: Final = (
    *("drive", "read", "hold", "push", "free", "notation"),
    *("define", "done", "couple", "let", "node"),
)

_LONG_DASH: Final = "\N{EM DASH}"
_EN_DASH: Final = "\N{EN DASH}"

_SPACES: Final = (
    "\t\v\f\N{NO-BREAK SPACE}\N{NARROW NO-BREAK SPACE}\N{FIGURE SPACE}\N{THIN SPACE}\N{HAIR SPACE}\N{EN SPACE}"
    "\N{EM SPACE}\N{THREE-PER-EM SPACE}\N{FOUR-PER-EM SPACE}\N{SIX-PER-EM SPACE}\N{PUNCTUATION SPACE}"
    "\N{MEDIUM MATHEMATICAL SPACE}\N{IDEOGRAPHIC SPACE}\N{ZERO WIDTH SPACE}\N{WORD JOINER}"
    "\N{ZERO WIDTH NO-BREAK SPACE}"
)
_PASTED: Final = str.maketrans(
    {
        **dict.fromkeys(_SPACES, " "),
        **dict.fromkeys("\r\N{NEXT LINE}\N{LINE SEPARATOR}\N{PARAGRAPH SEPARATOR}", "\n"),
        **dict.fromkeys("\N{MINUS SIGN}\N{HYPHEN}\N{NON-BREAKING HYPHEN}", "-"),
        **dict.fromkeys("\N{FRACTION SLASH}\N{DIVISION SLASH}\N{DIVISION SIGN}", "/"),
        "\N{ASTERISK OPERATOR}": "*",
        "\N{HORIZONTAL BAR}": _LONG_DASH,
    }
)

_COMMENT: Final = re.compile(r"#[^\n]*")
_STRUCTURE: Final = re.compile(r"[()\n;]")
# What a line that continues an open parenthesis never looks like: here a statement begins, so the parenthesis
# was forgotten. Arguments such as ``minus=m`` may begin a continued line; values of parts may not.
_BEGINS_ANEW: Final = re.compile(
    rf" *(?:(?:{'|'.join(SENTENCE_WORDS)})\b *[^\s=,)]|[RLCZY]\w* *=|\w+ *:|[^\n;()]*(?:--|{_LONG_DASH}))"
)
_SECTION: Final = re.compile(r" *define\b")
_FIRST_WORD: Final = re.compile(r" *(\w*)")


@dataclass(frozen=True, slots=True)
class Line:
    """One logical line; its first character is character ``start`` of the text."""

    text: str
    start: int = 0

    def span(self, start: int, end: int) -> Span:
        """The place in the whole text of characters ``start`` to ``end`` of this line."""
        return Span(self.start + start, self.start + end)


def check_length(text: str, hint: str = "is it a network?") -> None:
    """Raise LimitError for a text that is longer than symnet reads."""
    if len(text) > MOST_CHARACTERS:
        raise LimitError(
            Fault(f"the text has {len(text)} characters; at most {MOST_CHARACTERS} are read", hint)
        )


def single_line(text: str) -> Line:
    """The text as one line, for a value or an expression that stands by itself."""
    check_length(text)
    return Line(_dashes(_COMMENT.sub(_blank, text.translate(_PASTED)).replace("\n", " "), formula=True))


def logical_lines(text: str, hint: str = "is it a network?") -> tuple[list[Line], list[tuple[Line, Fault]]]:
    r"""The statements of a text, and those that no parser need see, each with its fault.

    >>> [line.text for line in logical_lines("a -- R1 -- b  # first\nZ1 = (R +\n 2 ohm); drive a")[0]]
    ['a -- R1 -- b', 'Z1 = (R +  2 ohm)', 'drive a']
    """
    check_length(text, hint)
    text = _COMMENT.sub(_blank, text.translate(_PASTED))
    closed = _closed(text)
    lines: list[Line] = []
    broken: list[tuple[Line, Fault]] = []
    start = depth = 0
    fault: Fault | None = None

    def cut(end: int) -> None:
        piece = text[start:end]
        stripped = piece.strip()
        if stripped:
            offset = start + len(piece) - len(piece.lstrip())
            line = Line(_dashes(stripped.replace("\n", " ")), offset)
            if fault is None:
                lines.append(line)
            else:
                broken.append((line, fault))

    for found in _STRUCTURE.finditer(text):
        at = found.start()
        match found[0]:
            case "(" if at in closed:
                depth += 1
                if depth == MOST_DEPTH + 1:
                    message = f"more than {MOST_DEPTH} parentheses inside one another"
                    fault = fault or Fault(message, "give a part of it a name of its own", Span(at, at + 1))
            case "(":
                fault = fault or Fault(
                    "this parenthesis is not closed", "add the missing )", Span(at, at + 1)
                )
            case ")":
                depth -= at in closed
            case _ if not depth:
                cut(at)
                start, fault = at + 1, None
    cut(len(text))
    return lines, broken


def _closed(text: str) -> set[int]:
    """The places of all parentheses that have a partner within their statement."""
    closed: set[int] = set()
    open_now: list[int] = []
    # A section of a later release writes its terminals and values in one pair of parentheses, parted by ;
    section = _SECTION.match(text) is not None
    for found in _STRUCTURE.finditer(text):
        at = found.start()
        match found[0]:
            case "(":
                open_now.append(at)
            case ")":
                if open_now:
                    closed |= {open_now.pop(), at}
            case ";" if section and open_now:
                pass
            case "\n" if open_now and not _BEGINS_ANEW.match(text, at + 1):
                pass
            case _:
                open_now.clear()
                section = _SECTION.match(text, at + 1) is not None
    return closed


def _blank(comment: re.Match[str]) -> str:
    return " " * len(comment[0])


def _dashes(line: str, *, formula: bool = False) -> str:
    """Decide what an en dash is: the dash of a chain or a minus sign.

    A sentence and what stands right of an equals sign hold formulas; a chain shows its dashes before any
    equals sign. Word processors also turn ``+/-`` into ``+/–``.
    """
    if _EN_DASH not in line and _LONG_DASH not in line:
        return line
    line = re.sub(f"[{_EN_DASH}{_LONG_DASH}]{{2}}", "--", line)
    line = re.sub(rf"(\+/?){_EN_DASH}", r"\1-", line)
    first = _FIRST_WORD.match(line)
    head, _, _ = line.partition("=")
    chain = any(dash in head for dash in ("--", _LONG_DASH, _EN_DASH)) and not formula
    if chain and not (first and first[1] in SENTENCE_WORDS):
        return line.replace(_EN_DASH, _LONG_DASH)
    return line.replace(_EN_DASH, "-")
