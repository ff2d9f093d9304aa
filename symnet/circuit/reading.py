"""From text to a Drawing, or to all the faults of the text in one error.

Each statement is parsed by itself, so that a broken one costs nothing but itself; then the names of all
statements are checked together. Words of a broken statement are taken as known, lest one slip be reported
twice. Whatever the text, nothing but a SymnetError leaves this module.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Iterable
from dataclasses import dataclass, replace
from fractions import Fraction
from functools import lru_cache
from typing import TYPE_CHECKING, Any, Final, TypeVar

from symnet.circuit.definitions import Definition, Definitions
from symnet.circuit.devices import device_source
from symnet.circuit.drafts import Draft, Header, RightSide, mentioned, value_of
from symnet.circuit.drawing import Drawing
from symnet.circuit.formulas import Formed
from symnet.circuit.lines import Line, logical_lines, single_line
from symnet.circuit.names import MOST_PARTS, check
from symnet.circuit.parts import Value, dimension_of_class
from symnet.circuit.sections import Section
from symnet.circuit.statements import Statements
from symnet.errors import Fault, NotationError, SymnetError
from symnet.expressions import Expression
from symnet.quantities import LEADING_CODE, TWO_PI, Dimension, spread_code

if TYPE_CHECKING:
    from lark import Token, Tree

    from symnet.circuit.messages import Diagnoses

__all__ = [
    "must_be_text",
    "parse",
    "raise_all",
    "read_drawing",
    "read_expression",
    "read_reading",
    "read_sections",
    "read_value",
]

_T = TypeVar("_T")
_STARTS: Final = ("statement", "value", "expression")
_MOST_FAULTS: Final = 100


def parse(
    line: Line,
    start: str,
    grammar: str = "network",
    starts: tuple[str, ...] = _STARTS,
    diagnoses: Diagnoses | None = None,
) -> Tree[Token]:
    """The tree of one line; NotationError with one fault, in an engineer's words, when it has none."""
    from lark.exceptions import UnexpectedInput

    from symnet.circuit.messages import DIAGNOSES, diagnose
    from symnet.grammar_files import parser

    try:
        return parser(grammar, *starts).parse(line.text, start=start)
    except UnexpectedInput as error:
        raise NotationError(diagnose(error, line, start, diagnoses or DIAGNOSES)) from None


def read_drawing(text: str) -> Drawing:
    """The network that a text describes.

    Raises NotationError with all the faults of the text, in the order of writing, and LimitError for a text
    of more than a million characters.

    >>> read_drawing("in -- R1 -- out -- C1 = 22 nF -- gnd; drive in; read out").nodes
    ('in', 'out')
    """
    must_be_text(text)
    lines, broken = logical_lines(text)
    main, definitions = _gathered(lines, broken)
    known = Definitions(definitions, shipped_section)
    known.doubtful |= main.doubtful
    known.make_all()
    net = known.drawing(main.draft, text)
    faults = main.faults + known.faults
    if len(faults) <= _MOST_FAULTS:
        places = {name: span for name, *_, span in (*main.draft.free, *main.draft.values)}
        faults += check(net, known.doubtful, places)
    raise_all(faults, text)
    return net


def read_sections(text: str, origin: str = "") -> dict[str, Section]:
    """The sections that a text of definitions holds; NotationError with all its faults."""
    lines, broken = logical_lines(text)
    main, definitions = _gathered(lines, broken)
    known = Definitions(definitions, shipped_section)
    made = known.make_all()
    raise_all(main.faults + known.faults, text)
    return {name: replace(section, origin=origin) for name, section in made.items()}


@lru_cache(maxsize=64)
def shipped_section(kind: str, given: frozenset[str]) -> Section | None:
    """The section that ships with symnet under this name, in the form that these arguments choose."""
    found = device_source(kind, given)
    return read_sections(found[0], origin=found[1])[kind] if found is not None else None


@dataclass(slots=True)
class _Gathered:
    """The statements outside of all definitions."""

    draft: Draft
    faults: list[Fault]
    doubtful: set[str]


