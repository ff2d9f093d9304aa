"""The brief: the network as understood, each H(s), its form, its ends, what it is, and the conventions used.

A brief is a frozen value: blocks in the order of reading, which the four writers turn into text, Markdown, HTML
and LaTeX. What cannot be had (a value is missing, H is 0, H is too long) is said in the place where it would
stand; nothing is left out in silence.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, field
from typing import Final, TypeAlias

from symnet.circuit.network import Network
from symnet.errors import Fault, LimitError, SymnetError
from symnet.exact.derive import derive_all
from symnet.exact.limits import limits
from symnet.exact.transfer import Transfer
from symnet.present.blocks import Block, Heading, Items, Paragraph
from symnet.present.conventions import conventions
from symnet.present.network import network_blocks
from symnet.present.page import Page
from symnet.present.recognition import recognition_blocks
from symnet.present.response import response_blocks
from symnet.present.results import conditions_blocks, limits_table, transfer_blocks
from symnet.present.shapes import normal_blocks, sections_blocks
from symnet.quantities import NUMBER
from symnet.review.polarity import polarities

__all__ = ["Brief", "brief"]

#: Order of a numeric H up to which the brief finds its poles.
HIGHEST_ORDER: Final = 100


@dataclass(frozen=True, slots=True, repr=False)
class Brief(Page):
    """What there is to say about a network, ready to be read; made by :func:`brief`.

    ``str()`` and :meth:`to_text` give plain text, :meth:`to_markdown`, :meth:`to_html` and :meth:`to_latex` the
    same blocks in other marks. ``transfers`` are the H(s) it speaks of.
    """

    network: Network
    transfers: tuple[Transfer, ...]
    blocks: tuple[Block, ...] = field(compare=False)

    def __repr__(self) -> str:
        labels = ", ".join(transfer.label for transfer in self.transfers)
        return f"<Brief of {len(self.network.parts)} parts: {labels}>"


def brief(network: Network) -> Brief:
    """Derive every H(s) of the network and say what each is: form, sections, limits, recognition, conventions.

    One piece for each pair of a drive and a read. Raises WiringError and SingularError as :func:`symnet.derive`
    does.

    >>> import symnet as sn
    >>> seen = sn.brief(sn.network("in -- R1 = 1k -- out -- C1 = 100n -- gnd; drive in; read out"))
    >>> seen
    <Brief of 2 parts: out/in>
    >>> "first order, low-pass" in seen.to_text()
    True
    """
    transfers = derive_all(network)
    blocks: list[Block] = [*network_blocks(network, transfers[0].values)]
    positive = tuple(str(polarity) for polarity in polarities(network) if polarity.feedback == "positive")
    if positive:
        blocks.append(Items(positive))
    words: set[str] = set()
    if network.reads and any("i_" in transfer.label for transfer in transfers):
        words.add("current")
    if any(value.tolerance for _, value in network.values):
        words.add("tolerance")
    for transfer in transfers:
        pieces, used = _about(transfer)
        blocks += pieces
        words |= used
    blocks += [Heading("Conventions"), conventions(words)]
    return Brief(network, transfers, tuple(blocks))


def _about(transfer: Transfer) -> tuple[list[Block], set[str]]:
    """Everything about one H, and the conventions that it uses."""
    blocks: list[Block] = []
    words: set[str] = set()
    for title, make in _PIECES:
        blocks.append(Heading(title.format(transfer.label)))
        try:
            if make in _FROM_POLES:
                _refuse_high_order(transfer)
            made, used = make(transfer)
        except SymnetError as error:
            said = "; ".join(fault.message for fault in error.faults)
            blocks.append(Paragraph(f"not available: {said}"))
            continue
        blocks += made
        words |= used
    return blocks, words


def _refuse_high_order(transfer: Transfer) -> None:
    """The poles of a very long network take minutes: nobody waits for that without having asked."""
    if transfer.is_numeric and (order := transfer.numeric().order) > HIGHEST_ORDER:
        raise LimitError(
            Fault(
                f"the order is {order}; poles and what follows from them take minutes beyond order {HIGHEST_ORDER}, "
                "so the brief leaves them out. sn.sections(H) and sn.f3db(H) find them; H.numeric() takes "
                "arrays of s at once"
            )
        )


_Piece: TypeAlias = tuple[tuple[Block, ...], set[str]]


def _transfer(transfer: Transfer) -> _Piece:
    return transfer_blocks(transfer), {"H", "frequency", "order n", "hidden mode"}


def _normal(transfer: Transfer) -> _Piece:
    from symnet.shape.normal import normalise

    form = normalise(transfer)
    words = {"w0, f0, tau", "normalised coefficients", "K"}
    if form.zeros_at_origin or form.poles_at_origin:
        words.add("split")
    return normal_blocks(form), words


def _sections(transfer: Transfer) -> _Piece:
    from symnet.shape.sections import sections

    return sections_blocks(sections(transfer)), {"section", "Q, zeta"}


def _response(transfer: Transfer) -> _Piece:
    return response_blocks(transfer), {"f3dB", "dB"} if transfer.dimension == NUMBER else {"f3dB"}


def _limits(transfer: Transfer) -> _Piece:
    table = limits_table(limits(transfer), transfer.values, transfer.dimension)
    return (table,), {"dB"} if transfer.dimension == NUMBER else set()


def _recognition(transfer: Transfer) -> _Piece:
    from symnet.shape.recognise import recognise
    from symnet.shape.verdict import Recognition

    found = recognise(transfer)
    if isinstance(found, Recognition):
        return recognition_blocks(found), {"f3dB", "distance"} if found.candidates else {"f3dB"}
    return conditions_blocks(found), {"f3dB", "positivity"}


_FROM_POLES: Final = (_normal, _sections, _response, _recognition)

_PIECES: Final[tuple[tuple[str, Callable[[Transfer], _Piece]], ...]] = (
    ("H(s) = {}", _transfer),
    ("Normal form", _normal),
    ("Poles, zeros, sections", _sections),
    ("Magnitude and delay", _response),
    ("Limits", _limits),
    ("Recognition", _recognition),
)
