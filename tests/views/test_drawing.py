"""Drawings: a stored picture, well-formed vector files, films, solids, and names that keep off each other."""

from __future__ import annotations

import runpy
import xml.etree.ElementTree as ET
from itertools import combinations
from pathlib import Path

import numpy as np
import pytest
from PIL import Image

import toewright as tw
from toewright.views import animation, export
from toewright.views.annotations import common_name
from toewright.views.drawing import VIEW_NAMES, draw
from toewright.views.labels import Box, place_labels
from toewright.views.pictures import write_picture
from toewright.views.projection import VIEWS
from toewright.views.render_vector import bar_outline, paint
from toewright.views.scene.build import Pose, build_scene
from toewright.views.scene.parts import Ball, Scene, Tube

ROOT = Path(__file__).parents[2]
REFERENCE = ROOT / "tests" / "data" / "drawing_marten_front.png"
"""The vector painter's sheet of marten_front.toml at rack 15 mm, travel -10 mm with locus and one ghost, looked at and found right."""


@pytest.fixture(scope="module")
def axle() -> tw.Axle:
    return tw.load(ROOT / "hardpoints" / "marten_front.toml")


@pytest.fixture(scope="module")
def scene(axle: tw.Axle) -> Scene:
    return build_scene(axle, [Pose(15.0, -10.0), Pose(-25.0, 10.0)], locus=list(np.linspace(-25.0, 25.0, 11)))


def small(path: Path) -> np.ndarray:
    """A picture, 800 px wide, as numbers."""
    image = Image.open(path).convert("RGB")
    return np.asarray(image.resize((800, round(800 * image.height / image.width)), Image.Resampling.BOX)).astype(float)


def test_the_sheet_looks_as_it_did_when_it_was_looked_at(scene: Scene, tmp_path: Path) -> None:
    """Tolerance: text moves by a pixel with other versions of the font library, so a mean is compared, and large differences counted."""
    path = tmp_path / "sheet.png"
    write_picture(scene, path, paint)
    now, then = small(path), small(REFERENCE)
    assert now.shape == then.shape
    difference = np.abs(now - then).max(axis=-1)
    assert difference.mean() < 3.0
    assert np.mean(difference > 60.0) < 0.01


@pytest.mark.parametrize("name", VIEW_NAMES)
def test_views_are_right_handed_and_square_on(name: str) -> None:
    view = VIEWS[name]
    np.testing.assert_allclose(np.cross(view.right, view.up), view.toward, atol=1e-12)
    np.testing.assert_allclose(view.project(np.eye(3)) @ view.project(np.eye(3)).T, np.eye(3), atol=1e-12)


def test_the_left_wheel_is_on_the_right_in_front_and_top_view_and_forward_is_left_in_side_view() -> None:
    left, forward, up = np.array([0.0, 1.0, 0.0]), np.array([1.0, 0.0, 0.0]), np.array([0.0, 0.0, 1.0])
    assert VIEWS["front"].project(left)[0] == VIEWS["top"].project(left)[0] == 1.0
    assert VIEWS["side"].project(forward)[0] == -1.0
    assert VIEWS["top"].project(forward)[1] == -1.0
    assert VIEWS["front"].project(up)[1] == VIEWS["side"].project(up)[1] == 1.0


def test_views_of_a_sheet_share_one_scale_and_stand_above_each_other(scene: Scene) -> None:
    figure = draw(scene, paint)
    figure.draw_without_rendering()
    top, oblique, front, side = figure.axes[:4]
    scales = [np.diff(axes.get_xlim())[0] / axes.get_window_extent().width for axes in (top, front, side)]
    assert np.ptp(scales) < 1e-9 * scales[0]
    assert top.get_xlim() == front.get_xlim()
    for axes in (top, oblique, front, side):
        width, height = axes.get_window_extent().size
        assert np.diff(axes.get_xlim())[0] / width == pytest.approx(np.diff(axes.get_ylim())[0] / height)


