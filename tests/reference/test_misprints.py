"""Misprinted roots and polynomials: the printed value breaks what defines the family, the right one does not."""

from __future__ import annotations

import mpmath
import numpy as np
import pytest
from numpy.typing import NDArray

import symnet as sn
from symnet.shape.families.inverse_chebyshev import inverse_chebyshev
from symnet.shape.families.legendre import legendre, optimum_polynomial
from symnet.shape.families.linear_phase import linear_phase
from symnet.shape.verdict import Recognition
from tests.reference import families, families_legendre_linear_phase, finite_zeros, misprints


@pytest.mark.parametrize("case", misprints.MISPRINTED_ZEROS, ids=lambda case: str(case.printed))
def test_zeros_of_elliptic_filters(case: misprints.Zero) -> None:
    """m7: a zero is the stop-band edge over cd((2i - 1)K/N, k), the frequency of a peak of the pass band."""
    made = sn.elliptic(case.order, case.ripple, edge=case.edge)
    upper = [z.imag for z in made.zeros if z.imag > 0]
    assert min(abs(z / case.right - 1) for z in upper) < case.within
    assert min(abs(z / case.printed - 1) for z in upper) > 20 * case.within
    k = 1 / case.edge
    peaks = [
        float(mpmath.ellipfun("cd", (2 * i - 1) * mpmath.ellipk(k * k) / case.order, k=k))
        for i in range(1, case.order // 2 + 1)
    ]
    assert min(abs(case.right * g * k - 1) for g in peaks) < case.within
    assert min(abs(case.printed * g * k - 1) for g in peaks) > 20 * case.within


def heights(order: int, poles: list[complex], error: str) -> NDArray[np.float64]:
    """The extremes of the phase error in degrees, the straight line being that of the definition."""
    made = linear_phase(order, error).scaled("w3dB", 1.0)
    w = np.linspace(0, made.reference("phase_edge").w * 1.02, 20001)
    factors = np.angle(1j * w[:, None] - np.array(poles)) - np.angle(-np.array(poles))
    curve = np.degrees(factors.sum(axis=1) - w / made.reference("phase_line").w)
    slope = np.diff(curve)
    found: NDArray[np.float64] = np.abs(curve[1:-1][slope[1:] * slope[:-1] < 0])
    return found


@pytest.mark.parametrize("case", misprints.MISPRINTED_POLES, ids=lambda case: str(case.order))
def test_poles_of_linear_phase(case: misprints.Pole) -> None:
    """Equal ripples of the phase: with the printed pole they are several times as unequal as four digits make them."""
    (row,) = (
        row
        for row in families_legendre_linear_phase.LINEAR_PHASE
        if row.order == case.order and row.error == case.error
    )
    assert case.printed in row.sigma_omega
    spread = {}
    for pole in (case.printed, case.right):
        pairs = [pole if printed == case.printed else printed for printed in row.sigma_omega]
        upper = [complex(-sigma, omega) for sigma, omega in pairs]
        found = heights(case.order, upper + [p.conjugate() for p in upper if p.imag], case.error)
        assert len(found) == case.order
        spread[pole] = float(np.abs(found - 0.5).max())
    assert spread[case.right] < 0.02
    assert spread[case.printed] > 1.5 * spread[case.right]
    made = linear_phase(case.order, case.error).scaled("w3dB", 1.0)
    for (sigma, omega), is_there in ((case.printed, False), (case.right, True)):
        near = [p for p in made.poles if abs(p.real + sigma) < 5.5e-5 and abs(p.imag - omega) < 5.5e-5]
        assert bool(near) == is_there


def test_legendre_polynomial_of_order_8() -> None:
    """m11: L_n(1) = 1 puts half power at w = 1; with the misprint it is 13."""
    assert sum(misprints.MISPRINTED_POLYNOMIAL) == 13
    assert sum(optimum_polynomial(8)) == 1
    wrong = [
        k
        for k, (a, b) in enumerate(zip(misprints.MISPRINTED_POLYNOMIAL, optimum_polynomial(8), strict=True))
        if a != b
    ]
    assert wrong == [7]
    assert optimum_polynomial(8)[7] == -1680
    assert legendre(8).decibels(1.0) == pytest.approx(-3.0103, abs=1e-5)


def test_bessel_poles_said_to_be_for_3_db() -> None:
    """m8: order 4 is -3.061 dB at w = 1, and recognised by its shape all the same."""
    (row,) = (row for row in families.POLES if row.id == "bessel-3db-poles-winder-4")
    upper = [complex(-sigma, omega) for sigma, omega in row.sigma_omega]
    poles = upper + [p.conjugate() for p in upper]
    level = -20 * np.log10(np.abs(np.prod([1 - 1j / p for p in poles])))
    assert level == pytest.approx(-3.061, abs=5e-4)
    assert sn.bessel(4).scaled("w3dB", 1.0).decibels(1.0) == pytest.approx(-3.0103, abs=1e-5)
    denominator = np.poly(poles).real
    found = sn.recognise([float(f"{c:.9g}") for c in denominator])
    assert isinstance(found, Recognition)
    assert found.match is not None
    assert found.match.name.startswith("Bessel, order 4")
    assert found.match.prototype.reference("w3dB").w == pytest.approx(1 - 0.0076, abs=2e-3)


@pytest.mark.parametrize(
    "row",
    [row for row in families_legendre_linear_phase.LINEAR_PHASE if row.error == "0.5 deg"],
    ids=lambda row: row.id,
)
def test_the_heading_gaussian_to_12_db_is_wrong(row: families_legendre_linear_phase.LinearPhase) -> None:
    """m12: these sets do not keep to 3.0103 w^2 dB down to 12 dB; a phase of equal ripples is what they have."""
    pairs = list(row.sigma_omega)
    if row.misprint is not None:
        pairs[row.misprint] = row.right
    upper = [complex(-sigma, omega) for sigma, omega in pairs]
    poles = upper + [p.conjugate() for p in upper if p.imag]
    w = np.linspace(0, np.sqrt(12 / 3.0103), 101)
    loss = 20 * np.log10(np.abs(1 - 1j * w[:, None] / np.array(poles))).sum(axis=1)
    assert np.abs(loss - 3.0103 * w**2).max() > 0.3
    assert heights(row.order, poles, row.error) == pytest.approx(0.5, abs=0.03)


def test_inverse_chebyshev_ladder_of_90_db() -> None:
    """m5: Table 2.23 has C5 = 2.785139 for 90 dB, a digit lost from 2.785739.

    Of that row only C5 is at hand, so the ladder is computed: C1, L2 || Cp2, C3, L4 || Cp4, C5 between 1 ohm and 1 ohm,
    traps at the two zeros, the others by Newton steps from the row for 85 dB: the reflection A + B - C - D of its chain
    matrix has all its zeros at DC, and A + B + C + D has the product of the poles.
    """
    row = next(case for case in finite_zeros.CASES if case.id == "invcheb-n5-85dB")
    values = sn.derive(sn.network(row.text)).values
    names = ("C1", "L2", "C3", "L4", "C5")
    x = np.array([float(values[name]) for name in names])
    near, far = 1 / np.sin(2 * np.pi / 5), 1 / np.sin(np.pi / 5)
    wanted = np.poly(inverse_chebyshev(5, "90 dB").poles).real

    def chain(x: NDArray[np.float64]) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
        one, none = np.array([1.0]), np.array([0.0])
        a, b, c, d = one, none, none, one
        for k, value in enumerate(x):
            if k % 2:  # a trap, times its own 1 + s^2/w^2
                trap = np.array([1 / (near if k == 1 else far) ** 2, 0, 1])
                s_l = np.array([value, 0])
                a, b = np.polymul(a, trap), np.polyadd(np.polymul(a, s_l), np.polymul(b, trap))
                c, d = np.polymul(c, trap), np.polyadd(np.polymul(c, s_l), np.polymul(d, trap))
            else:
                s_c = np.array([value, 0])
                a, c = np.polyadd(a, np.polymul(b, s_c)), np.polyadd(c, np.polymul(d, s_c))
        left, right = np.polyadd(a, b), np.polyadd(c, d)
        return np.asarray(np.polyadd(left, right)), np.asarray(np.polysub(left, right))

    def wrong(x: NDArray[np.float64]) -> NDArray[np.float64]:
        total, reflected = chain(x)
        return np.append(reflected[1:5], total[0] / total[-1] - wanted[0] / wanted[-1])

    for _ in range(20):
        slopes = np.array([(wrong(x + h) - wrong(x - h)) / 2e-6 for h in 1e-6 * np.eye(5)])
        x = x - np.linalg.solve(slopes.T, wrong(x))
    total = chain(x)[0]
    assert total / total[0] == pytest.approx(wanted, rel=1e-7)
    assert x[4] == pytest.approx(2.785739, abs=2e-6)
    assert abs(x[4] - 2.785139) > 5e-4
