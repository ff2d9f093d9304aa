r"""How an object shows itself in a notebook: one table from format to method.

An object that can write itself has some of the methods named in :data:`METHODS`. It inherits :class:`Shown` and is
displayed by whichever of them the front end prefers.
"""

from __future__ import annotations

from collections.abc import Collection
from typing import ClassVar, Final

__all__ = ["METHODS", "Shown"]

#: MIME type -> method that writes it.
METHODS: Final[dict[str, str]] = {
    "text/plain": "to_text",
    "text/html": "to_html",
    "text/latex": "to_latex",
    "text/markdown": "to_markdown",
}


class Shown:
    r"""For values that show themselves: inherit it and write ``to_text``, ``to_html``, ``to_latex``, ``to_markdown``.

    Methods that are not there are not shown; plain text falls back on ``str()``. ``_formats`` can leave out formats
    that exist but should not be displayed (a front end that gets HTML and LaTeX shows the HTML). LaTeX is put
    between dollar signs unless it is an environment.

    >>> class Gain(Shown):
    ...     def __str__(self):
    ...         return "K"
    ...     def to_latex(self):
    ...         return "K"
    >>> Gain()._repr_mimebundle_()
    {'text/plain': 'K', 'text/latex': '$\\displaystyle K$'}
    >>> Gain()._repr_mimebundle_(exclude={"text/latex"})
    {'text/plain': 'K'}
    """

    __slots__ = ()

    _formats: ClassVar[tuple[str, ...]] = tuple(METHODS)

    def _repr_mimebundle_(
        self, include: Collection[str] | None = None, exclude: Collection[str] | None = None
    ) -> dict[str, str]:
        """What IPython asks for: every format that the object can write, less what is not wanted."""
        bundle: dict[str, str] = {}
        for mime, method in METHODS.items():
            if (
                mime not in self._formats
                or (include and mime not in include)
                or (exclude and mime in exclude)
            ):
                continue
            write = getattr(self, method, str(self).__str__ if mime == "text/plain" else None)
            if write is None:
                continue
            written = write()
            if mime == "text/latex" and not written.startswith((r"\begin", "$")):
                written = rf"$\displaystyle {written}$"
            bundle[mime] = written
        return bundle
