"""Normalised capacitors of unity-gain sections, 1 ohm and -3 dB at 1 rad/s, digits as remembered.

Two-pole section: feedback capacitor from the output to the middle node, the other to ground at the input of the
amplifier. Three-pole section: C1 to ground at the first node, C2 fed back to the second, C3 to ground at the amplifier.
"""

from __future__ import annotations

from tests.reference.cases import Ladder

__all__ = ["CASES"]

SOURCE = (
    "unity-gain capacitor tables (Geffe; Williams & Taylor, Electronic Filter Design Handbook, Table 11-29 family),"
    " from memory"
)

TWO_POLES = """
    {at} -- R{a} -- m{a} -- R{b} -- p{a};  m{a} -- C{b} -- {out};  p{a} -- C{a} -- gnd
    U{a}: opamp(plus=p{a}, minus={out}, out={out})
    R{a}, R{b} = 1 ohm
"""

CASES: tuple[Ladder, ...] = (
    Ladder(
        id="ugcap-butterworth-2",
        family="butterworth",
        order=2,
        tol_pole=0.003,
        source=SOURCE,
        from_memory=True,
        text=TWO_POLES.format(at="in", out="out", a=1, b=2)
        + "C2 = 1.414 F;  C1 = 0.7071 F;  drive in;  read out",
    ),
    Ladder(
        id="ugcap-butterworth-3",
        family="butterworth",
        order=3,
        tol_pole=0.003,
        source=SOURCE,
        from_memory=True,
        text="""
            in -- R1 -- a -- R2 -- c -- R3 -- p
            a -- C1 -- gnd;  c -- C2 -- out;  p -- C3 -- gnd
            U1: opamp(plus=p, minus=out, out=out)
            R1, R2, R3 = 1 ohm;  C2 = 3.546 F;  C1 = 1.392 F;  C3 = 0.2024 F
            drive in;  read out
        """,
    ),
    Ladder(
        id="ugcap-butterworth-4",
        family="butterworth",
        order=4,
        tol_pole=0.003,
        source=SOURCE,
        from_memory=True,
        text=TWO_POLES.format(at="in", out="first", a=1, b=2)
        + TWO_POLES.format(at="first", out="out", a=3, b=4)
        + "C2 = 1.082 F;  C1 = 0.9241 F;  C4 = 2.613 F;  C3 = 0.3825 F;  drive in;  read out",
    ),
)
