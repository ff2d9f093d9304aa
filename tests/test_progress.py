"""Progress: nothing before a second, nothing where nobody looks, nothing left behind."""

from __future__ import annotations

import sys
from io import StringIO
from types import SimpleNamespace
from typing import Any

import pytest

from symnet.exact.roots import roots
from symnet.exact.trees import Piece, build
from symnet.progress import Progress

WIPE = "\r\x1b[K"


class Terminal(StringIO):
    """A stream that says that a person reads it."""

    def isatty(self) -> bool:
        return True


class Clock:
    """A clock that stands still until it is set."""

    def __init__(self) -> None:
        self.now = 100.0

    def __call__(self) -> float:
        return self.now


def test_nothing_is_written_before_a_second_and_nothing_is_wiped_then() -> None:
    clock, terminal = Clock(), Terminal()
    with Progress("roots", "roots", 9, clock=clock, stream=terminal) as at:
        for k in range(9):
            clock.now += 0.1
            at(k)
    assert not terminal.getvalue()


def test_after_a_second_a_line_at_most_four_times_a_second() -> None:
    clock, terminal = Clock(), Terminal()
    with Progress("terms", "terms", clock=clock, stream=terminal) as at:
        for k in range(1, 301):
            clock.now = 100 + k / 100
            at(k)
    *lines, wiped = terminal.getvalue().split(WIPE)[1:]
    assert lines[0] == "terms: 100 terms, 1 s (Ctrl-C stops it)"
    assert 8 <= len(lines) <= 9
    assert not wiped


def test_an_interrupt_wipes_the_line() -> None:
    clock, terminal = Clock(), Terminal()

    def work() -> None:
        with Progress("diagram", "parts", 7, clock=clock, stream=terminal) as at:
            clock.now += 5
            at(3)
            raise KeyboardInterrupt

    with pytest.raises(KeyboardInterrupt):
        work()
    assert terminal.getvalue() == f"{WIPE}diagram: 3 of 7 parts, 5 s (Ctrl-C stops it){WIPE}"


def test_a_file_or_a_pipe_gets_nothing() -> None:
    clock, pipe = Clock(), StringIO()
    with Progress("diagram", "parts", 7, clock=clock, stream=pipe) as at:
        clock.now += 5
        at(3)
    assert not pipe.getvalue()


def test_a_process_without_stderr_gets_nothing(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(sys, "stderr", None)
    clock = Clock()
    with Progress("diagram", "parts", 7, clock=clock) as at:
        clock.now += 5
        at(3)


def test_a_notebook_gets_one_place_that_is_empty_in_the_end(monkeypatch: pytest.MonkeyPatch) -> None:
    shown: list[Any] = []
    display = SimpleNamespace(
        DisplayHandle=lambda: SimpleNamespace(
            display=lambda data, raw: shown.append(("new", data["text/plain"], raw)),
            update=lambda data, raw: shown.append(("again", data["text/plain"], raw)),
        )
    )
    shell = SimpleNamespace(get_ipython=lambda: SimpleNamespace(kernel=object()), display=display)
    monkeypatch.setitem(sys.modules, "IPython", shell)
    monkeypatch.setitem(sys.modules, "IPython.display", display)
    monkeypatch.setattr(sys, "stderr", StringIO())
    clock = Clock()
    with Progress("diagram", "parts", 7, clock=clock) as at:
        for k in (3, 4):
            clock.now += 5
            at(k)
    assert [(how, text.partition(",")[0]) for how, text, _ in shown] == [
        ("new", "diagram: 3 of 7 parts"),
        ("again", "diagram: 4 of 7 parts"),
        ("again", ""),
    ]


def test_roots_of_high_order_tell_how_far_they_are(monkeypatch: pytest.MonkeyPatch) -> None:
    """Every look at the clock is a second later than the one before, so that the line is shown at once."""
    clock, terminal = Clock(), Terminal()

    def later() -> float:
        clock.now += 1
        return clock.now

    monkeypatch.setattr(sys, "stderr", terminal)
    monkeypatch.setattr("symnet.progress.time", SimpleNamespace(monotonic=later))
    p = [1]
    for k in range(1, 31):  # (s + 1)(s + 2)...(s + 30), which doubles cannot tell apart
        p = [k * a + b for a, b in zip([*p, 0], [0, *p], strict=True)]
    assert len(roots(p)) == 30
    assert " of 30 roots apart" in terminal.getvalue()
    assert terminal.getvalue().endswith(WIPE)


def test_a_diagram_tells_how_many_parts_are_decided(monkeypatch: pytest.MonkeyPatch) -> None:
    clock, terminal = Clock(), Terminal()

    def later() -> float:
        clock.now += 1
        return clock.now

    monkeypatch.setattr(sys, "stderr", terminal)
    monkeypatch.setattr("symnet.progress.time", SimpleNamespace(monotonic=later))
    assert not build(3, [Piece(a, b, a, b) for a, b in ((0, 1), (1, 2), (2, None), (0, 2))]).is_zero
    assert "building the diagram: 3 of 4 parts decided" in terminal.getvalue()
    assert terminal.getvalue().endswith(WIPE)
