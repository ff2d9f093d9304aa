"""Random networks: drawn once, written twice, as symnet text and as the oracle's plain tuples.

One builder serves seeded runs and hypothesis alike; it only asks a chooser for whole numbers. Every node hangs
on gnd by a tree of branches, every op amp has a branch from its output to its minus input, and an ideal output
never meets another one, so that most networks have a solution; whether one has is for the oracle to say.
"""

from __future__ import annotations

import random
from collections.abc import Callable, Sequence
from dataclasses import dataclass, field
from fractions import Fraction
from typing import Any, TypeVar

from hypothesis import strategies as st

from tests.oracle import Drawing, Part

T = TypeVar("T")
Whole = Callable[[int, int], int]

NODES = "abcdefghjkmnpqr"
DIGITS = ("1", "1.5", "2.2", "3.3", "4.7", "6.8")

#: class letter: unit in text, SI value of that unit, smallest and largest decade
SIZES = {
    "R": ("ohm", Fraction(1), 0, 5),
    "L": ("uH", Fraction(1, 10**6), 1, 5),
    "C": ("pF", Fraction(1, 10**12), 1, 5),
}

#: impedances and admittances that are an expression in s
RATIONAL = {
    "Z": ("{R} + s*{L}", "{R}/(1 + s*{R}*{C})", "1/(s*{C})", "{R} + 1/(s*{C})"),
    "Y": ("1/{R} + s*{C}", "s*{C}", "1/({R} + s*{L})", "s*{C}/(1 + s*{R}*{C})"),
}


@dataclass(frozen=True, slots=True)
class Sketch:
    """One network, written twice, with the value of every symbol."""

    text: str
    drawing: Drawing
    values: dict[str, Fraction]


@dataclass(slots=True)
class _Pencil:
    """What has been drawn so far."""

    whole: Whole
    rational: bool
    single: bool = False
    lines: list[str] = field(default_factory=list)
    parts: list[Part] = field(default_factory=list)
    values: dict[str, Fraction] = field(default_factory=dict)
    worth: list[str] = field(default_factory=list)
    inner: int = 0
    coupled: list[tuple[str, str, str]] = field(default_factory=list)

    def pick(self, options: Sequence[T]) -> T:
        return options[self.whole(0, len(options) - 1)]

    def chance(self, of: int) -> bool:
        return self.whole(1, of) == 1

    def size(self, kind: str) -> tuple[str, Fraction]:
        """A value of that class, as text and as a number."""
        unit, one, low, high = SIZES[kind]
        digits = f"{Fraction(self.pick(DIGITS)) * 10 ** self.whole(low, high)}"
        if "/" in digits:
            digits = f"{float(Fraction(digits))}"
        return f"{digits} {unit}", Fraction(digits) * one

    def branch(self, start: str, end: str) -> str:
        """One part between two nodes; gives its name."""
        kind = self.pick("RRRCCCLLZY" if self.rational else "RRRCCCLL")
        name = f"{kind}{1 + sum(part[1][0] == kind for part in self.parts)}"
        value = name
        if kind in RATIONAL:
            sizes = {letter: self.size(letter) for letter in "RLC"}
            form = self.pick(RATIONAL[kind])
            self.worth.append(f"{name} = " + form.format(**{k: text for k, (text, _) in sizes.items()}))
            value = form.format(**{k: f"({number})" for k, (_, number) in sizes.items()})
        else:
            text, self.values[name] = self.size(kind)
            self.worth.append(f"{name} = {text}")
        self.parts.append((kind, name, start, end, value))
        return name

    def link(self, start: str, end: str) -> str:
        """What stands between two nodes: a part, two in series, two in parallel; gives its text."""
        shape = self.whole(0, 5)
        if shape == 0:
            self.inner += 1
            inner = f"inside{self.inner}"
            return f"{self.branch(start, inner)} + {self.branch(inner, end)}"
        if shape == 1:
            return f"{self.branch(start, end)} || {self.branch(start, end)}"
        return self.branch(start, end)

    def chain(self, start: str, end: str) -> None:
        self.lines.append(f"{start} -- {self.link(start, end)} -- {end}")

    def symbol(self, stem: str, unit: str, one: Fraction) -> str:
        """A new law coefficient with a value; gives its name."""
        name = f"{stem}{1 + sum(known.startswith(stem) for known in self.values)}"
        digits = self.pick(DIGITS)
        self.values[name] = Fraction(digits) * one
        self.worth.append(f"{name} = {digits} {unit}".rstrip())
        return name

    def law(self, nodes: Sequence[str], kinds: dict[bool, tuple[str, str, Fraction]]) -> str:
        """A law of one or two voltages or currents; ``kinds`` says per voltage (False) or current what the factor is."""
        terms = []
        for _ in range(1 if self.single or self.whole(0, 3) else 2):
            control, of_current = self.control(nodes)
            terms.append(f"{self.symbol(*kinds[of_current])}*{control}")
        law = " - ".join(terms)
        if self.rational and not self.whole(0, 3):
            lag = self.pick(["tau1", "tau2"])
            if lag not in self.values:
                self.values[lag] = Fraction(2, 1000)
                self.worth.append(f"{lag} = 2 ms")
            law = f"({law})/(1 + s*{lag})"
        return law

    def control(self, nodes: Sequence[str]) -> tuple[str, bool]:
        """A voltage or a current of the network, as text; True when it is a current."""
        named = [part[1] for part in self.parts if part[0] in "RLCZY"]
        if self.chance(3):
            return f"i_{self.pick(named)}", True
        if self.chance(2) and len(nodes) > 1:
            first = self.pick(nodes)
            second = self.pick([node for node in nodes if node != first])
            return f"({first} - {second})", False
        return self.pick(nodes), False


