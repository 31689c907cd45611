from __future__ import annotations

from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest
from corners import PLAIN, SAMPLES
from files_for_tests import RADIUS

from toewright.kinematics.sweep import sweep
from toewright.model import load
from toewright.model.axis_maps import parse_axes
from toewright.model.axle import Corner, Side
from toewright.model.import_report import Sanity, sanity_list
from toewright.model.importing import Reading


def reading(kind: str = "double-wishbone", side: Side = "left", axes: str = "x,y,z", **moved: list[float]) -> Reading:
    points = {name: np.array(moved.get(name, point), dtype=float) for name, point in PLAIN[kind].items()}
    corner = Corner("left", kind, points)  # type: ignore[arg-type]
    corner = corner if side == "left" else corner.mirrored()
    return Reading(corner, parse_axes(axes), "mm", np.zeros(3), {}, (), ())


def odd(rows: tuple[Sanity, ...]) -> list[str]:
    return [row.what for row in rows if not row.usual]


@pytest.mark.parametrize("side", ["left", "right"])
@pytest.mark.parametrize("kind", PLAIN)
def test_a_usual_corner_is_usual(kind: str, side: Side) -> None:
    rows = sanity_list([reading(kind, side)], RADIUS[kind])
    assert odd(rows) == []
    found = {row.what: row.found for row in rows}
    assert (
        found["wheel centre near its radius above the road"] == f"{RADIUS[kind]:.1f} mm, radius {RADIUS[kind]:.1f} mm"
    )
    assert f"{side} side at y {'>' if side == 'left' else '<'} 0" in found


ODD = [
    ("wheel centre near its radius above the road", {"wheel_centre": [0, 602, 150]}),
    ("left side at y > 0", {"wheel_centre": [0, -602, 228]}),
    ("track of a car", {"wheel_centre": [0, 300, 228]}),
    ("size of a corner", {"lower_pivot_rear": [-2142, 221, 118]}),
    ("upper front pivot ahead of the rear one", {"upper_pivot_front": [-200, 262, 291]}),
    ("lower pivots inboard of the ball joint", {"lower_pivot_rear": [-142, 571, 118]}),
    ("upper ball joint above lower ball joint", {"upper_ball_joint": [-9, 528, 100]}),
    ("tie rod near the rack's height", {"tie_rod_inner": [62, 228, 260]}),
    (
        "tie rod's inner joint inboard of its outer one",
        {"tie_rod_inner": [71, 548, 152], "tie_rod_outer": [62, 228, 148]},
    ),
    ("lower arm near level, not at full droop", {"lower_pivot_front": [131, 214, 424]}),
    ("upper arm near level, not at full droop", {"upper_pivot_front": [118, 262, 591]}),
    ("wheel centre outboard of lower ball joint", {"wheel_centre": [0, 550, 228]}),
]


@pytest.mark.parametrize(("what", "moved"), ODD, ids=[what for what, _ in ODD])
def test_odd_points_are_named(what: str, moved: dict[str, list[float]]) -> None:
    assert what in odd(sanity_list([reading(**moved)], 228.0))


@pytest.mark.parametrize("sample", SAMPLES, ids=lambda path: path.stem)
def test_points_taken_at_droop_are_odd(sample: Path) -> None:
    """The wheel hanging as far down as a car on a lift lets it: a fifth of the loaded radius, the points put back over the road."""
    axle = load(sample)
    down = 0.2 * axle.wheel.loaded_radius
    hanging = sweep(axle, [0.0], [-down], sides=["left"])
    points = {
        name: places[0, 0] + [0.0, 0.0, down] for name, places in hanging.joints[0].items() if name in axle.left.points
    }
    assert points.keys() >= {"lower_ball_joint", "wheel_centre", "tie_rod_outer"}
    fixed = {name: axle.left.points[name] + [0.0, 0.0, down] for name in axle.left.points if name not in points}
    hung = replace(axle.left, points={**points, **fixed})
    rows = sanity_list([Reading(hung, parse_axes("x,y,z"), "mm", np.zeros(3), {}, (), ())], axle.wheel.loaded_radius)
    assert any("not at full droop" in what for what in odd(rows))
    drawn = sanity_list(
        [Reading(axle.left, parse_axes("x,y,z"), "mm", np.zeros(3), {}, (), ())], axle.wheel.loaded_radius
    )
    assert not any("not at full droop" in what for what in odd(drawn))


def test_left_handed_tables_are_marked() -> None:
    rows = sanity_list([reading(axes="x,-y,z")], 228.0)
    assert odd(rows) == ["axes of the table"]
    assert any("left-handed: right only if" in row.found for row in rows)


def test_both_sides_and_the_centre_plane() -> None:
    pair = [reading(), reading(side="right")]
    rows = sanity_list(pair, 228.0)
    assert odd(rows) == []
    assert rows[0].what.startswith("left: ")
    assert rows[-1] == Sanity("centre plane midway between the wheels", "midway is y = +0.0 mm", True)
    wider = {**pair[1].corner.points, "wheel_centre": np.array([0.0, -640.0, 228.0])}
    rows = sanity_list([pair[0], replace(pair[1], corner=replace(pair[1].corner, points=wider))], 228.0)
    assert odd(rows) == ["centre plane midway between the wheels"]
