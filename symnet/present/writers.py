r"""The four writers of showings: plain text, Markdown, HTML, LaTeX, all from the same blocks.

Plain text keeps to ASCII formulas that can be typed back in and to lines of 100 columns where words allow it.
Markdown and LaTeX hold LaTeX formulas; HTML holds MathML, so that it needs no script. Whatever a user typed is
escaped on its way into Markdown, HTML and LaTeX.
"""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence
from itertools import zip_longest
from textwrap import wrap
from typing import Final

from symnet.present.blocks import (
    Block,
    Folded,
    Formula,
    Heading,
    Items,
    Line,
    Paragraph,
    Row,
    Steps,
    Table,
    Typed,
)
from symnet.typeset.mathml import inner_mathml, to_mathml
from symnet.typeset.names import escape_html, escape_latex, name_text
from symnet.typeset.numbers import Written
from symnet.typeset.stacked import WIDTH, beside, stacked, words
from symnet.typeset.tree import Tree
from symnet.typeset.writing import shorten, to_latex, to_text

__all__ = ["formula_latex", "html", "latex", "markdown", "text"]

_MOST_IN_LINE: Final = 400
_MOST_TYPED: Final = 100
_UNBROKEN: Final = 40
_LEAST: Final = 40


def _typed(block: Typed) -> list[str]:
    """The lines of what was typed, blank lines around it dropped, its end counted when it is long."""
    lines = block.text.strip("\n").splitlines()
    left = len(lines) - _MOST_TYPED
    return lines if left <= 0 else [*lines[:_MOST_TYPED], f"# ... {left} more lines"]


def _pieces(line: Line) -> tuple[str | Tree | Written, ...]:
    return line if isinstance(line, tuple) else (line,)


# -- plain text -------------------------------------------------------------------------------------------------


def text(blocks: Sequence[Block]) -> str:
    """The blocks as plain text, without a final line end."""
    return "\n\n".join(filter(None, (_text(block) for block in blocks)))


def _line_text(line: Line) -> str:
    """One line; the spaces in numbers and short formulas do not break."""
    return "".join(
        name_text(piece) if isinstance(piece, str) else _unbroken(piece) for piece in _pieces(line)
    )


def _unbroken(piece: Written | Tree) -> str:
    written = piece.text if isinstance(piece, Written) else to_text(shorten(piece, _MOST_IN_LINE))
    return written.replace(" ", "\u00a0") if len(written) <= _UNBROKEN else written


def _wrapped(line: str, width: int = WIDTH) -> list[str]:
    """Rows of at most this width, broken at spaces and, where a formula has none, behind a sign of operation."""
    rows: list[str] = []
    for row in wrap(line, width, break_long_words=False, break_on_hyphens=False) or [""]:
        rest = row
        while len(rest) > width and (at := max(map(rest.rfind, "*/+,(", [0] * 5, [width] * 5))) > 0:
            rows.append(rest[: at + 1])
            rest = rest[at + 1 :]
        rows.append(rest)
    return [row.replace("\u00a0", " ") for row in rows]


def _text(block: Block) -> str:
    match block:
        case Heading(title, level):
            return f"{title}\n{('=' if level == 1 else '-') * len(title)}"
        case Paragraph(line):
            return "\n".join(_wrapped(_line_text(line)))
        case Formula(sides, function):
            parts = [words(f"    {function}(s)" if function else "    ")]
            for k, side in enumerate(sides):
                if k or function:
                    parts.append(words(" = "))
                parts.append(stacked(side, WIDTH - 24))
            return "\n".join(line.rstrip() for line in beside(*parts).lines)
        case Table():
            return _table_text(block)
        case Items(lines):
            return "\n".join("\n  ".join(_wrapped(f"- {_line_text(line)}")) for line in lines)
        case Typed():
            return "\n".join(f"    {name_text(row)}".rstrip() for row in _typed(block))
        case Steps(rows):
            return "\n".join(_steps_text(rows))
        case Folded(title, blocks):
            return f"{title}:\n\n{text(blocks)}"


#: A left side longer than this stands on a line of its own.
_LONGEST_LEFT: Final = 24


