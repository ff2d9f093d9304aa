"""How a notebook finds the showing of a result: values delegate, formatters own.

A result inherits :class:`Displayed` and knows no more of display than that. A formatter is a function from the
value to its showings by MIME type, registered for the class. Formatters stand in the room above all others,
which is loaded when the first value is displayed: by its name, as the public words are, since no room imports
one that stands above it.
"""

from __future__ import annotations

from collections.abc import Callable, Collection
from importlib import import_module
from typing import Any, Final, TypeAlias, TypeVar

__all__ = ["Bundle", "Displayed", "formats"]

Bundle: TypeAlias = dict[str, str]
T = TypeVar("T")

_FORMATTERS_STAND_IN: Final = "symnet.present.show"
_formatters: dict[type, Callable[[Any], Bundle]] = {}


def formats(kind: type[T]) -> Callable[[Callable[[T], Bundle]], Callable[[T], Bundle]]:
    """Register a formatter for this class; what inherits from it is shown by it too."""

    def register(formatter: Callable[[T], Bundle]) -> Callable[[T], Bundle]:
        _formatters[kind] = formatter
        return formatter

    return register


class Displayed:
    """A result that a notebook shows typeset when it is the last expression of a cell."""

    __slots__ = ()

    def _repr_mimebundle_(
        self, include: Collection[str] | None = None, exclude: Collection[str] | None = None
    ) -> Bundle:
        """The showings by MIME type: those of ``include`` only, if it is given, and without those of ``exclude``."""
        import_module(_FORMATTERS_STAND_IN)
        formatter = next((_formatters[kind] for kind in type(self).__mro__ if kind in _formatters), None)
        bundle = {"text/plain": repr(self)} if formatter is None else formatter(self)
        return {
            kind: shown
            for kind, shown in bundle.items()
            if (not include or kind in include) and not (exclude and kind in exclude)
        }
