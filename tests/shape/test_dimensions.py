"""Units of every term of H: derived ones agree, slips are found at the term."""

from __future__ import annotations

import pytest

from symnet.circuit.build import network
from symnet.exact.derive import derive
from symnet.quantities import NUMBER, OHM, SECOND
from symnet.shape.dimensions import check_dimensions, coefficient_dimensions
from tests.shape.symbols import transfer


@pytest.mark.parametrize(
    "text",
    [
        "in -- R1 -- out -- C1 -- gnd; drive in; read out",
        "in -- Rs -- a -- L1 -- out; a -- C1 -- gnd; out -- C2 || RL -- gnd; drive in; read out",
        "x -- R1 || C1 -- y -- L1 -- gnd; drive current into x; read y",
        "in -- R1 -- x -- L1 + C1 -- gnd; drive in; read i_R1",
    ],
)
def test_derived_transfers_agree(text: str) -> None:
    assert check_dimensions(derive(network(text))) == ()


def test_missing_bracket_is_found_at_the_term() -> None:
    # 1/(w0 Q) = R1 + R2 C2 + (1-K) R1 C1 for (R1 + R2) C2 + (1-K) R1 C1: a misprint (common practice, no source)
    h = transfer("K", "1+s*(R1+R2*C2+(1-K)*R1*C1)+s^2*R1*R2*C1*C2", "R1 R2 C1 C2 K")
    (finding,) = check_dimensions(h)
    assert (finding.where, finding.power, finding.term) == ("denominator", 1, "R1")
    assert (finding.dimension, finding.expected) == (OHM, SECOND)
    assert str(finding) == (
        "denominator, coefficient of s^1: the term R1 has the dimension ohm, the others ask for s"
    )


def test_numerator_is_measured_by_the_denominator() -> None:
    (finding,) = check_dimensions(transfer("R1", "1+s*R1*C1", "R1 C1"))
    assert (finding.where, finding.dimension, finding.expected) == ("numerator", OHM, NUMBER)


def test_unknown_names_are_passed_over() -> None:
    assert check_dimensions(transfer("x", "1+s*R1*x", "R1 x")) == ()
    assert check_dimensions(transfer("x", "x", "x")) == ()


def test_dimensions_of_coefficients() -> None:
    num, den = coefficient_dimensions(transfer("R2", "R1+R2+s*R1*R2*C1", "R1 R2 C1"))
    assert num == (OHM,)
    assert den == (OHM, OHM * SECOND)
