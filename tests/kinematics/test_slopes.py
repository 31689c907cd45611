"""Exact derivatives against central differences of the solve."""

from __future__ import annotations

import numpy as np
import pytest
from corners import make_axle, scatter

import toewright as tw
from toewright.core import layout
from toewright.kinematics.batch import solve_batch, solve_poses
from toewright.kinematics.design import coordinate_index, coordinate_names, design_vectors
from toewright.kinematics.slopes import MOTION_PARAMETERS, SETUP_PARAMETERS, SLOPE_COLUMNS, contracted_gradient

RACK, TRAVEL = np.array([-18.0, 0.0, 12.0]), np.array([-22.0, 0.0, 20.0])
GRID = np.repeat(RACK, 3), np.tile(TRAVEL, 3)


def central(designs, name, kind, travel_at, columns):
    """Five-point central difference of the solve; truncation h^4, rounding 1e-14/h."""

    def solve(step):
        moved, rack, travel = designs.copy(), GRID[0].copy(), GRID[1].copy()
        if name == "rack_travel":
            rack += step
        elif name == "wheel_travel":
            travel += step
        else:
            moved[:, SETUP_PARAMETERS[name] if name in SETUP_PARAMETERS else coordinate_index(kind, name)] += step
        found = solve_poses(moved, rack, travel, travel_at=travel_at, columns=columns)
        assert np.all(found.status == 0)
        return found.values

    h = 0.02
    return (8.0 * (solve(h) - solve(-h)) - (solve(2 * h) - solve(-2 * h))) / (12.0 * h)


@pytest.mark.parametrize("kind", ["double-wishbone", "strut"])
@pytest.mark.parametrize("travel_at", ["wheel-centre", "contact-point"])
@pytest.mark.parametrize("side", ["left", "right"])
def test_every_result_by_every_coordinate(kind, travel_at, side):
    axle = make_axle(scatter(kind, 5.0, 11), kind)
    parameters = (*coordinate_names(kind), *SETUP_PARAMETERS, *MOTION_PARAMETERS)
    exact = tw.slopes(axle, RACK, TRAVEL, travel_at=travel_at, sides=[side], parameters=parameters)
    designs = design_vectors(axle, [side])
    # of each result over all its derivatives; some are zero by the drive itself, whatever the design
    largest = np.maximum(np.max(np.abs(exact.values), axis=(0, 1, 2, 4)), 1e-5)
    for q, name in enumerate(parameters):
        numeric = central(designs, name, kind, travel_at, SLOPE_COLUMNS).reshape(3, 3, -1)
        error = np.abs(exact.values[0, ..., q] - numeric) / largest
        # 1e-6 relative; a result's smallest derivatives are below the difference's own rounding, so its largest is the measure
        assert np.max(error) < 1e-6, (name, SLOPE_COLUMNS[int(np.argmax(error.max(axis=(0, 1))))])


def test_bump_steer_has_the_slope_of_the_map():
    axle = make_axle(scatter("double-wishbone", 0.0, 0))
    found = tw.slopes(
        axle, [10.0], [-20.0, 20.0], sides=["left"], columns=["bump_steer"], parameters=["tie_rod_outer.z"]
    )

    def bump(step):
        moved = axle.with_points({("left", "tie_rod_outer"): axle.left.points["tie_rod_outer"] + [0.0, 0.0, step]})
        return tw.sweep(moved, [10.0], [-20.0, 20.0], sides=["left"])["bump_steer"][0, 0]

    h = 1e-3
    assert found.values[0, 0, :, 0, 0] == pytest.approx((bump(h) - bump(-h)) / (2 * h), rel=1e-6)


def test_steer_rate_is_the_derivative_by_rack():
    axle = make_axle(scatter("strut", 4.0, 2), "strut")
    found = tw.slopes(axle, RACK, TRAVEL, sides=["left"], columns=["steer_angle", "toe_in"])
    maps = tw.sweep(axle, RACK, TRAVEL, sides=["left"])
    assert found.of("steer_angle", "rack_travel") == pytest.approx(maps["steer_rate"], abs=1e-12)
    assert found.of("toe_in", "wheel_travel") == pytest.approx(maps["bump_steer_rate"], abs=1e-12)


@pytest.mark.parametrize("kind", ["double-wishbone", "strut"])
@pytest.mark.parametrize("travel_at", ["wheel-centre", "contact-point"])
def test_contracted_gradient_is_the_sum_of_its_parts(kind, travel_at):
    axle = make_axle(scatter(kind, 5.0, 7), kind)
    designs = design_vectors(axle)
    batch = solve_batch(designs, RACK, TRAVEL, travel_at=travel_at, columns=("grip",))
    poses = batch.poses.reshape(2, 9, 6)
    weights = np.random.default_rng(1).normal(size=(2, 9, len(layout.OBJECTIVE_TERMS)))
    found = contracted_gradient(designs, poses, GRID[0][None], GRID[1][None], weights, travel_at=travel_at)
    full = tw.slopes(axle, RACK, TRAVEL, travel_at=travel_at, columns=layout.OBJECTIVE_TERMS)
    for s in range(2):
        for q, name in enumerate(full.parameters):
            if name in MOTION_PARAMETERS:
                continue
            expected = np.sum(weights[s] * full.values[s, ..., q].reshape(9, -1))
            assert found[s, coordinate_index(kind, name)] == pytest.approx(expected, abs=1e-11), name


def test_unknown_names_are_refused():
    axle = make_axle(scatter("double-wishbone", 0.0, 0))
    with pytest.raises(ValueError, match="strut_top_mount"):
        tw.slopes(axle, [0.0], [0.0], parameters=["strut_top_mount.x"])
    with pytest.raises(ValueError, match="no derivative"):
        tw.slopes(axle, [0.0], [0.0], columns=["residual"])
