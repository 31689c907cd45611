from __future__ import annotations

import xml.etree.ElementTree as ET
from pathlib import Path

import matplotlib
import numpy as np
import pytest
from corners import HARDPOINTS, SAMPLES
from PIL import Image

import toewright as tw
from toewright.model.axle import Axle
from toewright.views.plots_ride import near_roll_centres, ride_figure
from toewright.views.plots_sweep import draw_map, sweep_figure, symmetric_levels
from toewright.views.plots_turn import turn_figure
from toewright.views.style import SERIES, new_figure, save_figure, styled, svg_for_page

FRONT = tw.load(HARDPOINTS / "marten_front.toml")
UNEQUAL = tw.load(HARDPOINTS / "ibex_front.toml")


def moved(axle: Axle, up: float) -> Axle:
    return axle.with_points({("left", "tie_rod_inner"): axle.left.points["tie_rod_inner"] + [0.0, 0.0, up]})


def texts(figure: matplotlib.figure.Figure) -> list[str]:
    return [t.get_text() for t in figure.findobj(matplotlib.text.Text) if t.get_text()]


@pytest.mark.parametrize("sample", SAMPLES, ids=lambda p: p.stem)
def test_every_sample_is_drawn_with_units_and_signs_on_its_axes(sample: Path) -> None:
    axle = tw.load(sample)
    figures = [sweep_figure([axle], [tw.sweep(axle)]), ride_figure([axle], [tw.ride(axle)])]
    if axle.rack is not None:
        figures.append(turn_figure([axle], [tw.turn(axle)]))
    for figure in figures:
        words = texts(figure)
        assert axle.title in words
        assert any(sample.name in w and (axle.sha256 or "?")[:12] in w for w in words)
        for axes in figure.axes:
            for label in (axes.get_xlabel(), axes.get_ylabel()):
                assert not label or "(" in label, label
    words = texts(figures[0])
    assert "bump steer\n(deg per wheel, toe-in +)" in words
    assert "wheel travel (mm, bump +, rebound -)" in words


def test_the_map_shows_the_solved_field_about_zero() -> None:
    maps = tw.sweep(FRONT)
    field = maps["bump_steer"][0]
    levels = symmetric_levels([field])
    assert np.allclose(levels, -levels[::-1])
    assert levels[-1] >= np.abs(field).max()
    with styled():
        axes = new_figure(4.0, 3.0, "", "").subplots()
        drawn = draw_map(axes, maps.rack_travel, maps.wheel_travel, field, levels)
        bold = [line for line in axes.lines if line.get_linewidth() > 2.0]
    assert np.allclose(drawn.levels, levels)
    assert [list(line.get_ydata()) for line in bold] == [[0, 0]]
    zero = axes.collections[-1].get_paths()[0].vertices
    at_zero = [
        np.interp(y, maps.wheel_travel, [np.interp(x, maps.rack_travel, row) for row in field.T]) for x, y in zero
    ]
    assert len(zero) > 5
    assert np.abs(at_zero).max() < 0.01 * np.abs(field).max()


def test_what_cannot_be_reached_is_hatched_and_said() -> None:
    far = tw.sweep(UNEQUAL, np.linspace(-120, 120, 9), np.linspace(-200, 200, 9))
    assert (far.status != 0).any()
    figure = sweep_figure([UNEQUAL], [far])
    assert any("hatched: out of reach or locked" in w for w in texts(figure))
    assert any(axes.patch.get_hatch() for axes in figure.axes)
    near = sweep_figure([UNEQUAL], [tw.sweep(UNEQUAL)])
    assert not any(axes.patch.get_hatch() for axes in near.axes)


def test_a_map_without_bump_steer_says_so() -> None:
    maps = tw.sweep(FRONT)
    level = np.zeros_like(maps["bump_steer"][0])
    with styled():
        figure = new_figure(4.0, 3.0, "", "")
        draw_map(figure.subplots(), maps.rack_travel, maps.wheel_travel, level, symmetric_levels([level]))
    assert "no toe change" in texts(figure)


def test_files_laid_over_each_other_have_letters_colours_and_marks() -> None:
    axles = [FRONT, moved(FRONT, 3.0)]
    figure = sweep_figure(axles, [tw.sweep(a) for a in axles])
    curves = [axes for axes in figure.axes if axes.get_title(loc="left") == "Toe change, left wheel"]
    straight = [line for line in curves[0].lines if line.get_marker() not in ("", "None")]
    assert [line.get_color() for line in straight] == list(SERIES[:2])
    assert len({line.get_marker() for line in straight}) == 2
    for k, line in enumerate(straight):
        expected = tw.sweep(axles[k], [0.0])["bump_steer"][0, 0]
        assert np.allclose(line.get_ydata(), expected)
    assert any(w.startswith("A: ") for w in texts(figure))


