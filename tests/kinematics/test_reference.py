"""Reference poses: made with 40 digits and another formulation (12 direction cosines and coordinates), tests/data."""

from __future__ import annotations

import json
from pathlib import Path

import numpy as np
import pytest
from corners import make_axle

import toewright as tw

CASES = json.loads((Path(__file__).parent.parent / "data" / "reference_poses.json").read_text())["cases"]
ANGLE, LENGTH, RATE = 1e-7, 1e-7, 1e-8  # deg, mm, deg/mm: what a designer could never measure, far above rounding
RATES = {"bump_steer_rate", "steer_rate", "camber_gain"}


def axle_of(case):
    points = {name: np.array(p, float) for name, p in case["points"].items()}
    if case["side"] == "right":
        points = {name: p * [1.0, -1.0, 1.0] for name, p in points.items()}
    return make_axle(
        points,
        case["type"],
        radius=case["loaded_radius"],
        toe_in=case["toe_in"],
        camber=case["camber"],
        rack_axis=case["rack_axis"],
    )


@pytest.mark.parametrize("case", CASES, ids=lambda c: c["name"])
@pytest.mark.parametrize("travel_at", ["wheel-centre", "contact-point"])
def test_poses(case, travel_at):
    axle = axle_of(case)
    poses = [pose for pose in case["poses"] if pose["travel_at"] == travel_at]
    rack = sorted({p["rack_travel"] for p in poses})
    travel = sorted({p["wheel_travel"] for p in poses})
    maps = tw.sweep(axle, rack, travel, travel_at=travel_at, sides=[case["side"]])
    assert poses
    for pose in poses:
        at = (0, rack.index(pose["rack_travel"]), travel.index(pose["wheel_travel"]))
        assert maps.status[at] == 0
        for name, value in pose.items():
            if name in maps.scalars and name not in ("rack_travel", "wheel_travel"):
                assert maps[name][at] == pytest.approx(value, abs=RATE if name in RATES else ANGLE, rel=0), name
        for name in ("wheel_centre", "contact_point", "kingpin_ground_point", "spin_axis"):
            assert maps[name][at] == pytest.approx(np.array(pose[name]), abs=LENGTH, rel=0), name
        outer = maps.joints[0]["tie_rod_outer"][at[1:]]
        assert outer == pytest.approx(np.array(pose["tie_rod_outer"]), abs=LENGTH, rel=0)
        slope = maps["contact_travel_slope"][at]
        assert slope[1] / slope[2] == pytest.approx(pose["contact_dy_dz"], abs=RATE, rel=0)
        assert slope[0] / slope[2] == pytest.approx(pose["contact_dx_dz"], abs=RATE, rel=0)


@pytest.mark.parametrize("case", CASES, ids=lambda c: c["name"])
def test_link_lengths_hold(case):
    axle = axle_of(case)
    maps = tw.sweep(axle, np.linspace(-24, 24, 9), np.linspace(-28, 28, 9), sides=[case["side"]])
    joints, corner = maps.joints[0], axle.corner(case["side"])
    pairs = [("lower_pivot_front", "lower_ball_joint"), ("lower_pivot_rear", "lower_ball_joint")]
    pairs.append(("tie_rod_inner", "tie_rod_outer"))
    if case["type"] == "double-wishbone":
        pairs += [("upper_pivot_front", "upper_ball_joint"), ("upper_pivot_rear", "upper_ball_joint")]
    for a, b in pairs:
        before = np.linalg.norm(corner.points[a] - corner.points[b])
        now = np.linalg.norm(joints[a] - joints[b], axis=-1)
        assert np.max(np.abs(now - before)) < 1e-9  # mm, the promise of the design
    assert np.max(maps.residual) < 1e-9
    if case["type"] == "strut":  # the top mount stays on the strut's axis
        top, on_axis = corner.points["strut_top_mount"], joints["strut_axis_point"]
        rotated = maps.joints[0]["lower_ball_joint"] - on_axis
        before = corner.points["lower_ball_joint"] - corner.points["strut_axis_point"]
        axis = corner.points["strut_top_mount"] - corner.points["strut_axis_point"]
        cosine = (before @ axis) / np.linalg.norm(axis)
        now = np.einsum("...i,...i->...", rotated, top - on_axis) / np.linalg.norm(top - on_axis, axis=-1)
        assert np.max(np.abs(now - cosine)) < 1e-9
