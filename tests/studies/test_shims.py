"""The workshop table against re-solves of the moved design."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from corners import HARDPOINTS

import toewright as tw
from toewright.core import layout
from toewright.kinematics.design import design_vector
from toewright.model.errors import InputError
from toewright.studies.adjusters import read_adjusters
from toewright.studies.as_built import at_height, rebuild
from toewright.studies.shims import shims
from toewright.views.shim_sheet import CAUTIONS, best_step, shim_page
from toewright.views.toe import ToeScale, ToeUnit

FRONT = tw.load(HARDPOINTS / "marten_front.toml")
TRAVEL = np.linspace(-25.0, 25.0, 5)


def with_adjusters(**tables):
    return replace(FRONT, extra={"adjusters": tables})


HEIGHT = {"moves": ["tie_rod_inner"], "direction": [0.0, 0.0, 1.0], "step": 1.0, "range": [-2.0, 2.0]}


@pytest.mark.parametrize("point", ["tie_rod_inner", "tie_rod_outer"])
def test_a_rack_shim_is_the_joint_moved_with_the_toe_set_again(point):
    # the arms do not feel the rod, so with the toe set again the upright stands where it was and only the joint has moved
    found = shims(with_adjusters(up={**HEIGHT, "moves": [point]}), travel=TRAVEL)
    for i, amount in enumerate(found["adjustment"]):
        moved = FRONT.with_points({("left", point): FRONT.left.points[point] + [0.0, 0.0, amount]})
        maps = tw.sweep(moved, [0.0], TRAVEL, sides=["left"])
        assert found["bump_steer_high"][i] == pytest.approx(maps["bump_steer"][0, 0, -1], abs=1e-8)
        assert found["bump_steer_low"][i] == pytest.approx(maps["bump_steer"][0, 0, 0], abs=1e-8)
        assert found["bump_steer_rate"][i] == pytest.approx(maps["bump_steer_rate"][0, 0, 2], abs=1e-9)
    assert found["toe_in_set"] == pytest.approx(FRONT.setup.toe_in, abs=1e-9)


def test_turns_of_the_rod():
    found = shims(
        with_adjusters(toe={"moves": "tie-rod", "thread_pitch": 2.0, "step": 0.5, "range": [-0.5, 0.5]}), travel=TRAVEL
    )
    design = design_vector(FRONT, "left")
    assert found["adjustment"].tolist() == [-0.5, 0.0, 0.5]
    assert found["toe_in_set"][2] == pytest.approx(rebuild(design, {}, 1.0)[layout.TOE_IN], abs=1e-10)
    assert found["rod_turns"].tolist() == [0.0, 0.0, 0.0]


def test_turns_are_length_over_pitch():
    both = with_adjusters(up=HEIGHT, toe={"moves": "tie-rod", "thread_pitch": 2.0, "step": 0.5, "range": [-0.5, 0.5]})
    found = shims(both, travel=TRAVEL)
    rows = found.rows_of("up")
    assert found["rod_turns"][rows] == pytest.approx(found["rod_longer"][rows] / 2.0)
    assert np.any(np.abs(found["rod_longer"][rows]) > 1e-3)
    assert np.isnan(shims(with_adjusters(up=HEIGHT), travel=TRAVEL)["rod_turns"]).all()


def test_ride_height_is_where_the_car_is_measured():
    found = shims(with_adjusters(up=HEIGHT), travel=TRAVEL, ride_height=-6.0)
    # nothing moved: the drawn car at that height, its toe set there; the shape of the toe curve hardly feels the small turn of the rod
    maps = tw.sweep(FRONT, [0.0], np.concatenate([TRAVEL - 6.0]), sides=["left"])
    toe = maps["toe_in"][0, 0]
    middle = int(np.flatnonzero(found["adjustment"] == 0.0)[0])
    assert found["bump_steer_high"][middle] == pytest.approx(toe[-1] - toe[2], abs=5e-4)
    assert found["toe_in_set"][middle] == pytest.approx(FRONT.setup.toe_in, abs=1e-9)
    stands = at_height(design_vector(FRONT, "left"), -6.0)
    assert stands[26] == pytest.approx(FRONT.left.points["wheel_centre"][2] - 6.0, abs=1e-12)
    assert found["camber"][middle] == pytest.approx(maps["camber"][0, 0, 2], abs=5e-3)


def test_the_right_side_mirrors():
    axle = with_adjusters(
        shim={**HEIGHT, "moves": ["upper_pivot_front", "upper_pivot_rear"], "direction": [0.0, 1.0, 0.0]}
    )
    left, right = shims(axle, travel=TRAVEL), shims(axle, side="right", travel=TRAVEL)
    for name in ("toe_before", "camber", "bump_steer_high", "rod_longer"):
        assert left[name] == pytest.approx(right[name], abs=1e-8), name
    assert left["camber"][-1] > left["camber"][0]  # pivots outward: top outboard


def test_directions_follow_the_files_axes_and_unit(tmp_path):
    text = (HARDPOINTS / "marten_front.toml").read_text()
    sae = replace(
        FRONT,
        axes="sae-j670",
        length_unit="in",
        extra={"adjusters": {"down": {**HEIGHT, "step": 0.1, "range": [0.0, 0.1]}}},
    )
    adjuster = read_adjusters(sae)[0]
    assert adjuster.direction.tolist() == [0.0, 0.0, -1.0]
    assert adjuster.amounts.tolist() == pytest.approx([0.0, 2.54])
    (tmp_path / "a.toml").write_text(text)
    assert [a.name for a in read_adjusters(tw.load(tmp_path / "a.toml"))] == [
        "rack_height",
        "outer_spacer",
        "camber_shim",
        "toe_turns",
    ]


@pytest.mark.parametrize(
    ("entry", "words"),
    [
        ({**HEIGHT, "moves": ["tie_rod_iner"]}, "did you mean 'tie_rod_inner'"),
        ({**HEIGHT, "moves": ["wheel_centre"]}, "can't be moved"),
        ({**HEIGHT, "moves": "rack"}, "tie-rod"),
        ({**HEIGHT, "direction": [0.0, 0.0, 0.0]}, "three numbers"),
        ({**HEIGHT, "direction": [0.0, 1.0]}, "three numbers"),
        ({**HEIGHT, "step": 0.0}, "above 0"),
        ({**HEIGHT, "step": "one"}, "above 0"),
        ({**HEIGHT, "range": [1.0, 2.0]}, "with 0 between"),
        ({**HEIGHT, "step": 1e-6}, "make it larger"),
        ({**HEIGHT, "stepp": 1.0}, "did you mean 'step'"),
        ({**HEIGHT, "thread_pitch": 1.0}, "tie-rod"),
        ({"moves": "tie-rod", "step": 1.0, "range": [0.0, 1.0]}, "thread_pitch"),
        (
            {"moves": "tie-rod", "thread_pitch": 1.0, "direction": [1.0, 0.0, 0.0], "step": 1.0, "range": [0.0, 1.0]},
            "leave it out",
        ),
        ("up", "is no table"),
    ],
)
def test_bad_adjusters_are_one_sentence(entry, words):
    with pytest.raises(InputError, match=words.replace("[", r"\[")) as caught:
        read_adjusters(with_adjusters(up=entry))
    assert "adjusters.up" in str(caught.value)


def test_impossible_requests():
    with pytest.raises(InputError, match=r"has no \[adjusters\]"):
        shims(tw.load(HARDPOINTS / "linnet_front.toml"))
    with pytest.raises(InputError, match="ride height"):
        shims(with_adjusters(up=HEIGHT), ride_height=900.0)
    far = {
        **HEIGHT,
        "direction": [0.0, 1.0, 0.0],
        "moves": ["upper_pivot_front", "upper_pivot_rear"],
        "step": 250.0,
        "range": [0.0, 250.0],
    }
    with pytest.raises(InputError, match=r"adjusters.far at \+250 mm"):
        shims(with_adjusters(far=far))


def test_page_escapes_and_has_cautions():
    found = shims(with_adjusters(up=HEIGHT), travel=TRAVEL)
    page = shim_page(replace(FRONT, title="<script>alert(1)</script>"), found, ToeScale(ToeUnit.MM, 254.0, True))
    assert "<script" not in page
    assert "&lt;script&gt;" in page
    for caution in CAUTIONS:
        assert caution.split("'")[0] in page
    assert "http" not in page
    best = best_step(found, "up")
    assert best is not None
    assert found["bump_steer_most"][best] == np.min(found["bump_steer_most"])
