"""Values chosen together are the best of their lists: held against full enumeration by other means, in numpy alone."""

from __future__ import annotations

import itertools
from fractions import Fraction
from pathlib import Path

import numpy as np
import pytest
from numpy.typing import NDArray

import symnet as sn
from symnet.errors import MissingValueError, NotationError, SymnetError, UnknownNameError
from symnet.values import choosing_search
from symnet.values.choosing_result import Candidate, Choice
from tests.reference.e_series import LISTED

Floats = NDArray[np.float64]

TWO_POLE = sn.network(
    "in -- R1 -- x -- R2 -- p; x -- C1 -- out; p -- C2 -- gnd; drive in; read out;"
    "U1: opamp(plus=p, minus=out, out=out)"
)
#: first-order section in front of a two-pole with multiple feedback, loading it (invented)
SEVEN = sn.network("""
    in -- R1 -- a -- R2 -- b; a -- C1 -- gnd; b -- C2 -- gnd; b -- R3 -- m; b -- R4 -- out; m -- C3 -- out
    U1: opamp(plus=gnd, minus=m, out=out)
    drive in; read out
""")


def members(series: str, low: float, high: float) -> Floats:
    """The values of a series between two limits, from the standard's list."""
    scale = 10 if LISTED[series][0] == 10 else 100
    values = np.array([figure / scale * 10.0**k for k in range(-13, 8) for figure in LISTED[series]])
    return values[(values > low * 0.9999) & (values < high * 1.0001)]


def si(candidate: Candidate) -> dict[str, float]:
    return {name: float(value.value) for name, value in candidate.values.items()}


def figures_of_two_pole(r1: Floats, r2: Floats, c1: Floats, c2: Floats) -> tuple[Floats, Floats]:
    """f0 = 1/(2 pi sqrt(R1 R2 C1 C2)), Q = sqrt(R1 R2 C1 C2)/(C2 (R1 + R2)): Sallen and Key's section, gain 1."""
    root = np.sqrt(r1 * r2 * c1 * c2)
    return 1 / (2 * np.pi * root), root / (c2 * (r1 + r2))


def full_enumeration(r: Floats, c: Floats) -> list[tuple[float, tuple[float, ...]]]:
    """The largest error of f0 = 1 kHz and Q = 2 for every combination, best first, to the hundredth."""
    grid = np.meshgrid(r, r, c, c, indexing="ij")
    f0, q = figures_of_two_pole(*grid)
    error = np.maximum(np.abs(f0 / 1000 - 1), np.abs(q / 2 - 1)).ravel()
    order = np.argsort(error)[:100]
    return [(float(error[k]), tuple(float(values.ravel()[k]) for values in grid)) for k in order]


