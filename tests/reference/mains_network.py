"""Artificial mains networks of CISPR 16-1-2: the impedance at the terminal of the equipment under test.

Rows are (f in kHz, |Z| in ohm, phase in degrees). The standard allows +-20 % and +-11.5 degrees; the idealised
networks meet every printed digit.
"""

from __future__ import annotations

from dataclasses import dataclass

from tests.reference.cases import Case

__all__ = ["CASES", "REAL_NETWORK", "UNTABULATED", "Impedance"]

Row = tuple[float, float, float]


@dataclass(frozen=True, slots=True, kw_only=True)
class Impedance(Case):
    """A one-port with its table, the tolerance of the standard and how near the ideal network is to the table."""

    rows: tuple[Row, ...]
    tol_percent: float
    tol_deg: float


NARROW: tuple[Row, ...] = (
    (9, 5.22, 26.55),
    (15, 6.22, 38.41),
    (20, 7.25, 44.97),
    (25, 8.38, 49.39),
    (30, 9.56, 52.33),
    (40, 11.99, 55.43),
    (50, 14.41, 56.4),
    (60, 16.77, 56.23),
    (70, 19.04, 55.4),
    (80, 21.19, 54.19),
    (90, 23.22, 52.77),
    (100, 25.11, 51.22),
    (150, 32.72, 43.35),
)

WIDE: tuple[Row, ...] = (
    (150, 34.29, 46.7),
    (170, 36.5, 43.11),
    (200, 39.12, 38.51),
    (250, 42.18, 32.48),
    (300, 44.17, 27.95),
    (350, 45.52, 24.45),
    (400, 46.46, 21.7),
    (500, 47.65, 17.66),
    (600, 48.33, 14.86),
    (700, 48.76, 12.81),
    (800, 49.04, 11.25),
    (900, 49.24, 10.03),
    (1000, 49.38, 9.04),
    (1200, 49.57, 7.56),
    (1500, 49.72, 6.06),
    (2000, 49.84, 4.55),
    (2500, 49.9, 3.64),
    (3000, 49.93, 3.04),
    (4000, 49.96, 2.28),
    (5000, 49.98, 1.82),
    (7000, 49.99, 1.3),
    (10000, 49.99, 0.91),
    (15000, 50, 0.61),
    (20000, 50, 0.46),
    (30000, 50, 0.3),
)

CASES: tuple[Impedance, ...] = (
    Impedance(
        id="amn-50ohm-50uH",
        title="50 ohm / 50 uH V-network, 0.15-30 MHz: EUT impedance = 50 ohm in parallel with 50 uH",
        source="CISPR 16-1-2 (clause 4.3, impedance table and +-20 % / +-11.5 deg tolerances). FROM MEMORY - no public text of "
        "the table was found; every row agrees with the closed form to the printed digit",
        from_memory=True,
        text="""
            eut -- L1 || Rm -- gnd
            drive current into eut
            read eut
            L1 = 50 uH;  Rm = 50 ohm
        """,
        rows=WIDE,
        tol_percent=20,
        tol_deg=11.5,
    ),
    Impedance(
        id="amn-50ohm-50uH-5ohm",
        title="50 ohm / 50 uH + 5 ohm V-network, 9-150 kHz",
        source="CISPR 16-1-2 (clause 4.2 table). FROM MEMORY; confirmed row by row by the closed form. Existence and name of "
        "the network sourced (public EMC mailing list quoting clause 4.2 and Annex A)",
        from_memory=True,
        text="""
            eut -- (L1 + R1) || Rm -- gnd
            drive current into eut
            read eut
            L1 = 50 uH;  R1 = 5 ohm;  Rm = 50 ohm
        """,
        rows=NARROW,
        tol_percent=20,
        tol_deg=11.5,
    ),
)

UNTABULATED = Case(
    id="amn-5uH-1ohm",
    title="50 ohm / 5 uH + 1 ohm V-network, 150 kHz-100 MHz",
    source="CISPR 16-1-2 clause 4.4, topology from memory; no table found, only closed form",
    from_memory=True,
    text="""
        eut -- (L1 + R1) || Rm -- gnd
        drive current into eut
        read eut
        L1 = 5 uH;  R1 = 1 ohm;  Rm = 50 ohm
    """,
)

REAL_NETWORK = Impedance(
    id="amn-annexA-network",
    title="two-section network with real components against the idealised table",
    source="CISPR 16-1-2 Annex A example component values, FROM MEMORY; public EMC page confirms the two-basic-type "
    "description only",
    from_memory=True,
    text="""
        eut -- L1 -- a -- L2 -- m
        a -- C1 + R1 -- gnd                          # 8 uF + 5 ohm
        m -- C2 + R2 -- gnd                          # 4 uF + 10 ohm
        eut -- C3 -- d -- R3 || Rm -- gnd            # 1 kohm and the 50 ohm receiver
        drive current into eut
        read eut
        L1 = 50 uH;  L2 = 250 uH
        C1 = 8 uF;  R1 = 5 ohm;  C2 = 4 uF;  R2 = 10 ohm
        C3 = 0.25 uF;  R3 = 1 kohm;  Rm = 50 ohm
    """,
    rows=(*NARROW, *(row for row in WIDE if row[0] > 150)),
    tol_percent=20,
    tol_deg=11.5,
)
