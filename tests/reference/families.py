"""Published tables of Butterworth, Bessel and Chebyshev filters: polynomials, poles, sections, single figures.

Digits as printed, each row with its source; ``from_memory`` marks rows of which nobody has seen the print.
Polynomials are in ascending powers of s. Poles are given as (sigma, omega) of the pole -sigma + j omega, one of a
pair. Sections are (a, b, Q) of the factors 1 + a s + b s^2. Bessel polynomials and poles are for unit delay,
sections and Winder's poles for 3 dB at 1 rad/s, Chebyshev rows for the edge of the ripple at 1 rad/s.
"""

from __future__ import annotations

from dataclasses import dataclass

__all__ = [
    "CHEBYSHEV_3_DB",
    "DELAYS_AT_DC",
    "POLES",
    "POLYNOMIALS",
    "SCALES",
    "SECTIONS",
    "Figure",
    "Poles",
    "Polynomial",
    "Sections",
]


@dataclass(frozen=True, slots=True, kw_only=True)
class Row:
    """A row of a table: which family, order and ripple it is for, and where it was printed."""

    id: str
    family: str
    order: int
    source: str
    from_memory: bool = False
    ripple: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Polynomial(Row):
    """The denominator, ascending; printed to so many decimals, or exact integers (decimals 0)."""

    coefficients: tuple[float, ...]
    decimals: int


@dataclass(frozen=True, slots=True, kw_only=True)
class Poles(Row):
    """Poles within ``within`` (relative to their magnitude), once the frequency scale is right to ``scale``."""

    sigma_omega: tuple[tuple[float, float], ...]
    within: float
    scale: float = 0.0


@dataclass(frozen=True, slots=True, kw_only=True)
class Sections(Row):
    """Factors 1 + a s + b s^2 with their Q (None for b = 0); 3 dB at 1 rad/s."""

    sections: tuple[tuple[float, float, float | None], ...]
    within: float
    q_within: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Figure(Row):
    """One number: a -3.0103 dB frequency in rad/s or a group delay in s, within ``within``."""

    value: float
    within: float


BUTTERWORTH_TABLE = "L. Weinberg-type table of Butterworth polynomials, as transcribed in a public source file (7 decimals, n=1..10)"
CHEBYSHEV_TABLE = (
    "table of 0.5 dB Chebyshev polynomials as transcribed in a public source file (7 decimals, n=1..10)"
)
CHEBYSHEV_RECALLED = "Weinberg/Budak/Van Valkenburg tables, from memory, confirmed by the closed form"
CHEBYSHEV_QUOTED = "n=4 row 0.2756/0.7426/1.4539/0.9528 sourced (public Q&A quoting a textbook table); Weinberg/Budak/Van Valkenburg tables, from memory, confirmed by the closed form"
THOMSON = "W. E. Thomson 1949; reverse Bessel polynomial coefficients (2n-k)!/(2^(n-k) k! (n-k)!); n=3 15,15,6,1 sourced; poles sourced to 10 digits (klaus-huber.net)"
HUBER = "klaus-huber.net table of Bessel poles (unit delay), 10 digits"
WINDER_3_4 = "S. Winder, Analog and Digital Filter Design, 2nd ed., Newnes 2002, Table 3.4 p. 97 (also reprinted on RF Cafe)"
WINDER_105 = "S. Winder, Analog and Digital Filter Design, 2nd ed., Newnes 2002, ch. 3 p. 105 (natural, ripple-edge normalised)"
BOND = 'C. R. Bond, "Bessel Filters: Polynomials, Poles and Circuit Elements", 2003 (table of scale factors)'
CARTER_16_6 = 'R. Mancini/B. Carter (eds.), Op Amps for Everyone, 5th ed., ch. 16 "Active filter design techniques", Table 16.6'
CARTER_16_7 = 'R. Mancini/B. Carter (eds.), Op Amps for Everyone, 5th ed., ch. 16 "Active filter design techniques", Table 16.7'
CLOSED_FORM = "closed form; usual table values from memory"
FIRST_COEFFICIENT = "first coefficient of the Butterworth polynomial; exact"

