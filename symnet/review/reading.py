"""From text to a Working, or to all the faults of the text in one error.

Each line is parsed by itself (grammar/working.lark), as in the network notation, so that a broken one costs
nothing but itself. The same characters as there read as their ASCII forms, and small digits below the line
(w\N{SUBSCRIPT ZERO}) as digits.
"""

from __future__ import annotations

from typing import Final

from symnet.circuit.lines import Line as Logical
from symnet.circuit.lines import logical_lines
from symnet.circuit.reading import must_be_text, parse, raise_all
from symnet.errors import LimitError, SymnetError
from symnet.review.labels import strip_label
from symnet.review.messages import DIAGNOSES
from symnet.review.statements import Statements
from symnet.review.working import Line, Working

__all__ = ["MOST_LINES", "read_working"]

MOST_LINES: Final = 1000
_MOST_FAULTS: Final = 100

_SIGNS: Final = str.maketrans(
    {chr(0x2080 + digit): str(digit) for digit in range(10)} | {"\N{COMBINING OVERLINE}": " "}
)


def read_working(text: str) -> Working:
    """The lines of a hand derivation.

    Raises NotationError with all the faults of the text, in the order of writing, and LimitError for a text of
    more than a million characters or a thousand lines.

    >>> [line.label for line in read_working("1. node x: (x - in)/R1 + s*C1*x = 0; so x = in/(1 + s*R1*C1)")]
    ['1', '2']
    """
    must_be_text(text, "write it as in sn.verify(network, 'out/in = 1/(1 + s*R1*C1)')")
    lines, broken = logical_lines(text.translate(_SIGNS), "is it a derivation?")
    faults = [fault for _, fault in broken]
    if len(lines) > MOST_LINES:
        raise LimitError(f"the working has {len(lines)} lines; at most {MOST_LINES} are read")
    found: list[Line] = []
    for line in lines:
        number = len(found) + 1
        label, at = strip_label(line.text)
        bare = Logical(line.text[at:], line.start + at)
        statements = Statements(bare)
        try:
            statement = statements.build(parse(bare, "line", "working", ("line",), DIAGNOSES))
        except SymnetError as error:
            statements.faults.extend(error.faults)
        if statements.faults:
            faults += statements.faults
            if len(faults) > _MOST_FAULTS:
                break
            continue
        end = bare.start + len(bare.text)
        found.append(
            Line(
                number, label or str(number), text[bare.start : end], statement, bare.span(0, len(bare.text))
            )
        )
    raise_all(faults, text, "is it a derivation?")
    return Working(tuple(found), text)
