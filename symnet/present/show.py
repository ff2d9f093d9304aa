"""How each result shows itself in a notebook: one formatter for each class, all from blocks.

Loaded when the first value is displayed (:mod:`symnet.typeset.displayed`). A showing is the same thing in four
dresses: plain text for a terminal, Markdown and LaTeX, and HTML with MathML, which needs no script to be set.
"""

from __future__ import annotations

from collections.abc import Sequence

from symnet.circuit.network import Network
from symnet.exact.limits import Limits
from symnet.exact.mna import Equations
from symnet.exact.naming import Naming
from symnet.exact.ports.element import ExtraElement
from symnet.exact.ports.extremes import Extremes
from symnet.exact.ports.modes import Modes
from symnet.exact.ports.twoport import Matrix, TwoPort
from symnet.exact.scaling import Scaling
from symnet.exact.transfer import Transfer
from symnet.present.blocks import Block, Formula, Table
from symnet.present.brief import Brief
from symnet.present.choosing import choice_blocks, preferred_blocks
from symnet.present.difference import comparison_blocks
from symnet.present.dominant import dominant_blocks, split_blocks
from symnet.present.explain import Explanation
from symnet.present.locus import locus_blocks, real_opamps_blocks
from symnet.present.loop import loop_blocks, stability_blocks
from symnet.present.network import network_blocks
from symnet.present.noise import formula_blocks, noise_blocks
from symnet.present.ports import element_blocks, extremes_blocks, matrix_blocks, modes_blocks, two_port_blocks
from symnet.present.recognition import recognition_blocks
from symnet.present.response import half_power_rows, step_blocks
from symnet.present.results import (
    conditions_blocks,
    equations_blocks,
    hides,
    limits_table,
    shortened,
    transfer_blocks,
    transfer_formula,
)
from symnet.present.review import review_blocks
from symnet.present.scaling import scaling_blocks
from symnet.present.shapes import form_blocks, normal_blocks, sections_blocks
from symnet.present.writers import formula_latex, html, latex, markdown, text
from symnet.quantities import NUMBER
from symnet.response.noise import Noise
from symnet.response.noise_formula import NoiseFormula
from symnet.response.time import StepResponse
from symnet.review.verdicts import Review
from symnet.shape.difference import Comparison
from symnet.shape.dominant import Dominant
from symnet.shape.families.prototype import Prototype
from symnet.shape.families.tabled import TableSection
from symnet.shape.figures import HalfPower
from symnet.shape.forms import Form
from symnet.shape.locus import Locus
from symnet.shape.loop import LoopGain
from symnet.shape.normal import NormalForm
from symnet.shape.real import RealOpAmps
from symnet.shape.sections import Sections
from symnet.shape.split import SplitPoles
from symnet.shape.stability import Stability
from symnet.shape.stated import Conditions
from symnet.shape.verdict import Recognition
from symnet.typeset.displayed import Bundle, formats
from symnet.values.choosing_result import Choice
from symnet.values.preferred import Preferred

__all__ = ["bundle"]


def bundle(blocks: Sequence[Block]) -> Bundle:
    """The showings of these blocks by MIME type; LaTeX of a formula alone stands between dollar signs."""
    alone = blocks[0] if len(blocks) == 1 else None
    return {
        "text/plain": text(blocks),
        "text/markdown": markdown(blocks),
        "text/html": html(blocks),
        "text/latex": f"$\\displaystyle {formula_latex(alone)}$"
        if isinstance(alone, Formula)
        else latex(blocks),
    }


@formats(Brief)
def _brief(value: Brief) -> Bundle:
    return bundle(value.blocks)


@formats(Explanation)
def _explanation(value: Explanation) -> Bundle:
    return bundle(value.blocks)


@formats(Transfer)
def _transfer(value: Transfer) -> Bundle:
    formula = transfer_formula(value)
    if formula is None or hides(value) or shortened(value):
        return bundle(transfer_blocks(value))
    return bundle((formula,))


@formats(Network)
def _network(value: Network) -> Bundle:
    return bundle(network_blocks(value, Naming.of(value).numbers)[1:])


@formats(Equations)
def _equations(value: Equations) -> Bundle:
    return bundle(equations_blocks(value)[1:])


@formats(Limits)
def _limits(value: Limits) -> Bundle:
    return bundle((limits_table(value, {}, NUMBER),))


@formats(NormalForm)
def _normal_form(value: NormalForm) -> Bundle:
    return bundle(normal_blocks(value))


@formats(Form)
def _form(value: Form) -> Bundle:
    return bundle(form_blocks(value))


@formats(HalfPower)
def _half_power(value: HalfPower) -> Bundle:
    rows = tuple(half_power_rows(value, value.level.dimension or NUMBER))
    return bundle((Table(("figure", "f", "w", "remark"), rows),))


@formats(StepResponse)
def _step_response(value: StepResponse) -> Bundle:
    return bundle(step_blocks(value))


@formats(Prototype)
def _prototype(value: Prototype) -> Bundle:
    return bundle((Table((), value.rows()),))


@formats(TableSection)
def _table_section(value: TableSection) -> Bundle:
    return bundle((Table((), value.rows()),))


@formats(Sections)
def _sections(value: Sections) -> Bundle:
    return bundle(sections_blocks(value))


@formats(Recognition)
def _recognition(value: Recognition) -> Bundle:
    return bundle(recognition_blocks(value))


@formats(Conditions)
def _conditions(value: Conditions) -> Bundle:
    return bundle(conditions_blocks(value))


@formats(TwoPort)
def _two_port(value: TwoPort) -> Bundle:
    return bundle(two_port_blocks(value))


@formats(Matrix)
def _matrix(value: Matrix) -> Bundle:
    return bundle(matrix_blocks(value))


@formats(ExtraElement)
def _extra_element(value: ExtraElement) -> Bundle:
    return bundle(element_blocks(value))


@formats(Extremes)
def _extremes(value: Extremes) -> Bundle:
    return bundle(extremes_blocks(value))


@formats(Modes)
def _modes(value: Modes) -> Bundle:
    return bundle(modes_blocks(value))


@formats(Dominant)
def _dominant(value: Dominant) -> Bundle:
    return bundle(dominant_blocks(value))


@formats(SplitPoles)
def _split_poles(value: SplitPoles) -> Bundle:
    return bundle(split_blocks(value))


@formats(Scaling)
def _scaling(value: Scaling) -> Bundle:
    return bundle(scaling_blocks(value))


@formats(Review)
def _review(value: Review) -> Bundle:
    return bundle(review_blocks(value))


@formats(Comparison)
def _comparison(value: Comparison) -> Bundle:
    return bundle(comparison_blocks(value))


@formats(LoopGain)
def _loop_gain(value: LoopGain) -> Bundle:
    return bundle(loop_blocks(value))


@formats(Stability)
def _stability(value: Stability) -> Bundle:
    return bundle(stability_blocks(value))


@formats(Locus)
def _locus(value: Locus) -> Bundle:
    return bundle(locus_blocks(value))


@formats(RealOpAmps)
def _real_opamps(value: RealOpAmps) -> Bundle:
    return bundle(real_opamps_blocks(value))


@formats(Preferred)
def _preferred(value: Preferred) -> Bundle:
    return bundle(preferred_blocks(value))


@formats(Choice)
def _choice(value: Choice) -> Bundle:
    return bundle(choice_blocks(value))


@formats(Noise)
def _noise(value: Noise) -> Bundle:
    return bundle(noise_blocks(value))


@formats(NoiseFormula)
def _noise_formula(value: NoiseFormula) -> Bundle:
    return bundle(formula_blocks(value))