def test_ackermann_begins_at_three_degrees() -> None:
    turned = tw.turn(FRONT)
    figure = turn_figure([FRONT], [turned])
    error = next(axes for axes in figure.axes if axes.get_title(loc="left") == "Ackermann error")
    x, y = error.lines[0].get_data()
    assert np.min(x) >= 3.0
    assert np.max(np.abs(y)) == pytest.approx(np.abs(turned["ackermann_error"]).max())
    assert "from 3 deg on" in error.get_xlabel()
    with pytest.raises(tw.InputError, match="3 deg of mean steer"):
        turn_figure([FRONT], [tw.turn(FRONT, [-1.0, 0.0, 1.0])])


def test_far_roll_centres_are_left_out() -> None:
    y, z = near_roll_centres(FRONT, np.array([0.0, 1e6, 10.0]), np.array([50.0, 50.0, -1e5]))
    assert np.isfinite(y).tolist() == [True, False, False]
    assert np.isfinite(z).tolist() == [True, False, False]


def test_one_pose_makes_no_picture() -> None:
    with pytest.raises(tw.InputError, match="no curve"):
        sweep_figure([FRONT], [tw.sweep(FRONT, [0.0], [0.0])])
    with pytest.raises(tw.InputError, match="no curve"):
        ride_figure([FRONT], [tw.ride(FRONT, ["bump"], travel=[0.0])])
    with pytest.raises(tw.InputError, match="at most 6"):
        sweep_figure([FRONT] * 7, [tw.sweep(FRONT)] * 7)


@pytest.mark.parametrize("positions", [([-10.0, 0.0, 10.0], [0.0]), ([0.0], [-10.0, 0.0, 10.0])])
def test_one_row_of_positions_is_drawn_as_curves(positions: tuple[list[float], list[float]]) -> None:
    figure = sweep_figure([FRONT], [tw.sweep(FRONT, *positions)])
    assert len(figure.axes) == 2


@pytest.mark.parametrize("title", ["$\\frac{1}{$ <b>&", "_hidden", "two\nlines", "車軸", "x" * 300])
def test_odd_titles_are_drawn_as_they_are(title: str, tmp_path: Path) -> None:
    import dataclasses

    axles = [dataclasses.replace(FRONT, title=title), UNEQUAL]
    figure = sweep_figure(axles, [tw.sweep(a) for a in axles])
    save_figure(figure, tmp_path / "odd.svg")
    assert ET.parse(tmp_path / "odd.svg").getroot().tag.endswith("svg")
    assert any(w.startswith("A: ") and len(w) < 60 for w in texts(figure))


@pytest.mark.parametrize("kind", ["png", "svg", "pdf"])
def test_the_same_figure_gives_the_same_file(kind: str, tmp_path: Path) -> None:
    for name in ("one", "two"):
        save_figure(ride_figure([FRONT], [tw.ride(FRONT, ["bump"])]), tmp_path / f"{name}.{kind}")
    one, two = ((tmp_path / f"{name}.{kind}").read_bytes() for name in ("one", "two"))
    assert one == two
    assert len(one) > 5000
    assert sorted(p.name for p in tmp_path.iterdir()) == [f"one.{kind}", f"two.{kind}"]
    if kind == "png":
        picture = np.asarray(Image.open(tmp_path / "one.png").convert("RGB"))
        assert picture.shape[1] == 1200
        assert (picture != 255).any(axis=2).mean() > 0.02


def test_drawing_leaves_the_global_state_alone() -> None:
    before = dict(matplotlib.rcParams)
    ride_figure([FRONT], [tw.ride(FRONT)])
    assert dict(matplotlib.rcParams) == before
    with pytest.raises(ValueError, match="unknown"):
        save_figure(ride_figure([FRONT], [tw.ride(FRONT)]), Path("picture.jpg"))


def test_a_figure_for_a_page_follows_light_and_dark() -> None:
    text = svg_for_page(ride_figure([FRONT], [tw.ride(FRONT, ["bump"])]))
    root = ET.fromstring(text)
    assert root.tag.endswith("svg")
    assert "prefers-color-scheme: dark" in text
    assert "fill: var(--c0)" in text
    assert "#ffffff" not in text.split("</style>", 1)[1]