class TestN16:
    """Preferred values together: 1 kHz, Q = 2, E24 resistors, E6 capacitors. Values and figures are those of need N16."""

    @pytest.fixture(scope="class")
    @staticmethod
    def choice() -> Choice:
        exact = TWO_POLE.with_values(R1="4.250k", R2="12.682k", C1="100n", C2="4.7n")
        return sn.choose(
            exact, f0="1 kHz", Q=2, R="E24, 1 kohm .. 100 kohm", C="E6, 1 nF .. 100 nF", runners_up=8
        )

    def test_the_values_and_their_figures(self, choice: Choice) -> None:
        assert {n: str(v) for n, v in choice.values.items()} == {
            "R1": "9.1 kohm",
            "R2": "27 kohm",
            "C1": "47 nF",
            "C2": "2.2 nF",
        }
        f0, q = choice.best.outcomes
        assert (round(f0.obtained, 1), round(q.obtained, 3)) == (998.5, 2.007)
        assert f0.error is not None
        assert q.error is not None
        assert (round(100 * f0.error, 2), round(100 * q.error, 2)) == (-0.15, 0.35)

    def test_nearest_rounding_is_told_beside_it(self, choice: Choice) -> None:
        assert choice.rounded is not None
        assert [str(v) for v in choice.rounded.values.values()] == ["4.3 kohm", "13 kohm", "100 nF", "4.7 nF"]
        f0, q = choice.rounded.outcomes
        assert f0.error is not None
        assert (round(f0.obtained, 1), round(100 * f0.error, 2), round(q.obtained, 3)) == (
            981.9,
            -1.81,
            1.993,
        )

    def test_optimal_and_its_runners_up_by_full_enumeration(self, choice: Choice) -> None:
        r, c = members("E24", 1e3, 1e5), members("E6", 1e-9, 1e-7)
        assert choice.combinations == len(r) ** 2 * len(c) ** 2 == 405_769
        assert choice.optimal
        assert choice.complete
        assert choice.gap == 0
        listed = full_enumeration(r, c)
        distinct = [e for k, (e, _) in enumerate(listed) if not k or e > listed[k - 1][0] * (1 + 1e-9)]
        found = [choice.best, *choice.runners_up]
        assert [candidate.error for candidate in found] == pytest.approx(distinct[: len(found)], rel=1e-9)
        for candidate in found:
            same = [values for error, values in listed if error == pytest.approx(candidate.error, rel=1e-9)]
            assert candidate.alike_count == len(same) - 1
            assert any(tuple(si(candidate).values()) == pytest.approx(values) for values in same)

    def test_far_fewer_evaluations_than_combinations(self, choice: Choice) -> None:
        assert choice.evaluations < choice.combinations / 4
        assert "none left open" in choice.proof

    def test_enumeration_says_the_same(self, choice: Choice, monkeypatch: pytest.MonkeyPatch) -> None:
        monkeypatch.setattr(choosing_search, "MOST_ENUMERATED", 10**6)
        all_of_them = sn.choose(
            TWO_POLE, f0="1 kHz", Q=2, R="E24, 1 kohm .. 100 kohm", C="E6, 1 nF .. 100 nF", runners_up=8
        )
        assert all_of_them.how == "every combination"
        assert "all 405 769 combinations were computed" in all_of_them.proof
        assert all_of_them.best == choice.best
        assert all_of_them.runners_up == choice.runners_up

    def test_the_network_has_the_values(self, choice: Choice) -> None:
        section = sn.sections(sn.derive(choice.network)).numbers
        assert section is not None
        (pair,) = section.poles
        assert pair.f0 == pytest.approx(choice.best.outcomes[0].obtained, rel=1e-12)
        assert pair.q is not None
        assert pair.q.value == pytest.approx(choice.best.outcomes[1].obtained, rel=1e-12)


def response_of_seven(values: dict[str, Floats], f: complex) -> NDArray[np.complex128]:
    """H at one frequency from the two node equations and the virtual ground, eliminated by hand."""
    s = 2j * np.pi * f
    r1, r2, r3, r4 = (values[f"R{k}"] for k in (1, 2, 3, 4))
    c1, c2, c3 = (values[f"C{k}"] for k in (1, 2, 3))
    # node m is at 0 V: b/R3 = -s C3 out, so b = -s R3 C3 out; node b then gives a, node a gives in
    b = -s * r3 * c3
    a = r2 * (b * (1 / r2 + s * c2 + 1 / r3 + 1 / r4) - 1 / r4)
    supply = r1 * (a * (1 / r1 + 1 / r2 + s * c1) - b / r2)
    result: NDArray[np.complex128] = 1 / supply
    return result


def errors_of_seven(values: dict[str, Floats]) -> Floats:
    """The largest |dB - dB wanted|, Butterworth 3 at 1 kHz and gain 1, at 61 frequencies from 10 Hz to 2 kHz."""
    worst = np.zeros(())
    for f in np.geomspace(10, 2000, 61):
        wanted = -10 * np.log10(1 + (f / 1000) ** 6)
        worst = np.maximum(worst, np.abs(20 * np.log10(np.abs(response_of_seven(values, float(f)))) - wanted))
    return worst


