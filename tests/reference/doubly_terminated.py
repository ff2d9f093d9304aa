"""Doubly terminated low-pass prototypes without ripple: Butterworth and Bessel.

Elements of the shunt-C-first form for 1 ohm and 1 rad/s, digits as printed. Even four-digit tables put the
poles of a Bessel ladder of order 9 or 10 eighteen percent off while the response agrees within 0.001 dB: such a
network is judged by its response.
"""

from __future__ import annotations

from tests.reference.cases import Ladder

__all__ = ["CASES"]

BUTTERWORTH = "RF Cafe Butterworth prototype table (n<=7, 5 decimals) and a public prototype table (n=8..10, 4 decimals); formula Matthaei/Young/Jones sec. 4.05"
WINDER_2_3 = "S. Winder, Analog and Digital Filter Design, 2nd ed., Newnes 2002, Table 2.3 p. 52"
WINDER_2_4 = "S. Winder, Analog and Digital Filter Design, 2nd ed., Newnes 2002, Table 2.4 p. 52"
WINDER_2_5 = "S. Winder, Analog and Digital Filter Design, 2nd ed., Newnes 2002, Table 2.5 p. 53"
JUDGE_BY_RESPONSE = "4-digit elements: response within 0.02 dB to 2 rad/s although high-order poles move by percents (ill-conditioned) - a matcher must judge by response, not by pole distance"
HEADING = "table is headed C1 with Rs=2; the L-first dual has Rs=1/2"
SCALE_ERROR = "these rows inherit the frequency-scale error of the pole table 3.4 (n=3 +0.33 %, n=4 -0.76 %, n=5 +0.31 %): shape right, w0 off"

