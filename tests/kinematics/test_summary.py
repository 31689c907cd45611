from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from corners import HARDPOINTS, PLAIN, SAMPLES, make_axle, scatter

import toewright as tw
from toewright.kinematics.sheet import SHEET_COLUMNS, design_sheets, link_lengths, tie_rod_place
from toewright.kinematics.summary import RANGED, bump_steer, mirror_images, one_side_tells_all, ranges
from toewright.model.axle import Corner, Rack

PLAIN_AXLE = make_axle(PLAIN["double-wishbone"])


@pytest.mark.parametrize("sample", SAMPLES, ids=lambda p: p.stem)
@pytest.mark.parametrize("total", [False, True])
def test_the_worst_place_is_the_worst_of_all(sample: object, total: bool) -> None:
    maps = tw.sweep(tw.load(sample))  # type: ignore[arg-type]
    figures = maps["bump_steer"].sum(axis=0)[np.newaxis] if total else maps["bump_steer"]
    for found, angles in zip(bump_steer(maps, total=total), figures, strict=True):
        assert found.worst is not None
        assert abs(found.worst.value) == pytest.approx(np.max(np.abs(angles)), abs=1e-15)
        i = np.flatnonzero(maps.rack_travel == found.worst.rack_travel)[0]
        j = np.flatnonzero(maps.wheel_travel == found.worst.wheel_travel)[0]
        assert angles[i, j] == pytest.approx(found.worst.value, abs=1e-15)
        assert found.worst_straight is not None
        straight = angles[np.argmin(np.abs(maps.rack_travel))]
        assert abs(found.worst_straight.value) == pytest.approx(np.max(np.abs(straight)), abs=1e-15)


def test_columns_are_straight_ahead_and_both_ends() -> None:
    wide = bump_steer(tw.sweep(PLAIN_AXLE, np.linspace(-30, 30, 21), [-10.0, 0.0, 10.0]))[0]
    assert wide.racks.tolist() == [-30.0, 0.0, 30.0]
    few = bump_steer(tw.sweep(PLAIN_AXLE, [5.0, 10.0, 20.0], [0.0, 10.0]))[0]
    assert few.racks.tolist() == [5.0, 10.0, 20.0]
    assert few.worst_straight is None
    assert few.angles.shape == (1, 3, 2)


def test_the_total_needs_both_sides() -> None:
    with pytest.raises(ValueError, match="both sides"):
        bump_steer(tw.sweep(PLAIN_AXLE, [0.0], [0.0], sides=("left",)), total=True)


def test_ranges_hold_their_places_and_the_design_value() -> None:
    maps = tw.sweep(PLAIN_AXLE, [-20.0, 0.0, 20.0], [-20.0, 0.0, 20.0])
    found = ranges(maps, "right")
    assert tuple(found) == RANGED
    for name, place in found.items():
        values = maps[name][1]
        assert place.least.value == values.min()
        assert place.greatest.value == values.max()
        assert place.design == values[1, 1]
    assert ranges(tw.sweep(PLAIN_AXLE, [-20.0], [5.0]), "left")["camber"].design is None


def test_where_nothing_is_reached_there_is_no_worst_place_and_no_range() -> None:
    maps = tw.sweep(PLAIN_AXLE, [0.0], [500.0])
    assert bump_steer(maps)[0].worst is None
    assert ranges(maps, "left") == {}


def test_mirror_images_are_told_from_unequal_sides() -> None:
    assert mirror_images(PLAIN_AXLE)
    stated = replace(PLAIN_AXLE, symmetric=False)
    assert mirror_images(stated)
    moved = PLAIN_AXLE.right.points["tie_rod_outer"] + [0.0, 0.0, 1e-3]
    assert not mirror_images(PLAIN_AXLE.with_points({("right", "tie_rod_outer"): moved}))
    assert not mirror_images(replace(PLAIN_AXLE, rack=Rack(np.array([0.1, np.sqrt(0.99), 0.0]), 30.0)))
    other = make_axle(PLAIN["strut"])
    assert not mirror_images(replace(PLAIN_AXLE, right=other.right))


