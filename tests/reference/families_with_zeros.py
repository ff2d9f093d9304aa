"""Published poles and zeros of inverse Chebyshev and elliptic filters.

Digits as printed, each row with its source. Poles are given as (sigma, omega) of the pole -sigma + j omega, one of a
pair; zeros as the omega of +-j omega. Tolerances are relative to the magnitude of the root.
"""

from __future__ import annotations

from dataclasses import dataclass

from tests.reference.families import Row

__all__ = ["CAUER", "INVERSE_POLES", "INVERSE_ZEROS", "Cauer", "InversePoles", "InverseZeros"]


@dataclass(frozen=True, slots=True, kw_only=True)
class InversePoles(Row):
    """Poles for the edge of the stop band at 1 rad/s."""

    attenuation: str
    sigma_omega: tuple[tuple[float, float], ...]
    within: float


@dataclass(frozen=True, slots=True, kw_only=True)
class InverseZeros(Row):
    """Zeros for 3 dB at 1 rad/s, with the -3 dB frequency over the edge of the stop band."""

    attenuation: str
    w3dB_over_edge: float
    zeros: tuple[float, ...]
    within: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Cauer(Row):
    """Poles and zeros for the edge of the ripple at 1 rad/s and that of the stop band at ``edge``, to 7 decimals.

    The zeros are those of the definition to the last digit. The poles differ from it by up to k1^2, 3e-5, since the
    table was computed with sn(jx, k1) taken for j sinh(x), k1 = 0: with that they come out to the last digit, which the
    test shows. ``misprint`` is the place of a printed pair that does not, ``right`` what does.
    """

    edge: float
    attenuation_db: float
    """As printed: the whole dB of the class."""
    sigma_omega: tuple[tuple[float, float], ...]
    zeros: tuple[float, ...]
    misprint: int | None = None
    right: tuple[float, float] = (0.0, 0.0)


WINDER_3_22 = "S. Winder, Analog and Digital Filter Design, 2nd ed., Newnes 2002, Table 3.22 p. 114 (natural, stopband-edge normalised)"
WINDER_3_20 = (
    "S. Winder, Analog and Digital Filter Design, 2nd ed., Newnes 2002, Table 3.20 p. 113 (3 dB normalised)"
)
WINDER_3_28_3_30 = (
    "S. Winder, Analog and Digital Filter Design, 2nd ed., Newnes 2002, Tables 3.28 and 3.30 p. 120-121"
)

INVERSE_POLES: tuple[InversePoles, ...] = (
    InversePoles(
        id="invcheb30-poles-4",
        family="inverse Chebyshev",
        order=4,
        source=WINDER_3_22,
        attenuation="30 dB",
        sigma_omega=((0.19879, 0.61798), (0.68363, 0.36464)),
        within=3e-05,
    ),
    InversePoles(
        id="invcheb30-poles-5",
        family="inverse Chebyshev",
        order=5,
        source=WINDER_3_22,
        attenuation="30 dB",
        sigma_omega=((0.16241, 0.73493), (0.62225, 0.66471), (1.07787, 0)),
        within=3e-05,
    ),
)

INVERSE_ZEROS: tuple[InverseZeros, ...] = (
    InverseZeros(
        id="invcheb40-zeros-8",
        family="inverse Chebyshev",
        order=8,
        source=WINDER_3_20,
        attenuation="40 dB",
        w3dB_over_edge=0.8147,
        zeros=(1.25149, 1.47623, 2.20934, 6.29166),
        within=2e-05,
    ),
    InverseZeros(
        id="invcheb40-zeros-9",
        family="inverse Chebyshev",
        order=9,
        source=WINDER_3_20,
        attenuation="40 dB",
        w3dB_over_edge=0.84865,
        zeros=(1.19652, 1.36063, 1.83318, 3.44524),
        within=2e-05,
    ),
)

#: Two zeros of the table are misprints and stand right here: see ``misprints``.
CAUER: tuple[Cauer, ...] = (
    Cauer(
        id="cauer-1dB-n5-ws1.2",
        family="elliptic",
        order=5,
        source=WINDER_3_28_3_30,
        ripple="1 dB",
        edge=1.2,
        attenuation_db=38,
        sigma_omega=((0.2175734, 0.7481695), (0.0480848, 0.9984797), (0.3915898, 0)),
        zeros=(1.722895, 1.23334),
    ),
    Cauer(
        id="cauer-1dB-n4-ws1.4",
        family="elliptic",
        order=4,
        source=WINDER_3_28_3_30,
        ripple="1 dB",
        edge=1.4,
        attenuation_db=36,
        sigma_omega=((0.370285, 0.4971396), (0.0977832, 0.9955948)),
        zeros=(3.169408, 1.480785),
    ),
    Cauer(
        id="cauer-1dB-n4-ws1.5",
        family="elliptic",
        order=4,
        source=WINDER_3_28_3_30,
        ripple="1 dB",
        edge=1.5,
        attenuation_db=39,
        sigma_omega=((0.3649968, 0.4806942), (0.1044116, 0.9939388)),
        zeros=(3.478406, 1.592342),
    ),
    Cauer(
        id="cauer-1dB-n6-ws1.3",
        family="elliptic",
        order=6,
        source=WINDER_3_28_3_30,
        ripple="1 dB",
        edge=1.3,
        attenuation_db=57,
        sigma_omega=((0.2757091, 0.335609), (0.1454597, 0.8107855), (0.0390806, 0.9974829)),
        zeros=(4.130155, 1.66429, 1.328862),
    ),
    Cauer(
        id="cauer-1dB-n6-ws1.4",
        family="elliptic",
        order=6,
        source=WINDER_3_28_3_30,
        ripple="1 dB",
        edge=1.4,
        attenuation_db=63,
        sigma_omega=((0.2669266, 0.3208161), (0.1508535, 0.7950983), (0.0431288, 0.9968596)),
        zeros=(4.618428, 1.825298, 1.434274),
    ),
    Cauer(
        id="cauer-1dB-n5-ws1.5",
        family="elliptic",
        order=5,
        source=WINDER_3_28_3_30,
        ripple="1 dB",
        edge=1.5,
        attenuation_db=53,
        sigma_omega=((0.2288748, 0.681675), (0.0665407, 0.9952537), (0.3378465, 0)),
        zeros=(2.331876, 1.557406),
        misprint=0,
        right=(0.2288748, 0.6816781),
    ),
    Cauer(
        id="cauer-1dB-n4-ws2.0",
        family="elliptic",
        order=4,
        source=WINDER_3_28_3_30,
        ripple="1 dB",
        edge=2.0,
        attenuation_db=51,
        sigma_omega=((0.3512734, 0.4424978), (0.1214786, 0.9891762)),
        zeros=(4.922113, 2.143189),
    ),
)