def _gathered(
    lines: Iterable[Line], broken: Iterable[tuple[Line, Fault]]
) -> tuple[_Gathered, list[Definition]]:
    """All statements, each read by itself, those between ``define`` and ``done`` apart from the others."""
    main = _Gathered(Draft(), [], set())
    for line, fault in broken:
        main.faults.append(fault)
        main.doubtful |= mentioned(line.text)
    definitions: list[Definition] = []
    inside: Definition | None = None
    for line in lines:
        own, faults = _read_line(line)
        if own.header is not None or (faults and line.text.startswith("define ")):
            if inside is not None:
                hint = "end the one before with done; a section may place others, which are defined beside it"
                fault = Fault("a definition stands inside another", hint, line.span(0, len(line.text)))
                inside.faults.append(fault)
            inside = Definition(own.header or Header("", (), (), line.span(0, 6)), Draft(), faults)
            definitions.append(inside)
        elif own.is_done:
            if inside is None:
                hint = "a section begins with define name(in, out)"
                main.faults.append(Fault("done ends a section and none is open", hint, line.span(0, 4)))
            inside = None
        else:
            place = inside or main
            if inside is not None and (own.drives or own.reads):
                hint = "drive and read belong to the network that places it"
                whole = line.span(0, len(line.text))
                faults.append(Fault("a section is neither driven nor read by itself", hint, whole))
            if not faults:  # half a statement would give rise to faults that are none
                place.draft.take(own)
            place.faults += faults
        if faults:
            (inside or main).doubtful.update(mentioned(line.text))
        if len(main.faults) > _MOST_FAULTS or len(main.draft.parts) > MOST_PARTS:
            break
    if inside is not None:
        hint = "end it with the word done on a line of its own"
        inside.faults.append(Fault("this definition has no end", hint, inside.header.span))
    return main, definitions


def _read_line(line: Line) -> tuple[Draft, list[Fault]]:
    """One statement, and what is wrong with it."""
    statements = Statements(line, own := Draft())
    try:
        statements.build(parse(line, "statement"))
    except SymnetError as error:
        statements.faults.extend(error.faults)
    return own, statements.faults


def raise_all(faults: Iterable[Fault], text: str, hint: str = "is it a network?") -> None:
    """Raise NotationError with these faults in the order of writing, unless there is none."""
    found = sorted(dict.fromkeys(faults), key=_place)
    if len(found) > _MOST_FAULTS:
        found[_MOST_FAULTS:] = [Fault(f"reading stopped after {_MOST_FAULTS} faults", hint)]
    if found:
        raise NotationError(found, text=text)


def _place(fault: Fault) -> tuple[int, int]:
    return (fault.span.start, fault.span.end) if fault.span else (1 << 60, 0)


def read_expression(text: str) -> Expression:
    """One expression, names left as they are.

    >>> from symnet.circuit.writing import write_expression
    >>> write_expression(read_expression("2*R1 || R2"))
    '2*(R1 || R2)'
    """

    def made(reader: Statements, formed: Any) -> Expression:
        return reader.whole(formed).expression

    return _alone(text, "expression", made)


def read_reading(text: str) -> Expression:
    """What ``read ...`` names: an expression, a node or a pair of nodes, numbers of nodes too.

    >>> from symnet.circuit.writing import write_expression
    >>> write_expression(read_reading("3 - 1"))
    'v_3 - v_1'
    """

    def made(reader: Statements, formed: Any) -> Expression:
        return reader.reading(formed)

    return _alone(text, "expression", made)


def read_value(text: str, name: str, dimension: Dimension | None = None) -> Value:
    """A whole right-hand side for ``name``: a quantity with or without tolerance, a code, a tie.

    Codes of IEC 60062 may begin with their letter here (``u47``, ``R47``, ``M47``), since nothing but a value
    can stand. ``dimension`` is that of a symbol; that of a part follows from its name. The properties of a device
    (``U1.gbw``) may be given in Hz, which stands for the angular frequency 2 pi times as large.

    >>> read_value("u47 ±5%", "C1").tolerance
    Fraction(1, 20)
    """
    dimension = dimension_of_class(name) or dimension

    def made(_: Statements, side: Any) -> Value:
        return value_of(name, side, dimension)

    must_be_text(text)
    code = re.match(r"\w+(?=\s*(?:$|±|\+\s*/?\s*-\s*\d))", text.strip())
    if code is None or not LEADING_CODE.fullmatch(code[0]):
        return _alone(text, "value", made, TWO_PI if "." in name else None)
    try:  # as a number with prefix, so that dimension and tolerance are treated as those of any other value
        return _alone(spread_code(code[0]) + text.strip()[code.end() :], "value", made)
    except NotationError as error:
        raise NotationError([replace(fault, span=None) for fault in error.faults], text=text) from None


def _alone(
    text: str, start: str, made: Callable[[Statements, Any], _T], in_hertz: Fraction | None = None
) -> _T:
    must_be_text(text)
    line = single_line(text)
    reader = Statements(line, Draft())
    reader.in_hertz = in_hertz
    try:
        built: Formed | RightSide = reader.build(parse(line, start))
        if isinstance(built, Formed):
            reader.must_not_be_code(built)
        result = made(reader, built)
    except SymnetError as error:
        raise NotationError(sorted([*reader.faults, *error.faults], key=_place), text=text) from None
    if reader.faults:
        raise NotationError(sorted(reader.faults, key=_place), text=text)
    return result


def must_be_text(text: object, hint: str = "write it as in symnet.network('in -- R1 -- out')") -> None:
    """Refuse what is no text, with an example of what is."""
    if not isinstance(text, str):
        raise NotationError(Fault(f"a text is needed, not {type(text).__name__}", hint))