POLYNOMIALS: tuple[Polynomial, ...] = (
    Polynomial(
        id="bw-poly-1",
        family="butterworth",
        order=1,
        source=BUTTERWORTH_TABLE,
        coefficients=(1, 1),
        decimals=7,
    ),
    Polynomial(
        id="bw-poly-3",
        family="butterworth",
        order=3,
        source=BUTTERWORTH_TABLE,
        coefficients=(1, 2, 2, 1),
        decimals=7,
    ),
    Polynomial(
        id="bw-poly-5",
        family="butterworth",
        order=5,
        source=BUTTERWORTH_TABLE,
        coefficients=(1, 3.236068, 5.236068, 5.236068, 3.236068, 1),
        decimals=7,
    ),
    Polynomial(
        id="bw-poly-6",
        family="butterworth",
        order=6,
        source=BUTTERWORTH_TABLE,
        coefficients=(1, 3.8637033, 7.4641016, 9.1416202, 7.4641016, 3.8637033, 1),
        decimals=7,
    ),
    Polynomial(
        id="bw-poly-7",
        family="butterworth",
        order=7,
        source=BUTTERWORTH_TABLE,
        coefficients=(1, 4.4939592, 10.0978347, 14.5917939, 14.5917939, 10.0978347, 4.4939592, 1),
        decimals=7,
    ),
    Polynomial(
        id="bw-poly-8",
        family="butterworth",
        order=8,
        source=BUTTERWORTH_TABLE,
        coefficients=(1, 5.1258309, 13.1370712, 21.846151, 25.6883559, 21.846151, 13.1370712, 5.1258309, 1),
        decimals=7,
    ),
    Polynomial(
        id="ch05-poly-1",
        family="chebyshev",
        order=1,
        source=CHEBYSHEV_TABLE,
        ripple="0.5 dB",
        coefficients=(2.8627752, 1),
        decimals=7,
    ),
    Polynomial(
        id="ch05-poly-5",
        family="chebyshev",
        order=5,
        source=CHEBYSHEV_TABLE,
        ripple="0.5 dB",
        coefficients=(0.1789234, 0.7525181, 1.3095747, 1.9373675, 1.1724909, 1),
        decimals=7,
    ),
    Polynomial(
        id="ch05-poly-7",
        family="chebyshev",
        order=7,
        source=CHEBYSHEV_TABLE,
        ripple="0.5 dB",
        coefficients=(0.0447309, 0.2820722, 0.7556511, 1.6479029, 1.8694079, 2.412651, 1.1512176, 1),
        decimals=7,
    ),
    Polynomial(
        id="ch05-poly-9",
        family="chebyshev",
        order=9,
        source=CHEBYSHEV_TABLE,
        ripple="0.5 dB",
        coefficients=(
            0.0111827,
            0.0941198,
            0.3408193,
            0.9836199,
            1.611388,
            2.781499,
            2.4293297,
            2.9027337,
            1.1425705,
            1,
        ),
        decimals=7,
    ),
    Polynomial(
        id="ch1-poly-1",
        family="chebyshev",
        order=1,
        source=CHEBYSHEV_RECALLED,
        from_memory=True,
        ripple="1 dB",
        coefficients=(1.9652267, 1),
        decimals=7,
    ),
    Polynomial(
        id="ch1-poly-2",
        family="chebyshev",
        order=2,
        source=CHEBYSHEV_RECALLED,
        from_memory=True,
        ripple="1 dB",
        coefficients=(1.1025103, 1.0977343, 1),
        decimals=7,
    ),
    Polynomial(
        id="ch1-poly-3",
        family="chebyshev",
        order=3,
        source=CHEBYSHEV_RECALLED,
        from_memory=True,
        ripple="1 dB",
        coefficients=(0.4913067, 1.2384092, 0.9883412, 1),
        decimals=7,
    ),
    Polynomial(
        id="ch1-poly-4",
        family="chebyshev",
        order=4,
        source=CHEBYSHEV_QUOTED,
        ripple="1 dB",
        coefficients=(0.2756276, 0.7426194, 1.4539248, 0.9528114, 1),
        decimals=7,
    ),
    Polynomial(
        id="ch1-poly-5",
        family="chebyshev",
        order=5,
        source=CHEBYSHEV_RECALLED,
        from_memory=True,
        ripple="1 dB",
        coefficients=(0.1228267, 0.5805342, 0.9743961, 1.688816, 0.9368201, 1),
        decimals=7,
    ),
    Polynomial(
        id="ch2-poly-1",
        family="chebyshev",
        order=1,
        source=CHEBYSHEV_RECALLED,
        from_memory=True,
        ripple="2 dB",
        coefficients=(1.3075603, 1),
        decimals=7,
    ),
    Polynomial(
        id="ch2-poly-3",
        family="chebyshev",
        order=3,
        source=CHEBYSHEV_RECALLED,
        from_memory=True,
        ripple="2 dB",
        coefficients=(0.3268901, 1.0221903, 0.7378216, 1),
        decimals=7,
    ),
    Polynomial(
        id="ch3-poly-1",
        family="chebyshev",
        order=1,
        source=CHEBYSHEV_RECALLED,
        from_memory=True,
        ripple="3 dB",
        coefficients=(1.0023773, 1),
        decimals=7,
    ),
    Polynomial(
        id="ch3-poly-3",
        family="chebyshev",
        order=3,
        source=CHEBYSHEV_RECALLED,
        from_memory=True,
        ripple="3 dB",
        coefficients=(0.2505943, 0.928348, 0.5972404, 1),
        decimals=7,
    ),
    Polynomial(id="bessel-poly-1", family="bessel", order=1, source=THOMSON, coefficients=(1, 1), decimals=0),
    Polynomial(
        id="bessel-poly-2", family="bessel", order=2, source=THOMSON, coefficients=(3, 3, 1), decimals=0
    ),
    Polynomial(
        id="bessel-poly-5",
        family="bessel",
        order=5,
        source=THOMSON,
        coefficients=(945, 945, 420, 105, 15, 1),
        decimals=0,
    ),
    Polynomial(
        id="bessel-poly-7",
        family="bessel",
        order=7,
        source=THOMSON,
        coefficients=(135135, 135135, 62370, 17325, 3150, 378, 28, 1),
        decimals=0,
    ),
    Polynomial(
        id="bessel-poly-9",
        family="bessel",
        order=9,
        source=THOMSON,
        coefficients=(34459425, 34459425, 16216200, 4729725, 945945, 135135, 13860, 990, 45, 1),
        decimals=0,
    ),
    Polynomial(
        id="bessel-poly-10",
        family="bessel",
        order=10,
        source=THOMSON,
        coefficients=(
            654729075,
            654729075,
            310134825,
            91891800,
            18918900,
            2837835,
            315315,
            25740,
            1485,
            55,
            1,
        ),
        decimals=0,
    ),
)