def _steps_text(rows: Sequence[Row]) -> Iterator[str]:
    """Equations with their equals signs below each other; what is too long goes on behind the equals sign."""
    before = 2 + max((len(name_text(row.label)) for row in rows), default=0)
    lefts = [to_text(row.left) if row.left is not None else "" for row in rows]
    column = max((len(left) for left in lefts if len(left) <= _LONGEST_LEFT), default=0)
    for row, left in zip(rows, lefts, strict=True):
        head = f"{name_text(row.label):<{before}}"
        if len(left) > _LONGEST_LEFT:
            first, *more = _wrapped(left, WIDTH - before)
            yield head + first
            yield from (" " * before + line for line in more)
            head, left = " " * before, ""
        room = WIDTH - before - column - 3
        lines = _wrapped(to_text(row.right), room)
        reason = f"   ({name_text(row.reason)})" if row.reason else ""
        if len(lines[-1]) + len(reason) > room:
            lines += _wrapped(reason, room)
        else:
            lines[-1] += reason
        yield f"{head}{left:<{column}} = {lines[0]}".rstrip()
        yield from (" " * (before + column + 3) + line for line in lines[1:])


def _table_text(table: Table) -> str:
    rows = [[_line_text(cell) for cell in row] for row in table.rows]
    if table.header:
        rows.insert(0, list(table.header))
    if not rows:
        return ""
    widths = _widths(list(zip_longest(*rows, fillvalue="")))
    shown = []
    for k, row in enumerate(rows):
        cells = [_wrapped(cell, width) for cell, width in zip(row, widths, strict=False)]
        for line in zip_longest(*cells, fillvalue=""):
            pieces = (f"{piece:<{width}}" for piece, width in zip(line, widths, strict=False))
            shown.append(f"  {'  '.join(pieces)}".rstrip())
        if table.header and not k:
            shown.append("  " + "  ".join("-" * width for width in widths))
    if table.omitted:
        shown.append(f"  ... {_more(table.omitted)}")
    return "\n".join(shown)


def _widths(columns: Sequence[Sequence[str]]) -> list[int]:
    """As wide as the cells, and where that is too wide the widest columns give way, down to their longest word."""
    widths = [max(map(len, column)) for column in columns]
    least = [min(_LEAST, max(len(word) for cell in column for word in cell.split(" "))) for column in columns]
    over = sum(widths) + 2 * len(widths) - WIDTH
    while over > 0:
        k = max(range(len(widths)), key=lambda k: (widths[k] > least[k], widths[k]))
        if widths[k] <= least[k]:
            break
        widths[k] -= 1
        over -= 1
    return widths


def _more(count: int) -> str:
    return f"{count} more row{'' if count == 1 else 's'}"


# -- Markdown -------------------------------------------------------------------------------------------------


def markdown(blocks: Sequence[Block]) -> str:
    """The blocks as Markdown with LaTeX formulas between dollar signs."""
    return "\n\n".join(filter(None, (_markdown(block) for block in blocks)))


def _escape_markdown(words: str) -> str:
    return re.sub(r"([\\`*_{}\[\]<>|$#~])", r"\\\1", name_text(words))


def _number_markdown(number: Written) -> str:
    return f"${number.latex}$" if "<" in number.html else number.html


def _line_markdown(line: Line) -> str:
    return "".join(
        _escape_markdown(piece)
        if isinstance(piece, str)
        else _number_markdown(piece)
        if isinstance(piece, Written)
        else f"${to_latex(shorten(piece, _MOST_IN_LINE))}$"
        for piece in _pieces(line)
    )


