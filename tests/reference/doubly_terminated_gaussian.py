"""Doubly terminated ladders that are Gaussian down to 6 dB and to 12 dB, digits as printed.

Gaussian means that the loss in dB grows as the square of the frequency, 3.0103*w^2 dB, down to the stated level.
"""

from __future__ import annotations

from tests.reference.cases import Ladder

__all__ = ["CASES"]

ZVEREV_6_DB = "Zverev Gaussian-to-6 dB table as reprinted on RF Cafe"
ZVEREV_12_DB = "Zverev Gaussian-to-12 dB table as reprinted on RF Cafe"
GAUSSIAN = "-3 dB at 1 rad/s within 1 %; attenuation follows 3.0103*w^2 dB up to the stated level"

CASES: tuple[Ladder, ...] = (
    Ladder(
        id="gauss6-doubly-3",
        family="gaussian_to_6db",
        order=3,
        tol_db=1.5,
        tol_scale=0.01,
        source=ZVEREV_6_DB,
        text="""
            in -- Rs -- a -- L2 -- out
            a -- C1 -- gnd;  out -- C3 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.3655 F;  L2 = 0.9032 H;  C3 = 2.269 F
        """,
        note=GAUSSIAN,
    ),
    Ladder(
        id="gauss6-doubly-4",
        family="gaussian_to_6db",
        order=4,
        tol_db=1.0,
        tol_scale=0.01,
        source=ZVEREV_6_DB,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  out -- RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.4153 F;  L2 = 0.8634 H;  C3 = 1.142 F;  L4 = 2.264 H
        """,
        note=GAUSSIAN,
    ),
    Ladder(
        id="gauss6-doubly-5",
        family="gaussian_to_6db",
        order=5,
        tol_db=1.0,
        tol_scale=0.01,
        source=ZVEREV_6_DB,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  out -- C5 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.43 F;  L2 = 0.9132 H;  C3 = 1.109 F;  L4 = 1.195 H;  C5 = 2.335 F
        """,
        note=GAUSSIAN,
    ),
    Ladder(
        id="gauss6-doubly-7",
        family="gaussian_to_6db",
        order=7,
        tol_db=1.0,
        tol_scale=0.01,
        source=ZVEREV_6_DB,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- c -- L6 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  c -- C5 -- gnd;  out -- C7 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.3975 F;  L2 = 0.9082 H;  C3 = 1.15 F;  L4 = 1.212 H;  C5 = 1.248 F
            L6 = 1.267 H;  C7 = 2.347 F
        """,
        note="printed L4=0.212 corrected to 1.212; -3 dB at 1 rad/s within 1 %; attenuation follows 3.0103*w^2 dB up to the stated level",
    ),
    Ladder(
        id="gauss12-doubly-5",
        family="gaussian_to_12db",
        order=5,
        tol_db=1.0,
        tol_scale=0.01,
        source=ZVEREV_12_DB,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  out -- C5 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.2452 F;  L2 = 0.5751 H;  C3 = 0.7681 F;  L4 = 1.013 H;  C5 = 2.266 F
        """,
        note=GAUSSIAN,
    ),
    Ladder(
        id="gauss12-doubly-6",
        family="gaussian_to_12db",
        order=6,
        tol_db=1.0,
        tol_scale=0.01,
        source=ZVEREV_12_DB,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- c -- L6 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  c -- C5 -- gnd;  out -- RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.2635 F;  L2 = 0.6055 H;  C3 = 0.7617 F;  L4 = 0.8421 H;  C5 = 1.055 F
            L6 = 2.255 H
        """,
        note=GAUSSIAN,
    ),
    Ladder(
        id="gauss12-doubly-7",
        family="gaussian_to_12db",
        order=7,
        tol_db=1.0,
        tol_scale=0.01,
        source=ZVEREV_12_DB,
        text="""
            in -- Rs -- a -- L2 -- b -- L4 -- c -- L6 -- out
            a -- C1 -- gnd;  b -- C3 -- gnd;  c -- C5 -- gnd;  out -- C7 || RL -- gnd
            drive in;  read out
            Rs, RL = 1 ohm
            C1 = 0.2473 F;  L2 = 0.5845 H;  C3 = 0.7555 F;  L4 = 0.8127 H;  C5 = 0.884 F
            L6 = 1.049 H;  C7 = 2.281 F
        """,
        note=GAUSSIAN,
    ),
)
