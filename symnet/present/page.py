"""A showing that can be carried away: the same blocks as text, Markdown, HTML or LaTeX."""

from __future__ import annotations

from typing import TYPE_CHECKING, Protocol

from symnet.present import writers
from symnet.typeset.displayed import Displayed

if TYPE_CHECKING:
    from symnet.present.blocks import Block

__all__ = ["Page"]


class _HasBlocks(Protocol):
    @property
    def blocks(self) -> tuple[Block, ...]:
        """What is shown, in the order of reading."""


class Page(Displayed):
    """What has ``blocks``: ``str()`` gives plain text, the methods the other marks."""

    __slots__ = ()

    def to_text(self: _HasBlocks) -> str:
        """Plain text, without a final line end."""
        return writers.text(self.blocks)

    def to_markdown(self: _HasBlocks) -> str:
        """Markdown with LaTeX formulas between dollar signs."""
        return writers.markdown(self.blocks)

    def to_html(self: _HasBlocks) -> str:
        """A piece of HTML with MathML formulas and without scripts."""
        return writers.html(self.blocks)

    def to_latex(self: _HasBlocks) -> str:
        """The body of a LaTeX document that loads amsmath and longtable."""
        return writers.latex(self.blocks)

    def __str__(self: _HasBlocks) -> str:
        return writers.text(self.blocks)