def _markdown(block: Block) -> str:
    match block:
        case Heading(title, level):
            return f"{'#' * (level + 1)} {_escape_markdown(title)}"
        case Paragraph(line):
            return _line_markdown(line)
        case Formula():
            return f"$$\n{formula_latex(block)}\n$$"
        case Table(header, rows, omitted):
            shown = [list(map(_line_markdown, row)) for row in rows]
            width = len(header) or max(map(len, shown), default=0)
            titles = list(map(_escape_markdown, header)) or [""] * width
            if omitted:
                shown.append([f"… {_more(omitted)}"] + [""] * (width - 1))
            lines = [titles, ["---"] * width, *shown]
            return "\n".join(f"| {' | '.join(row)} |" for row in lines)
        case Items(lines):
            return "\n".join(f"- {_line_markdown(line)}" for line in lines)
        case Typed():
            fence = "`" * max(3, 1 + max(map(len, re.findall("`+", block.text)), default=0))
            return "\n".join([f"{fence}text", *map(name_text, _typed(block)), fence])
        case Steps(rows):
            return f"$$\n{_steps_latex(rows, 'aligned')}\n$$"
        case Folded(title, blocks):
            return f"<details>\n<summary>{escape_html(title)}</summary>\n\n{markdown(blocks)}\n\n</details>"


# -- HTML -------------------------------------------------------------------------------------------------------

_CELL: Final = 'style="text-align:left;vertical-align:top;padding:0.15em 1.2em 0.15em 0"'


def html(blocks: Sequence[Block]) -> str:
    """The blocks as a piece of HTML with MathML formulas; no script, no style sheet, nothing from elsewhere."""
    return f"<div>\n{_blocks_html(blocks)}\n</div>"


def _blocks_html(blocks: Sequence[Block]) -> str:
    return "\n".join(map(_html, blocks))


def _line_html(line: Line) -> str:
    return "".join(
        escape_html(piece)
        if isinstance(piece, str)
        else piece.html.replace(" ", "&nbsp;")
        if isinstance(piece, Written)
        else to_mathml(shorten(piece, _MOST_IN_LINE))
        for piece in _pieces(line)
    )


def _html(block: Block) -> str:
    match block:
        case Heading(title, level):
            return f"<h{level + 2}>{escape_html(title)}</h{level + 2}>"
        case Paragraph(line):
            return f"<p>{_line_html(line)}</p>"
        case Formula(sides, function):
            name = [f"<mi>{function}</mi><mo>(</mo><mi>s</mi><mo>)</mo>"] if function else []
            inner = "<mo>=</mo>".join([*name, *map(inner_mathml, sides)])
            return f'<div style="overflow-x:auto;overflow-y:hidden;padding:0.3em 0"><math display="block"><mrow>{inner}</mrow></math></div>'
        case Table(header, rows, omitted):
            head = "".join(f"<th {_CELL}>{escape_html(title)}</th>" for title in header)
            shown = ["".join(f"<td {_CELL}>{_line_html(cell)}</td>" for cell in row) for row in rows]
            if omitted:
                shown.append(f'<td colspan="{max(1, len(header))}" {_CELL}>… {_more(omitted)}</td>')
            body = "\n".join(f"<tr>{row}</tr>" for row in shown)
            top = f"<thead><tr>{head}</tr></thead>\n" if header else ""
            return f'<table style="margin:0.6em 0">\n{top}<tbody>\n{body}\n</tbody>\n</table>'
        case Items(lines):
            return "<ul>\n" + "\n".join(f"<li>{_line_html(line)}</li>" for line in lines) + "\n</ul>"
        case Typed():
            return (
                '<pre style="font-family:monospace">' + "\n".join(map(escape_html, _typed(block))) + "</pre>"
            )
        case Steps(rows):
            return (
                '<div style="overflow-x:auto"><table style="margin:0.6em 0;border-collapse:collapse">\n'
                f"{_steps_html(rows)}\n</table></div>"
            )
        case Folded(title, blocks):
            return f"<details><summary>{escape_html(title)}</summary>\n{_blocks_html(blocks)}\n</details>"


_STEP: Final = 'style="text-align:{};padding:0.3em {};white-space:nowrap;border:0;background:none"'


def _steps_html(rows: Sequence[Row]) -> str:
    """One row of a table for each equation: label, left side, equals sign with the right side and the reason."""
    label, left, right = (
        _STEP.format(side, padding)
        for side, padding in (("left", "1.2em 0.3em 0"), ("right", "0"), ("left", "0"))
    )
    shown = []
    for row in rows:
        start = "" if row.left is None else to_mathml(row.left)
        equals = f'<math displaystyle="true"><mo>=</mo>{inner_mathml(row.right)}</math>'
        reason = (
            f'<span style="color:#666;padding-left:2em">{escape_html(row.reason)}</span>'
            if row.reason
            else ""
        )
        shown.append(
            f"<tr><td {label}>{escape_html(row.label)}</td><td {left}>{start}</td><td {right}>{equals}{reason}</td></tr>"
        )
    return "\n".join(shown)


