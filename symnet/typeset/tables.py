r"""Tables: one set of rows, written as aligned text, Markdown, HTML or LaTeX.

A cell is a string, a display tree or a quantity that has been written already; each writer asks the cell for its
own form, so that a formula is typeset where that is possible and typeable where it is not. The HTML sets no
colours and takes those of the page, so that it is legible on light and on dark ground. A long table ends early
and says how many rows are left out.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from typing import ClassVar, Literal, TypeAlias

from symnet.errors import Fault, LimitError
from symnet.typeset.mime import Shown
from symnet.typeset.names import escape_html, escape_latex, name_text
from symnet.typeset.numbers import Written
from symnet.typeset.tree import Tree
from symnet.typeset.writing import to_html, to_latex, to_text

__all__ = ["Cell", "Table"]

Cell: TypeAlias = str | Written | Tree

_HTML_ALIGN = {"l": "left", "r": "right", "c": "center"}
_MARKDOWN_ALIGN = {"l": ":--", "r": "--:", "c": ":-:"}
_MARKDOWN_SPECIAL = "\\`*_|<>[]$#~"


@dataclass(frozen=True, slots=True)
class Table(Shown):
    r"""Rows of cells under a header.

    ``align`` has one letter a column: l, r or c; empty means all left. ``most`` is the number of rows shown (None:
    all). Raises :class:`~symnet.errors.LimitError` when a row has not as many cells as the header.

    >>> from symnet.typeset.numbers import quantity
    >>> table = Table.of(["part", "value"], [["R1", quantity(14700, "ohm")], ["C1", quantity(22e-9, "F")]], align="lr")
    >>> print(table)
    part      value
    ----  ---------
    R1    14.7 kohm
    C1        22 nF
    >>> print(table.to_markdown())
    | part | value |
    | :-- | --: |
    | R1 | 14.7 kohm |
    | C1 | 22 nF |
    """

    header: tuple[Cell, ...]
    rows: tuple[tuple[Cell, ...], ...]
    caption: str = ""
    align: str = ""
    most: int | None = None

    _formats: ClassVar[tuple[str, ...]] = ("text/plain", "text/html", "text/markdown")

    def __post_init__(self) -> None:
        for number, row in enumerate(self.rows, 1):
            if len(row) != len(self.header):
                raise LimitError(
                    Fault(f"row {number} of the table has {len(row)} cells, its header {len(self.header)}")
                )
        if self.align and (len(self.align) != len(self.header) or set(self.align) - set("lrc")):
            raise LimitError(
                Fault(f"the alignment {self.align!r} does not fit", "give one of l, r, c for each column")
            )

    @classmethod
    def of(
        cls,
        header: Iterable[Cell],
        rows: Iterable[Iterable[Cell]],
        caption: str = "",
        align: str = "",
        most: int | None = None,
    ) -> Table:
        """A table from any rows."""
        return cls(tuple(header), tuple(map(tuple, rows)), caption, align, most)

    def __str__(self) -> str:
        return self.to_text()

    @property
    def shown(self) -> tuple[tuple[Cell, ...], ...]:
        """The rows that are written."""
        return self.rows if self.most is None else self.rows[: self.most]

    @property
    def left_out(self) -> str:
        """What stands below a table that ends early; empty when it does not."""
        count = len(self.rows) - len(self.shown)
        return f"... {count} more {'row' if count == 1 else 'rows'}" if count else ""

    def _alignment(self) -> str:
        return self.align or "l" * len(self.header)

    def to_text(self) -> str:
        """Aligned plain text, the caption above."""
        cells = [[_text(cell) for cell in row] for row in (self.header, *self.shown)]
        widths = [max(map(len, column)) for column in zip(*cells, strict=True)]
        lines = [self._line(row, widths) for row in cells]
        lines.insert(1, "  ".join("-" * width for width in widths))
        return "\n".join(filter(None, (name_text(self.caption), *lines, self.left_out)))

    def _line(self, row: Sequence[str], widths: Sequence[int]) -> str:
        place = {"l": str.ljust, "r": str.rjust, "c": str.center}
        return "  ".join(
            place[how](cell, width) for how, cell, width in zip(self._alignment(), row, widths, strict=True)
        ).rstrip()

    def to_markdown(self) -> str:
        """A Markdown table; formulas as LaTeX between dollar signs."""
        lines = [
            "| " + " | ".join(_markdown(cell) for cell in self.header) + " |",
            "| " + " | ".join(_MARKDOWN_ALIGN[how] for how in self._alignment()) + " |",
            *("| " + " | ".join(_markdown(cell) for cell in row) + " |" for row in self.shown),
        ]
        head = [f"**{_markdown(self.caption)}**", ""] if self.caption else []
        tail = ["", self.left_out] if self.left_out else []
        return "\n".join((*head, *lines, *tail))

    def to_html(self) -> str:
        """An HTML table without colours of its own."""

        def row(cells: Iterable[Cell], tag: str) -> str:
            return (
                "<tr>"
                + "".join(
                    f'<{tag} style="text-align:{_HTML_ALIGN[how]}">{_html(cell)}</{tag}>'
                    for how, cell in zip(self._alignment(), cells, strict=True)
                )
                + "</tr>"
            )

        pieces = ['<table style="border-collapse:collapse;color:inherit;background:inherit">']
        if self.caption:
            pieces.append(f'<caption style="text-align:left">{escape_html(self.caption)}</caption>')
        pieces.append(f'<thead style="border-bottom:1px solid currentColor">{row(self.header, "th")}</thead>')
        pieces.append("<tbody>")
        pieces.extend(row(cells, "td") for cells in self.shown)
        if self.left_out:
            pieces.append(f'<tr><td colspan="{len(self.header)}">{escape_html(self.left_out)}</td></tr>')
        pieces.append("</tbody></table>")
        return "\n".join(pieces)

    def to_latex(self, environment: Literal["tabular", "array"] = "tabular") -> str:
        r"""A LaTeX ``tabular``, or an ``array`` for mathematics (which notebooks can typeset)."""
        in_array = environment == "array"
        rule = "\\hline"
        lines = [f"\\begin{{{environment}}}{{{self._alignment()}}}"]
        lines.append(" & ".join(_latex(cell, in_array=in_array) for cell in self.header) + r" \\ " + rule)
        lines.extend(
            " & ".join(_latex(cell, in_array=in_array) for cell in row) + r" \\" for row in self.shown
        )
        if self.left_out:
            note = _latex(self.left_out, in_array=in_array)
            lines.append(rf"\multicolumn{{{len(self.header)}}}{{l}}{{{note}}} \\")
        lines.append(f"\\end{{{environment}}}")
        return "\n".join(lines)


def _text(cell: Cell) -> str:
    match cell:
        case str():
            return name_text(cell)
        case Written():
            return cell.text
        case _:
            return to_text(cell)


def _html(cell: Cell) -> str:
    match cell:
        case str():
            return escape_html(cell)
        case Written():
            return cell.html
        case _:
            return to_html(cell)


def _latex(cell: Cell, *, in_array: bool) -> str:
    if isinstance(cell, str):
        text = escape_latex(cell)
        return rf"\text{{{text}}}" if in_array else text
    formula = cell.latex if isinstance(cell, Written) else to_latex(cell)
    return formula if in_array else f"${formula}$"


def _markdown(cell: Cell) -> str:
    match cell:
        case str():
            return "".join(f"\\{c}" if c in _MARKDOWN_SPECIAL else c for c in name_text(cell))
        case Written():
            return _markdown(cell.text)
        case _:
            return f"${to_latex(cell)}$"
