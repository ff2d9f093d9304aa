"""From text to a Drawing, or to all the faults of the text in one error.

Each statement is parsed by itself, so that a broken one costs nothing but itself; then the names of all
statements are checked together. Words of a broken statement are taken as known, lest one slip be reported
twice. Whatever the text, nothing but a SymnetError leaves this module.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Iterable
from dataclasses import replace
from typing import TYPE_CHECKING, Any, Final, TypeVar

from symnet.circuit.drafts import Draft, RightSide, all_names, mentioned, value_of
from symnet.circuit.drawing import Drawing
from symnet.circuit.formulas import Formed
from symnet.circuit.lines import Line, logical_lines, single_line
from symnet.circuit.names import MOST_PARTS, check
from symnet.circuit.parts import CurrentLaw, Part, Value, VoltageLaw, dimension_of_class
from symnet.circuit.statements import Statements
from symnet.circuit.writing import default_labels
from symnet.errors import Fault, NotationError, SymnetError
from symnet.expressions import Expression
from symnet.quantities import LEADING_CODE, Dimension, spread_code

if TYPE_CHECKING:
    from lark import Token, Tree

__all__ = ["parse", "read_drawing", "read_expression", "read_reading", "read_value"]

_T = TypeVar("_T")
_STARTS: Final = ("statement", "value", "expression")
_MOST_FAULTS: Final = 100


def parse(line: Line, start: str, grammar: str = "network", starts: tuple[str, ...] = _STARTS) -> Tree[Token]:
    """The tree of one line; NotationError with one fault, in an engineer's words, when it has none."""
    from lark.exceptions import UnexpectedInput

    from symnet.circuit.messages import diagnose
    from symnet.grammar_files import parser

    try:
        return parser(grammar, *starts).parse(line.text, start=start)
    except UnexpectedInput as error:
        raise NotationError(diagnose(error, line, start)) from None


def read_drawing(text: str) -> Drawing:
    """The network that a text describes.

    Raises NotationError with all the faults of the text, in the order of writing, and LimitError for a text
    of more than a million characters.

    >>> read_drawing("in -- R1 -- out -- C1 = 22 nF -- gnd; drive in; read out").nodes
    ('in', 'out')
    """
    _must_be_text(text)
    lines, broken = logical_lines(text)
    draft = Draft()
    faults = [fault for _, fault in broken]
    doubtful = {name for line, _ in broken for name in mentioned(line.text)}
    for line in lines:
        found = _read_line(line, draft)
        if found:
            faults += found
            doubtful |= mentioned(line.text)
        if len(faults) > _MOST_FAULTS or len(draft.parts) > MOST_PARTS:
            break
    net, late = _settled(draft, text, doubtful)
    faults += late
    if len(faults) <= _MOST_FAULTS:
        faults += check(net, doubtful, {name: span for name, *_, span in (*draft.free, *draft.values)})
    faults = sorted(dict.fromkeys(faults), key=_place)
    if len(faults) > _MOST_FAULTS:
        faults[_MOST_FAULTS:] = [Fault(f"reading stopped after {_MOST_FAULTS} faults", "is it a network?")]
    if faults:
        raise NotationError(faults, text=text)
    return net


def _read_line(line: Line, draft: Draft) -> list[Fault]:
    """Add one statement to the draft, or give its faults."""
    statements = Statements(line, own := Draft())
    try:
        statements.build(parse(line, "statement"))
    except SymnetError as error:
        statements.faults.extend(error.faults)
    if not statements.faults:  # half a statement would give rise to faults that are none
        draft.take(own)
    return statements.faults


def _place(fault: Fault) -> tuple[int, int]:
    return (fault.span.start, fault.span.end) if fault.span else (1 << 60, 0)


def _settled(draft: Draft, text: str, doubtful: set[str]) -> tuple[Drawing, list[Fault]]:
    """The network of a draft: laws named, values given the dimension of their names.

    A name whose value is refused joins the ``doubtful`` ones.
    """
    faults: list[Fault] = []
    free: dict[str, Dimension | None] = {}
    for name, dimension, span in draft.free:
        if name in free:
            faults.append(Fault(f"{name} is declared free twice", "once is enough", span))
        free[name] = dimension
    values: dict[str, Value] = {}
    for name, side, span in draft.values:
        if name in values:
            faults.append(Fault(f"{name} has a value already", "give one value only", span, parts=(name,)))
            continue
        try:
            values[name] = value_of(name, side, dimension_of_class(name) or free.get(name))
        except SymnetError as error:
            faults += error.faults
            doubtful.add(name)
    parts = tuple(_labelled(draft))
    drives, reads = tuple(draft.drives), tuple(draft.reads)
    return Drawing(parts, drives, reads, tuple(values.items()), tuple(free.items()), text), faults


def _labelled(draft: Draft) -> Iterable[Part]:
    """The parts, laws without a name of their own called law1, law2, ..."""
    nameless = [part for part in draft.parts if isinstance(part, VoltageLaw | CurrentLaw) and not part.name]
    fresh = iter(default_labels(len(nameless), all_names(draft)) if nameless else ())
    for part in draft.parts:
        if isinstance(part, VoltageLaw | CurrentLaw) and not part.name:
            yield replace(part, name=next(fresh))
        else:
            yield part


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
    can stand. ``dimension`` is that of a symbol; that of a part follows from its name.

    >>> read_value("u47 ±5%", "C1").tolerance
    Fraction(1, 20)
    """
    dimension = dimension_of_class(name) or dimension

    def made(_: Statements, side: Any) -> Value:
        return value_of(name, side, dimension)

    _must_be_text(text)
    code = re.match(r"\w+(?=\s*(?:$|±|\+\s*/?\s*-\s*\d))", text.strip())
    if code is None or not LEADING_CODE.fullmatch(code[0]):
        return _alone(text, "value", made)
    try:  # as a number with prefix, so that dimension and tolerance are treated as those of any other value
        return _alone(spread_code(code[0]) + text.strip()[code.end() :], "value", made)
    except NotationError as error:
        raise NotationError([replace(fault, span=None) for fault in error.faults], text=text) from None


def _alone(text: str, start: str, made: Callable[[Statements, Any], _T]) -> _T:
    _must_be_text(text)
    line = single_line(text)
    reader = Statements(line, Draft())
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


def _must_be_text(text: object) -> None:
    if not isinstance(text, str):
        hint = "write it as in symnet.network('in -- R1 -- out')"
        raise NotationError(Fault(f"a text is needed, not {type(text).__name__}", hint))
