"""Doubly terminated Chebyshev low-pass prototypes, digits as printed.

Two normalisations are in print: to the 3 dB frequency, counted from the ripple peak, and to the ripple edge.
Even orders need RL = tanh^2(beta/4); equal terminations are impossible there.
"""

from __future__ import annotations

from tests.reference.cases import Ladder

__all__ = ["CASES"]

WINDER_2_12 = "S. Winder, Analog and Digital Filter Design, 2nd ed., Newnes 2002, Table 2.12 p. 66 (normalised to the 3 dB frequency, not the ripple edge)"
WINDER_2_13 = "S. Winder, Analog and Digital Filter Design, 2nd ed., Newnes 2002, Table 2.13 p. 66 (normalised to the 3 dB frequency, not the ripple edge)"
WINDER_2_14 = "S. Winder, Analog and Digital Filter Design, 2nd ed., Newnes 2002, Table 2.14 p. 66 (normalised to the 3 dB frequency, not the ripple edge)"
CORRECTED_EDITION = (
    "RF Cafe Chebyshev prototype table (later, corrected edition); formula Matthaei/Young/Jones sec. 4.05"
)
MATTHAEI_YOUNG_JONES = "Matthaei/Young/Jones Table 4.05-2, from memory; confirmed by the closed form"
RIPPLE_EDGE = "g-values, ripple-edge normalised; even order needs RL = tanh^2(beta/4) (here the last column)"

