"""The shell command: exit codes, where things are printed, and messages instead of tracebacks."""

from __future__ import annotations

import os
import subprocess
import sys
from collections.abc import Iterable
from pathlib import Path

import pytest

import symnet
from symnet.cli import main

TOP = Path(__file__).resolve().parent.parent
RC = "in -- R1 = 1k -- out -- C1 = 100n -- gnd\ndrive in\nread out\n"


def run(
    arguments: Iterable[str], given: bytes = b"", where: Path = TOP, **environment: str
) -> subprocess.CompletedProcess[bytes]:
    """The command in a process of its own, as a shell starts it."""
    return subprocess.run(
        [sys.executable, "-m", "symnet", *arguments],
        input=given,
        cwd=where,
        capture_output=True,
        env={**os.environ, "PYTHONPATH": str(TOP), "PYTHONIOENCODING": "utf-8", **environment},
        check=False,
    )


@pytest.fixture
def network(tmp_path: Path) -> Path:
    path = tmp_path / "low_pass.symnet"
    path.write_text(RC, encoding="utf-8")
    return path


def test_prints_the_brief(network: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert main([str(network)]) == 0
    shown = capsys.readouterr()
    assert shown.out.rstrip("\n") == symnet.brief(symnet.load(network)).to_text()
    assert shown.err == ""


def test_markdown(network: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["--md", str(network)]) == 0
    assert capsys.readouterr().out.rstrip("\n") == symnet.brief(symnet.load(network)).to_markdown()


def test_standard_input() -> None:
    done = run(["-"], b"\xef\xbb\xbf" + RC.encode())
    assert (done.returncode, done.stderr) == (0, b"")
    assert b"first order, low-pass" in done.stdout


def test_version_and_help(capsys: pytest.CaptureFixture[str]) -> None:
    for option, words in (
        ("--version", f"symnet {symnet.__version__}"),
        ("--help", "network in symnet's notation"),
    ):
        with pytest.raises(SystemExit) as end:
            main([option])
        assert end.value.code == 0
        assert words in capsys.readouterr().out


@pytest.mark.parametrize("arguments", [[], ["a", "b"], ["--no-such-option", "a"]])
def test_wrong_usage_is_2(arguments: list[str], capsys: pytest.CaptureFixture[str]) -> None:
    with pytest.raises(SystemExit) as end:
        main(arguments)
    assert end.value.code == 2
    assert "usage: symnet" in capsys.readouterr().err


def test_fault_in_the_network(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    path = tmp_path / "slip.symnet"
    path.write_text("in -- R1 -- C1 -- gnd\ndrive in\nread out\n", encoding="utf-8")
    assert main([str(path)]) == 1
    shown = capsys.readouterr()
    assert shown.out == ""
    assert "slip.symnet" in shown.err
    assert "line 1, column 13" in shown.err
    assert "^" in shown.err


def test_fault_of_the_wiring(capsys: pytest.CaptureFixture[str], tmp_path: Path) -> None:
    path = tmp_path / "island.symnet"
    path.write_text("in -- R1 -- gnd\na -- R2 -- b\ndrive in\nread a\n", encoding="utf-8")
    assert main([str(path)]) == 1
    assert "gnd" in capsys.readouterr().err


def test_no_file(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert main([str(tmp_path / "none.symnet")]) == 1
    assert "No such file" in capsys.readouterr().err


def test_directory(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert main([str(tmp_path)]) == 1
    assert "directory" in capsys.readouterr().err


@pytest.mark.parametrize(
    "data", [b"\x89PNG\r\n\x1a\n\x00\x00", b"in -- R\xb5 -- gnd", RC.encode("utf-16"), b"\x00" * 50]
)
def test_files_that_are_no_text(data: bytes, tmp_path: Path) -> None:
    path = tmp_path / "data.bin"
    path.write_bytes(data)
    for done in (run([str(path)]), run(["-"], data)):
        assert done.returncode == 1
        assert done.stdout == b""
        assert done.stderr.startswith(b"symnet: ")
        assert b"Traceback" not in done.stderr


def test_empty_file(tmp_path: Path) -> None:
    path = tmp_path / "empty.symnet"
    path.write_bytes(b"")
    done = run([str(path)])
    assert done.returncode == 1
    assert b"Traceback" not in done.stderr


@pytest.mark.parametrize("encoding", ["ascii", "latin-1", "cp1252"])
def test_consoles_that_cannot_show_every_sign(encoding: str, tmp_path: Path) -> None:
    path = tmp_path / "tolerances.symnet"
    path.write_text(RC + "R2 = 5 ohm ±1%\nout -- R2 -- gnd\n", encoding="utf-8")
    done = run([str(path)], PYTHONIOENCODING=encoding, PYTHONUTF8="0")
    assert (done.returncode, done.stderr) == (0, b"")
    text = done.stdout.decode(encoding)
    assert ("±1 %" if encoding != "ascii" else "+/-1 %") in text


def test_reader_that_has_seen_enough(network: Path) -> None:
    """`symnet FILE | head -1`: the pipe closes early, and nobody hears of it."""
    read, write = os.pipe()
    os.close(read)
    with os.fdopen(write, "w") as closed:
        done = subprocess.run(
            [sys.executable, "-m", "symnet", str(network)],
            stdout=closed,
            stderr=subprocess.PIPE,
            cwd=TOP,
            check=False,
        )
    assert (done.returncode, done.stderr) == (0, b"")


def test_control_characters_do_not_reach_the_terminal(tmp_path: Path) -> None:
    path = tmp_path / "hostile.symnet"
    path.write_bytes(b"# \x1b[2J\x07 comment\n" + RC.encode())
    done = run([str(path)])
    assert b"\x1b" not in done.stdout + done.stderr


@pytest.fixture
def working(tmp_path: Path) -> Path:
    path = tmp_path / "working.txt"
    path.write_text("1. node out: (out - in)/R1 + s*C1*out = 0\n2. f0 = 1.59 kHz\n", encoding="utf-8")
    return path


def test_a_working_that_holds(network: Path, working: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert main([str(network), "--check", str(working)]) == 0
    shown = capsys.readouterr()
    assert "Every line holds (2 of 2)." in shown.out
    assert "true for the given values, to the digits given" in shown.out
    assert shown.err == ""


def test_a_working_with_a_false_line(
    network: Path, working: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    working.write_text("1. out/in = 1/(1 - s*R1*C1)\n", encoding="utf-8")
    assert main([str(network), "--check", str(working), "--md"]) == 1
    shown = capsys.readouterr()
    assert "The first line that does not hold is line 1." in shown.out
    assert shown.err == ""


def test_a_fault_of_the_working_names_its_file(
    network: Path, working: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    working.write_text("out = 2 in\n", encoding="utf-8")
    assert main([str(network), "--check", str(working)]) == 1
    shown = capsys.readouterr()
    assert shown.out == ""
    assert "working.txt: line 1, column 9: in follows a number and is not a unit" in shown.err
    assert main([str(network), "--check", str(working) + "x"]) == 1
    assert "No such file" in capsys.readouterr().err


def test_a_working_from_standard_input(network: Path) -> None:
    done = run([str(network), "--check", "-"], b"H = 1/(1 + s*R1*C1)")
    assert (done.returncode, done.stderr) == (0, b"")
    assert b"Every line holds" in done.stdout
