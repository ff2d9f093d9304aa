"""The house: every import goes downward, no circles, and the public words are the ones that were agreed."""

from __future__ import annotations

import ast
import subprocess
import sys
from collections.abc import Iterator
from graphlib import TopologicalSorter
from importlib import import_module
from pathlib import Path

import pytest

import symnet

TOP = Path(__file__).resolve().parent.parent
PACKAGE = TOP / "symnet"

#: The rooms from the ground up; each may import from itself and from those before it.
ROOMS = (
    "errors",
    "progress",
    "quantities",
    "expressions",
    "grammar_files",
    "typeset",
    "circuit",
    "exact",
    "response",
    "shape",
    "review",
    "values",
    "carry",
    "present",
    "cli",
    "__main__",
)

#: What `import symnet` offers. A word that goes, or comes by accident, breaks this test.
WORDS = {
    "Network",
    "SymnetError",
    "Transfer",
    "admittance",
    "bessel",
    "brief",
    "butterworth",
    "capacitor",
    "chebyshev",
    "choose",
    "common_mode",
    "compare",
    "define",
    "derive",
    "derive_all",
    "dominant",
    "drive",
    "elliptic",
    "driving_point",
    "equations",
    "explain",
    "export",
    "extra_element",
    "f3db",
    "form",
    "group_delay",
    "hold",
    "impedance",
    "inductor",
    "limits",
    "load",
    "locus",
    "loop_gain",
    "network",
    "noise",
    "normalise",
    "opamp",
    "phase",
    "preferred",
    "place",
    "prototypes",
    "push",
    "read",
    "real_opamps",
    "recognise",
    "resistor",
    "scale",
    "sections",
    "split_poles",
    "step",
    "stability",
    "verify",
    "two_port",
}


def modules() -> Iterator[tuple[str, ast.Module]]:
    for path in sorted(PACKAGE.rglob("*.py")):
        parts = path.relative_to(TOP).with_suffix("").parts
        name = ".".join(parts[:-1] if parts[-1] == "__init__" else parts)
        yield name, ast.parse(path.read_text(encoding="utf-8"))


TREES = dict(modules())


def imported(nodes: Iterator[ast.AST]) -> Iterator[str]:
    """The symnet modules that these statements import, by full name."""
    for node in nodes:
        if isinstance(node, ast.Import):
            yield from (alias.name for alias in node.names if alias.name.split(".")[0] == "symnet")
        elif isinstance(node, ast.ImportFrom):
            assert node.level == 0, f"relative import in line {node.lineno}: write it in full"
            if node.module and node.module.split(".")[0] == "symnet":
                for alias in node.names:
                    longer = f"{node.module}.{alias.name}"
                    yield longer if longer in TREES else node.module


def on_loading(tree: ast.AST) -> Iterator[ast.AST]:
    """The statements that run when the module is loaded: not in functions, not for the type checker."""
    for child in ast.iter_child_nodes(tree):
        if isinstance(child, ast.FunctionDef | ast.AsyncFunctionDef | ast.Lambda):
            continue
        if isinstance(child, ast.If) and ast.unparse(child.test) == "TYPE_CHECKING":
            continue
        yield child
        yield from on_loading(child)


def room(module: str) -> str:
    return module.split(".")[1] if "." in module else "symnet"


@pytest.mark.parametrize("module", [name for name in TREES if name != "symnet"])
def test_every_import_goes_downward(module: str) -> None:
    here = ROOMS.index(room(module))
    for other in imported(ast.walk(TREES[module])):
        if other != "symnet":  # the version number, which is all that the front door itself holds
            assert ROOMS.index(room(other)) <= here, f"{module} imports {other}, which stands above it"


def test_no_module_needs_itself_to_load() -> None:
    graph = {name: set(imported(on_loading(tree))) - {name} for name, tree in TREES.items()}
    assert len(tuple(TopologicalSorter(graph).static_order())) == len(graph)  # raises CycleError on a circle


def test_nothing_but_the_three_libraries_is_needed() -> None:
    allowed = {"symnet", "sympy", "mpmath", "numpy", "lark", *sys.stdlib_module_names}
    optional = {"matplotlib", "IPython"}
    for name, tree in TREES.items():
        for node in ast.walk(tree):
            names = []
            if isinstance(node, ast.Import):
                names = [alias.name for alias in node.names]
            elif isinstance(node, ast.ImportFrom) and node.module:
                names = [node.module]
            for other in names:
                top = other.split(".")[0]
                assert top in allowed | optional, f"{name} imports {other}"


def test_text_never_becomes_code() -> None:
    for name, tree in TREES.items():
        for node in ast.walk(tree):
            if isinstance(node, ast.Call):
                called = ast.unparse(node.func).split(".")[-1]
                assert called not in {"eval", "exec", "sympify", "parse_expr", "simplify"}, (
                    f"{name} line {node.lineno} calls {called}"
                )


def test_public_words() -> None:
    assert set(symnet.__all__) == WORDS
    assert set(dir(symnet)) == WORDS | {"__version__"}


@pytest.mark.parametrize("word", sorted(WORDS))
def test_public_word_exists_and_says_what_it_is(word: str) -> None:
    assert (getattr(symnet, word).__doc__ or "").strip()


@pytest.mark.parametrize("module", [name for name in TREES if name not in {"symnet", "symnet.__main__"}])
def test_module_says_its_idea_and_its_public_names(module: str) -> None:
    tree = TREES[module]
    assert ast.get_docstring(tree)
    loaded = import_module(module)
    for name in getattr(loaded, "__all__", ()):
        assert hasattr(loaded, name), f"{module}.__all__ promises {name}"


def test_unknown_public_word_is_an_attribute_error() -> None:
    with pytest.raises(AttributeError, match="derivee"):
        getattr(symnet, "derivee")  # noqa: B009


def test_import_is_quiet_and_loads_nothing_heavy() -> None:
    code = "import sys, symnet; print(sorted({'sympy', 'numpy', 'lark'} & set(sys.modules)))"
    run = subprocess.run(
        [sys.executable, "-W", "error", "-c", code], cwd=TOP, capture_output=True, text=True, check=True
    )
    assert (run.stdout, run.stderr) == ("[]\n", "")
