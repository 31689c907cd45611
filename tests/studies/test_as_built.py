"""The workshop's changes: parts keep their dimensions."""

from __future__ import annotations

import numpy as np
import pytest
from corners import PLAIN, make_axle
from hypothesis import given
from hypothesis import strategies as st

from toewright.core import layout
from toewright.kinematics.batch import solve_poses
from toewright.kinematics.design import coordinate_index, design_vectors
from toewright.model.errors import InputError
from toewright.studies.as_built import MOVABLE, rebuild, rod_for_toe

LINKS = {
    "double-wishbone": [
        ("upper_pivot_front", "upper_ball_joint"),
        ("upper_pivot_rear", "upper_ball_joint"),
        ("lower_pivot_front", "lower_ball_joint"),
        ("lower_pivot_rear", "lower_ball_joint"),
        ("tie_rod_inner", "tie_rod_outer"),
    ],
    "strut": [
        ("lower_pivot_front", "lower_ball_joint"),
        ("lower_pivot_rear", "lower_ball_joint"),
        ("tie_rod_inner", "tie_rod_outer"),
    ],
}


def point(design, kind, name):
    k = coordinate_index(kind, f"{name}.x")
    return design[k : k + 3]


def length(design, kind, a, b):
    return float(np.linalg.norm(point(design, kind, a) - point(design, kind, b)))


@given(st.sampled_from(["double-wishbone", "strut"]), st.sampled_from([0, 1]), st.integers(0, 10_000))
def test_links_keep_their_length(kind, side, seed):
    rng = np.random.default_rng(seed)
    design = design_vectors(make_axle(PLAIN[kind], kind))[side]
    moved = {name: rng.normal(0.0, 2.0, 3) for name in rng.choice(MOVABLE[kind], 2, replace=False)}
    new = rebuild(design, moved, rod_longer=1.5)
    for a, b in LINKS[kind]:
        longer = 1.5 if a == "tie_rod_inner" else 0.0
        assert length(new, kind, a, b) == pytest.approx(length(design, kind, a, b) + longer, abs=1e-9)
    assert point(new, kind, "wheel_centre")[2] == pytest.approx(point(design, kind, "wheel_centre")[2], abs=1e-12)
    if kind == "strut":  # the moved top mount lies on the moved axis: the new design stands where it is drawn
        assert solve_poses(new[None], [0.0], [0.0])["residual"][0, 0] < 1e-9


def test_nothing_moved_nothing_changes():
    design = design_vectors(make_axle(PLAIN["strut"], "strut"))[0]
    assert rebuild(design, {}) == pytest.approx(design, abs=1e-11)


def test_a_rack_moved_is_the_inner_joint_moved():
    # moving the inner joint along the rack's axis is what rack travel does
    axle = make_axle(PLAIN["double-wishbone"])
    design = design_vectors(axle)[0]
    new = rebuild(design, {"tie_rod_inner": np.array([0.0, 7.0, 0.0])})
    there = solve_poses(design[None], [7.0], [0.0])
    assert new[layout.TOE_IN] == pytest.approx(there["toe_in"][0, 0], abs=1e-10)
    assert new[layout.CAMBER] == pytest.approx(there["camber"][0, 0], abs=1e-10)


def test_camber_shim_tilts_the_top_inward():
    design = design_vectors(make_axle(PLAIN["double-wishbone"]))[0]
    inward = np.array([0.0, -2.0, 0.0])
    new = rebuild(design, {"upper_pivot_front": inward, "upper_pivot_rear": inward})
    assert new[layout.CAMBER] < design[layout.CAMBER]
    lever = PLAIN["double-wishbone"]["upper_ball_joint"][2] - PLAIN["double-wishbone"]["lower_ball_joint"][2]
    assert design[layout.CAMBER] - new[layout.CAMBER] == pytest.approx(np.degrees(2.0 / lever), rel=0.1)


@pytest.mark.parametrize("side", [0, 1])
def test_toe_is_reset_by_the_rod(side):
    design = design_vectors(make_axle(PLAIN["double-wishbone"]))[side]
    new, longer = rod_for_toe(rebuild(design, {"tie_rod_inner": np.array([0.0, 0.0, 3.0])}), -0.1)
    assert new[layout.TOE_IN] == pytest.approx(-0.1, abs=1e-10)
    assert 0.0 < abs(longer) < 1.0


def test_impossible_changes_are_refused():
    design = design_vectors(make_axle(PLAIN["double-wishbone"]))[0]
    with pytest.raises(InputError, match="can't be put together"):
        rebuild(design, {}, rod_longer=-150.0)
    with pytest.raises(InputError, match="wheel_centre is no point"):
        rebuild(design, {"wheel_centre": np.zeros(3)})