#: The normalisation of Winder's table 3.4 is off by up to 0.8 % in frequency (order 4: -3.061 dB at w = 1); the shape
#: is right to 5e-5: match the shape, report the frequency.
POLES: tuple[Poles, ...] = (
    Poles(
        id="bessel-delay-poles-5",
        family="bessel",
        order=5,
        source=HUBER,
        sigma_omega=((2.324674303, 3.57102292), (3.351956399, 1.742661416), (3.646738595, 0)),
        within=5e-09,
    ),
    Poles(
        id="bessel-delay-poles-6",
        family="bessel",
        order=6,
        source=HUBER,
        sigma_omega=((2.515932248, 4.492672954), (3.735708356, 2.626272311), (4.248359396, 0.8675096732)),
        within=5e-09,
    ),
    Poles(
        id="bessel-delay-poles-10",
        family="bessel",
        order=10,
        source=HUBER,
        sigma_omega=(
            (3.108916234, 8.232699459),
            (4.886219567, 6.224985482),
            (5.967528329, 4.384947189),
            (6.615290965, 2.611567921),
            (6.922044905, 0.8676651955),
        ),
        within=5e-09,
    ),
    Poles(
        id="bessel-3db-poles-winder-1",
        family="bessel",
        order=1,
        source=WINDER_3_4,
        sigma_omega=((1, 0),),
        within=0.0001,
        scale=0.008,
    ),
    Poles(
        id="bessel-3db-poles-winder-2",
        family="bessel",
        order=2,
        source=WINDER_3_4,
        sigma_omega=((1.103, 0.6368),),
        within=0.0001,
        scale=0.008,
    ),
    Poles(
        id="bessel-3db-poles-winder-3",
        family="bessel",
        order=3,
        source=WINDER_3_4,
        sigma_omega=((1.0509, 1.0025), (1.327, 0)),
        within=0.0001,
        scale=0.008,
    ),
    Poles(
        id="bessel-3db-poles-winder-4",
        family="bessel",
        order=4,
        source=WINDER_3_4,
        sigma_omega=((1.3596, 0.4071), (0.9877, 1.2476)),
        within=0.0001,
        scale=0.008,
    ),
    Poles(
        id="bessel-3db-poles-winder-9",
        family="bessel",
        order=9,
        source=WINDER_3_4,
        sigma_omega=((1.8081, 0.5126), (1.6532, 1.0319), (1.3683, 1.5685), (0.8788, 2.1509), (1.8575, 0)),
        within=0.0001,
        scale=0.008,
    ),
    Poles(
        id="cheb01-poles-2",
        family="chebyshev",
        order=2,
        source=WINDER_105,
        ripple="0.1 dB",
        sigma_omega=((1.18618, 1.38095),),
        within=2e-05,
    ),
    Poles(
        id="cheb01-poles-3",
        family="chebyshev",
        order=3,
        source=WINDER_105,
        ripple="0.1 dB",
        sigma_omega=((0.4847, 1.20616), (0.96941, 0)),
        within=2e-05,
    ),
    Poles(
        id="cheb01-poles-5",
        family="chebyshev",
        order=5,
        source=WINDER_105,
        ripple="0.1 dB",
        sigma_omega=((0.16653, 1.08037), (0.43599, 0.66771), (0.53891, 0)),
        within=2e-05,
    ),
    Poles(
        id="cheb01-poles-6",
        family="chebyshev",
        order=6,
        source=WINDER_105,
        ripple="0.1 dB",
        sigma_omega=((0.11469, 1.05652), (0.31335, 0.77343), (0.42804, 0.28309)),
        within=2e-05,
    ),
    Poles(
        id="cheb01-poles-7",
        family="chebyshev",
        order=7,
        source=WINDER_105,
        ripple="0.1 dB",
        sigma_omega=((0.08384, 1.04183), (0.23492, 0.83549), (0.33947, 0.46366), (0.37678, 0)),
        within=2e-05,
    ),
    Poles(
        id="cheb01-poles-8",
        family="chebyshev",
        order=8,
        source=WINDER_105,
        ripple="0.1 dB",
        sigma_omega=((0.06398, 1.03218), (0.1822, 0.87504), (0.27268, 0.58468), (0.32165, 0.20531)),
        within=2e-05,
    ),
)