class TestSevenParts:
    """A three-pole section with seven parts, all chosen."""

    TARGET = sn.butterworth(3).at(f3dB="1 kHz")

    def test_e96_with_its_gap_to_the_bound(self) -> None:
        choice = sn.choose(SEVEN, self.TARGET, K=-1, R="E96", C="E6", work=3_000_000)
        assert choice.combinations == 193**4 * 13**3 == 3_048_311_138_197
        assert choice.evaluations < 4_000_000
        assert choice.error < 0.0026  # 0.253 %, which 40 million evaluations prove to be the optimum
        assert 0 <= choice.least <= choice.error
        assert choice.gap == choice.error - choice.least
        assert not choice.optimal
        assert "not proved optimal: of 3 048 311 138 197 combinations" in choice.proof
        assert "(the gap to the bound)" in choice.proof
        poles = np.roots(self._denominator(si(choice.best)))
        wanted = np.array(self.TARGET.poles)
        away = np.min(np.abs(poles[:, None] / wanted - 1), axis=0)
        gain = abs(response_of_seven({k: np.array(v) for k, v in si(choice.best).items()}, 0.0) + 1)
        assert max(*away, float(gain)) == pytest.approx(choice.error, rel=1e-6)

    @staticmethod
    def _denominator(values: dict[str, float]) -> Floats:
        """1/H interpolated at four points of s, highest power first."""
        f = np.array([100.0, 300.0, 900.0, 2000.0])
        arrays = {name: np.array(value) for name, value in values.items()}
        samples = np.array([1 / response_of_seven(arrays, each / 1j) for each in f])  # s = 2 pi f
        found: Floats = np.polyfit(2 * np.pi * f / 6283, samples.real, 3) / 6283.0 ** np.arange(3, -1, -1)
        return found

    def test_branch_and_bound_finds_what_full_enumeration_finds(self) -> None:
        lists = {"R": ("E6", 4.7e3, 47e3), "C": ("E3", 2.2e-9, 47e-9)}
        choice = sn.choose(
            SEVEN,
            self.TARGET,
            K=-1,
            R="E6, 4.7 kohm .. 47 kohm",
            C="E3, 2.2 nF .. 47 nF",
            band=("10 Hz", "2 kHz"),
        )
        assert choice.how == "branch and bound"
        assert choice.complete
        names = tuple(choice.values)
        grid = np.meshgrid(*(members(*lists[name[0]]) for name in names), indexing="ij", copy=False)
        errors = errors_of_seven(dict(zip(names, grid, strict=True)))
        assert choice.combinations == errors.size
        best = sorted(errors.ravel())[: 1 + len(choice.runners_up)]
        found = [candidate.error for candidate in (choice.best, *choice.runners_up)]
        assert found == pytest.approx(best, rel=1e-6)
        values = {name: np.array(value) for name, value in si(choice.best).items()}
        assert float(errors_of_seven(values)) == pytest.approx(choice.error, rel=1e-6)
        assert choice.best.outcomes[-1].name == "largest error"
        assert abs(choice.best.outcomes[-1].obtained) == pytest.approx(choice.error)


LADDER = sn.network("""
    in -- Rs -- a -- L1 -- out; a -- C1 -- gnd; out -- C2 || RL -- gnd; drive in; read out
    Rs, RL = 600 ohm ±1%; C1, C2 = 13.263 nF ±2%; L1 = 9.549 mH ±5%
""")


