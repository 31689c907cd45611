from __future__ import annotations

import os
import signal
import subprocess
import sys
from pathlib import Path

import pytest
from command_line import Cli
from corners import HARDPOINTS

import toewright
from toewright_cli.commands import COMMANDS

FRONT = HARDPOINTS / "marten_front.toml"
HEAVY = ("numba", "scipy", "xarray", "pandas", "matplotlib", "pyvista", "trimesh", "tomlkit", "jinja2")


def test_version(cli: Cli) -> None:
    result = cli("--version")
    assert (result.code, result.out) == (0, f"toewright {toewright.__version__}\n")


@pytest.mark.parametrize("arguments", [[], ["--help"], ["-h"]])
def test_help_lists_every_command(cli: Cli, arguments: list[str]) -> None:
    result = cli(*arguments)
    assert result.code == 0
    for name in COMMANDS:
        assert f" {name} " in result.out


@pytest.mark.parametrize("name", COMMANDS)
def test_every_command_has_help_of_its_own(cli: Cli, name: str) -> None:
    result = cli(name, "--help")
    assert result.code == 0
    assert f"toewright {name}" in result.out
    assert result.err == ""


def test_help_imports_nothing_heavy() -> None:
    program = (
        "import sys; from toewright_cli.app import run; code = run(['--help']); "
        "print(code, *(m for m in sys.argv[1:] if m in sys.modules), file=sys.stderr)"
    )
    done = subprocess.run([sys.executable, "-c", program, *HEAVY], capture_output=True, text=True, check=True)
    assert done.stderr.split() == ["0"]


@pytest.mark.parametrize(
    ("arguments", "words"),
    [
        (["swep"], "'swep' is no command; did you mean 'sweep'?"),
        (["qqqqqq"], "there are new, import, check, sweep"),
        (["--bogus"], "no such option: --bogus"),
        (["sweep"], "sweep: missing argument 'FILE'; see `toewright sweep --help`"),
        (["sweep", FRONT, "again"], "unexpected extra argument"),
        (["sweep", FRONT, "--bogus"], "no such option: --bogus"),
        (["sweep", FRONT, "--travel"], "'--travel' requires an argument"),
        (["sweep", FRONT, "--toe-unit", "furlong"], "'furlong' is not one of 'deg', 'mm', 'in', 'min'"),
        (["sweep", FRONT, "--toe-diameter", "wide"], "'wide'"),
        (["sweep", FRONT, "--travel-at", "moon"], "'moon' is not one of 'wheel-centre', 'contact-point'"),
        (["check"], "missing argument 'FILE...'"),
    ],
)
def test_a_wrong_command_line_is_refused_in_one_sentence(cli: Cli, arguments: list[object], words: str) -> None:
    result = cli(*arguments)
    assert result.code == 2
    assert words in result.complaint


def test_the_library_refuses_and_the_command_line_says_so(cli: Cli, monkeypatch: pytest.MonkeyPatch) -> None:
    def full(*_: object, **__: object) -> None:
        raise OSError(28, "No space left on device", "some/where.csv")

    monkeypatch.setattr("toewright.kinematics.sweep.sweep", full)
    result = cli("sweep", FRONT)
    assert result.code == 2
    assert "some/where.csv: No space left on device" in result.complaint


def test_an_interrupt_ends_in_one_line_and_leaves_nothing(
    cli: Cli, monkeypatch: pytest.MonkeyPatch, tmp_path: Path
) -> None:
    def stop(*_: object, **__: object) -> None:
        raise KeyboardInterrupt

    monkeypatch.setattr("toewright_cli.show.maps.long_table", stop)
    result = cli("sweep", FRONT, "--out", tmp_path / "maps.csv")
    assert result.code == 130
    assert result.complaint == "toewright: stopped; nothing half-written is left behind"
    assert list(tmp_path.iterdir()) == []


def entry_point() -> list[str]:
    return [sys.executable, "-c", "from toewright_cli.app import main; main()"]


def test_the_whole_process_gives_results_on_stdout_only() -> None:
    done = subprocess.run([*entry_point(), "check", str(FRONT)], capture_output=True, text=True, check=False)
    assert done.returncode == 0
    assert "kingpin inclination" in done.stdout
    assert "Traceback" not in done.stderr


def test_no_colour_codes_when_piped_or_when_no_color_is_set() -> None:
    forced = {**os.environ, "FORCE_COLOR": "1", "NO_COLOR": "1", "TERM": "xterm-256color"}
    for environment in (dict(os.environ), forced):
        done = subprocess.run(
            [*entry_point(), "sweep", str(FRONT)], capture_output=True, text=True, check=True, env=environment
        )
        codes = [piece.split("m")[0] for piece in done.stdout.split("\x1b[")[1:]]
        assert not any(part.startswith(("3", "4", "9", "10")) for code in codes for part in code.split(";"))


@pytest.mark.skipif(not hasattr(signal, "SIGPIPE"), reason="no SIGPIPE on this system")
def test_a_reader_that_goes_away_ends_it_quietly() -> None:
    with subprocess.Popen(
        [*entry_point(), "sweep", str(FRONT), "--json"], stdout=subprocess.PIPE, stderr=subprocess.PIPE
    ) as process:
        assert process.stdout is not None
        assert process.stderr is not None
        process.stdout.close()
        assert b"Traceback" not in process.stderr.read()
        assert process.wait() == -signal.SIGPIPE


@pytest.mark.skipif(not Path("/dev/full").exists(), reason="no /dev/full on this system")
def test_a_full_disk_behind_stdout_is_one_sentence() -> None:
    with Path("/dev/full").open("w") as full:
        done = subprocess.run(
            [*entry_point(), "check", str(FRONT)], stdout=full, stderr=subprocess.PIPE, text=True, check=False
        )
    assert done.returncode == 2
    assert "No space left on device" in done.stderr
    assert "Traceback" not in done.stderr


def test_shell_completion_knows_commands_and_options() -> None:
    environment = {**os.environ, "_TOEWRIGHT_COMPLETE": "complete_bash", "COMP_CWORD": "2"}
    environment["COMP_WORDS"] = "toewright sweep --toe"
    done = subprocess.run(entry_point(), capture_output=True, text=True, check=False, env=environment)
    assert {"--toe-unit", "--toe-diameter", "--toe-total"} <= set(done.stdout.split())