def test_one_side_tells_all_exactly_where_the_maps_say_so() -> None:
    maps = tw.sweep(PLAIN_AXLE, [-20.0, 0.0, 20.0], [-20.0, 0.0, 20.0])
    assert one_side_tells_all(PLAIN_AXLE, maps)
    np.testing.assert_allclose(maps["bump_steer"][0], maps["bump_steer"][1, ::-1], atol=1e-9)
    assert not one_side_tells_all(PLAIN_AXLE, tw.sweep(PLAIN_AXLE, [0.0, 20.0], [0.0]))
    assert not one_side_tells_all(PLAIN_AXLE, tw.sweep(PLAIN_AXLE, [0.0], [0.0], sides=("left",)))


@pytest.mark.parametrize("kind", ["double-wishbone", "strut"])
def test_the_sheet_is_the_design_pose(kind: str) -> None:
    axle = make_axle(scatter(kind, 3.0, 5), kind)
    pose = tw.design_pose(axle)
    for s, sheet in enumerate(design_sheets(axle)):
        assert tuple(sheet.figures) == SHEET_COLUMNS
        assert all(sheet.figures[name] == pose[name][s, 0, 0] for name in SHEET_COLUMNS)
        for words, length in link_lengths(axle.corner(sheet.side)).items():
            assert sheet.lengths[words] == length
            assert length > 1.0
    bare = make_axle(scatter(kind, 3.0, 5), kind, rack_axis=None)
    assert "steer_rate" not in design_sheets(bare)[0].figures


def test_the_tie_rod_is_placed_on_its_side_of_the_axis() -> None:
    """Vertical axis through (0, 500): a joint 60 ahead and 20 nearer the centre plane (exact construction)."""
    points = {
        **{name: np.array(p) for name, p in PLAIN["double-wishbone"].items()},
        "lower_ball_joint": np.array([0.0, 500.0, 100.0]),
        "upper_ball_joint": np.array([0.0, 500.0, 300.0]),
        "tie_rod_outer": np.array([60.0, 480.0, 170.0]),
    }
    left = Corner("left", "double-wishbone", points)
    for corner in (left, left.mirrored()):
        place = tie_rod_place(corner)
        assert (place.ahead, place.inboard) == pytest.approx((60.0, 20.0), abs=1e-12)
        assert place.arm == pytest.approx(np.hypot(60.0, 20.0), abs=1e-12)
        assert place.words == "60.0 mm ahead of the steering axis and 20.0 mm inboard of it"
    behind = left.replace_points({"tie_rod_outer": np.array([-60.0, 520.0, 170.0])})
    assert tie_rod_place(behind).words == "60.0 mm behind the steering axis and 20.0 mm outboard of it"


def test_remarks_state_common_practice_and_keep_quiet_inside_it() -> None:
    assert design_sheets(tw.load(HARDPOINTS / "marten_front.toml"))[0].remarks == ()
    upper = PLAIN_AXLE.left.points["upper_ball_joint"]
    leaning = PLAIN_AXLE.with_points({("left", "upper_ball_joint"): upper - [60.0, 0.0, 0.0]})
    (remark,) = design_sheets(leaning)[0].remarks
    assert remark.startswith("caster +20.")
    assert "common practice, not a rule" in remark
    forward = PLAIN_AXLE.with_points({("left", "upper_ball_joint"): upper + [60.0, 0.0, 0.0]})
    assert [r.split(" ")[0] for r in design_sheets(forward)[0].remarks] == ["caster", "mechanical"]
    inner = PLAIN_AXLE.left.points["tie_rod_inner"]
    shallow = PLAIN_AXLE.with_points({("left", "tie_rod_inner"): inner + [700.0, 0.0, 0.0]})
    assert any(r.startswith("transmission angle") for r in design_sheets(shallow)[0].remarks)
