"""The repository itself: what the README promises, the size of files, and that words have one home."""

from __future__ import annotations

import os
import re
import shlex
import subprocess
import sys
from pathlib import Path

import pytest

from toewright.model.glossary import GLOSSARY

ROOT = Path(__file__).parent.parent
README = (ROOT / "README.md").read_text(encoding="utf-8")
DEVELOPERS = (ROOT / "DEVELOPERS.md").read_text(encoding="utf-8")
SOURCES = [*(ROOT / "solver").rglob("*.py"), *(ROOT / "cli").rglob("*.py")]

LONGEST = 400
"""Lines; the compiled kernels call each other and must share a file."""


def blocks(language: str) -> list[str]:
    """Fenced blocks of the README in one language."""
    return re.findall(rf"```{language}\n(.*?)```", README, flags=re.DOTALL)


def toewright_commands() -> list[list[str]]:
    """Arguments of every toewright command line in the README."""
    found = []
    typed = [line for block in blocks("console") for line in block.splitlines() if line.startswith("$ ")]
    for line in "".join(blocks("sh")).splitlines() + typed:
        for part in line.removeprefix("$ ").split("&&"):
            words = shlex.split(part)
            if words and words[0].endswith("toewright"):
                found.append(words[1:])
            elif words[:3] == ["uv", "run", "toewright"]:
                found.append(words[3:])
    return found


def run_toewright(arguments: list[str], folder: Path) -> subprocess.CompletedProcess[str]:
    environment = {**os.environ, "COLUMNS": "80"}
    return subprocess.run(
        [sys.executable, "-c", "from toewright_cli.app import main; main()", *arguments],
        cwd=folder,
        env=environment,
        capture_output=True,
        text=True,
        check=False,
    )


def test_the_readme_opens_with_one_paragraph_that_states_the_job() -> None:
    title, paragraph, heading = README.split("\n\n")[:3]
    assert title == "# toewright"
    assert heading.startswith("## ")
    for word in ("hardpoints", "rack travel", "wheel travel", "steer"):
        assert word in paragraph


@pytest.mark.parametrize(
    "line",
    [
        "python3 -m venv .venv && .venv/bin/pip install -q -e . && .venv/bin/toewright sweep hardpoints/marten_front.toml",
        "python3 -m venv .venv && .venv/bin/pip install -q -e '.[test]' && .venv/bin/python -m pytest",
    ],
)
def test_the_set_up_lines_stand_alone(line: str) -> None:
    assert f"```sh\n{line}\n```" in README


@pytest.mark.parametrize("arguments", toewright_commands(), ids=" ".join)
def test_every_command_of_the_readme_runs(arguments: list[str], tmp_path: Path) -> None:
    (tmp_path / "hardpoints").symlink_to(ROOT / "hardpoints")
    done = run_toewright(arguments, tmp_path)
    assert done.returncode == 0, done.stderr


@pytest.mark.parametrize("block", blocks("console"), ids=lambda b: b.splitlines()[0])
def test_the_readme_shows_what_the_tool_prints(block: str) -> None:
    command, _, shown = block.partition("\n")
    arguments = shlex.split(command.removeprefix("$ toewright"))
    printed = run_toewright(arguments, ROOT).stdout
    assert shown.split() == printed.split()


@pytest.mark.parametrize("block", blocks("python"))
def test_the_readme_python_runs(block: str, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(ROOT)
    exec(compile(block, "README.md", "exec"), {})


def test_the_readme_signs_are_those_of_the_glossary() -> None:
    known = {entry.label: (entry.unit, entry.sign) for entry in GLOSSARY.values()}
    rows = re.findall(r"^\| ([^|]+) \| ([^|]+) \| ([^|]+) \|$", README, flags=re.MULTILINE)
    figures = [row for row in rows if row[0] != "figure"]
    assert len(figures) > 10
    for label, unit, sign in figures:
        assert known[label][0] == unit
        if label != "rack travel":
            assert known[label][1] == sign


def test_cautions_are_there() -> None:
    for phrase in ("Steering can kill", "qualified engineer", "tighten"):
        assert phrase in README


@pytest.mark.parametrize("text", [README, DEVELOPERS], ids=["README", "DEVELOPERS"])
def test_links_lead_somewhere(text: str) -> None:
    for target in re.findall(r"\]\(([^)#:]+)\)", text):
        assert (ROOT / target).exists(), target


@pytest.mark.parametrize("path", re.findall(r"`((?:solver|cli|tests|hardpoints|\.ci)/[^` *<>]*)`", DEVELOPERS))
def test_paths_in_the_guide_exist(path: str) -> None:
    assert (ROOT / path).exists()


def test_no_file_grows_too_long() -> None:
    long = [p.name for p in SOURCES if len(p.read_text(encoding="utf-8").splitlines()) > LONGEST]
    assert long == ["kernels.py"]


def test_library_code_does_not_print() -> None:
    pattern = re.compile(r"^\s*print\(|sys\.std(out|err)", flags=re.MULTILINE)
    printing = [p.name for p in (ROOT / "solver").rglob("*.py") if pattern.search(p.read_text(encoding="utf-8"))]
    assert printing == []


def test_heavy_libraries_wait_until_they_are_used() -> None:
    program = (
        "import sys, toewright as tw; tw.sweep(tw.load('hardpoints/marten_front.toml'), [0.0], [0.0]); "
        "print(*(m for m in sys.argv[1:] if m in sys.modules))"
    )
    heavy = ("xarray", "pandas", "matplotlib", "pyvista", "vtkmodules", "trimesh", "scipy.optimize", "jinja2")
    done = subprocess.run([sys.executable, "-c", program, *heavy], cwd=ROOT, capture_output=True, text=True, check=True)
    assert done.stdout.split() == []
