"""Frequency weightings A, B, C, D and U: the published tables, and networks that realise them.

The networks are constructed, not published: a chain of first-order sections with unity buffers between them, 10 kohm
each, C = 1/(2 pi f R) to the digits of a double. U and D have no such chain; they stand as a single law with the
published rational function. A table row stands for the exact third-octave frequency 1000*10^(n/10) Hz, not for the
nominal one beside it.
"""

from __future__ import annotations

from tests.reference.cases import Case

__all__ = ["LOSS_AT_1_KHZ", "PUBLISHED_POLES", "ROWS", "A", "B", "C", "D", "U"]

TABLE = 'IEC 60651/61672-1 A/C and IEC 61012 U nominal weightings, table of exact third-octave frequencies as published on a standards-data page (lichtbeeldgeluid.nl, "A, C & U Weighting Table"); pole frequencies 20.6/107.7/737.9/12200 Hz quoted there and in ANSI S1.4-1983 / S1.42-2001 extracts'

#: nominal frequency in Hz; A, C and U weighting in dB. Row k is for the exact frequency 1000*10^((k - 20)/10) Hz.
ROWS: tuple[tuple[float, float | None, float | None, float], ...] = (
    (10, -70.4, -14.3, 0.0),
    (12.5, -63.4, -11.2, 0.0),
    (16, -56.7, -8.5, 0.0),
    (20, -50.5, -6.2, 0.0),
    (25, -44.7, -4.4, 0.0),
    (31.5, -39.4, -3.0, 0.0),
    (40, -34.6, -2.0, 0.0),
    (50, -30.2, -1.3, 0.0),
    (63, -26.2, -0.8, 0.0),
    (80, -22.5, -0.5, 0.0),
    (100, -19.1, -0.3, 0.0),
    (125, -16.1, -0.2, 0.0),
    (160, -13.4, -0.1, 0.0),
    (200, -10.9, 0.0, 0.0),
    (250, -8.6, 0.0, 0.0),
    (315, -6.6, 0.0, 0.0),
    (400, -4.8, 0.0, 0.0),
    (500, -3.2, 0.0, 0.0),
    (630, -1.9, 0.0, 0.0),
    (800, -0.8, 0.0, 0.0),
    (1000, 0.0, 0.0, 0.0),
    (1250, 0.6, 0.0, 0.0),
    (1600, 1.0, -0.1, 0.0),
    (2000, 1.2, -0.2, 0.0),
    (2500, 1.3, -0.3, 0.0),
    (3150, 1.2, -0.5, 0.0),
    (4000, 1.0, -0.8, 0.0),
    (5000, 0.5, -1.3, 0.0),
    (6300, -0.1, -2.0, 0.0),
    (8000, -1.1, -3.0, 0.0),
    (10000, -2.5, -4.4, 0.0),
    (12500, -4.3, -6.2, -2.8),
    (16000, -6.6, -8.5, -13.0),
    (20000, -9.3, -11.2, -25.3),
    (25000, None, None, -37.6),
    (31500, None, None, -49.7),
    (40000, None, None, -61.8),
)

#: f1, f2, f3, f4 in Hz as usually quoted. IEC 61672-1 Annex (analytical expressions): fL=10^1.5 Hz, fH=10^3.9 Hz,
#: fA=10^2.45 Hz, fr=1000 Hz; relations recalled from memory, figures agree:
#: f2=(3-sqrt(5))/2*fA; f3=(3+sqrt(5))/2*fA; b=(1/(1-D))*(fr^2+fL^2*fH^2/fr^2-D*(fL^2+fH^2)); c=fL^2*fH^2;
#: D=sqrt(1/2); f1=sqrt((-b-sqrt(b^2-4c))/2); f4=sqrt((-b+sqrt(b^2-4c))/2)
PUBLISHED_POLES = (20.598997, 107.65265, 737.86223, 12194.217)

#: Loss at 1 kHz before normalisation, dB, to 0.005 dB.
#: Public note quoting ANSI S1.4-1983 / S1.42-2001: 2.0, 0.17 and 0.06 dB for A, B, C.
LOSS_AT_1_KHZ = {"A": 2.0, "B": 0.17, "C": 0.06}