class TestWhatIsChosen:
    def test_kept_parts_keep_their_values_and_the_chosen_ones_their_tolerance(self) -> None:
        choice = sn.choose(LADDER, sn.butterworth(3).at(f3dB="20 kHz"), keep="Rs RL", C="E24", L="E12")
        assert [name for name, _ in choice.kept] == ["Rs", "RL"]
        assert [str(value) for value in choice.values.values()] == ["10 mH", "13 nF", "13 nF"]
        tolerances = {name: value.tolerance for name, value in choice.network.values}
        assert (tolerances["C1"], tolerances["L1"]) == (Fraction(2, 100), Fraction(5, 100))

    def test_inductors_stay_without_a_word(self) -> None:
        choice = sn.choose(LADDER, sn.butterworth(3).at(f3dB="20 kHz"), keep=["Rs", "RL"])
        assert set(choice.values) == {"C1", "C2"}

    def test_ties_hold(self) -> None:
        tied = TWO_POLE.add("R2 = R1")
        choice = sn.choose(tied, f0="1 kHz", Q=2, C="E12")
        assert set(choice.values) == {"R1", "C1", "C2"}
        assert choice.optimal
        r, c = members("E24", 1e3, 1e5), members("E12", 1e-9, 1e-7)
        grid = np.meshgrid(r, c, c, indexing="ij")
        f0, q = figures_of_two_pole(grid[0], grid[0], grid[1], grid[2])
        error = np.maximum(np.abs(f0 / 1000 - 1), np.abs(q / 2 - 1))
        assert choice.error == pytest.approx(error.min(), rel=1e-9)

    def test_the_network_itself_is_the_target_without_another(self) -> None:
        exact = TWO_POLE.with_values(R1="4.250k", R2="12.682k", C1="100n", C2="4.7n")
        choice = sn.choose(exact, R="E24", C="E6", objective="f0/Q")
        assert choice.best.outcomes[0].wanted == pytest.approx(1000, rel=1e-3)
        assert choice.best.outcomes[-1].name == "K"
        assert choice.optimal

    def test_one_list_for_one_part(self) -> None:
        choice = sn.choose(TWO_POLE, f0="1 kHz", Q=2, C2=sn.preferred("E3", "1 nF", "10 nF"))
        assert dict(choice.lists)["C2"].name == "E3"
        assert dict(choice.lists)["C1"].name == "E6"

    def test_pairs_are_never_worse(self) -> None:
        single = sn.preferred("E12", "1 kohm", "47 kohm")
        plain = sn.choose(TWO_POLE, f0="1 kHz", Q=2, R=single)
        pairs = sn.choose(TWO_POLE, f0="1 kHz", Q=2, R=single.with_pairs("series", "parallel"))
        assert pairs.optimal
        assert pairs.error < plain.error / 4
        assert any(part.entry.how for part in pairs.best.parts)
        f0, q = figures_of_two_pole(*(np.array(value) for value in si(pairs.best).values()))
        assert max(abs(f0 / 1000 - 1), abs(q / 2 - 1)) == pytest.approx(pairs.error, rel=1e-9)

    def test_stock(self, tmp_path: Path) -> None:
        file = tmp_path / "drawer.csv"
        file.write_text(
            "name,value\nR-1,9.1 kohm\nR-2,27 kohm\nR-3,22 kohm\nC-1,47 nF\nC-2,2.2 nF\n", "utf-8"
        )
        choice = sn.choose(TWO_POLE, f0="1 kHz", Q=2, stock=file)
        assert choice.combinations == 36
        assert [part.entry.labels for part in choice.best.parts] == [("R-1",), ("R-2",), ("C-1",), ("C-2",)]
        assert dict(choice.lists)["R1"].name == "drawer.csv"

    def test_lists_that_leave_out_what_is_needed_are_doubted(self) -> None:
        far = sn.choose(TWO_POLE, f0="10 MHz", Q=2)
        assert far.optimal
        assert any("do their limits leave out" in note for note in far.notes)
        assert not sn.choose(TWO_POLE, f0="1 kHz", Q=2).notes

    def test_what_is_tied_is_searched_without_bounds_and_said_so(self) -> None:
        tied = sn.choose(TWO_POLE.add("R2 = R1"), f0="1 kHz", Q=2, R="E96", C="E12")
        assert any("of R1: tied" in note for note in tied.notes)
        r, c = members("E96", 1e3, 1e5), members("E12", 1e-9, 1e-7)
        grid = np.meshgrid(r, c, c, indexing="ij")
        f0, q = figures_of_two_pole(grid[0], grid[0], grid[1], grid[2])
        error = np.maximum(np.abs(f0 / 1000 - 1), np.abs(q / 2 - 1))
        assert tied.how == "branch and bound"
        assert tied.complete
        assert tied.error == pytest.approx(error.min(), rel=1e-9)

    def test_a_balanced_network_is_a_target_though_a_pole_and_a_zero_cancel(self) -> None:
        twin = sn.network("""
            in -- R1 -- a -- R2 -- out; a -- C3 -- gnd; in -- C1 -- b -- C2 -- out; b -- R3 -- gnd
            drive in; read out; R1, R2 = 10 kohm; R3 = 5 kohm; C1, C2 = 10 nF; C3 = 20 nF
        """)
        choice = sn.choose(twin, keep="R1 R2 C1 C2", R="E24", C="E24")
        assert {name: str(value) for name, value in choice.values.items()} == {
            "C3": "20 nF",
            "R3": "5.1 kohm",
        }
        poles = sn.derive(choice.network).numeric().poles()
        assert len(poles) == 3

    def test_numbers_of_zeros_and_high_pass(self) -> None:
        high = sn.network(
            "in -- C1 -- x -- C2 -- p; x -- R1 -- out; p -- R2 -- gnd; drive in; read out;"
            "U1: opamp(plus=p, minus=out, out=out)"
        )
        capacitors = "E6, 100 nF .. 1 uF"
        by_figures = sn.choose(high, f0="100 Hz", Q=0.5**0.5, C=capacitors)
        by_poles = sn.choose(high, sn.butterworth(2).at(f3dB="100 Hz").high_pass(), C=capacitors)
        assert by_figures.values == by_poles.values
        (crossing,) = sn.f3db(sn.derive(by_poles.network))
        assert crossing.f == pytest.approx(100, rel=1e-3)

    def test_finite_zeros_count(self) -> None:
        ladder = sn.network(
            "in -- Rs -- a -- L2 || C2 -- out; a -- C1 -- gnd; out -- C3 || RL -- gnd;"
            "drive in; read out; Rs, RL = 50 ohm"
        )
        target = sn.elliptic(3, "0.1 dB", "30 dB").at(f3dB="10 MHz")
        capacitors = "E24, 30 pF .. 1 nF"
        with pytest.raises(SymnetError, match="in F"):
            sn.choose(ladder, target, keep="Rs RL", C=capacitors, L="E12, 100 nF .. 10 uF")
        choice = sn.choose(ladder, target, keep="Rs RL", C=capacitors, L="E12, 100 nH .. 10 uH")
        assert choice.optimal
        H = sn.derive(choice.network).numeric()
        wanted, zeros = np.array(target.poles), np.array(target.zeros)
        got_poles = np.array([root.value for root in H.poles()])
        got_zeros = np.array([root.value for root in H.zeros()])
        off = [np.min(np.abs(got_poles[:, None] / wanted - 1), axis=0).max()]
        off.append(np.min(np.abs(got_zeros[:, None] / zeros - 1), axis=0).max())
        assert max(off) == pytest.approx(choice.error, rel=1e-6)
        assert any(outcome.name == "f of zero 1" for outcome in choice.best.outcomes)

    def test_a_hidden_mode_does_not_count(self) -> None:
        bridge = sn.network("in -- R1 -- out -- C1 -- gnd; in -- R2 -- y -- C2 -- gnd; drive in; read out")
        choice = sn.choose(bridge, f0="1 kHz")
        assert set(choice.values) == {"R1", "C1"}
        all_errors = [
            abs(1 / (2 * np.pi * r * c) / 1000 - 1)
            for r, c in itertools.product(members("E24", 1e3, 1e5), members("E6", 1e-9, 1e-7))
        ]
        assert choice.error == pytest.approx(min(all_errors), rel=1e-6)

    def test_a_mode_that_cancels_by_algebra_does_not_count(self) -> None:
        compensated = sn.network("""
            in -- R1 || C1 -- a -- R2 || C2 -- gnd; R2 = R1; C2 = C1    # the divider's pole cancels its zero
            a -- R3 || C3 -- gnd; R3 = R1; C3 = C1
            hold b = a
            b -- R4 -- out -- C4 -- gnd
            drive in; read out
        """)
        choice = sn.choose(compensated, f0="1 kHz")
        assert set(choice.values) == {"R4", "C4"}
        product = choice.values["R4"].value * choice.values["C4"].value
        assert choice.error == pytest.approx(abs(1 / (2 * np.pi * float(product)) / 1000 - 1), rel=1e-9)


