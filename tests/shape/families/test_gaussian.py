"""Gaussian and transitional Gaussian filters: the printed digits, and the definitions at any order."""

from __future__ import annotations

import math
from collections.abc import Callable

import mpmath
import numpy as np
import pytest
from numpy.typing import NDArray

from symnet.errors import LimitError, NotationError
from symnet.shape.families import Prototype
from symnet.shape.families.gaussian import GAUSSIAN, gaussian
from symnet.shape.families.transitional_gaussian import gaussian_to_6db, gaussian_to_12db
from tests.reference.families_without_ripple import GAUSSIAN_POLES, TransitionalPoles

MAKERS: dict[str, Callable[[int], Prototype]] = {
    "gaussian to 6 dB": gaussian_to_6db,
    "gaussian to 12 dB": gaussian_to_12db,
}
LEVELS: dict[object, float] = {gaussian_to_6db: 20 * math.log10(2), gaussian_to_12db: 20 * math.log10(4)}


def loss(made: Prototype, w: NDArray[np.float64]) -> NDArray[np.float64]:
    """-20 log10 |H(jw)/H(0)| as the sum over the poles, in dB."""
    s = 1j * w[:, None]
    return np.asarray(20 * np.log10(np.abs(1 - s / np.asarray(made.poles))).sum(axis=1))


def deviation(made: Prototype, level: float) -> NDArray[np.float64]:
    """loss - c w^2 up to where the loss reaches the level, with c such that half a ripple is left there; in dB."""
    grid = np.linspace(
        0, 3, 30_001
    )  # with many ripples the level is crossed more than once; the last time counts
    last = int(np.flatnonzero(loss(made, grid) < level)[-1])
    low, high = grid[last], grid[last + 1]
    for _ in range(60):
        middle = (low + high) / 2
        low, high = (middle, high) if loss(made, np.array([middle]))[0] < level else (low, middle)
    x = np.sin(np.linspace(0, math.pi / 2, 20_001))  # denser where the ripples are
    half = 0.05 if made.order % 2 else -0.05
    return loss(made, high * x) - (level - half) * x**2


class TestGaussian:
    @pytest.mark.parametrize("order", [*range(1, 13), 30, 60])
    def test_is_the_series_of_the_exponential(self, order: int) -> None:
        """|H(jw)|^-2 = sum over k = 0 ... n of w^(2k)/k!."""
        made = gaussian(order)
        assert len(made.poles) == order
        assert all(p.real < 0 for p in made.poles)
        for w in (0.2, 0.8, 1.0, 1.5, 2.5):
            series = math.fsum(w ** (2 * k) / math.factorial(k) for k in range(order + 1))
            assert abs(made(1j * w)) ** -2 == pytest.approx(series, rel=1e-11)

    def test_goes_to_the_bell_curve(self) -> None:
        """-3.0103 dB at sqrt(ln 2) and exp(-w^2/2) elsewhere."""
        made = gaussian(60)
        assert made.reference("w3dB").w == pytest.approx(math.sqrt(math.log(2)), rel=1e-12)
        assert abs(made(2j)) == pytest.approx(math.exp(-2), rel=1e-12)

    def test_conditions_are_those_of_the_exact_square(self) -> None:
        """Order 2: |D|^2 = 1 + x + x^2/2 with D = 1 + a s + b s^2 means b = 1/sqrt 2, a^2 = 1 + sqrt 2."""
        b = 1 / math.sqrt(2)
        (left,) = GAUSSIAN.conditions((1.0, math.sqrt(1 + 2 * b), b))
        assert left == pytest.approx(0, abs=1e-14)

    @pytest.mark.parametrize("order", [2, 5, 9])
    def test_more_digits_are_the_same_poles(self, order: int) -> None:
        made = gaussian(order)
        assert [complex(p) for p in made.precise(30)[0]] == pytest.approx(made.poles, rel=1e-15)


