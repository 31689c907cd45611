"""``toewright draw`` as people use it."""

from __future__ import annotations

import os
import signal
import subprocess
import sys
import time
from pathlib import Path

import matplotlib
import numpy as np
import pytest
from command_line import Cli
from PIL import Image

from toewright.views import animation, opengl

ROOT = Path(__file__).parents[2]
MARTEN = ROOT / "hardpoints" / "marten_front.toml"
REAR = ROOT / "hardpoints" / "marten_rear.toml"

linux = pytest.mark.skipif(not sys.platform.startswith("linux"), reason="window classes of Linux")


@pytest.fixture(autouse=True)
def _bare_screen(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.delenv("DISPLAY", raising=False)


def size(path: Path) -> tuple[int, int]:
    with Image.open(path) as image:
        image.load()
        return image.size


def test_a_picture_without_opengl_says_in_one_line_what_to_install(
    cli: Cli, monkeypatch: pytest.MonkeyPatch, tmp_path: Path
) -> None:
    monkeypatch.setattr(opengl, "draws", lambda *_: False)
    monkeypatch.setenv("XDG_CACHE_HOME", str(tmp_path / "cache"))
    path = tmp_path / "linkage.png"
    done = cli("draw", MARTEN, "-o", path)
    assert done.code == 0
    assert done.out == ""
    told = [line for line in done.err.splitlines() if "OpenGL" in line]
    assert len(told) == 1
    assert "libegl1" in told[0]
    assert "libosmesa6" in told[0]
    assert size(path)[0] == 1600
    assert np.asarray(Image.open(path).convert("L")).std() > 10.0


@linux
def test_a_whole_process_without_any_opengl_draws_all_the_same(tmp_path: Path) -> None:
    """A real process whose only candidate crashes its child: it must not crash itself."""
    program = (
        "import sys\n"
        "from toewright.views import opengl\n"
        "opengl.candidates = lambda environment: ('vtkXOpenGLRenderWindow',)\n"
        "from toewright_cli.app import run\n"
        "sys.exit(run(sys.argv[1:]))\n"
    )
    path = tmp_path / "linkage.png"
    environment = {name: value for name, value in os.environ.items() if name not in ("DISPLAY", opengl.VARIABLE)}
    done = subprocess.run(
        [sys.executable, "-c", program, "draw", str(MARTEN), "--view", "front", "-o", str(path)],
        env={**environment, "XDG_CACHE_HOME": str(tmp_path / "cache")}, capture_output=True, text=True, check=False,
    )  # fmt: skip
    assert done.returncode == 0, done.stderr
    assert "libegl1" in done.stderr
    assert size(path)[0] == 1600
    assert (tmp_path / "cache" / "toewright" / "opengl.json").read_text().count("null") == 1


def test_a_picture_with_opengl(cli: Cli, tmp_path: Path) -> None:
    if opengl.first_that_draws(opengl.candidates(os.environ), os.environ) is None:
        pytest.skip(f"the probe found no OpenGL; {opengl.REMEDY}")
    path = tmp_path / "linkage.png"
    done = cli("draw", MARTEN, "--pose", "rack=20,travel=-10", "--pose", "travel=0", "--renderer", "opengl", "-o", path)
    assert done.code == 0
    assert f"wrote {path}" in done.err
    assert "OpenGL" not in done.err
    assert size(path)[0] == 1600


def test_opengl_asked_for_and_not_there_is_refused(cli: Cli, monkeypatch: pytest.MonkeyPatch, tmp_path: Path) -> None:
    monkeypatch.setattr(opengl, "draws", lambda *_: False)
    monkeypatch.setenv("XDG_CACHE_HOME", str(tmp_path))
    done = cli("draw", MARTEN, "--renderer", "opengl", "-o", tmp_path / "a.png")
    assert done.code == 2
    assert done.complaint.startswith(
        "toewright: --renderer opengl: no OpenGL that works was found; to draw with OpenGL install"
    )
    assert not (tmp_path / "a.png").exists()


@pytest.mark.parametrize("kind", ["svg", "pdf", "glb", "stl"])
def test_other_files(cli: Cli, tmp_path: Path, kind: str) -> None:
    path = tmp_path / f"linkage.{kind}"
    done = cli("draw", REAR, "--side", "right", "--pose", "travel=12", "-o", path)
    assert done.code == 0, done.err
    heads = {"svg": b"<?xml", "pdf": b"%PDF-", "glb": b"glTF", "stl": b"solid "}
    assert path.read_bytes().startswith(heads[kind])
    assert b"left_tyre" not in path.read_bytes()


def test_a_locus_over_its_own_travel(cli: Cli, tmp_path: Path) -> None:
    path = tmp_path / "locus.svg"
    done = cli("draw", MARTEN, "--locus", "--travel", "-12:12:7", "--view", "front", "-o", path)
    assert done.code == 0
    text = path.read_text(encoding="utf-8")
    assert "over wheel travel -12 to +12 mm" in text
    assert "bump steer (deg, toe-in +)" in text


def test_a_film_of_the_rack(cli: Cli, tmp_path: Path) -> None:
    path = tmp_path / "steer.gif"
    done = cli(
        "draw", MARTEN, "--animate", "rack", "--rack", "-20:20:3", "--view", "top", "--renderer", "vector", "-o", path
    )
    assert done.code == 0, done.err
    with Image.open(path) as film:
        assert film.n_frames == 4
        assert film.size[0] == animation.WIDTHS[".gif"]


def test_a_film_of_an_axle_without_a_rack_moves_the_wheels(cli: Cli, tmp_path: Path) -> None:
    path = tmp_path / "bump.gif"
    done = cli("draw", REAR, "--travel", "-10,10", "--view", "front", "--renderer", "vector", "-o", path)
    assert done.code == 0, done.err
    with Image.open(path) as film:
        assert film.n_frames == 2


def test_mp4_without_an_encoder_is_refused(cli: Cli, monkeypatch: pytest.MonkeyPatch, tmp_path: Path) -> None:
    monkeypatch.setattr("matplotlib.animation.FFMpegWriter.isAvailable", lambda: False)
    done = cli("draw", MARTEN, "-o", tmp_path / "a.mp4")
    assert done.code == 2
    assert done.complaint == (
        "toewright: an .mp4 needs ffmpeg, which is not on the path; install it, or write a .gif instead"
    )


@linux
def test_an_encoder_that_breaks_off_is_one_sentence(cli: Cli, monkeypatch: pytest.MonkeyPatch, tmp_path: Path) -> None:
    broken = tmp_path / "bin" / "ffmpeg"
    broken.parent.mkdir()
    broken.write_text("#!/bin/sh\nexec 0<&-\nexit 3\n")
    broken.chmod(0o755)
    monkeypatch.setattr("matplotlib.animation.FFMpegWriter.isAvailable", lambda: True)
    with matplotlib.rc_context({"animation.ffmpeg_path": str(broken)}):
        done = cli(
            "draw", MARTEN, "--rack", "-10,10", "--view", "top", "--renderer", "vector", "-o", tmp_path / "a.mp4"
        )
    assert done.code == 2
    assert done.err.splitlines()[-1].startswith("toewright: ffmpeg broke off while it wrote the .mp4")
    assert [path.name for path in tmp_path.iterdir()] == ["bin"]


def test_mp4_where_there_is_an_encoder(cli: Cli, tmp_path: Path) -> None:
    from matplotlib.animation import FFMpegWriter

    if not FFMpegWriter.isAvailable():
        pytest.skip("ffmpeg is not on the path (Debian: ffmpeg)")
    path = tmp_path / "steer.mp4"
    done = cli("draw", MARTEN, "--rack", "-10,10", "--view", "top", "--renderer", "vector", "-o", path)
    assert done.code == 0, done.err
    assert path.read_bytes()[4:8] == b"ftyp"


def test_without_a_display_the_window_is_refused(cli: Cli, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(sys, "platform", "linux")
    done = cli("draw", MARTEN)
    assert done.code == 2
    assert done.complaint == (
        "toewright: draw: there is no display to open a window on; give -o FILE, such as -o linkage.png"
    )


REFUSALS = {
    "key": (["--pose", "yaw=3"], "--pose yaw=3: 'yaw=3' is no rack=... or travel=...; write rack=20,travel=-10"),
    "twice": (["--pose", "rack=3,rack=4"], "--pose rack=3,rack=4: rack is given twice"),
    "number": (["--pose", "rack=wide"], "--pose rack=wide: 'wide' is not a number; write rack=20,travel=-10"),
    "nan": (["--pose", "rack=nan"], "'nan' is not a number"),
    "empty": (["--pose", ""], "--pose"),
    "large": (["--pose", "rack=99999"], "99999 is more than any car has"),
    "reach": (["--pose", "rack=150"], "rack travel +150 mm, wheel travel 0 mm cannot be drawn"),
    "view": (["--view", "below"], "--view"),
    "animate": (["--animate", "rack"], "--animate rack: .png does not move; give -o FILE with .gif or .mp4"),
    "list": (["--rack", "-5:5:3"], "--rack -5:5:3: is the LIST of --animate rack"),
    "travel": (["--travel", "-5:5:3"], "--travel -5:5:3: is the LIST of --animate travel and of --locus"),
    "single": (["--locus", "--travel", "5"], "--travel 5: a single position does not move"),
    "many": (["--pose", "travel=1"] * 13, "--pose: 13 poses over each other can't be told apart"),
}


@pytest.mark.parametrize("case", REFUSALS)
def test_bad_input_is_one_sentence_and_no_file(cli: Cli, tmp_path: Path, case: str) -> None:
    arguments, words = REFUSALS[case]
    done = cli("draw", MARTEN, "-o", tmp_path / "a.png", "--renderer", "vector", *arguments)
    assert done.code == 2
    complaint = done.err.splitlines()[-1]
    assert complaint.startswith("toewright: ")
    assert words in complaint
    assert list(tmp_path.iterdir()) == []


@pytest.mark.parametrize(
    ("name", "arguments", "words"),
    [
        ("a.jpg", [], "the extension '.jpg' is unknown; use .png, .svg, .pdf, .gif, .mp4, .glb or .stl"),
        ("a.glb", ["--view", "top"], "--view top: .glb holds the whole linkage; leave --view out"),
        ("a.stl", ["--locus"], "--locus: .stl does not show it; use .png, .svg, .pdf or .glb"),
        ("a.svg", ["--renderer", "opengl"], "--renderer opengl: makes pixels only, not .svg"),
        ("a.gif", ["--pose", "travel=1", "--pose", "travel=2"], "--pose: a film takes one"),
        ("a.gif", ["--rack", "-5:5:501"], "--rack: 501 positions are more than the 500 that can be drawn"),
    ],
)
def test_what_does_not_go_together_is_refused(
    cli: Cli, tmp_path: Path, name: str, arguments: list[str], words: str
) -> None:
    done = cli("draw", MARTEN, "-o", tmp_path / name, *arguments)
    assert done.code == 2
    assert words in done.complaint
    assert list(tmp_path.iterdir()) == []


def test_an_axle_without_a_rack_takes_no_rack_travel(cli: Cli, tmp_path: Path) -> None:
    done = cli("draw", REAR, "--pose", "rack=5", "-o", tmp_path / "a.svg")
    assert done.code == 2
    assert "has no [rack], so --pose rack=5 means nothing" in done.complaint
    done = cli("draw", REAR, "--animate", "rack", "-o", tmp_path / "a.gif")
    assert done.code == 2
    assert "has no [rack], so nothing can move it; use --animate travel" in done.complaint


def test_a_file_that_exists_is_kept_unless_forced(cli: Cli, tmp_path: Path) -> None:
    path = tmp_path / "a.svg"
    path.write_text("mine")
    done = cli("draw", MARTEN, "--view", "side", "-o", path)
    assert done.code == 2
    assert "exists already" in done.complaint
    assert path.read_text() == "mine"
    assert cli("draw", MARTEN, "--view", "side", "-o", path, "--force").code == 0
    assert path.read_text(encoding="utf-8").startswith("<?xml")


def test_a_rack_beyond_its_stroke_is_remarked_on(cli: Cli, tmp_path: Path) -> None:
    done = cli("draw", MARTEN, "--pose", "rack=32", "--view", "side", "-o", tmp_path / "a.svg")
    assert done.code == 0
    assert "remark: the rack is drawn beyond its stroke of 30 mm each way" in done.err


@linux
def test_ctrl_c_leaves_nothing_behind(tmp_path: Path) -> None:
    path = tmp_path / "film.gif"
    arguments = ["draw", str(MARTEN), "--rack", "-20:20:200", "--renderer", "vector", "-o", str(path)]
    child = subprocess.Popen(
        [sys.executable, "-c", "from toewright_cli.app import main; main()", *arguments],
        stderr=subprocess.PIPE,
        text=True,
    )
    assert child.stderr is not None
    while "drawing" not in child.stderr.readline():
        assert child.poll() is None
    time.sleep(1.5)  # past the imports: an interrupt in the middle of one can come out as an ImportError
    child.send_signal(signal.SIGINT)
    _, told = child.communicate(timeout=30)
    assert child.returncode == 130, told
    assert "stopped; nothing half-written is left behind" in told
    assert "Traceback" not in told
    assert list(tmp_path.iterdir()) == []