def build(
    whole: Whole,
    most_nodes: int = 6,
    rational: bool = True,
    active: bool = True,
    *,
    least_nodes: int = 2,
    links: tuple[int, int] = (0, 4),
    single: bool = False,
    devices: bool = False,
) -> Sketch:
    """A connected network; ``whole(low, high)`` gives whole numbers, low and high included.

    ``links`` are the fewest and the most branches beyond the tree that hangs every node on gnd. With ``single``
    (and without ``rational``) every law has one term, so that every term of the equations has its own parameter.
    With ``devices`` it holds coupled coils, transformers, transistors and what else ships with the notation.
    """
    pencil = _Pencil(whole, rational, single)
    nodes = list(NODES[: whole(least_nodes, most_nodes)])
    for k, node in enumerate(nodes):
        pencil.chain(node, "gnd" if k == 0 or pencil.chance(4) else pencil.pick(nodes[:k]))
    for _ in range(whole(*links)):
        start = pencil.pick(nodes)
        pencil.chain(start, pencil.pick([node for node in ["gnd", *nodes] if node != start]))
    unfixed = list(nodes)
    drive, drive_text = _drive(pencil, nodes, unfixed)
    if active:
        for k in range(whole(0, 2)):
            _active(pencil, nodes, unfixed, f"{k + 1}")
    read = pencil.control(nodes)[0].strip("()")
    if devices:
        for k in range(whole(1, 3)):
            _device(pencil, nodes, unfixed, f"X{k + 1}")
        _coupled(pencil)
    pencil.lines += [drive_text, f"read {read}"]
    text = "\n".join([*pencil.lines, *pencil.worth])
    return Sketch(text, Drawing(tuple(pencil.parts), drive, read, tuple(pencil.coupled)), pencil.values)


def _drive(pencil: _Pencil, nodes: list[str], unfixed: list[str]) -> tuple[tuple[str, str, str], str]:
    node = pencil.pick(nodes)
    if pencil.whole(0, 2):
        unfixed.remove(node)
        return ("voltage", node, "gnd"), f"drive {node}"
    start = pencil.pick([other for other in ["gnd", *nodes] if other != node])
    if start == "gnd":
        return ("current", "gnd", node), f"drive current into {node}"
    return ("current", start, node), f"drive current from {start} to {node}"


