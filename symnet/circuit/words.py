"""What a word may be: a node, a symbol, a label; and what to say when it means something else already."""

from __future__ import annotations

from symnet.circuit.meanings import RESERVED, is_part_name
from symnet.circuit.parts import GROUND, class_letter

__all__ = ["node_fault", "plain_fault"]


def node_fault(name: str) -> tuple[str, str] | None:
    """Why a word is no node, and what to do; None when it is one.

    >>> node_fault("out"), node_fault("R1")
    (None, ('R1 stands where a node must stand', 'names that begin with R are parts'))
    """
    if name[0] in "0123456789.":
        if name.strip("0") == "":
            return f"{name} is no node; the reference is called {GROUND}", f"write {GROUND}"
        if not name.isdigit() or name[0] == "0":
            return f"{name} is no node", "a node has a name, or a whole number from 1"
        return None
    if name == GROUND:
        return None
    if name.lower() in {GROUND, "ground"}:
        return f"the reference is called {GROUND}", f"write {GROUND} for {name}"
    if is_part_name(name):
        return (
            f"{name} stands where a node must stand",
            f"names that begin with {class_letter(name)} are parts",
        )
    return plain_fault(name, "a node")


def plain_fault(name: str, what: str) -> tuple[str, str] | None:
    """Why a word cannot be ``what``, since it means something else already; None when it can.

    >>> plain_fault("i_R1", "a node")
    ('i_R1 means the current through R1 and cannot be a node', 'call it R1')
    """
    if name == "s":
        return f"s is the Laplace variable and cannot be {what}", "choose another name"
    if name == GROUND:
        return f"{GROUND} is the reference and cannot be {what}", "choose another name"
    if name in RESERVED:
        return f"{name} is a word of the notation and cannot be {what}", "choose another name"
    if name.startswith(("i_", "v_")) and name[2:]:
        kind = "current through" if name[0] == "i" else "voltage of"
        return f"{name} means the {kind} {name[2:]} and cannot be {what}", f"call it {name[2:]}"
    return None
