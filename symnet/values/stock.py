"""The user's own stock as lists to choose from: a CSV file with a column of values, and a name beside each.

The file is data and stays data: it is read up to a stated size, as UTF-8, cell by cell; a value is a quantity of the
notation and nothing else, so that formulas of a spreadsheet, control characters and numbers of a million digits are
refused, each with line, column and caret. The first line names the columns; comma, semicolon or tab parts them, and a
cell may stand in double quotes.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Final

from symnet.circuit.parts import CLASS_LETTERS
from symnet.errors import Fault, LimitError, NotationError, Span, SymnetError
from symnet.quantities import CODE, NUMBER, OHM, Dimension, read_quantity
from symnet.values.preferred import Entry, Preferred

__all__ = ["load_stock", "read_stock"]

_MOST_BYTES: Final = 2_000_000
_MOST_ROWS: Final = 20_000
_MOST_CELL: Final = 200
_MOST_FAULTS: Final = 20
_KINDS: Final = {letter: CLASS_LETTERS[letter] for letter in "RCL"}
_COLUMNS: Final = ("value", "name", "kind")


@dataclass(frozen=True, slots=True)
class _Cell:
    text: str
    span: Span


def load_stock(path: str | Path) -> Mapping[str, Preferred]:
    """The lists of a CSV file, by class letter: "R", "C" and "L", as far as the file has them; see :func:`read_stock`.

    Raises NotationError for a file that cannot be read or is no UTF-8 text, LimitError beyond 2 MB.
    """
    path = Path(path)
    try:
        with path.open("rb") as file:
            data = file.read(_MOST_BYTES + 1)
    except OSError as error:
        raise NotationError(
            Fault(f"the stock list {path.name} cannot be read: {error.strerror}", "is the path right?")
        ) from None
    if len(data) > _MOST_BYTES:
        raise LimitError(f"the stock list {path.name} is larger than {_MOST_BYTES // 1_000_000} MB")
    try:
        text = data.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        raise NotationError(
            Fault(f"the stock list {path.name} is no UTF-8 text at byte {error.start}", "save it as UTF-8")
        ) from None
    return read_stock(text, path.name)


def read_stock(text: str, name: str = "stock") -> Mapping[str, Preferred]:
    r"""The lists of a CSV text, by class letter.

    The first line names the columns: ``value`` must be there, ``name`` (a part number) and ``kind`` (R, C or L) may
    be. A value is written as in the notation, with its unit unless ``kind`` says what it is: 4.7 kohm, 4K7, 22 nF.
    Other columns are passed over; one value under several names keeps the first.

    Raises NotationError with every fault found, each with its place; LimitError beyond 20 000 rows.

    >>> lists = read_stock("name;value;price\nR-17;4.7 kohm;0.02\nC-3;22 nF;0.11\nR-18;10 kohm;0.02")
    >>> lists["R"], lists["C"].entries[0].text(lists["C"].dimension)
    (<Preferred: stock, 2 values from 4.7 kohm to 10 kohm>, '22 nF (C-3)')
    """
    rows = _rows(text)
    head, columns = _header(text, rows)
    found: dict[Dimension, dict[object, Entry]] = {}
    faults: list[Fault] = []
    for cells in rows:
        if len(cells) == 1 and not cells[0].text:
            continue
        if len(cells) != len(head):
            span = cells[0].span.to(cells[-1].span)
            fault = f"this row has {len(cells)} cells, and the first line {len(head)}"
            faults.append(Fault(fault, "a cell that holds the separator stands in double quotes", span))
        else:
            try:
                label = cells[columns["name"]].text if "name" in columns else ""
                dimension, entry = _entry(cells, columns, label)
                found.setdefault(dimension, {}).setdefault(entry.value, entry)
            except SymnetError as error:
                faults += error.faults
        if len(faults) >= _MOST_FAULTS:
            break
    if faults:
        raise NotationError(faults, text=text)
    letters = {dimension: letter for letter, dimension in _KINDS.items()}
    lists = {
        letters[dimension]: Preferred(
            name, dimension, entries=tuple(sorted(entries.values(), key=lambda entry: entry.value))
        )
        for dimension, entries in found.items()
    }
    if not lists:
        raise NotationError(Fault(f"{name} lists no value", "below the first line stands one part a row"))
    return lists


def _header(text: str, rows: Iterator[list[_Cell]]) -> tuple[list[_Cell], Mapping[str, int]]:
    head = next(rows, [])
    columns = {cell.text.lower(): k for k, cell in enumerate(head) if cell.text.lower() in _COLUMNS}
    if "value" not in columns:
        span = head[0].span.to(head[-1].span) if head else None
        hint = "the first line names the columns: name, value"
        raise NotationError(Fault("no column of this list is called value", hint, span), text=text)
    return head, columns


def _entry(cells: list[_Cell], columns: Mapping[str, int], label: str) -> tuple[Dimension, Entry]:
    cell = cells[columns["value"]]
    expected = (
        OHM if "K" in cell.text and CODE.fullmatch(cell.text) else None
    )  # K marks resistors (IEC 60062)
    if "kind" in columns:
        kind = cells[columns["kind"]]
        expected = _KINDS.get(kind.text.upper())
        if expected is None:
            raise NotationError(Fault("a kind is R, C or L", span=kind.span))
    try:
        quantity = read_quantity(cell.text, expected)
    except SymnetError as error:
        raise NotationError([fault.at(cell.span) for fault in error.faults]) from None
    if quantity.dimension not in _KINDS.values():
        said = "has no unit" if quantity.dimension == NUMBER else f"is in {quantity.dimension}"
        hint = "write ohm, F or H behind the number, or add a column called kind with R, C or L"
        raise NotationError(Fault(f"this value {said}", hint, cell.span))
    if quantity.value <= 0:
        raise NotationError(Fault("a value in stock is positive", span=cell.span))
    return quantity.dimension, Entry(quantity.value, (quantity.value,), None, (label,) if label else ())


def _rows(text: str) -> Iterator[list[_Cell]]:
    """The cells of each line, with their places; the separator is the first of tab, semicolon, comma in line 1."""
    separator, start = "", 0
    for count, line in enumerate(text.split("\n")):
        if count > _MOST_ROWS:
            raise LimitError(f"a stock list has at most {_MOST_ROWS} rows")
        body = line.removesuffix("\r")
        for k, character in enumerate(body):
            if not character.isprintable() and character != "\t":
                at = Span(start + k, start + k + 1)
                raise NotationError(
                    Fault(f"the control character U+{ord(character):04X} has no place in a list", span=at),
                    text=text,
                )
        separator = separator or next((c for c in "\t;," if c in body), ",")
        yield list(_cells(text, start, start + len(body), separator))
        start += len(line) + 1


def _cells(text: str, start: int, end: int, separator: str) -> Iterator[_Cell]:
    while True:
        stop, quoted = start, False
        while stop < end and (quoted or text[stop] != separator):
            quoted ^= text[stop] == '"'
            stop += 1
        span = Span(start, max(stop, start + 1))
        if quoted:
            raise NotationError(Fault("this quotation mark is not closed", span=span), text=text)
        if stop - start > _MOST_CELL:
            raise LimitError(Fault(f"a cell has at most {_MOST_CELL} characters", span=span), text=text)
        cell = text[start:stop].strip()
        if len(cell) > 1 and cell[0] == cell[-1] == '"':
            cell = cell[1:-1].replace('""', '"').strip()
        yield _Cell(cell, span)
        if stop >= end:
            return
        start = stop + 1
