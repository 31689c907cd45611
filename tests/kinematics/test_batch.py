"""Many designs at once give what one at a time gives."""

from __future__ import annotations

import numpy as np
import pytest
from corners import make_axle, scatter

import toewright as tw
from toewright.core import layout
from toewright.kinematics.batch import solve_batch, solve_chunks, solve_poses
from toewright.kinematics.design import design_vectors
from toewright.kinematics.lines import grid_line

RACK, TRAVEL = np.linspace(-15.0, 15.0, 7), np.linspace(-20.0, 20.0, 7)


def many(count):
    base = design_vectors(make_axle(scatter("double-wishbone", 0.0, 0)), ["left"])
    designs = np.repeat(base, count, axis=0)
    designs[:, :27] += np.random.default_rng(4).normal(0.0, 1.0, (count, 27))
    return designs


def test_a_batch_is_its_designs_one_by_one():
    designs = many(37)
    batch = solve_batch(designs, RACK, TRAVEL)
    assert np.all(batch.status == layout.OK)
    for n in (0, 15, 16, 36):
        one = solve_batch(designs[n : n + 1], RACK, TRAVEL)
        assert np.max(np.abs(one.values[0] - batch.values[n])) < 1e-8
        assert np.max(np.abs(one["steer_angle"][0] - batch["steer_angle"][n])) < 1e-10


def test_chunks_and_threads_change_nothing():
    designs = many(101)
    whole = solve_batch(designs, RACK, TRAVEL, threads=1)
    got = 0
    for part, batch in solve_chunks(designs, RACK, TRAVEL, threads=2, chunk=16):
        assert part.start == got
        got = part.stop
        assert np.array_equal(batch.values, whole.values[part])
    assert got == 101


def test_kinds_and_sides_mix_in_one_batch():
    designs = np.concatenate(
        [
            design_vectors(make_axle(scatter(kind, 3.0, seed), kind))
            for seed in range(3)
            for kind in ("strut", "double-wishbone")
        ]
    )
    batch = solve_batch(designs, RACK, TRAVEL)
    for n in range(len(designs)):
        one = solve_batch(designs[n : n + 1], RACK, TRAVEL)
        assert np.max(np.abs(one["camber"][0] - batch["camber"][n])) < 1e-10


def test_one_lost_design_does_not_touch_its_neighbours():
    designs = many(16)
    alone = solve_batch(designs, RACK, TRAVEL)
    designs[5, 21:24] = designs[5, 18:21] + 0.7 * (0.8 * designs[5, 15:18] + 0.2 * designs[5, 6:9] - designs[5, 18:21])
    mixed = solve_batch(designs, RACK, TRAVEL)
    others = np.delete(np.arange(16), 5)
    assert np.max(np.abs(alone.values - mixed.values)[others]) < 1e-8


def test_requested_order_and_missing_zero():
    designs = many(2)
    batch = solve_batch(designs, [12.0, -3.0], [5.0, -9.0, 2.0], columns=("toe_in", "bump_steer"))
    assert batch.values.shape == (2, 2, 3, 2)
    alone = solve_poses(designs, np.repeat([12.0, -3.0], 3), np.tile([5.0, -9.0, 2.0], 2), columns=("toe_in",))
    assert batch["toe_in"] == pytest.approx(alone.values[..., 0].reshape(2, 2, 3), abs=1e-10)
    zero = solve_batch(designs, [12.0, -3.0], [0.0], columns=("toe_in",))
    assert batch["bump_steer"] == pytest.approx(batch["toe_in"] - zero["toe_in"], abs=1e-12)


def test_crowded_and_uneven_positions():
    designs = many(3)
    travel = np.array([-20.0, -19.9999999, -3.0, 1e-12, 1e-7, 0.5, 0.5000001, 20.0])
    batch = solve_batch(designs, [0.0, 1e-6, 14.0], travel, columns=("steer_angle",))
    alone = solve_poses(designs, np.repeat([0.0, 1e-6, 14.0], 8), np.tile(travel, 3), columns=("steer_angle",))
    assert batch["steer_angle"].reshape(3, -1) == pytest.approx(alone.values[..., 0], abs=1e-9)


def test_bad_requests_are_refused():
    designs = many(1)
    with pytest.raises(ValueError, match="shape"):
        solve_batch(designs[:, :30], RACK, TRAVEL)
    with pytest.raises(ValueError, match="unknown column"):
        solve_batch(designs, RACK, TRAVEL, columns=("sideways",))
    with pytest.raises(ValueError, match="travel_at"):
        solve_batch(designs, RACK, TRAVEL, travel_at="hub")
    with pytest.raises(ValueError, match="finite"):
        grid_line(np.array([0.0, np.nan]), 5.0)
    with pytest.raises(ValueError, match="ascend"):
        tw.sweep(make_axle(scatter("strut", 0.0, 0), "strut"), [3.0, 1.0], [0.0])


def test_labelled_forms():
    axle = make_axle(scatter("double-wishbone", 0.0, 0))
    maps = tw.sweep(axle, [-70.0, 0.0, 10.0], [-5.0, 0.0, 5.0])
    data = maps.to_xarray()
    assert data["bump_steer"].dims == ("side", "rack_travel", "wheel_travel")
    assert data["toe_in"].attrs["units"] == "deg"
    assert data["toe_in"].attrs["sign"] == "toe-in +"
    assert float(data["camber"].sel(side="left", rack_travel=10.0, wheel_travel=5.0)) == maps["camber"][0, 2, 2]
    table = maps.to_dataframe()
    assert list(table.columns[:4]) == ["side", "rack_travel", "wheel_travel", "status"]
    assert len(table) == 18
    assert table.loc[table.status != "ok", "toe_in"].isna().all()
    assert (table.status != "ok").any()
    with pytest.raises(KeyError, match="bump_steer"):
        maps["nothing"]
