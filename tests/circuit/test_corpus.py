"""Notation 1 is frozen: what a text meant once, it means in every later release."""

from __future__ import annotations

import pytest

import symnet as sn

from .corpus import CORPUS


@pytest.mark.parametrize(("text", "written"), CORPUS, ids=[str(k) for k in range(len(CORPUS))])
def test_a_text_reads_as_it_always_did(text: str, written: str) -> None:
    net = sn.network(text)
    assert net.to_text() == written
    assert sn.network(written) == net
