"""What a notebook is given: one entry for each method that is there, less what it does not want."""

from __future__ import annotations

from dataclasses import dataclass
from typing import ClassVar

from symnet.typeset.mime import METHODS, Shown


@dataclass(frozen=True, slots=True)
class Everything(Shown):
    name: str = "K"

    def to_text(self) -> str:
        return self.name

    def to_html(self) -> str:
        return f"<i>{self.name}</i>"

    def to_latex(self) -> str:
        return self.name

    def to_markdown(self) -> str:
        return f"*{self.name}*"


@dataclass(frozen=True, slots=True)
class TextOnly(Shown):
    def __str__(self) -> str:
        return "text"


class Environment(Shown):
    _formats: ClassVar[tuple[str, ...]] = ("text/latex",)

    def to_latex(self) -> str:
        return r"\begin{array}{l}1\end{array}"


def test_every_format_that_is_there() -> None:
    assert Everything()._repr_mimebundle_() == {
        "text/plain": "K",
        "text/html": "<i>K</i>",
        "text/latex": r"$\displaystyle K$",
        "text/markdown": "*K*",
    }
    assert set(METHODS) == set(Everything()._repr_mimebundle_())


def test_include_and_exclude_are_honoured() -> None:
    shown = Everything()
    assert set(shown._repr_mimebundle_(include={"text/html"})) == {"text/html"}
    assert set(shown._repr_mimebundle_(exclude=["text/html", "text/latex"])) == {
        "text/plain",
        "text/markdown",
    }
    assert set(shown._repr_mimebundle_(include={"text/html", "text/plain"}, exclude={"text/html"})) == {
        "text/plain"
    }
    assert shown._repr_mimebundle_(include={"image/png"}) == {}


def test_text_falls_back_on_str() -> None:
    assert TextOnly()._repr_mimebundle_() == {"text/plain": "text"}


def test_an_environment_is_not_put_between_dollars() -> None:
    assert Environment()._repr_mimebundle_() == {"text/latex": r"\begin{array}{l}1\end{array}"}