def _active(pencil: _Pencil, nodes: list[str], unfixed: list[str], number: str) -> None:
    """A law or an op amp, as long as a node is left whose voltage nothing holds yet."""
    kind = pencil.pick(["hold", "push", "opamp"])
    if kind == "push":
        start = pencil.pick(nodes)
        end = pencil.pick([node for node in ["gnd", *nodes] if node != start])
        law = pencil.law(nodes, {True: ("beta", "", Fraction(1)), False: ("gm", "mS", Fraction(1, 1000))})
        pencil.lines.append(f"push from {start} to {end} = {law} as pump{number}")
        pencil.parts.append(("push", f"pump{number}", start, end, law))
    elif unfixed and kind == "hold":
        out = unfixed.pop(pencil.whole(0, len(unfixed) - 1))
        others = [node for node in nodes if node != out] or nodes
        law = pencil.law(others, {True: ("rho", "ohm", Fraction(1)), False: ("mu", "", Fraction(1))})
        pencil.lines.append(f"hold {out} = {law} as amp{number}")
        pencil.parts.append(("hold", f"amp{number}", out, "gnd", law))
    elif len(unfixed) > 1:
        out = unfixed.pop(pencil.whole(0, len(unfixed) - 1))
        minus = pencil.pick(unfixed)
        plus = pencil.pick([node for node in ["gnd", *nodes] if node not in {minus, out}])
        pencil.chain(out, minus)
        pencil.lines.append(f"U{number}: opamp(plus={plus}, minus={minus}, out={out})")
        pencil.parts.append(("opamp", f"U{number}", plus, minus, out))