# -- LaTeX ------------------------------------------------------------------------------------------------------


def latex(blocks: Sequence[Block]) -> str:
    """The blocks as the body of a LaTeX document (needs amsmath and longtable)."""
    return "\n\n".join(filter(None, (_latex(block) for block in blocks)))


def formula_latex(formula: Formula) -> str:
    """A formula as LaTeX mathematics, without marks around it."""
    head = [f"{formula.function}(s)"] if formula.function else []
    return " = ".join([*head, *map(to_latex, formula.sides)])


_IN_LATEX: Final = {
    "Ω": r"$\Omega$", "µ": r"$\mu$", "ω": r"$\omega$", "±": r"$\pm$", "−": "$-$", "°": r"$^\circ$", "×": r"$\times$",
    "·": r"$\cdot$", "→": r"$\to$", "∞": r"$\infty$", "≤": r"$\leq$", "≥": r"$\geq$", "≈": r"$\approx$", "²": "$^2$",
    "√": r"$\surd$", "π": r"$\pi$", "…": r"\ldots{}", "\u00a0": "~", "‖": r"$\parallel$", "|": r"\textbar{}",
}  # fmt: skip


def _words_latex(given: str) -> str:
    return "".join(_IN_LATEX.get(c) or escape_latex(c) for c in given)


def _line_latex(line: Line) -> str:
    return "".join(
        _words_latex(piece)
        if isinstance(piece, str)
        else f"${piece.latex}$"
        if isinstance(piece, Written)
        else f"${to_latex(shorten(piece, _MOST_IN_LINE))}$"
        for piece in _pieces(line)
    )


def _steps_latex(rows: Sequence[Row], environment: str) -> str:
    """Equations aligned at their equals signs, labels and reasons as text beside them."""
    lines = []
    for row in rows:
        label = rf"\text{{{escape_latex(row.label)}}}\quad " if row.label else ""
        left = "" if row.left is None else to_latex(row.left)
        reason = rf" && \text{{{escape_latex(row.reason)}}}" if row.reason else ""
        lines.append(f"{label}{left} &= {to_latex(row.right)}{reason}")
    return f"\\begin{{{environment}}}\n" + " \\\\\n".join(lines) + f"\n\\end{{{environment}}}"


def _latex(block: Block) -> str:
    match block:
        case Heading(title, level):
            return rf"\{'section' if level == 1 else 'subsection'}*{{{_words_latex(title)}}}"
        case Paragraph(line):
            return _line_latex(line)
        case Formula():
            return f"\\[\n{formula_latex(block)}\n\\]"
        case Table(header, rows, omitted):
            width = len(header) or max(map(len, rows), default=1)
            columns = "l" * (width - 1) + r"p{0.5\linewidth}"
            top = [" & ".join(map(_words_latex, header)) + r" \\ \hline"] if header else []
            body = [" & ".join(map(_line_latex, row)) + r" \\" for row in rows]
            rest = [rf"\ldots{{}} {_more(omitted)} \\"] if omitted else []
            lines = "\n".join([*top, *body, *rest])
            return f"\\begin{{longtable}}{{{columns}}}\n{lines}\n\\end{{longtable}}"
        case Items(lines):
            return (
                "\\begin{itemize}\n"
                + "\n".join(rf"\item {_line_latex(line)}" for line in lines)
                + "\n\\end{itemize}"
            )
        case Typed():
            spaced = (_words_latex(row).replace("  ", "~~") for row in _typed(block))
            return "\\begin{quote}\\ttfamily\n" + " \\\\\n".join(spaced) + "\n\\end{quote}"
        case Steps(rows):
            return _steps_latex(rows, "align*")
        case Folded(title, blocks):
            return f"\\paragraph{{{_words_latex(title)}}}\n\n{latex(blocks)}"