@pytest.mark.parametrize(
    ("arguments", "error", "message"),
    [
        ({"f0": "1 kHz"}, NotationError, "give Q"),
        ({"Q": 2}, NotationError, "Q alone"),
        ({"f0": "1 kHz", "Q": -1}, NotationError, "positive"),
        ({"target": sn.butterworth(3)}, NotationError, "3 poles"),
        ({"target": sn.butterworth(2).high_pass()}, NotationError, "zeros at the origin"),
        ({"f0": "1 kHz", "Q": 2, "target": sn.butterworth(2)}, NotationError, "not both"),
        ({"f0": "1 kHz", "Q": 2, "objective": "beauty"}, NotationError, "there is no objective"),
        ({"f0": "1 kHz", "Q": 2, "objective": "dB"}, NotationError, "band"),
        ({"f0": "1 kHz", "Q": 2, "band": ("2 kHz", "1 kHz")}, NotationError, "upwards"),
        ({"f0": "1 kHz", "Q": 2, "K": 0}, NotationError, "gain to aim at"),
        ({"f0": "1 kHz", "Q": 2, "K": "large"}, NotationError, "gain to aim at"),
        ({"f0": "1 kHz", "Q": 2, "keep": "R1"}, MissingValueError, "no value for R1"),
        ({"f0": "1 kHz", "Q": 2, "keep": "R9"}, UnknownNameError, "no name R9"),
        ({"f0": "1 kHz", "Q": 2, "R": "E25"}, UnknownNameError, "no series"),
        ({"f0": "1 kHz", "Q": 2, "R": "E24, 1 kohm"}, NotationError, "no range"),
        ({"f0": "1 kHz", "Q": 2, "R": "E24, 1 nF .. 1 uF"}, NotationError, "not in ohm"),
        ({"f0": "1 kHz", "Q": 2, "C7": "E24"}, UnknownNameError, "no name C7"),
        ({"target": sn.derive(LADDER)}, NotationError, "3 poles"),
        ({}, MissingValueError, "no value"),
    ],
)
def test_refusals(arguments: dict[str, object], error: type[SymnetError], message: str) -> None:
    with pytest.raises(error, match=message):
        sn.choose(TWO_POLE, **arguments)  # type: ignore[arg-type]