@pytest.mark.parametrize("name", [*VIEW_NAMES, None])
def test_everything_drawn_and_written_is_inside_the_picture(scene: Scene, name: str | None) -> None:
    figure = draw(scene, paint, view=name)
    figure.draw_without_rendering()
    sheet = figure.bbox
    for axes in figure.axes[:4] if name is None else figure.axes[:1]:
        view = VIEWS[name or ("top", "oblique", "front", "side")[figure.axes.index(axes)]]
        flat = view.project(np.array([part.centre for part in scene.parts if isinstance(part, Ball)]))
        assert flat[:, 0].min() > axes.get_xlim()[0]
        assert flat[:, 0].max() < axes.get_xlim()[1]
        assert flat[:, 1].min() > axes.get_ylim()[0]
        assert flat[:, 1].max() < axes.get_ylim()[1]
        for text in axes.texts:
            box = text.get_window_extent()
            assert box.x0 >= sheet.x0 - 1
            assert box.x1 <= sheet.x1 + 1
    for text in figure.texts:
        box = text.get_window_extent()
        assert box.x0 >= sheet.x0
        assert box.x1 <= sheet.x1, text.get_text()
        assert box.y0 >= sheet.y0, text.get_text()


@pytest.mark.parametrize("sample", sorted(path.name for path in (ROOT / "hardpoints").glob("*.toml")))
def test_names_do_not_lie_on_each_other(sample: str) -> None:
    figure = draw(build_scene(tw.load(ROOT / "hardpoints" / sample)), lambda *_: None)
    figure.draw_without_rendering()
    for axes in figure.axes[:4]:
        boxes = [(text.get_text(), text.get_window_extent()) for text in axes.texts if len(text.get_text()) > 1]
        for (first, a), (second, b) in combinations(boxes, 2):
            assert not a.overlaps(b), (axes, first, second)


def test_every_joint_is_named_on_both_sides(scene: Scene) -> None:
    figure = draw(scene, lambda *_: None, view="oblique")
    words = " ".join(text.get_text() for text in figure.axes[0].texts)
    for name in ("upper ball joint", "tie rod inner", "lower pivot front", "wheel centre", "contact point"):
        assert words.count(name) == 2, name


def test_names_in_a_row_share_their_beginning() -> None:
    assert common_name(["lower pivot front", "lower pivot rear"]) == "lower pivot front, rear"
    assert common_name(["wheel centre", "contact point"]) == "wheel centre, contact point"


def test_names_find_free_places() -> None:
    anchors = np.array([[100.0, 100.0], [104.0, 100.0], [100.0, 103.0], [98.0, 97.0]])
    boxes = place_labels(anchors, np.tile([60.0, 14.0], (4, 1)), anchors, (300.0, 200.0), [Box(0.0, 0.0, 90.0, 90.0)])
    assert not any(a.overlaps(b) for a, b in combinations([*boxes, Box(0.0, 0.0, 90.0, 90.0)], 2))


def test_a_bar_seen_along_its_axis_is_a_circle() -> None:
    outline = bar_outline(np.array([3.0, 4.0, 0.0]), np.array([3.0, 4.0, 9.0]), 2.0)
    np.testing.assert_allclose(np.linalg.norm(outline - [3.0, 4.0], axis=1), 2.0)


@pytest.mark.parametrize("kind", [".svg", ".pdf"])
def test_vector_files_are_whole_and_the_same_every_time(scene: Scene, tmp_path: Path, kind: str) -> None:
    first, second = tmp_path / f"a{kind}", tmp_path / f"b{kind}"
    for path in (first, second):
        write_picture(scene, path, paint, "front")
    assert first.read_bytes() == second.read_bytes()
    if kind == ".svg":
        root = ET.parse(first).getroot()
        assert root.tag == "{http://www.w3.org/2000/svg}svg"
        assert not root.findall(".//{http://www.w3.org/2000/svg}image")
        assert "upper ball joint" in first.read_text(encoding="utf-8")
    else:
        assert first.read_bytes().startswith(b"%PDF-")
        assert b"%%EOF" in first.read_bytes()[-32:]


