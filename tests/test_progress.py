"""Progress: nothing before a second, nothing where nobody looks, nothing left behind."""

from __future__ import annotations

import sys
from io import StringIO
from types import SimpleNamespace
from typing import Any

import pytest

import symnet as sn
from symnet.exact.matrices import Matrix
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


def shown_at_once(monkeypatch: pytest.MonkeyPatch) -> Terminal:
    """A terminal on which every look at the clock is a second later than the one before."""
    clock, terminal = Clock(), Terminal()

    def later() -> float:
        clock.now += 1
        return clock.now

    monkeypatch.setattr(sys, "stderr", terminal)
    monkeypatch.setattr("symnet.progress.time", SimpleNamespace(monotonic=later))
    return terminal


def test_roots_of_high_order_tell_how_far_they_are(monkeypatch: pytest.MonkeyPatch) -> None:
    """Every look at the clock is a second later than the one before, so that the line is shown at once."""
    terminal = shown_at_once(monkeypatch)
    p = [1]
    for k in range(1, 31):  # (s + 1)(s + 2)...(s + 30), which doubles cannot tell apart
        p = [k * a + b for a, b in zip([*p, 0], [0, *p], strict=True)]
    assert len(roots(p)) == 30
    assert " of 30 roots apart" in terminal.getvalue()
    assert terminal.getvalue().endswith(WIPE)


def test_a_diagram_tells_how_many_parts_are_decided(monkeypatch: pytest.MonkeyPatch) -> None:
    terminal = shown_at_once(monkeypatch)
    assert not build(3, [Piece(a, b, a, b) for a, b in ((0, 1), (1, 2), (2, None), (0, 2))]).is_zero
    assert "building the diagram: 3 of 4 parts decided" in terminal.getvalue()
    assert terminal.getvalue().endswith(WIPE)


def test_a_derivation_tells_that_it_is_confirmed_and_written_out(monkeypatch: pytest.MonkeyPatch) -> None:
    terminal = shown_at_once(monkeypatch)
    net = sn.network("in -- R1 -- a -- C1 -- gnd; a -- R2 -- b -- C2 -- gnd; drive in; read b")
    assert len(sn.derive(net).denominator) == 5
    said = terminal.getvalue()
    for line in ("solving the nodal equations: ", " unknowns eliminated", "writing out: 5 of 5 terms"):
        assert line in said
    assert said.endswith(WIPE)


def test_a_common_factor_tells_how_far_it_is(monkeypatch: pytest.MonkeyPatch) -> None:
    """The compensated divider, whose mode a tie hides."""
    terminal = shown_at_once(monkeypatch)
    divided = "in -- R1 || C1 -- out -- R2 || C2 -- gnd; drive in; read out; C2 = R1*C1/R2"
    assert sn.derive(sn.network(divided)).hidden
    said = terminal.getvalue()
    assert "looking for a common factor: 0 coefficients compared" in said
    assert "dividing by a common factor: 1 terms of the quotient found" in said
    assert said.endswith(WIPE)


def test_numbers_without_a_diagram_tell_how_far_they_are(monkeypatch: pytest.MonkeyPatch) -> None:
    """(1 + 2 s) (3 + s) from two pieces that share no node."""
    terminal = shown_at_once(monkeypatch)
    matrix = Matrix(2, (Piece(0, None, 0, None), Piece(1, None, 1, None)), (0, 1))
    assert matrix.coefficients([[1, 2], [3, 1]], [[1], [1]]) == [3, 7, 2]
    assert "evaluating the determinant: 2 of 3 whole s" in terminal.getvalue()
    assert terminal.getvalue().endswith(WIPE)
