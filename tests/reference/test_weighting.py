"""Frequency weightings: the networks meet every row of the published tables and have the standard's poles."""

from __future__ import annotations

from itertools import pairwise
from math import pi, sqrt

import pytest

from tests.reference import weighting
from tests.reference.cases import Case
from tests.reference.comparing import decibels, numeric, poles

EXACT = [1000 * 10 ** ((k - 20) / 10) for k in range(len(weighting.ROWS))]


def standard_poles() -> tuple[float, float, float, float]:
    """f1 ... f4 from the defining relations of IEC 61672-1."""
    fr, fL, fH, fA = 1000.0, 10**1.5, 10**3.9, 10**2.45
    D = sqrt(0.5)
    b = (1 / (1 - D)) * (fr**2 + fL**2 * fH**2 / fr**2 - D * (fL**2 + fH**2))
    c = fL**2 * fH**2
    root = sqrt(b**2 - 4 * c)
    return sqrt((-b - root) / 2), (3 - sqrt(5)) / 2 * fA, (3 + sqrt(5)) / 2 * fA, sqrt((-b + root) / 2)


def test_nominal_frequencies_stand_for_the_exact_ones() -> None:
    assert [row[0] for row in weighting.ROWS] == pytest.approx(EXACT, rel=0.015)


@pytest.mark.parametrize(
    ("case", "column", "tolerance"),
    [(weighting.A, 1, 0.051), (weighting.C, 2, 0.051), (weighting.U, 3, 0.06)],
)
def test_every_row_of_the_table(case: Case, column: int, tolerance: float) -> None:
    H = numeric(case)
    for f, row in zip(EXACT, weighting.ROWS, strict=True):
        if row[column] is not None:
            assert decibels(H, f) - decibels(H, 1000) == pytest.approx(row[column], abs=tolerance), f


def test_quoted_poles_are_those_of_the_relations() -> None:
    assert pytest.approx(standard_poles(), rel=5e-8) == weighting.PUBLISHED_POLES


@pytest.mark.parametrize(
    ("case", "which"), [(weighting.A, (0, 0, 1, 2, 3, 3)), (weighting.C, (0, 0, 3, 3))], ids=["A", "C"]
)
def test_networks_have_the_poles_of_the_standard(case: Case, which: tuple[int, ...]) -> None:
    wanted = [standard_poles()[k] for k in which]
    found = sorted(-p.real / (2 * pi) for p in poles(numeric(case)))
    assert found == pytest.approx(wanted, rel=1e-14)
    # equal parts give equal poles, exactly: the two at f1 and the two at f4
    assert sum(a == b for a, b in pairwise(found)) == 2


@pytest.mark.parametrize("letter", ["A", "B", "C"])
def test_loss_at_1_khz(letter: str) -> None:
    case: Case = getattr(weighting, letter)
    assert -decibels(numeric(case), 1000) == pytest.approx(weighting.LOSS_AT_1_KHZ[letter], abs=0.005)


def test_d_weighting_magnitude_formula() -> None:
    H = numeric(weighting.D)
    for f in EXACT:
        f2 = f * f
        magnitude = (
            f
            / 6.8966888496476e-5
            * sqrt(
                ((1037918.48 - f2) ** 2 + 1080768.16 * f2)
                / ((9837328 - f2) ** 2 + 11723776 * f2)
                / ((f2 + 79919.29) * (f2 + 1345600))
            )
        )
        assert abs(H(2j * pi * f)) == pytest.approx(magnitude, rel=0.00115)  # 0.01 dB