A = Case(
    id="aw-network",
    title="constructed (not published) buffered RC realisation of A-weighting: high-pass f1, f1, f2, f3, low-pass f4, f4",
    source="constructed from the standard's poles; table as aw-table: " + TABLE,
    text="""
        in -- C1 -- a1 -- R1 -- gnd;  hold b1 = a1
        b1 -- C2 -- a2 -- R2 -- gnd;  hold b2 = a2
        b2 -- C3 -- a3 -- R3 -- gnd;  hold b3 = a3
        b3 -- C4 -- a4 -- R4 -- gnd;  hold b4 = a4
        b4 -- R5 -- a5 -- C5 -- gnd;  hold b5 = a5
        b5 -- R6 -- a6 -- C6 -- gnd;  hold b6 = a6
        drive in;  read b6
        R1, R2, R3, R4, R5, R6 = 10 kohm
        C1, C2 = 772.6344280098512 nF
        C3 = 147.84117724740793 nF
        C4 = 21.569737067728688 nF
        C5, C6 = 1.3051673687640102 nF
    """,
)

B = Case(
    id="bw-network",
    title="constructed (not published) buffered RC realisation of B-weighting: C-weighting and a high-pass at 10^2.2 Hz",
    source="constructed; the pole at 10^2.2 Hz is from memory, the loss of 0.17 dB at 1 kHz confirms it",
    from_memory=True,
    text="""
        in -- C1 -- a1 -- R1 -- gnd;  hold b1 = a1
        b1 -- C2 -- a2 -- R2 -- gnd;  hold b2 = a2
        b2 -- C3 -- a3 -- R3 -- gnd;  hold b3 = a3
        b3 -- R4 -- a4 -- C4 -- gnd;  hold b4 = a4
        b4 -- R5 -- a5 -- C5 -- gnd;  hold b5 = a5
        drive in;  read b5
        R1, R2, R3, R4, R5 = 10 kohm
        C1, C2 = 772.6344280098512 nF
        C3 = 100.41998025415853 nF
        C4, C5 = 1.3051673687640102 nF
    """,
)

C = Case(
    id="cw-network",
    title="constructed (not published) buffered RC realisation of C-weighting: high-pass f1, f1, low-pass f4, f4",
    source="constructed from the standard's poles; table as cw-table: " + TABLE,
    text="""
        in -- C1 -- a1 -- R1 -- gnd;  hold b1 = a1
        b1 -- C2 -- a2 -- R2 -- gnd;  hold b2 = a2
        b2 -- R3 -- a3 -- C3 -- gnd;  hold b3 = a3
        b3 -- R4 -- a4 -- C4 -- gnd;  hold b4 = a4
        drive in;  read b4
        R1, R2, R3, R4 = 10 kohm
        C1, C2 = 772.6344280098512 nF
        C3, C4 = 1.3051673687640102 nF
    """,
)

U = Case(
    id="uw-table",
    title="U-weighting (IEC 61012): all-pole, double real -12200 Hz and pairs -7850+-j8800, -2900+-j12150 Hz; "
    "T = 1/(2 pi) s makes s*T the frequency in Hz",
    source="IEC 61012:1990 poles (memory) vs published U column: " + TABLE,
    from_memory=True,
    note="pole values from memory; the published U column confirms them",
    text="""
        hold low  = 1/(1 + s*T/12200)^2*in
        hold mid  = 1/(1 + 2*7850*s*T/(7850^2 + 8800^2) + s^2*T^2/(7850^2 + 8800^2))*low
        hold high = 1/(1 + 2*2900*s*T/(2900^2 + 12150^2) + s^2*T^2/(2900^2 + 12150^2))*mid
        high -- RL -- gnd
        drive in;  read high
        T = 159.15494309189535 ms;  RL = 10 kohm
    """,
)

D = Case(
    id="dw-two-forms",
    title="D-weighting: published magnitude formula equals published s-domain rational function; T = 1 s",
    source="magnitude form from public source files quoting the encyclopedia; s-domain form from memory (IEC 537 "
    "D-weighting)",
    from_memory=True,
    note="magnitude: f/6.8966888496476e-5*sqrt(((1037918.48-f2)^2+1080768.16*f2)/((9837328-f2)^2+11723776*f2)"
    "/((f2+79919.29)*(f2+1345600))), f2 = f^2, within 0.01 dB",
    text="""
        hold out = 91104.32*s*T*(s^2*T^2 + 6532*s*T + 4.0975e7)/((s*T + 1776.3)*(s*T + 7288.5)*(s^2*T^2 + 21514*s*T + 3.8836e8))*in
        out -- RL -- gnd
        drive in;  read out
        T = 1000 ms;  RL = 10 kohm
    """,
)