class TestTransitional:
    @pytest.mark.parametrize("row", GAUSSIAN_POLES, ids=lambda row: row.id)
    def test_every_printed_digit(self, row: TransitionalPoles) -> None:
        upper = [p for p in MAKERS[row.family](row.order).poles if p.imag >= 0]
        found = sorted((round(-p.real, 4), round(p.imag, 4)) for p in upper)
        assert found == sorted(row.sigma_omega)

    @pytest.mark.parametrize("order", [2, 3, 4, 5, 9, 20])
    @pytest.mark.parametrize("make", [gaussian_to_6db, gaussian_to_12db])
    def test_more_digits_are_the_same_poles(self, make: Callable[[int], Prototype], order: int) -> None:
        """They agree with the doubles, with each other, and with half power at 1 rad/s."""
        made = make(order)
        some, more = made.precise(30)[0], made.precise(45)[0]
        assert [complex(p) for p in some] == pytest.approx(made.poles, rel=1e-12)
        assert max(abs(p - q) for p, q in zip(some, more, strict=True)) < 1e-29 * max(map(abs, more))
        with mpmath.workdps(50):
            square = mpmath.fprod(abs(1 - 1j / p) ** 2 for p in more)
            assert abs(square - 2) < mpmath.mpf(10) ** -42

    @pytest.mark.parametrize("row", [row for row in GAUSSIAN_POLES if row.heading], ids=lambda row: row.id)
    def test_the_heading_of_the_page_is_another_family(self, row: TransitionalPoles) -> None:
        """Rows that the page puts under "Gaussian to 6 dB" are Gaussian to 12 dB: no pole fits the heading."""
        headed = [p for p in MAKERS["gaussian to 6 dB"](row.order).poles if p.imag >= 0]
        for sigma, omega in row.sigma_omega:
            assert min(abs(complex(-sigma, omega) - p) for p in headed) > 0.008

    @pytest.mark.parametrize("row", [row for row in GAUSSIAN_POLES if row.printed], ids=lambda row: row.id)
    def test_misprinted_rows_contradict_their_own_normalisation(self, row: TransitionalPoles) -> None:
        """With the corrected digits the loss is 3.01 dB at 1 rad/s to the last printed place, as printed it is not."""

        def at_1(rows: tuple[tuple[float, float], ...]) -> float:
            poles = np.array([complex(-s, sign * w) for s, w in rows for sign in ((1, -1) if w else (1,))])
            return float(20 * np.log10(np.abs(1 - 1j / poles)).sum())

        assert at_1(row.sigma_omega) == pytest.approx(10 * math.log10(2), abs=1e-3)
        assert abs(at_1(row.printed) - 10 * math.log10(2)) > 0.1

    @pytest.mark.parametrize("order", [*range(2, 13), 25, 60])
    @pytest.mark.parametrize("make", [gaussian_to_6db, gaussian_to_12db])
    def test_ripples_about_a_gaussian_are_equal(self, make: Callable[[int], Prototype], order: int) -> None:
        """loss - c w^2 turns n - 1 times, at +-0.1 dB and 0 in turn, and is +-0.05 dB at the end: the definition."""
        made = make(order)
        assert all(p.real < 0 for p in made.poles)
        sign = 1 if order % 2 else -1
        assert loss(made, np.array([1.0]))[0] == pytest.approx(10 * math.log10(2), abs=1e-12)
        e = deviation(made, LEVELS[make])
        turns = np.flatnonzero(np.diff(np.sign(np.diff(e)))) + 1
        wanted = np.where(np.arange(order - 1) % 2, 0, sign * 0.1)
        assert e[turns[: order - 1]] == pytest.approx(wanted, abs=3e-5)
        if order > 3:  # the lowest orders cannot follow that far
            assert len(turns) == order - 1
            assert e.min() > min(0, sign * 0.1) - 3e-5
            assert e.max() < max(0, sign * 0.1) + 3e-5

    @pytest.mark.parametrize(
        ("make", "order", "above"),
        [(gaussian_to_6db, 2, 0.06), (gaussian_to_12db, 2, 1.12), (gaussian_to_12db, 3, 0.12)],
    )
    def test_what_the_lowest_orders_exceed_the_ripple_by(
        self, make: Callable[[int], Prototype], order: int, above: float
    ) -> None:
        e = deviation(make(order), LEVELS[make])
        assert e.max() - (0.1 if order % 2 else 0) == pytest.approx(above, abs=5e-3)

    @pytest.mark.parametrize("make", [gaussian_to_6db, gaussian_to_12db])
    def test_order_1_is_refused(self, make: Callable[[int], Prototype]) -> None:
        with pytest.raises(NotationError, match="begins with order 2"):
            make(1)
        with pytest.raises(NotationError, match="whole number"):
            make(0)
        with pytest.raises(LimitError):
            make(61)
