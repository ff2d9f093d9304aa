"""Every notebook runs from the first cell to the last in a clean kernel, and is stored without outputs."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import nbformat
import pytest
from nbclient import NotebookClient

FOLDER = Path(__file__).resolve().parent.parent / "notebooks"
NOTEBOOKS = sorted(FOLDER.glob("*.ipynb"))


def test_there_are_notebooks() -> None:
    assert NOTEBOOKS


@pytest.mark.parametrize("path", NOTEBOOKS, ids=lambda path: path.stem)
def test_stored_without_outputs(path: Path) -> None:
    """So that version control shows what changed, and nothing shown can be older than the code."""
    for cell in nbformat.read(path, as_version=4).cells:
        if cell.cell_type == "code":
            assert not cell.outputs
            assert cell.execution_count is None


@pytest.mark.parametrize("path", NOTEBOOKS, ids=lambda path: path.stem)
# The kernel is another process; what its client library warns about on our side is not ours to mend.
@pytest.mark.filterwarnings("default")
def test_runs_in_a_clean_kernel(path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setenv("PYTHONPATH", str(FOLDER.parent))
    monkeypatch.delenv("PYTHONWARNINGS", raising=False)
    notebook = nbformat.read(path, as_version=4)
    notebook.cells.insert(0, nbformat.v4.new_code_cell("import warnings; warnings.simplefilter('error')"))
    client = NotebookClient(
        notebook, timeout=120, kernel_name="python3", resources={"metadata": {"path": str(FOLDER)}}
    )
    client.execute()
    outputs = [output for cell in notebook.cells if cell.cell_type == "code" for output in cell.outputs]
    assert not [output for output in outputs if output.output_type == "error"]
    assert not [output for output in outputs if output.get("name") == "stderr"]
    shown = [output.data for output in outputs if output.output_type == "execute_result"]
    assert not [data["text/plain"] for data in shown if not is_typeset(data)]
    assert len(shown) >= 8


def is_typeset(data: Any) -> bool:
    return bool({"text/latex", "text/html"} & set(data)) and not data["text/plain"].startswith("<")