SECTIONS: tuple[Sections, ...] = (
    Sections(
        id="bessel_mag-aibi-1",
        family="bessel",
        order=1,
        source=CARTER_16_6,
        sections=((1, 0, None),),
        within=0.000101,
        q_within=0.0051,
    ),
    Sections(
        id="bessel_mag-aibi-3",
        family="bessel",
        order=3,
        source=CARTER_16_6,
        sections=((0.756, 0, None), (0.9996, 0.4772, 0.69)),
        within=0.000101,
        q_within=0.0051,
    ),
    Sections(
        id="bessel_mag-aibi-4",
        family="bessel",
        order=4,
        source=CARTER_16_6,
        sections=((1.3397, 0.4889, 0.52), (0.7743, 0.389, 0.81)),
        within=0.000101,
        q_within=0.0051,
    ),
    Sections(
        id="bessel_mag-aibi-5",
        family="bessel",
        order=5,
        source=CARTER_16_6,
        sections=((0.6656, 0, None), (1.1402, 0.4128, 0.56), (0.6216, 0.3245, 0.92)),
        within=0.000101,
        q_within=0.0051,
    ),
    Sections(
        id="bessel_mag-aibi-6",
        family="bessel",
        order=6,
        source=CARTER_16_6,
        sections=((1.2217, 0.3887, 0.51), (0.9686, 0.3505, 0.61), (0.5131, 0.2756, 1.02)),
        within=0.000101,
        q_within=0.0051,
    ),
    Sections(
        id="bessel_mag-aibi-7",
        family="bessel",
        order=7,
        source=CARTER_16_6,
        sections=((0.5937, 0, None), (1.0944, 0.3395, 0.53), (0.8304, 0.3011, 0.66), (0.4332, 0.2381, 1.13)),
        within=0.000101,
        q_within=0.0051,
    ),
    Sections(
        id="bessel_mag-aibi-9",
        family="bessel",
        order=9,
        source=CARTER_16_6,
        sections=(
            (0.5386, 0, None),
            (1.0244, 0.2834, 0.52),
            (0.871, 0.2636, 0.59),
            (0.632, 0.2311, 0.76),
            (0.3257, 0.1854, 1.32),
        ),
        within=0.000101,
        q_within=0.0051,
    ),
    Sections(
        id="butterworth-aibi-2",
        family="butterworth",
        order=2,
        source=CARTER_16_7,
        sections=((1.4142, 1, 0.71),),
        within=0.000101,
        q_within=0.0051,
    ),
    Sections(
        id="butterworth-aibi-3",
        family="butterworth",
        order=3,
        source=CARTER_16_7,
        sections=((1, 0, None), (1, 1, 1.0)),
        within=0.000101,
        q_within=0.0051,
    ),
    Sections(
        id="butterworth-aibi-5",
        family="butterworth",
        order=5,
        source=CARTER_16_7,
        sections=((1, 0, None), (1.618, 1, 0.62), (0.618, 1, 1.62)),
        within=0.000101,
        q_within=0.0051,
    ),
    Sections(
        id="butterworth-aibi-6",
        family="butterworth",
        order=6,
        source=CARTER_16_7,
        sections=((1.9319, 1, 0.52), (1.4142, 1, 0.71), (0.5176, 1, 1.93)),
        within=0.000101,
        q_within=0.0051,
    ),
    Sections(
        id="butterworth-aibi-7",
        family="butterworth",
        order=7,
        source=CARTER_16_7,
        sections=((1, 0, None), (1.8019, 1, 0.55), (1.247, 1, 0.8), (0.445, 1, 2.25)),
        within=0.000101,
        q_within=0.0051,
    ),
    Sections(
        id="butterworth-aibi-9",
        family="butterworth",
        order=9,
        source=CARTER_16_7,
        sections=((1, 0, None), (1.8794, 1, 0.53), (1.5321, 1, 0.65), (1, 1, 1.0), (0.3473, 1, 2.88)),
        within=0.000101,
        q_within=0.0051,
    ),
)