def _device(pencil: _Pencil, nodes: list[str], unfixed: list[str], name: str) -> None:
    """A section that ships with the notation, and for the oracle the parts that it stands for."""
    kinds = ["gyrator", "ota", "bjt", "fet", "potentiometer", "crystal"]
    if len(unfixed) > 1 and len(nodes) > 1:
        kinds += ["transformer", "nic", "cfa", "opamp"]
    kind = pencil.pick(kinds)
    held = unfixed.pop(pencil.whole(0, len(unfixed) - 1)) if kind in kinds[6:] else ""
    a, b, c = (pencil.pick([node for node in ["gnd", *nodes] if node != held]) for _ in range(3))

    def worth(letter: str) -> str:
        """A free symbol with a value of that class, which is an argument of the section."""
        symbol = f"{letter}{name}"
        text, pencil.values[symbol] = pencil.size(letter)
        pencil.worth += [f"free {symbol}", f"{symbol} = {text}"]
        return symbol

    def number(stem: str, unit: str = "", one: Fraction = Fraction(1)) -> str:
        symbol = pencil.symbol(stem, unit, one)
        pencil.worth.append(f"free {symbol}")
        return symbol

    def part(letter: str, inner: str, start: str, end: str, value: str) -> None:
        pencil.parts.append((letter, f"{name}_{inner}", start, end, value))

    arguments: dict[str, str]
    match kind:
        case "gyrator":
            g = number("gm", "mS", Fraction(1, 1000))
            arguments = {"p1": a, "p2": "gnd", "q1": b, "q2": c, "g": g}
            part("push", "forward", a, "gnd", f"{g}*({b} - {c})")
            part("push", "backward", b, c, f"-{g}*{a}")
        case "ota":
            g, r, x = number("gm", "mS", Fraction(1, 1000)), worth("R"), worth("C")
            arguments = {"plus": a, "minus": b, "out": c, "gm": g, "Rout": r, "Cin": x}
            part("push", "amp", "gnd", c, f"{g}*({a} - {b})")
            part("R", "Rout", c, "gnd", r)
            part("C", "Cin", a, b, x)
        case "bjt":
            g, r, x = number("gm", "mS", Fraction(1, 1000)), worth("R"), worth("C")
            arguments = {"collector": a, "base": b, "emitter": c, "gm": g, "Rb": r, "Cmu": x, "Rpi": r}
            inner = f"{name}_b"
            part("push", "source", a, c, f"{g}*({inner} - {c})")
            part("R", "Rb", b, inner, r)
            part("R", "Rpi", inner, c, r)
            part("C", "Cmu", inner, a, x)
        case "fet":
            g, x = number("gm", "mS", Fraction(1, 1000)), worth("C")
            arguments = {"drain": a, "gate": b, "source": c, "gm": g, "Cgd": x, "Cgs": x}
            part("push", "channel", a, c, f"{g}*({b} - {c})")
            part("C", "Cgd", b, a, x)
            part("C", "Cgs", b, c, x)
        case "potentiometer":
            r, k = worth("R"), number("x")
            arguments = {"top": a, "wiper": b, "bottom": c, "Rt": r, "x": k}
            part("R", "Ru", a, b, f"(1 - {k})*{r}")
            part("R", "Rl", b, c, f"{k}*{r}")
        case "crystal":
            r, x, y = worth("R"), worth("C"), worth("L")
            arguments = {"a": a, "b": b, "Rm": r, "Lm": y, "Cm": x, "C0": x}
            part("Z", "motional", a, b, f"{r} + s*{y} + 1/(s*{x})")
            part("C", "C0", a, b, x)
        case "transformer":
            n = number("mu")
            arguments = {"p1": held, "p2": "gnd", "s1": a, "s2": b, "n": n}
            part("hold", "primary", held, "gnd", f"{n}*({a} - {b})")
            part("push", "secondary", a, b, f"-{n}*i_{name}_primary")
        case "nic":
            k = number("mu")
            arguments = {"a": held, "b": a, "k": k}
            part("hold", "link", held, "gnd", a)
            part("push", "inverter", a, "gnd", f"i_{name}_link/{k}")
        case "cfa":
            r, x = worth("R"), worth("C")
            arguments = {"plus": a, "minus": b, "out": held, "Rx": r, "Rt": r, "Ct": x}
            part("hold", "buffer", f"{name}_x", "gnd", a)
            part("R", "Rx", f"{name}_x", b, r)
            part("hold", "amp", held, "gnd", f"-{r}/(1 + s*{r}*{x})*i_{name}_buffer")
        case _:
            gain, r = number("mu"), worth("R")
            wt = number("wt", "krad/s", Fraction(1000))
            arguments = {"plus": a, "minus": b, "out": held, "gain": gain, "gbw": wt, "Rout": r, "pole2": wt}
            law = f"{gain}/(1 + s*{gain}/{wt})/(1 + s/{wt})*({a} - {b})"
            part("hold", "amp", f"{name}_o", "gnd", law)
            part("R", "Rout", f"{name}_o", held, r)
    listed = ", ".join(f"{key}={value}" for key, value in arguments.items())
    pencil.lines.append(f"{name}: {kind}({listed})")


def _coupled(pencil: _Pencil) -> None:
    """Share flux between two coils, if there are two; M below what any of them allows."""
    coils = [part[1] for part in pencil.parts if part[0] == "L" and "_" not in part[1]]
    if len(coils) < 2:
        return
    one, two = coils[0], coils[-1]
    microhenry = float(min(pencil.values[one], pencil.values[two]) / 2 * 10**6)
    pencil.values["M1"] = Fraction(str(microhenry)) / 10**6
    pencil.worth.append(f"M1 = {microhenry} uH")
    pencil.lines.append(f"couple {one} to {two} with M1")
    pencil.coupled.append((one, two, "M1"))


def seeded(seed: int, **how: Any) -> Sketch:
    """The network of a seed: the same one on every machine and in every Python from 3.11 on."""
    return build(random.Random(seed).randint, **how)


@st.composite
def sketches(draw: st.DrawFn, most_nodes: int = 5, *, rational: bool = True, active: bool = True) -> Sketch:
    """Random networks as hypothesis draws them; they shrink towards two nodes and resistors of 1 ohm."""
    return build(lambda low, high: draw(st.integers(low, high)), most_nodes, rational, active)
