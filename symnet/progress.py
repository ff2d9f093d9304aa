"""What long work is doing, on one line that goes away: shown after a second, to somebody who looks on.

A second is about as long as one waits without asking what goes on. So nothing is written before that, and never
where nobody sees it: in a script, in a pipe, in a test. It is written on stderr of a terminal, and in a notebook
below the cell; when the work ends, or is interrupted, the line is wiped.

The caller ticks once per piece of work that takes microseconds or more: a level of a diagram, a sweep over all
roots, a block of terms. A tick is one look at the clock, and where there is nobody to show it to not even that.
"""

from __future__ import annotations

import sys
import time
from collections.abc import Callable
from types import TracebackType
from typing import Any, Final, Protocol, Self, TypeAlias

__all__ = ["Progress"]

#: Shows a line in place of the one before; an empty one wipes it.
Show: TypeAlias = Callable[[str], None]

_FIRST: Final = 1.0  # seconds before anything is shown
_AGAIN: Final = 0.25  # seconds between two lines


class Stream(Protocol):
    """As much of a text stream as is needed."""

    def isatty(self) -> bool:
        """Whether a person reads it."""

    def write(self, text: str, /) -> object:
        """Take the text."""

    def flush(self) -> object:
        """Show it now."""


class Progress:
    r"""A piece of long work: ``with Progress("diagram", "parts", 400) as at:`` and now and then ``at(17)``.

    ``of`` names what is counted, ``total`` how many there will be where that is known. ``clock`` and ``stream``
    are the computer's and stderr unless others are given.

    >>> class Terminal:
    ...     isatty = lambda self: True
    ...     flush = lambda self: None
    ...     write = lambda self, text: print(repr(text))
    >>> seconds = iter([0.0, 0.5, 2.0])
    >>> with Progress("diagram", "parts", 400, clock=lambda: next(seconds), stream=Terminal()) as at:
    ...     at(16)
    ...     at(17)
    '\r\x1b[Kdiagram: 17 of 400 parts, 2 s (Ctrl-C stops it)'
    '\r\x1b[K'
    """

    __slots__ = ("_clock", "_next", "_of", "_show", "_shown", "_start", "_total", "_what")

    def __init__(
        self,
        what: str,
        of: str,
        total: int | None = None,
        *,
        clock: Callable[[], float] | None = None,
        stream: Stream | None = None,
    ) -> None:
        self._what, self._of, self._total = what, of, total
        self._show = _shower(stream)
        self._shown = False
        self._clock = time.monotonic if clock is None else clock
        self._start = self._clock()
        self._next = self._start + _FIRST

    def __enter__(self) -> Self:
        return self

    def __call__(self, done: int) -> None:
        """So much is done."""
        if self._show is None:
            return
        now = self._clock()
        if now < self._next:
            return
        self._next = now + _AGAIN
        self._shown = True
        counted = f"{done}" if self._total is None else f"{done} of {self._total}"
        self._show(f"{self._what}: {counted} {self._of}, {now - self._start:.0f} s (Ctrl-C stops it)")

    def __exit__(
        self, kind: type[BaseException] | None, error: BaseException | None, trace: TracebackType | None
    ) -> None:
        if self._shown and self._show is not None:
            self._show("")


def _shower(stream: Stream | None) -> Show | None:
    """How to show a line to whoever looks on; None when nobody does."""
    at: Stream | None = sys.stderr if stream is None else stream
    if at is not None and at.isatty():
        return _Line(at)
    return _in_notebook() if stream is None else None


class _Line:
    """The last line of a terminal, written over again and again."""

    def __init__(self, stream: Stream) -> None:
        self._stream = stream

    def __call__(self, text: str) -> None:
        self._stream.write(f"\r\x1b[K{text}")
        self._stream.flush()


def _in_notebook() -> Show | None:
    """A place below the cell that runs, where this is a notebook: a shell of IPython that has a kernel."""
    running = sys.modules.get("IPython")  # never imported for this: where it is not loaded, no notebook runs
    shell: Any = running.get_ipython() if running is not None else None
    return _Place() if getattr(shell, "kernel", None) is not None else None


class _Place:
    """A display in a notebook, made when there is something to show."""

    def __init__(self) -> None:
        self._handle: Any = None

    def __call__(self, text: str) -> None:
        from IPython.display import DisplayHandle

        data = {"text/plain": text}
        if self._handle is None:
            self._handle = DisplayHandle()
            self._handle.display(data, raw=True)
        else:
            self._handle.update(data, raw=True)