#: The -3.0103 dB angular frequency of the unit-delay Bessel filter.
SCALES: tuple[Figure, ...] = (
    Figure(
        id="bessel-scale-2", family="bessel", order=2, source=BOND, value=1.36165412871613, within=5.1e-14
    ),
    Figure(
        id="bessel-scale-3", family="bessel", order=3, source=BOND, value=1.75567236868121, within=5.1e-14
    ),
    Figure(
        id="bessel-scale-5", family="bessel", order=5, source=BOND, value=2.42741070215263, within=5.1e-14
    ),
    Figure(
        id="bessel-scale-6", family="bessel", order=6, source=BOND, value=2.70339506120292, within=5.1e-14
    ),
    Figure(
        id="bessel-scale-9", family="bessel", order=9, source=BOND, value=3.39169313891166, within=5.1e-14
    ),
)

#: The -3.0103 dB frequency of a Chebyshev filter relative to its peak, for the ripple edge at 1: cosh(acosh(1/e)/n).
CHEBYSHEV_3_DB: tuple[Figure, ...] = (
    Figure(
        id="cheb0.1-3dB-3",
        family="chebyshev",
        order=3,
        source=CLOSED_FORM,
        from_memory=True,
        ripple="0.1 dB",
        value=1.38899,
        within=6e-05,
    ),
    Figure(
        id="cheb0.1-3dB-5",
        family="chebyshev",
        order=5,
        source=CLOSED_FORM,
        from_memory=True,
        ripple="0.1 dB",
        value=1.13472,
        within=6e-05,
    ),
    Figure(
        id="cheb0.5-3dB-3",
        family="chebyshev",
        order=3,
        source=CLOSED_FORM,
        from_memory=True,
        ripple="0.5 dB",
        value=1.16749,
        within=6e-05,
    ),
    Figure(
        id="cheb0.5-3dB-4",
        family="chebyshev",
        order=4,
        source=CLOSED_FORM,
        from_memory=True,
        ripple="0.5 dB",
        value=1.0931,
        within=6e-05,
    ),
    Figure(
        id="cheb0.5-3dB-5",
        family="chebyshev",
        order=5,
        source=CLOSED_FORM,
        from_memory=True,
        ripple="0.5 dB",
        value=1.05926,
        within=6e-05,
    ),
    Figure(
        id="cheb1-3dB-2",
        family="chebyshev",
        order=2,
        source=CLOSED_FORM,
        from_memory=True,
        ripple="1 dB",
        value=1.21763,
        within=6e-05,
    ),
    Figure(
        id="cheb1-3dB-3",
        family="chebyshev",
        order=3,
        source=CLOSED_FORM,
        from_memory=True,
        ripple="1 dB",
        value=1.09487,
        within=6e-05,
    ),
    Figure(
        id="cheb1-3dB-4",
        family="chebyshev",
        order=4,
        source=CLOSED_FORM,
        from_memory=True,
        ripple="1 dB",
        value=1.053,
        within=6e-05,
    ),
    Figure(
        id="cheb1-3dB-5",
        family="chebyshev",
        order=5,
        source=CLOSED_FORM,
        from_memory=True,
        ripple="1 dB",
        value=1.03381,
        within=6e-05,
    ),
    Figure(
        id="cheb3-3dB-2",
        family="chebyshev",
        order=2,
        source=CLOSED_FORM,
        from_memory=True,
        ripple="3 dB",
        value=1.00059,
        within=6e-05,
    ),
    Figure(
        id="cheb3-3dB-3",
        family="chebyshev",
        order=3,
        source=CLOSED_FORM,
        from_memory=True,
        ripple="3 dB",
        value=1.00026,
        within=6e-05,
    ),
)

#: The group delay at DC of a Butterworth filter with w0 = 1: 1/sin(pi/(2n)).
DELAYS_AT_DC: tuple[Figure, ...] = (
    Figure(id="bw-delay0-1", family="butterworth", order=1, source=FIRST_COEFFICIENT, value=1, within=5.1e-8),
    Figure(id="bw-delay0-3", family="butterworth", order=3, source=FIRST_COEFFICIENT, value=2, within=5.1e-8),
    Figure(
        id="bw-delay0-4",
        family="butterworth",
        order=4,
        source=FIRST_COEFFICIENT,
        value=2.6131259,
        within=5.1e-8,
    ),
    Figure(
        id="bw-delay0-8",
        family="butterworth",
        order=8,
        source=FIRST_COEFFICIENT,
        value=5.1258309,
        within=5.1e-8,
    ),
    Figure(
        id="bw-delay0-10",
        family="butterworth",
        order=10,
        source=FIRST_COEFFICIENT,
        value=6.3924532,
        within=5.1e-8,
    ),
)
