"""The figures of a candidate as an engineer reads them: f0 and Q of each section, beside what was wanted."""

from __future__ import annotations

import math
from collections.abc import Sequence
from fractions import Fraction
from typing import TYPE_CHECKING

import numpy as np

from symnet.values.choosing_aim import Aim, Floats
from symnet.values.choosing_result import Outcome

if TYPE_CHECKING:
    from symnet.values.choosing_model import Model

__all__ = ["outcomes_of"]


def outcomes_of(aim: Aim, model: Model, values: Sequence[Fraction]) -> tuple[Outcome, ...]:
    """f0 and Q of the sections, frequencies of zeros, K and the largest error in dB, for these values (SI)."""
    figures = model.figures(aim, [np.array([float(value)]) for value in values])[:, 0]
    n, q = len(aim.poles), len(aim.zeros)
    c = np.concatenate([[1.0], figures[:n]])
    found = _section_outcomes(aim.poles, (np.roots(c[::-1]) * aim.unit).tolist())
    for k, (wanted, got) in enumerate(
        _paired(aim.zeros, np.concatenate([[1.0], figures[n : n + q]]), aim.unit)
    ):
        found.append(
            Outcome(f"f of zero {k + 1}", abs(wanted) / 2 / math.pi, abs(got) / 2 / math.pi, unit="Hz")
        )
    if aim.gain is not None:
        found.append(Outcome("K", aim.gain, float(figures[-1]), model.H.dimension))
    if aim.objective == "dB":
        errors = aim.deviation(figures[:, None])[:, 0]
        worst = int(np.argmax(np.abs(errors)))
        where = float(aim.frequencies[worst])
        found.append(Outcome("largest error", None, float(errors[worst]), unit="dB", where=where))
    return tuple(found)


def _paired(wanted: Sequence[complex], c: Floats, unit: float) -> list[tuple[complex, complex]]:
    """Zeros beside what was wanted, the upper ones of pairs, by rising frequency."""
    both = [
        sorted((r for r in roots if r.imag >= 0), key=lambda r: (abs(r), r.imag))
        for roots in (wanted, (np.roots(c[::-1]) * unit).tolist())
    ]
    return list(zip(*both, strict=True)) if len(both[0]) == len(both[1]) else []


def _section_outcomes(wanted: Sequence[complex], got: Sequence[complex]) -> list[Outcome]:
    """f0 and Q of the sections; beside those that were wanted, where there are as many of each kind."""
    asked, obtained = _sections(wanted), _sections(got)
    fits = [q is None for _, q in asked] == [q is None for _, q in obtained]
    found = []
    for k, (f, q) in enumerate(obtained):
        mark = f" of section {k + 1}" if len(obtained) > 1 else ""
        found.append(Outcome(f"f0{mark}", asked[k][0] if fits else None, f, unit="Hz"))
        if q is not None:
            found.append(Outcome(f"Q{mark}", asked[k][1] if fits else None, q))
    return found


def _sections(roots: Sequence[complex]) -> list[tuple[float, float | None]]:
    """f0 in Hz and Q of each pair, f0 alone of a real pole, by rising f0; two poles in all are one section."""
    if len(roots) == 2:
        w0, total = math.sqrt(abs(roots[0] * roots[1])), -(roots[0] + roots[1]).real
        return [(w0 / 2 / math.pi, w0 / total if total else math.inf)]
    found: list[tuple[float, float | None]] = []
    for root in roots:
        size = abs(root)
        if root.imag > 1e-12 * size:
            found.append((size / 2 / math.pi, size / (-2 * root.real) if root.real else math.inf))
        elif abs(root.imag) <= 1e-12 * size:
            found.append((size / 2 / math.pi, None))
    return sorted(found, key=lambda pair: (pair[1] is not None, pair[1] or 0, pair[0]))
