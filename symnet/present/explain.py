"""The derivation of H told as a person writes it: every line an equation, every line checked.

The lines come from :mod:`symnet.exact.byhand`; here they are arranged, given their reasons, and written: typeset,
as text, or in the notation of hand derivations, in which :func:`symnet.verify` reads them back.
"""

from __future__ import annotations

from dataclasses import dataclass, field, replace
from typing import Final, Literal, TypeAlias

from symnet.circuit.network import Network
from symnet.circuit.parts import CurrentDrive
from symnet.errors import Fault, LimitError
from symnet.exact.byhand.elimination import eliminate
from symnet.exact.byhand.frame import Frame
from symnet.exact.byhand.narration import Step, narrate
from symnet.exact.byhand.truth import hold_to_the_solution
from symnet.exact.derive import derive
from symnet.exact.determinant import count_in_words
from symnet.exact.transfer import Transfer
from symnet.expressions import Name
from symnet.present.blocks import Block, Heading, Paragraph, Row, Steps
from symnet.present.page import Page
from symnet.typeset.notation import tree_of

__all__ = ["Detail", "Explanation", "explain"]

#: full: every substitution; outline: the equations of the network and what each voltage comes to.
Detail: TypeAlias = Literal["full", "outline"]

#: Terms of H, N and D together, up to which each of the two is written.
MOST_TERMS: Final = {"full": 60, "outline": 160}
MOST_NODES: Final = 30
LONGEST_LINE: Final = 800
_IN_OUTLINE: Final = frozenset({"given", "let", "law", "node", "result", "final"})


@dataclass(frozen=True, slots=True, repr=False)
class Explanation(Page):
    """A derivation of H, line by line; made by :func:`explain`.

    ``steps`` are its equations, each ``left = right`` with a label and a reason; the last is H, in the form in
    which H shows itself. ``str()`` and :meth:`to_text` give plain text, :meth:`to_markdown`, :meth:`to_html` and
    :meth:`to_latex` the same typeset, :meth:`to_working` the notation of hand derivations.
    """

    network: Network
    transfer: Transfer
    detail: Detail
    steps: tuple[Step, ...]
    checks: tuple[str, ...] = field(compare=False)

    @property
    def blocks(self) -> tuple[Block, ...]:
        """What is shown, before it is text, Markdown, HTML or LaTeX."""
        return (
            Heading(f"Derivation of {self.transfer.label}"),
            Paragraph(self._conventions()),
            Steps(tuple(map(_row, self.steps))),
            Paragraph("Checked: " + "; ".join(self.checks) + "."),
        )

    def _conventions(self) -> str:
        said = "A node's name is its voltage against gnd (in V)"
        if isinstance(self.transfer.drive, CurrentDrive):
            said += (
                "; the current of the drive is written i_"
                + self.transfer.network.drive_names[self.transfer.network.drives.index(self.transfer.drive)]
                + " (in A)"
            )
        return said + "; s in rad/s."

    def to_working(self) -> str:
        """The lines in the notation of hand derivations, one a line, reasons behind ``#``."""
        return "\n".join(map(_working_line, self.steps))

    def __repr__(self) -> str:
        return (
            f"<Explanation of {self.transfer.label}: {len(self.steps)} lines ({self.detail}), each checked>"
        )