def test_a_title_is_text_whatever_it_holds(axle: tw.Axle, tmp_path: Path) -> None:
    from dataclasses import replace

    path = tmp_path / "odd.svg"
    write_picture(build_scene(replace(axle, title="a $x^{2$ <b> & 車")), path, paint, "side")
    ET.parse(path)


@pytest.mark.parametrize("along", ["rack", "travel"])
def test_a_film_runs_there_and_back(axle: tw.Axle, tmp_path: Path, along: str) -> None:
    scenes = animation.swept_scenes(axle, along, [-10.0, 0.0, 10.0], Pose(), sides=("left",), travel_at="wheel-centre")
    frames = list(animation.pictures(scenes, paint, "front", 400))
    assert frames[0].shape[1] == 400
    assert animation.there_and_back(4) == [0, 1, 2, 3, 2, 1]
    path = tmp_path / "film.gif"
    animation.write_gif(path, frames)
    with Image.open(path) as film:
        assert film.n_frames == 4
        assert film.info["loop"] == 0
        assert film.size == (frames[0].shape[1], frames[0].shape[0])
        shown = []
        for k in range(film.n_frames):
            film.seek(k)
            shown.append(np.asarray(film.convert("RGB")).astype(int))
    np.testing.assert_array_equal(shown[1], shown[3])
    assert np.abs(shown[0] - shown[2]).max() > 100
    assert np.abs(shown[1] - frames[1]).mean() < 6.0


def test_a_film_moves_along_something_known(axle: tw.Axle) -> None:
    with pytest.raises(ValueError, match="along is 'yaw'; allowed are 'rack' and 'travel'"):
        animation.swept_scenes(axle, "yaw", [0.0, 1.0], Pose(), sides=("left",), travel_at="wheel-centre")


def test_glb_has_named_parts_in_metres_where_they_belong(scene: Scene, tmp_path: Path) -> None:
    import trimesh

    path = tmp_path / "linkage.glb"
    export.write_glb(scene, path)
    loaded = trimesh.load(path)
    assert {part.name for part in (*scene.parts, *scene.ghosts)} | {"ground"} == set(loaded.geometry)
    for name in ("left upper arm front leg", "right tie rod", "left kingpin axis"):
        part = scene.part(name)
        assert isinstance(part, Tube)
        points = loaded.geometry[name].vertices
        for x, y, z in (part.start, part.end):
            gap = np.linalg.norm(1000.0 * points - np.array([y, z, x]), axis=1).min()
            assert gap < 1e-3, "glTF holds single precision: 1e-7 of a metre"
    assert np.ptp(loaded.geometry["left path of contact point"].visual.vertex_colors, axis=0).max() > 20


def test_stl_has_named_solids_in_mm(axle: tw.Axle, scene: Scene, tmp_path: Path) -> None:
    path = tmp_path / "linkage.stl"
    export.write_stl(scene, path)
    names = [line.split()[1] for line in path.read_text(encoding="ascii").splitlines() if line.startswith("solid ")]
    assert "left_tie_rod" in names
    assert "right_tyre" in names
    assert len(names) == len(set(names))
    import trimesh

    loaded = trimesh.load(path)
    low, high = loaded.bounds
    bounds = build_scene(axle, [Pose(15.0, -10.0), Pose(-25.0, 10.0)]).bounds
    np.testing.assert_allclose(low, bounds.low, atol=8.0)
    np.testing.assert_allclose(high, bounds.high, atol=8.0)


def test_the_pictures_of_the_readme_are_there_and_small() -> None:
    script = runpy.run_path(str(ROOT / "tools" / "readme_pictures.py"))
    for name in script["COMMANDS"]:
        path = script["FOLDER"] / name
        assert path.stat().st_size <= script["LARGEST"]
        with Image.open(path) as image:
            assert image.width == script["WIDTH"]


def test_bars_and_balls_are_closed_surfaces_seen_from_outside(scene: Scene) -> None:
    for name in ("left tie rod", "left tie rod outer"):
        mesh = export.mesh_of(export.named_surfaces(scene, curves=False)[name], colours=False)
        mesh.merge_vertices()
        assert mesh.is_watertight
        assert mesh.volume > 0.0