CASES: tuple[Ladder, ...] = (
    Ladder(
        id="cheb0.25-doubly-3dB-3",
        family="chebyshev_3db",
        order=3,
        ripple_db=0.25,
        tol_pole=5e-05,
        source=WINDER_2_12,
        text="""
            in -- Rs -- a -- L2 -- out
            a -- C1 -- gnd;  out -- C3 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 1.63306 F;  L2 = 1.43616 H;  C3 = 1.63306 F
        """,
    ),
    Ladder(
        id="cheb0.25-doubly-3dB-9",
        family="chebyshev_3db",
        order=9,
        ripple_db=0.25,
        tol_pole=5e-05,
        source=WINDER_2_12,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- c -- L6 -- d -- L8 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  c -- C5 -- gnd;  d -- C7 -- gnd
            out -- C9 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 1.5 F;  L2 = 1.40755 H;  C3 = 2.4446 F;  L4 = 1.54062 H;  C5 = 2.50767 F
            L6 = 1.54062 H;  C7 = 2.4446 F;  L8 = 1.40755 H;  C9 = 1.5 F
        """,
    ),
    Ladder(
        id="cheb0.5-doubly-3dB-3",
        family="chebyshev_3db",
        order=3,
        ripple_db=0.5,
        tol_pole=5e-05,
        source=WINDER_2_13,
        text="""
            in -- Rs -- a -- L2 -- out
            a -- C1 -- gnd;  out -- C3 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 1.86369 F;  L2 = 1.28036 H;  C3 = 1.86369 F
        """,
    ),
    Ladder(
        id="cheb0.5-doubly-3dB-5",
        family="chebyshev_3db",
        order=5,
        ripple_db=0.5,
        tol_pole=5e-05,
        source=WINDER_2_13,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  out -- C5 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 1.80691 F;  L2 = 1.30248 H;  C3 = 2.69145 F;  L4 = 1.30248 H;  C5 = 1.80691 F
        """,
    ),
    Ladder(
        id="cheb0.5-doubly-3dB-7",
        family="chebyshev_3db",
        order=7,
        ripple_db=0.5,
        tol_pole=5e-05,
        source=WINDER_2_13,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- c -- L6 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  c -- C5 -- gnd;  out -- C7 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 1.78962 F;  L2 = 1.29608 H;  C3 = 2.71773 F;  L4 = 1.38476 H;  C5 = 2.71773 F
            L6 = 1.29608 H;  C7 = 1.78962 F
        """,
    ),
    Ladder(
        id="cheb0.5-doubly-3dB-9",
        family="chebyshev_3db",
        order=9,
        ripple_db=0.5,
        tol_pole=5e-05,
        source=WINDER_2_13,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- c -- L6 -- d -- L8 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  c -- C5 -- gnd;  d -- C7 -- gnd
            out -- C9 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 1.78229 F;  L2 = 1.29208 H;  C3 = 2.7163 F;  L4 = 1.39214 H;  C5 = 2.77344 F
            L6 = 1.39214 H;  C7 = 2.7163 F;  L8 = 1.29208 H;  C9 = 1.78229 F
        """,
    ),
    Ladder(
        id="cheb1-doubly-3dB-7",
        family="chebyshev_3db",
        order=7,
        ripple_db=1,
        tol_pole=5e-05,
        source=WINDER_2_14,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- c -- L6 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  c -- C5 -- gnd;  out -- C7 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 2.20391 F;  L2 = 1.13061 H;  C3 = 3.14695 F;  L4 = 1.19368 H;  C5 = 3.14695 F
            L6 = 1.13061 H;  C7 = 2.20391 F
        """,
    ),
    Ladder(
        id="cheb0.01-doubly-2",
        family="chebyshev",
        order=2,
        ripple_db=0.01,
        tol_value=8e-05,
        source=CORRECTED_EDITION,
        text="""
            in -- Rs -- a -- L2 -- out
            a -- C1 -- gnd;  out -- RL -- gnd
            drive in;  read out
            Rs = 1 ohm;  RL = 0.9085 ohm
            C1 = 0.4489 F;  L2 = 0.4078 H
        """,
        note=RIPPLE_EDGE,
    ),
    Ladder(
        id="cheb0.01-doubly-3",
        family="chebyshev",
        order=3,
        ripple_db=0.01,
        tol_value=8e-05,
        source=CORRECTED_EDITION,
        text="""
            in -- Rs -- a -- L2 -- out
            a -- C1 -- gnd;  out -- C3 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.6292 F;  L2 = 0.9703 H;  C3 = 0.6292 F
        """,
        note=RIPPLE_EDGE,
    ),
    Ladder(
        id="cheb0.01-doubly-4",
        family="chebyshev",
        order=4,
        ripple_db=0.01,
        tol_value=8e-05,
        source=CORRECTED_EDITION,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  out -- RL -- gnd
            drive in;  read out
            Rs = 1 ohm;  RL = 0.9085 ohm
            C1 = 0.7129 F;  L2 = 1.2004 H;  C3 = 1.3213 F;  L4 = 0.6476 H
        """,
        note=RIPPLE_EDGE,
    ),
    Ladder(
        id="cheb0.01-doubly-7",
        family="chebyshev",
        order=7,
        ripple_db=0.01,
        tol_value=8e-05,
        source=CORRECTED_EDITION,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- c -- L6 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  c -- C5 -- gnd;  out -- C7 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.797 F;  L2 = 1.3924 H;  C3 = 1.7481 F;  L4 = 1.6331 H;  C5 = 1.7481 F
            L6 = 1.3924 H;  C7 = 0.797 F
        """,
        note=RIPPLE_EDGE,
    ),
    Ladder(
        id="cheb0.1-doubly-2",
        family="chebyshev",
        order=2,
        ripple_db=0.1,
        tol_value=8e-05,
        source=CORRECTED_EDITION,
        text="""
            in -- Rs -- a -- L2 -- out
            a -- C1 -- gnd;  out -- RL -- gnd
            drive in;  read out
            Rs = 1 ohm;  RL = 0.7378 ohm
            C1 = 0.8431 F;  L2 = 0.622 H
        """,
        note=RIPPLE_EDGE,
    ),
    Ladder(
        id="cheb0.1-doubly-4",
        family="chebyshev",
        order=4,
        ripple_db=0.1,
        tol_value=8e-05,
        source=CORRECTED_EDITION,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  out -- RL -- gnd
            drive in;  read out
            Rs = 1 ohm;  RL = 0.7378 ohm
            C1 = 1.1088 F;  L2 = 1.3062 H;  C3 = 1.7704 F;  L4 = 0.8181 H
        """,
        note=RIPPLE_EDGE,
    ),
    Ladder(
        id="cheb0.1-doubly-5",
        family="chebyshev",
        order=5,
        ripple_db=0.1,
        tol_value=8e-05,
        source=CORRECTED_EDITION,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  out -- C5 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 1.1468 F;  L2 = 1.3712 H;  C3 = 1.975 F;  L4 = 1.3712 H;  C5 = 1.1468 F
        """,
        note=RIPPLE_EDGE,
    ),
    Ladder(
        id="cheb0.1-doubly-6",
        family="chebyshev",
        order=6,
        ripple_db=0.1,
        tol_value=8e-05,
        source=CORRECTED_EDITION,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- c -- L6 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  c -- C5 -- gnd;  out -- RL -- gnd
            drive in;  read out
            Rs = 1 ohm;  RL = 0.7378 ohm
            C1 = 1.1681 F;  L2 = 1.404 H;  C3 = 2.0562 F;  L4 = 1.5171 H;  C5 = 1.9029 F
            L6 = 0.8618 H
        """,
        note=RIPPLE_EDGE,
    ),
    Ladder(
        id="cheb0.1-doubly-7",
        family="chebyshev",
        order=7,
        ripple_db=0.1,
        tol_value=8e-05,
        source=CORRECTED_EDITION,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- c -- L6 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  c -- C5 -- gnd;  out -- C7 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 1.1812 F;  L2 = 1.4228 H;  C3 = 2.0967 F;  L4 = 1.5734 H;  C5 = 2.0967 F
            L6 = 1.4228 H;  C7 = 1.1812 F
        """,
        note=RIPPLE_EDGE,
    ),
    Ladder(
        id="cheb0.2-doubly-3",
        family="chebyshev",
        order=3,
        ripple_db=0.2,
        tol_value=8e-05,
        source=CORRECTED_EDITION,
        text="""
            in -- Rs -- a -- L2 -- out
            a -- C1 -- gnd;  out -- C3 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 1.2276 F;  L2 = 1.1525 H;  C3 = 1.2276 F
        """,
        note=RIPPLE_EDGE,
    ),
    Ladder(
        id="cheb0.2-doubly-6",
        family="chebyshev",
        order=6,
        ripple_db=0.2,
        tol_value=8e-05,
        source=CORRECTED_EDITION,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- c -- L6 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  c -- C5 -- gnd;  out -- RL -- gnd
            drive in;  read out
            Rs = 1 ohm;  RL = 0.6499 ohm
            C1 = 1.3598 F;  L2 = 1.3632 H;  C3 = 2.2395 F;  L4 = 1.4556 H;  C5 = 2.0974 F
            L6 = 0.8838 H
        """,
        note=RIPPLE_EDGE,
    ),
    Ladder(
        id="cheb0.2-doubly-7",
        family="chebyshev",
        order=7,
        ripple_db=0.2,
        tol_value=8e-05,
        source=CORRECTED_EDITION,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- c -- L6 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  c -- C5 -- gnd;  out -- C7 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 1.3723 F;  L2 = 1.3782 H;  C3 = 2.2757 F;  L4 = 1.5002 H;  C5 = 2.2757 F
            L6 = 1.3782 H;  C7 = 1.3723 F
        """,
        note=RIPPLE_EDGE,
    ),
    Ladder(
        id="cheb0.5-doubly-3",
        family="chebyshev",
        order=3,
        ripple_db=0.5,
        tol_value=6e-05,
        source=MATTHAEI_YOUNG_JONES,
        from_memory=True,
        text="""
            in -- Rs -- a -- L2 -- out
            a -- C1 -- gnd;  out -- C3 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 1.5963 F;  L2 = 1.0967 H;  C3 = 1.5963 F
        """,
    ),
    Ladder(
        id="cheb1-doubly-5",
        family="chebyshev",
        order=5,
        ripple_db=1,
        tol_value=6e-05,
        source=MATTHAEI_YOUNG_JONES,
        from_memory=True,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  out -- C5 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 2.1349 F;  L2 = 1.0911 H;  C3 = 3.0009 F;  L4 = 1.0911 H;  C5 = 2.1349 F
        """,
    ),
)
