"""Resistive pads: published element tables for 50 ohm (T, pi, bridged T) and 8 ohm loudspeaker L-pads.

With K = 10^(dB/20): T: series Z0 (K-1)/(K+1), shunt 2 Z0 K/(K^2-1). Pi: shunt Z0 (K+1)/(K-1), series
Z0 (K^2-1)/(2K). Bridged T: bridge Z0 (K-1), shunt Z0/(K-1). L: series R (1-1/K), shunt R/(K-1).
"""

from __future__ import annotations

from dataclasses import dataclass

from tests.reference.cases import Case

__all__ = ["CASES", "Pad"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Pad(Case):
    """A pad of so many dB between z0 and z0 (an L-pad: z0 is the load and what its input shows).

    ``series`` is the series arm, or the bridge of a bridged T; ``shunt`` the arm to ground; in ohm, as printed.
    """

    kind: str
    db: float
    z0: float
    series: float
    shunt: float


PI_PADS = "published 50 ohm pi-pad table"
T_PADS = "published 50 ohm T-pad table (public attenuator tables, formulas as in microwaves encyclopaedia)"
BRIDGED_T_PADS = "published 50 ohm bridged-T table (electronics-notes.com)"
L_PADS = "loudspeaker L-pad formulas and 8 ohm values; from memory, confirmed"

CASES: tuple[Pad, ...] = (
    Pad(
        id="pipad-1dB",
        kind="pi",
        db=1,
        z0=50,
        series=5.77,
        shunt=869.5,
        source=PI_PADS,
        text="""
            in -- Rs -- a -- R2 -- out
            a -- R1 -- gnd
            out -- R3 || RL -- gnd
            drive in
            read out
            Rs, RL = 50 ohm;  R1, R3 = 869.5 ohm;  R2 = 5.77 ohm
        """,
    ),
    Pad(
        id="tpad-2dB",
        kind="T",
        db=2,
        z0=50,
        series=5.73,
        shunt=215.2,
        source=T_PADS,
        text="""
            in -- Rs -- a -- R1 -- m -- R3 -- out
            m -- R2 -- gnd
            out -- RL -- gnd
            drive in
            read out
            Rs, RL = 50 ohm;  R1, R3 = 5.73 ohm;  R2 = 215.2 ohm
        """,
    ),
    Pad(
        id="pipad-2dB",
        kind="pi",
        db=2,
        z0=50,
        series=11.61,
        shunt=436.2,
        source=PI_PADS,
        text="""
            in -- Rs -- a -- R2 -- out
            a -- R1 -- gnd
            out -- R3 || RL -- gnd
            drive in
            read out
            Rs, RL = 50 ohm;  R1, R3 = 436.2 ohm;  R2 = 11.61 ohm
        """,
    ),
    Pad(
        id="pipad-3dB",
        kind="pi",
        db=3,
        z0=50,
        series=17.61,
        shunt=292.4,
        source=PI_PADS,
        text="""
            in -- Rs -- a -- R2 -- out
            a -- R1 -- gnd
            out -- R3 || RL -- gnd
            drive in
            read out
            Rs, RL = 50 ohm;  R1, R3 = 292.4 ohm;  R2 = 17.61 ohm
        """,
    ),
    Pad(
        id="tpad-6dB",
        kind="T",
        db=6,
        z0=50,
        series=16.61,
        shunt=66.93,
        source=T_PADS,
        text="""
            in -- Rs -- a -- R1 -- m -- R3 -- out
            m -- R2 -- gnd
            out -- RL -- gnd
            drive in
            read out
            Rs, RL = 50 ohm;  R1, R3 = 16.61 ohm;  R2 = 66.93 ohm
        """,
    ),
    Pad(
        id="pipad-6dB",
        kind="pi",
        db=6,
        z0=50,
        series=37.35,
        shunt=150.5,
        source=PI_PADS,
        text="""
            in -- Rs -- a -- R2 -- out
            a -- R1 -- gnd
            out -- R3 || RL -- gnd
            drive in
            read out
            Rs, RL = 50 ohm;  R1, R3 = 150.5 ohm;  R2 = 37.35 ohm
        """,
    ),
    Pad(
        id="pipad-10dB",
        kind="pi",
        db=10,
        z0=50,
        series=71.15,
        shunt=96.25,
        source=PI_PADS,
        text="""
            in -- Rs -- a -- R2 -- out
            a -- R1 -- gnd
            out -- R3 || RL -- gnd
            drive in
            read out
            Rs, RL = 50 ohm;  R1, R3 = 96.25 ohm;  R2 = 71.15 ohm
        """,
    ),
    Pad(
        id="pipad-20dB",
        kind="pi",
        db=20,
        z0=50,
        series=247.5,
        shunt=61.11,
        source=PI_PADS,
        text="""
            in -- Rs -- a -- R2 -- out
            a -- R1 -- gnd
            out -- R3 || RL -- gnd
            drive in
            read out
            Rs, RL = 50 ohm;  R1, R3 = 61.11 ohm;  R2 = 247.5 ohm
        """,
    ),
    Pad(
        id="tpad-4dB",
        kind="T",
        db=4,
        z0=50,
        series=11.3,
        shunt=104.8,
        source=T_PADS,
        text="""
            in -- Rs -- a -- R1 -- m -- R3 -- out
            m -- R2 -- gnd
            out -- RL -- gnd
            drive in
            read out
            Rs, RL = 50 ohm;  R1, R3 = 11.3 ohm;  R2 = 104.8 ohm
        """,
    ),
    Pad(
        id="tpad-5dB",
        kind="T",
        db=5,
        z0=50,
        series=14,
        shunt=82.2,
        source=T_PADS,
        text="""
            in -- Rs -- a -- R1 -- m -- R3 -- out
            m -- R2 -- gnd
            out -- RL -- gnd
            drive in
            read out
            Rs, RL = 50 ohm;  R1, R3 = 14 ohm;  R2 = 82.2 ohm
        """,
    ),
    Pad(
        id="pipad-5dB",
        kind="pi",
        db=5,
        z0=50,
        series=30.4,
        shunt=178.5,
        source=PI_PADS,
        text="""
            in -- Rs -- a -- R2 -- out
            a -- R1 -- gnd
            out -- R3 || RL -- gnd
            drive in
            read out
            Rs, RL = 50 ohm;  R1, R3 = 178.5 ohm;  R2 = 30.4 ohm
        """,
    ),
    Pad(
        id="pipad-12dB",
        kind="pi",
        db=12,
        z0=50,
        series=93.2,
        shunt=83.5,
        source=PI_PADS,
        text="""
            in -- Rs -- a -- R2 -- out
            a -- R1 -- gnd
            out -- R3 || RL -- gnd
            drive in
            read out
            Rs, RL = 50 ohm;  R1, R3 = 83.5 ohm;  R2 = 93.2 ohm
        """,
    ),
    Pad(
        id="tpad-25dB",
        kind="T",
        db=25,
        z0=50,
        series=44.7,
        shunt=5.6,
        source=T_PADS,
        text="""
            in -- Rs -- a -- R1 -- m -- R3 -- out
            m -- R2 -- gnd
            out -- RL -- gnd
            drive in
            read out
            Rs, RL = 50 ohm;  R1, R3 = 44.7 ohm;  R2 = 5.6 ohm
        """,
    ),
    Pad(
        id="tpad-40dB",
        kind="T",
        db=40,
        z0=50,
        series=49,
        shunt=1,
        source=T_PADS,
        text="""
            in -- Rs -- a -- R1 -- m -- R3 -- out
            m -- R2 -- gnd
            out -- RL -- gnd
            drive in
            read out
            Rs, RL = 50 ohm;  R1, R3 = 49 ohm;  R2 = 1 ohm
        """,
    ),
    Pad(
        id="btpad-1dB",
        kind="bridged-T",
        db=1,
        z0=50,
        series=6.1,
        shunt=410,
        source=BRIDGED_T_PADS,
        text="""
            in -- Rs -- a -- Ra -- m -- Rb -- out
            a -- R1 -- out
            m -- R2 -- gnd
            out -- RL -- gnd
            drive in
            read out
            Rs, RL = 50 ohm;  Ra, Rb = 50 ohm;  R1 = 6.1 ohm;  R2 = 410 ohm
        """,
    ),
    Pad(
        id="btpad-3dB",
        kind="bridged-T",
        db=3,
        z0=50,
        series=20.6,
        shunt=121,
        source=BRIDGED_T_PADS,
        text="""
            in -- Rs -- a -- Ra -- m -- Rb -- out
            a -- R1 -- out
            m -- R2 -- gnd
            out -- RL -- gnd
            drive in
            read out
            Rs, RL = 50 ohm;  Ra, Rb = 50 ohm;  R1 = 20.6 ohm;  R2 = 121 ohm
        """,
    ),
    Pad(
        id="lpad-3dB",
        kind="L",
        db=3,
        z0=8,
        series=2.34,
        shunt=19.39,
        source=L_PADS,
        from_memory=True,
        text="""
            in -- R1 -- out
            out -- R2 || RL -- gnd
            drive in
            read out
            RL = 8 ohm;  R1 = 2.34 ohm;  R2 = 19.39 ohm
        """,
    ),
    Pad(
        id="lpad-6dB",
        kind="L",
        db=6,
        z0=8,
        series=3.99,
        shunt=8.04,
        source=L_PADS,
        from_memory=True,
        text="""
            in -- R1 -- out
            out -- R2 || RL -- gnd
            drive in
            read out
            RL = 8 ohm;  R1 = 3.99 ohm;  R2 = 8.04 ohm
        """,
    ),
)
