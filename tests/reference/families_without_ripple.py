"""Published tables of Gaussian (transitional), critically damped and Linkwitz-Riley filters, digits as printed.

Poles are (sigma, omega) of the pole -sigma + j omega, one of a pair, for -3.0103 dB at 1 rad/s. ``printed`` holds
what stands on the page where that is a misprint, ``heading`` the family that the page puts above the row where the
numbers are another's. ``from_memory`` marks rows of which nobody has seen the print.
"""

from __future__ import annotations

from dataclasses import dataclass

from tests.reference.families import Row, Sections

__all__ = ["CRITICALLY_DAMPED", "GAUSSIAN_POLES", "LINKWITZ_RILEY", "TransitionalPoles"]


@dataclass(frozen=True, slots=True, kw_only=True)
class TransitionalPoles(Row):
    """Poles to four decimals, and what the page has instead of some of them."""

    sigma_omega: tuple[tuple[float, float], ...]
    heading: str = ""
    printed: tuple[tuple[float, float], ...] = ()


ANALOG_DEVICES = "pole tables taken from Analog Devices material as reprinted on RF Cafe (mislabelled there)"
BASIC_LINEAR_DESIGN = "Basic Linear Design ch. 8 'Gaussian to 6 dB' table, from memory"
TIETZE_SCHENK = "Tietze/Schenk table of critically damped filters (a_i, b_i), from memory"
LINKWITZ = "S. Linkwitz 1976 alignments; closed form"
SIX = "Gaussian to 6 dB"

GAUSSIAN_POLES: tuple[TransitionalPoles, ...] = (
    TransitionalPoles(
        id="gauss12-poles-3",
        family="gaussian to 12 dB",
        order=3,
        source=ANALOG_DEVICES,
        heading=SIX,
        # two digits changed places: with 0.9360 the -3 dB frequency would be 0.9777, with 0.9630 it is 1.0000
        sigma_omega=((0.936, 1.2168), (0.963, 0)),
        printed=((0.936, 1.2168), (0.936, 0)),
    ),
    TransitionalPoles(
        id="gauss12-poles-4",
        family="gaussian to 12 dB",
        order=4,
        source=ANALOG_DEVICES,
        heading=SIX,
        sigma_omega=((0.9278, 1.6995), (0.9192, 0.556)),
    ),
    TransitionalPoles(
        id="gauss12-poles-5",
        family="gaussian to 12 dB",
        order=5,
        source=ANALOG_DEVICES,
        heading=SIX,
        sigma_omega=((0.8075, 0.9973), (0.7153, 2.0532), (0.8131, 0)),
        printed=((0.8075, 0.9973), (0.7153, 0.2053), (0.8131, 0)),
    ),
    TransitionalPoles(
        id="gauss12-poles-8",
        family="gaussian to 12 dB",
        order=8,
        source=ANALOG_DEVICES,
        heading=SIX,
        sigma_omega=((0.5441, 0.3358), (0.5175, 0.9962), (0.4328, 1.61), (0.1978, 2.0703)),
    ),
    TransitionalPoles(
        id="gauss12-poles-9",
        family="gaussian to 12 dB",
        order=9,
        source=ANALOG_DEVICES,
        heading=SIX,
        sigma_omega=((0.4961, 0.6192), (0.4568, 1.2145), (0.3592, 1.7429), (0.1489, 2.1003), (0.5065, 0)),
    ),
    TransitionalPoles(
        id="gauss6-poles-4",
        family="gaussian to 6 dB",
        order=4,
        source=BASIC_LINEAR_DESIGN,
        from_memory=True,
        sigma_omega=((0.794, 0.5029), (0.6304, 1.5407)),
    ),
    TransitionalPoles(
        id="gauss6-poles-5",
        family="gaussian to 6 dB",
        order=5,
        source=BASIC_LINEAR_DESIGN,
        from_memory=True,
        sigma_omega=((0.619, 0.8254), (0.3559, 1.5688), (0.665, 0)),
    ),
    TransitionalPoles(
        id="gauss6-poles-8",
        family="gaussian to 6 dB",
        order=8,
        source=BASIC_LINEAR_DESIGN,
        from_memory=True,
        sigma_omega=((0.4222, 0.264), (0.3833, 0.7716), (0.2878, 1.2066), (0.1122, 1.4798)),
    ),
)

#: The first factor 1 + a s + b s^2 of each order, for 3 dB at 1 rad/s; Q is 1/2 where there is one.
CRITICALLY_DAMPED: tuple[Sections, ...] = tuple(
    Sections(
        id=f"critdamp-{order}",
        family="critically damped",
        order=order,
        source=TIETZE_SCHENK,
        from_memory=True,
        sections=((a, b, 0.5 if b else None),),
        within=6e-5,
        q_within=0,
    )
    for order, a, b in ((3, 0.5098, 0.0), (4, 0.87, 0.1892), (5, 0.3856, 0.0), (6, 0.6999, 0.1225))
)

#: Order, level at w0 in dB; the square of the Butterworth polynomial of order n/2.
LINKWITZ_RILEY: tuple[tuple[int, float], ...] = ((2, -6.0206), (6, -6.0206))