CASES: tuple[Ladder, ...] = (
    Ladder(
        id="bw-doubly-1",
        family="butterworth",
        order=1,
        tol_pole=0.0001,
        source=BUTTERWORTH,
        text="""
            in -- Rs -- out
            out -- C1 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 2 F
        """,
    ),
    Ladder(
        id="bw-doubly-2",
        family="butterworth",
        order=2,
        tol_pole=0.0001,
        source=BUTTERWORTH,
        text="""
            in -- Rs -- a -- L2 -- out
            a -- C1 -- gnd;  out -- RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 1.41421 F;  L2 = 1.41421 H
        """,
    ),
    Ladder(
        id="bw-doubly-4",
        family="butterworth",
        order=4,
        tol_pole=0.0001,
        source=BUTTERWORTH,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  out -- RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.76537 F;  L2 = 1.84776 H;  C3 = 1.84776 F;  L4 = 0.76537 H
        """,
    ),
    Ladder(
        id="bw-doubly-7",
        family="butterworth",
        order=7,
        tol_pole=0.0001,
        source=BUTTERWORTH,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- c -- L6 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  c -- C5 -- gnd;  out -- C7 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.44504 F;  L2 = 1.24698 H;  C3 = 1.80194 F;  L4 = 2 H;  C5 = 1.80194 F
            L6 = 1.24698 H;  C7 = 0.44504 F
        """,
    ),
    Ladder(
        id="bw-doubly-9",
        family="butterworth",
        order=9,
        tol_pole=0.003,
        source=BUTTERWORTH,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- c -- L6 -- d -- L8 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  c -- C5 -- gnd;  d -- C7 -- gnd
            out -- C9 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.3473 F;  L2 = 1 H;  C3 = 1.5321 F;  L4 = 1.8794 H;  C5 = 2 F;  L6 = 1.8794 H
            C7 = 1.5321 F;  L8 = 1 H;  C9 = 0.3473 F
        """,
    ),
    Ladder(
        id="bessel-doubly-2",
        family="bessel_mag",
        order=2,
        tol_pole=0.2,
        tol_db=0.02,
        source=WINDER_2_3,
        text="""
            in -- Rs -- a -- L2 -- out
            a -- C1 -- gnd;  out -- RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.576 F;  L2 = 2.148 H
        """,
        note=JUDGE_BY_RESPONSE,
    ),
    Ladder(
        id="bessel-doubly-3",
        family="bessel_mag",
        order=3,
        tol_pole=0.2,
        tol_db=0.02,
        source=WINDER_2_3,
        text="""
            in -- Rs -- a -- L2 -- out
            a -- C1 -- gnd;  out -- C3 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.3374 F;  L2 = 0.9705 H;  C3 = 2.2034 F
        """,
        note=JUDGE_BY_RESPONSE,
    ),
    Ladder(
        id="bessel-doubly-4",
        family="bessel_mag",
        order=4,
        tol_pole=0.2,
        tol_db=0.02,
        source=WINDER_2_3,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  out -- RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.2334 F;  L2 = 0.6725 H;  C3 = 1.0815 F;  L4 = 2.2404 H
        """,
        note=JUDGE_BY_RESPONSE,
    ),
    Ladder(
        id="bessel-doubly-5",
        family="bessel_mag",
        order=5,
        tol_pole=0.2,
        tol_db=0.02,
        source=WINDER_2_3,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  out -- C5 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.1743 F;  L2 = 0.5072 H;  C3 = 0.804 F;  L4 = 1.111 H;  C5 = 2.2582 F
        """,
        note=JUDGE_BY_RESPONSE,
    ),
    Ladder(
        id="bessel-doubly-6",
        family="bessel_mag",
        order=6,
        tol_pole=0.2,
        tol_db=0.02,
        source=WINDER_2_3,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- c -- L6 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  c -- C5 -- gnd;  out -- RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.1365 F;  L2 = 0.4002 H;  C3 = 0.6392 F;  L4 = 0.8538 H;  C5 = 1.1126 F
            L6 = 2.2645 H
        """,
        note=JUDGE_BY_RESPONSE,
    ),
    Ladder(
        id="bessel-doubly-7",
        family="bessel_mag",
        order=7,
        tol_pole=0.2,
        tol_db=0.02,
        source=WINDER_2_3,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- c -- L6 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  c -- C5 -- gnd;  out -- C7 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.1106 F;  L2 = 0.3259 H;  C3 = 0.5249 F;  L4 = 0.702 H;  C5 = 0.869 F
            L6 = 1.1052 H;  C7 = 2.2659 F
        """,
        note=JUDGE_BY_RESPONSE,
    ),
    Ladder(
        id="bessel-doubly-8",
        family="bessel_mag",
        order=8,
        tol_pole=0.2,
        tol_db=0.02,
        source=WINDER_2_3,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- c -- L6 -- d -- L8 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  c -- C5 -- gnd;  d -- C7 -- gnd
            out -- RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.0919 F;  L2 = 0.2719 H;  C3 = 0.4409 F;  L4 = 0.5936 H;  C5 = 0.7303 F
            L6 = 0.8695 H;  C7 = 1.0956 F;  L8 = 2.2656 H
        """,
        note=JUDGE_BY_RESPONSE,
    ),
    Ladder(
        id="bessel-doubly-9",
        family="bessel_mag",
        order=9,
        tol_pole=0.2,
        tol_db=0.02,
        source=WINDER_2_3,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- c -- L6 -- d -- L8 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  c -- C5 -- gnd;  d -- C7 -- gnd
            out -- C9 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.078 F;  L2 = 0.2313 H;  C3 = 0.377 F;  L4 = 0.5108 H;  C5 = 0.6306 F
            L6 = 0.7407 H;  C7 = 0.8639 F;  L8 = 1.0863 H;  C9 = 2.2649 F
        """,
        note=JUDGE_BY_RESPONSE,
    ),
    Ladder(
        id="bessel-doubly-10",
        family="bessel_mag",
        order=10,
        tol_pole=0.2,
        tol_db=0.02,
        source=WINDER_2_3,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- c -- L6 -- d -- L8 -- e -- L10 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  c -- C5 -- gnd;  d -- C7 -- gnd
            e -- C9 -- gnd;  out -- RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.0672 F;  L2 = 0.1998 H;  C3 = 0.327 F;  L4 = 0.4454 H;  C5 = 0.5528 F
            L6 = 0.6493 H;  C7 = 0.742 F;  L8 = 0.8561 H;  C9 = 1.0781 F;  L10 = 2.2641 H
        """,
        note=JUDGE_BY_RESPONSE,
    ),
    Ladder(
        id="bessel-doubly-rs2-2",
        family="bessel_mag",
        order=2,
        tol_pole=0.2,
        tol_db=0.02,
        source=WINDER_2_4,
        text="""
            in -- Rs -- a -- L2 -- out
            a -- C1 -- gnd;  out -- RL -- gnd
            drive in;  read out
            Rs = 2 ohm;  RL = 1 ohm
            C1 = 0.2601 F;  L2 = 3.5649 H
        """,
        note=HEADING,
    ),
    Ladder(
        id="bessel-doubly-rs2-6",
        family="bessel_mag",
        order=6,
        tol_pole=0.2,
        tol_db=0.02,
        source=WINDER_2_4,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- c -- L6 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  c -- C5 -- gnd;  out -- RL -- gnd
            drive in;  read out
            Rs = 2 ohm;  RL = 1 ohm
            C1 = 0.0666 F;  L2 = 0.7824 H;  C3 = 0.3131 F;  L4 = 1.6752 H;  C5 = 0.5405 F
            L6 = 3.8122 H
        """,
        note=HEADING,
    ),
    Ladder(
        id="bessel-doubly-rs2-7",
        family="bessel_mag",
        order=7,
        tol_pole=0.2,
        tol_db=0.02,
        source=WINDER_2_4,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- c -- L6 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  c -- C5 -- gnd;  out -- C7 || RL -- gnd
            drive in;  read out
            Rs = 2 ohm;  RL = 1 ohm
            C1 = 1.9045 F;  L2 = 1.0748 H;  C3 = 0.8555 F;  L4 = 0.6914 H;  C5 = 0.51605 F
            L6 = 0.3198 H;  C7 = 0.1084 F
        """,
        note=HEADING,
    ),
    Ladder(
        id="bessel-doubly-rs3-2",
        family="bessel_mag",
        order=2,
        tol_shape=0.002,
        tol_scale=0.0085,
        source=WINDER_2_5,
        text="""
            in -- Rs -- a -- L2 -- out
            a -- C1 -- gnd;  out -- RL -- gnd
            drive in;  read out
            Rs = 3 ohm;  RL = 1 ohm
            C1 = 0.16633 F;  L2 = 4.9409 H
        """,
        note=SCALE_ERROR,
    ),
    Ladder(
        id="bessel-doubly-rs3-3",
        family="bessel_mag",
        order=3,
        tol_shape=0.002,
        tol_scale=0.0085,
        source=WINDER_2_5,
        text="""
            in -- Rs -- a -- L2 -- out
            a -- C1 -- gnd;  out -- C3 || RL -- gnd
            drive in;  read out
            Rs = 3 ohm;  RL = 1 ohm
            C1 = 1.7267 F;  L2 = 0.8925 H;  C3 = 0.30905 F
        """,
        note=SCALE_ERROR,
    ),
)
