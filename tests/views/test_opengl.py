"""The probe for OpenGL: a child process that may crash, an answer that is kept, and nothing set that was not probed."""

from __future__ import annotations

import json
import os
import sys
from pathlib import Path

import numpy as np
import pytest

from toewright.views import opengl

NO_WINDOW = "vtkXOpenGLRenderWindow"
"""A class that cannot work without a display, and takes the process down."""

linux = pytest.mark.skipif(not sys.platform.startswith("linux"), reason="window classes of Linux")


@pytest.fixture
def environment(tmp_path: Path) -> dict[str, str]:
    """The environment without a display and with an empty cache."""
    kept = {name: value for name, value in os.environ.items() if name not in ("DISPLAY", opengl.VARIABLE)}
    return {**kept, "XDG_CACHE_HOME": str(tmp_path)}


@linux
def test_a_class_that_crashes_its_process_is_found_out_in_a_child(environment: dict[str, str]) -> None:
    assert opengl.draws(NO_WINDOW, environment) is False


def test_a_child_that_cannot_start_or_has_no_vtk_is_no(
    environment: dict[str, str], monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(opengl, "PROBE", "raise ImportError")
    assert opengl.draws("", environment) is False
    monkeypatch.setattr(opengl, "PROBE", "import time; time.sleep(60)")
    monkeypatch.setattr(opengl, "PATIENCE", 0.2)
    assert opengl.draws("", environment) is False
    monkeypatch.setattr(sys, "executable", "/nonexistent/python")
    assert opengl.draws("", environment) is False


def test_blank_pixels_are_no(environment: dict[str, str], monkeypatch: pytest.MonkeyPatch) -> None:
    if not any(opengl.draws(name, environment) for name in opengl.candidates(environment)):
        pytest.skip(f"the probe found no OpenGL; {opengl.REMEDY}")
    monkeypatch.setattr(opengl, "PROBE", opengl.PROBE.replace("renderer.AddActor(actor)", ""))
    assert not any(opengl.draws(name, environment) for name in opengl.candidates(environment))


@linux
def test_the_first_class_that_draws_is_kept_per_machine(
    environment: dict[str, str], monkeypatch: pytest.MonkeyPatch, tmp_path: Path
) -> None:
    asked: list[str] = []

    def draws(name: str, _: object) -> bool:
        asked.append(name)
        return name == "second"

    monkeypatch.setattr(opengl, "draws", draws)
    for _ in range(2):
        assert opengl.first_that_draws(("first", "second", "third"), environment) == "second"
    assert asked == ["first", "second"]
    kept = json.loads((tmp_path / "toewright" / "opengl.json").read_text())
    assert list(kept.values()) == ["second"]
    assert (
        opengl.first_that_draws(("first", "second", "third"), {**environment, "LD_LIBRARY_PATH": "/else"}) == "second"
    )
    assert asked == ["first", "second"] * 2


@linux
@pytest.mark.parametrize("spoilt", ["", "{", "[]", '{"key": 5}'])
def test_a_spoilt_cache_only_costs_a_probe(
    environment: dict[str, str], monkeypatch: pytest.MonkeyPatch, tmp_path: Path, spoilt: str
) -> None:
    monkeypatch.setattr(opengl, "draws", lambda name, _: name == "good")
    (tmp_path / "toewright").mkdir()
    (tmp_path / "toewright" / "opengl.json").write_text(spoilt)
    assert opengl.first_that_draws(("good",), environment) == "good"


def test_a_cache_that_cannot_be_written_is_no_matter(
    environment: dict[str, str], monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(opengl, "draws", lambda *_: True)
    monkeypatch.setattr(opengl, "cache_folder", lambda _: Path("/dev/null/folder"))
    assert opengl.first_that_draws(("good",), environment) == "good"


@linux
def test_nothing_is_set_that_was_not_probed(monkeypatch: pytest.MonkeyPatch, tmp_path: Path) -> None:
    monkeypatch.setenv("XDG_CACHE_HOME", str(tmp_path))
    monkeypatch.setenv(opengl.VARIABLE, "unchanged")
    monkeypatch.setattr(opengl, "draws", lambda *_: False)
    assert opengl.use_offscreen() is False
    assert os.environ[opengl.VARIABLE] == "unchanged"
    monkeypatch.delenv("DISPLAY", raising=False)
    assert opengl.use_window() is False


@linux
def test_the_user_s_own_class_comes_first_and_a_display_last() -> None:
    classes = opengl.candidates({opengl.VARIABLE: "theirs", "DISPLAY": ":7"})
    assert classes[0] == "theirs"
    assert classes[-1] == NO_WINDOW
    assert NO_WINDOW not in opengl.candidates({})


def test_openGL_draws_the_same_linkage_as_the_vector_painter(monkeypatch: pytest.MonkeyPatch) -> None:
    """Where one has ink the other has it too: same projection, same parts."""
    monkeypatch.delenv("DISPLAY", raising=False)
    found = opengl.first_that_draws(opengl.candidates(os.environ), os.environ)
    if found is None:
        pytest.skip(f"the probe found no OpenGL; {opengl.REMEDY}")
    monkeypatch.setenv(opengl.VARIABLE, found)
    import toewright as tw
    from toewright.views.animation import pictures
    from toewright.views.render_gl import Painter
    from toewright.views.render_vector import paint
    from toewright.views.scene.build import Pose, build_scene

    axle = tw.load(Path(__file__).parents[2] / "hardpoints" / "linnet_front.toml")
    scenes = [build_scene(axle, [Pose(rack, 10.0)], locus=[-20.0, 0.0, 20.0]) for rack in (0.0, 30.0)]
    painter = Painter(1)
    solid = list(pictures(scenes, painter, "top", 800))
    painter.close()
    flat = list(pictures(scenes, paint, "top", 800))
    for one, other in zip(solid, flat, strict=True):
        assert one.shape == other.shape
        ink = [np.abs(picture.astype(int) - 255).max(axis=-1) > 100 for picture in (one, other)]
        both = np.mean(ink[0] & ink[1])
        assert both > 0.8 * np.mean(ink[1]), (both, np.mean(ink[0]), np.mean(ink[1]))
    assert np.mean(np.abs(solid[0].astype(int) - solid[1].astype(int)).max(axis=-1) > 60) > 0.01


def test_the_window_moves_with_its_sliders_and_says_why_it_cannot(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.delenv("DISPLAY", raising=False)
    found = opengl.first_that_draws(opengl.candidates(os.environ), os.environ)
    if found is None:
        pytest.skip(f"the probe found no OpenGL; {opengl.REMEDY}")
    monkeypatch.setenv(opengl.VARIABLE, found)
    import toewright as tw
    from toewright.views.scene.build import Pose
    from toewright.views.window import LinkageWindow

    axle = tw.load(Path(__file__).parents[2] / "hardpoints" / "marten_front.toml")
    window = LinkageWindow(axle, Pose(), sides=("left", "right"), travel_at="wheel-centre", off_screen=True)
    try:
        travel, rack = window.sliders
        rack.GetRepresentation().SetValue(20.0)
        rack.InvokeEvent("InteractionEvent")
        travel.GetRepresentation().SetValue(-10.0)
        travel.InvokeEvent("InteractionEvent")
        assert window.pose == Pose(20.0, -10.0)
        assert window.scene.caption.pose == "rack travel +20 mm, wheel travel -10 mm (rebound)"
        maps = tw.sweep(axle, [20.0], [-10.0])
        shown = window.plotter.actors["figures"].GetText(2)
        assert f"{maps['toe_in'][0, 0, 0]:+.2f}" in shown
        window.toggle_names()
        assert "names" not in window.plotter.actors
        window.move_rack(300.0)
        assert window.pose == Pose(20.0, -10.0)
        assert "cannot be drawn" in window.plotter.actors["figures"].GetText(2).replace("\n", " ")
    finally:
        window.plotter.close()