def explain(
    network: Network, read: str | None = None, drive: str | None = None, detail: Detail | None = None
) -> Explanation:
    """The derivation of H as a person would write it: node equations, substitutions, terms grouped, H.

    ``read`` and ``drive`` choose as in :func:`symnet.derive`; other drives are at zero. ``detail="full"`` writes
    every substitution, ``"outline"`` only the equations of the network and what each voltage comes to; without it
    the derivation is full where that can still be read. Voltages are eliminated one by one, from the output
    backwards where the network allows it.

    Every line is held to the exact solution of the network, and the last one to H, before anything is returned.

    Raises LimitError, with the count, where the derivation would be too long to be read; otherwise what
    :func:`symnet.derive` raises.

    >>> import symnet as sn
    >>> net = sn.network("in -- R1 -- a -- R2 -- out; a -- C1 -- gnd; out -- C2 -- gnd; drive in; read out")
    >>> print(sn.explain(net, detail="outline").to_working())
    node out: (a - out)/R2 = s*C2*out                             # currents in = currents out
    so        a = out*(1 + s*R2*C2)                               # collected by powers of s
    node a:   (in - a)/R1 = (a - out)/R2 + s*C1*a
    so        in = out*(1 + s*(R1*C1 + (R1 + R2)*C2) + s^2*R1*R2*C1*C2)  # collected by powers of s
    hence     out/in = 1/(1 + s*(R1*C1 + (R1 + R2)*C2) + s^2*R1*R2*C1*C2)
    """
    transfer = derive(network, read, drive)
    detail = _readable_detail(transfer, detail)
    frame = Frame(transfer.network, transfer.drive, transfer.read, transfer.naming)
    elimination = eliminate(frame, is_long=detail == "outline")
    told = narrate(elimination, transfer)
    hold_to_the_solution(told, elimination, transfer)
    steps = told if detail == "full" else _outline(told)
    _refuse_unreadable(transfer, steps)
    checks = (
        f"each of the {len(steps)} lines becomes 0 = 0 under the exact solution of the network, found by determinants",
        "the last line is H, exactly, and H has been confirmed by the nodal equations",
    )
    return Explanation(transfer.network, transfer, detail, steps, checks)


def _readable_detail(transfer: Transfer, detail: Detail | None) -> Detail:
    """The detail asked for, or the fullest that can be read; LimitError where it cannot."""
    if detail not in {None, *MOST_TERMS}:
        raise ValueError(f'detail is "full" or "outline", not {detail!r}')
    terms = sum(transfer.terms)
    nodes = len(transfer.network.nodes)
    fitting: list[Detail] = ["full", "outline"] if detail is None else [detail]
    for each in fitting:
        if terms <= MOST_TERMS[each] and nodes <= MOST_NODES:
            return each
    asked = fitting[-1]
    hints = [f"of up to {MOST_TERMS[asked]} terms and {MOST_NODES} nodes it is written"]
    if detail == "full" and terms <= MOST_TERMS["outline"]:
        hints.append('ask for detail="outline"')
    hints.append("tie equal parts together (R2 = R1), or read a node nearer the drive")
    raise LimitError(
        Fault(
            f"{transfer.label} has up to {count_in_words(terms)} terms and the network {nodes} nodes: "
            f"{'a full derivation' if asked == 'full' else 'a derivation'} of that length cannot be read",
            "; ".join(hints),
        )
    )


def _refuse_unreadable(transfer: Transfer, steps: tuple[Step, ...]) -> None:
    """LimitError when a line is too long to be read."""
    longest = max(len(str(step)) for step in steps)
    if longest > LONGEST_LINE:
        raise LimitError(
            Fault(
                f"the derivation of {transfer.label} has {len(steps)} lines, the longest of {longest} characters; "
                f"beyond {LONGEST_LINE} nobody can read one",
                "tie equal parts together (R2 = R1), or read a node nearer the drive",
            )
        )


def _outline(steps: tuple[Step, ...]) -> tuple[Step, ...]:
    """The equations of the network, the abbreviations, what each voltage comes to, H."""
    kept = [step for step in steps if step.kind in _IN_OUTLINE]
    return tuple(
        replace(step, goes_on=k > 0 and step.goes_on and kept[k - 1].left == step.left)
        for k, step in enumerate(kept)
    )


# -- how a line is shown -----------------------------------------------------------------------------------------


def _row(step: Step) -> Row:
    left = None if step.goes_on else tree_of(step.left)
    return Row(left, tree_of(step.right), "" if step.goes_on else _word(step), step.reason)


def _word(step: Step) -> str:
    """What stands before a line."""
    if step.kind in {"let", "final"}:
        return "let" if step.kind == "let" else "hence"
    if step.label:
        return step.label
    return "so" if isinstance(step.left, Name) and step.kind != "given" else ""


def _working_line(step: Step) -> str:
    word = _word(step)
    if step.kind == "node":
        word = f"{word}:" if word.startswith("node ") else ""
    elif step.kind == "law":
        word = ""
    reason = f"  # {step.reason}" if step.reason else ""
    return f"{f'{word:<9} {step}':<60}{reason}".rstrip()
