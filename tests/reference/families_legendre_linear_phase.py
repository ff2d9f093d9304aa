"""Published Legendre-Papoulis polynomials and poles of linear-phase filters.

Digits as printed, each row with its source; ``from_memory`` marks rows of which nobody has seen the print. The
polynomials L_n are in ascending powers of w^2, exact. Poles are given as (sigma, omega) of the pole
-sigma + j omega, one of a pair, for 3 dB at 1 rad/s.
"""

from __future__ import annotations

from dataclasses import dataclass

from tests.reference.families import Polynomial, Row

__all__ = ["DENOMINATORS", "LINEAR_PHASE", "OPTIMUM", "LinearPhase", "Optimum"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Optimum(Row):
    """L_n, ascending in w^2."""

    coefficients: tuple[int, ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class LinearPhase(Row):
    """Poles printed to so many decimals. ``misprint`` is the place of a printed pair that is not that of the
    definition, which has ``right`` there.
    """

    error: str
    sigma_omega: tuple[tuple[float, float], ...]
    decimals: int = 4
    misprint: int | None = None
    right: tuple[float, float] = (0.0, 0.0)


PAPOULIS = "A. Papoulis, Proc. IRE 46 (1958) 606-609 and 47 (1959) 332-333; L5 example and OEIS A245320 cited in a public code listing; L3, L5, L6, L7, L10 rows read in a second public listing; L9 (one zero missing there) and L8 (misprinted there) too; L4 recalled; all ten rows reproduced exactly by the published integral definition"
KUO = "Kuo, Network Analysis and Synthesis, 2nd ed. 1966, ch. 13 example (0.577/(s^3+1.31s^2+1.359s+0.577)); from memory, reproduced by spectral factorisation"
#: Reprinted under the heading "Gaussian to 12 dB", which it is not; see ``misprints``.
ANALOG_0_5 = "Analog Devices pole tables as reprinted (mislabelled) on RF Cafe"
ANALOG_0_05 = "Basic Linear Design ch. 8 'linear phase with equiripple error 0.05 deg', from memory; confirmed by the phase ripple"

OPTIMUM: tuple[Optimum, ...] = (
    Optimum(id="papoulis-L-1", family="Legendre-Papoulis", order=1, source=PAPOULIS, coefficients=(0, 1)),
    Optimum(id="papoulis-L-2", family="Legendre-Papoulis", order=2, source=PAPOULIS, coefficients=(0, 0, 1)),
    Optimum(
        id="papoulis-L-3", family="Legendre-Papoulis", order=3, source=PAPOULIS, coefficients=(0, 1, -3, 3)
    ),
    Optimum(
        id="papoulis-L-5",
        family="Legendre-Papoulis",
        order=5,
        source=PAPOULIS,
        coefficients=(0, 1, -8, 28, -40, 20),
    ),
    Optimum(
        id="papoulis-L-7",
        family="Legendre-Papoulis",
        order=7,
        source=PAPOULIS,
        coefficients=(0, 1, -15, 105, -355, 615, -525, 175),
    ),
    Optimum(
        id="papoulis-L-9",
        family="Legendre-Papoulis",
        order=9,
        source=PAPOULIS,
        coefficients=(0, 1, -24, 276, -1624, 5376, -10416, 11704, -7056, 1764),
    ),
    Optimum(
        id="papoulis-L-10",
        family="Legendre-Papoulis",
        order=10,
        source=PAPOULIS,
        coefficients=(0, 0, 15, -280, 2310, -10416, 27860, -45360, 44100, -23520, 5292),
    ),
)

DENOMINATORS: tuple[Polynomial, ...] = (
    Polynomial(
        id="papoulis-den-3",
        family="Legendre-Papoulis",
        order=3,
        source=KUO,
        from_memory=True,
        coefficients=(0.577, 1.359, 1.31, 1),
        decimals=3,
    ),
)

LINEAR_PHASE: tuple[LinearPhase, ...] = (
    LinearPhase(
        id="linphase0.5-poles-2",
        family="linear phase",
        order=2,
        source=ANALOG_0_5,
        error="0.5 deg",
        sigma_omega=((0.859, 0.6981),),
    ),
    LinearPhase(
        id="linphase0.5-poles-3",
        family="linear phase",
        order=3,
        source=ANALOG_0_5,
        error="0.5 deg",
        sigma_omega=((0.6969, 1.1318), (0.8257, 0)),
    ),
    LinearPhase(
        id="linphase0.5-poles-4",
        family="linear phase",
        order=4,
        source=ANALOG_0_5,
        error="0.5 deg",
        sigma_omega=((0.7448, 0.5133), (0.6037, 1.4983)),
    ),
    LinearPhase(
        id="linphase0.5-poles-5",
        family="linear phase",
        order=5,
        source=ANALOG_0_5,
        error="0.5 deg",
        sigma_omega=((0.6775, 0.9401), (0.5412, 1.8256), (0.7056, 0)),
    ),
    LinearPhase(
        id="linphase0.5-poles-6",
        family="linear phase",
        order=6,
        source=ANALOG_0_5,
        error="0.5 deg",
        sigma_omega=((0.6519, 0.4374), (0.6167, 1.2963), (0.4893, 2.0982)),
    ),
    LinearPhase(
        id="linphase0.5-poles-7",
        family="linear phase",
        order=7,
        source=ANALOG_0_5,
        error="0.5 deg",
        sigma_omega=((0.619, 0.8338), (0.5816, 1.6455), (0.4598, 2.3994), (0.6283, 0)),
        misprint=1,
        right=(0.5816, 1.6453),
    ),
    LinearPhase(
        id="linphase0.5-poles-8",
        family="linear phase",
        order=8,
        source=ANALOG_0_5,
        error="0.5 deg",
        sigma_omega=((0.5791, 0.3857), (0.5665, 1.1505), (0.5303, 1.8914), (0.4148, 2.578)),
        misprint=3,
        right=(0.4184, 2.578),
    ),
    LinearPhase(
        id="linphase0.05-poles-4",
        family="linear phase",
        order=4,
        source=ANALOG_0_05,
        from_memory=True,
        error="0.05 deg",
        sigma_omega=((0.9648, 0.4748), (0.7448, 1.4008)),
    ),
    LinearPhase(
        id="linphase0.05-poles-6",
        family="linear phase",
        order=6,
        source=ANALOG_0_05,
        from_memory=True,
        error="0.05 deg",
        sigma_omega=((0.8904, 0.4111), (0.8233, 1.2179), (0.6152, 1.981)),
    ),
    LinearPhase(
        id="linphase0.05-poles-8",
        family="linear phase",
        order=8,
        source=ANALOG_0_05,
        from_memory=True,
        error="0.05 deg",
        sigma_omega=((0.8195, 0.3711), (0.793, 1.1054), (0.7213, 1.8134), (0.5341, 2.4761)),
    ),
)
