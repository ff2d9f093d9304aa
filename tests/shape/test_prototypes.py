"""The front door of the prototypes: every name leads to what it says, and nothing is loaded before it is used."""

from __future__ import annotations

import subprocess
import sys
from pathlib import Path

import pytest

import symnet as sn
from symnet.shape import prototypes
from symnet.shape.families import CATALOGUE, Prototype

EXAMPLES = {
    "butterworth_thomson": (4, "0.5"),
    "first_order": (),
    "first_order_all_pass": (),
    "second_order": ("0.8",),
    "second_order_all_pass": ("0.8",),
    "pade_delay": (2, 3),
}
OTHERS = {"table_section", "table_sections"}


@pytest.mark.parametrize("name", sorted(set(prototypes.__all__) - OTHERS))
def test_every_name_gives_a_prototype(name: str) -> None:
    made = getattr(sn.prototypes, name)(*EXAMPLES.get(name, (4,)))
    assert isinstance(made, Prototype)
    assert made.references
    assert made.equation
    assert all(p.real < 0 for p in made.poles)
    assert made.at(f0="1 kHz").reference("f0").f == pytest.approx(1000)


def test_all_families_of_the_catalogue_are_there() -> None:
    made = {
        getattr(prototypes, name)(*EXAMPLES.get(name, (4,))).family
        for name in set(prototypes.__all__) - OTHERS
    }
    # a variant is an argument of the constructor
    assert {family.name.partition(", variant")[0] for family in CATALOGUE if family.has_order(4)} <= made


def test_unknown_name_lists_the_known_ones() -> None:
    with pytest.raises(AttributeError, match=r"'gauss'; there are bessel, .*gaussian"):
        getattr(prototypes, "gauss")  # noqa: B009
    assert set(dir(prototypes)) == set(prototypes.__all__)


def test_a_family_is_loaded_when_it_is_used() -> None:
    code = (
        "import sys, symnet; symnet.prototypes; a = {'sympy', 'numpy'} & set(sys.modules); "
        "symnet.prototypes.gaussian(3); print(sorted(a), 'symnet.shape.families.delays' in sys.modules)"
    )
    top = Path(__file__).resolve().parents[2]
    run = subprocess.run([sys.executable, "-c", code], cwd=top, capture_output=True, text=True, check=True)
    assert run.stdout == "[] False\n"
