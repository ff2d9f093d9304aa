"""Published roots and polynomials that are demonstrably wrong, with what is right; misprinted elements of ladders
are in ``test_element_tables``.

Each is held to the identity that defines its family: the printed value breaks it, the right one does not, and no
prototype has the printed one.
"""

from __future__ import annotations

from dataclasses import dataclass

__all__ = ["MISPRINTED_POLES", "MISPRINTED_POLYNOMIAL", "MISPRINTED_ZEROS", "Pole", "Zero"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Zero:
    """A zero of an elliptic filter of ``ripple`` and stop-band ``edge``, the edge of the ripple at 1 rad/s."""

    where: str
    order: int
    ripple: str
    edge: float
    printed: float
    right: float
    within: float
    """Relative: the digits that the right value has."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Pole:
    """A pole -sigma + j omega of a linear-phase filter with 0.5 degree, 3 dB at 1 rad/s."""

    where: str
    order: int
    error: str
    printed: tuple[float, float]
    right: tuple[float, float]


WINDER_3_30 = (
    "S. Winder, Analog and Digital Filter Design, 2nd ed., Newnes 2002, Table 3.30 (public text copy)"
)
ANALOG_0_5 = "Analog Devices pole tables as reprinted on RF Cafe (under 'Gaussian to 12 dB')"

MISPRINTED_ZEROS: tuple[Zero, ...] = (
    Zero(
        where=WINDER_3_30,
        order=6,
        ripple="1 dB",
        edge=1.2,
        printed=1.22716,
        right=1.222716,
        within=1e-6,
    ),
    Zero(
        where=WINDER_3_30,
        order=6,
        ripple="1 dB",
        edge=1.4,
        printed=1.431274,
        right=1.434274,
        within=1e-6,
    ),
    # found by the tests here: one digit
    Zero(
        where=WINDER_3_30,
        order=6,
        ripple="1 dB",
        edge=1.3,
        printed=4.130155,
        right=4.130255,
        within=1e-6,
    ),
)

#: Found by the tests here. Order 8 transposes two digits; order 7 is off by two units of the last place.
MISPRINTED_POLES: tuple[Pole, ...] = (
    Pole(where=ANALOG_0_5, order=8, error="0.5 deg", printed=(0.4148, 2.578), right=(0.4184, 2.578)),
    Pole(where=ANALOG_0_5, order=7, error="0.5 deg", printed=(0.5816, 1.6455), right=(0.5816, 1.6453)),
)

#: A public student listing of Legendre-Papoulis polynomials, order 8, ascending in w^2: -1668 w^14 for -1680 w^14 (the
#: other coefficients are those that it had right).
MISPRINTED_POLYNOMIAL: tuple[int, ...] = (0, 0, 10, -120, 615, -1624, 2310, -1668, 490)
