"""Tuning: slopes against differences, recovery of a known point, bounds, directions, grid, trade."""

from __future__ import annotations

import numpy as np
import pytest
from corners import HARDPOINTS

import toewright as tw
from toewright.model.errors import InputError
from toewright.studies.goals import parse_goal
from toewright.studies.locus import locus
from toewright.studies.residuals import SCALES, Free, jacobian, moved_axle, parse_free, residuals
from toewright.studies.tuning import trade_off, tune

FRONT = tw.load(HARDPOINTS / "marten_front.toml")
IBEX = tw.load(HARDPOINTS / "ibex_front.toml")
INNER_Z = Free("tie_rod_inner", "z", -10.0, 10.0)
FLAT = parse_goal("bump_steer over -25:25 = 0", FRONT)


@pytest.mark.parametrize("axle", [FRONT, IBEX], ids=["symmetric", "unequal sides"])
@pytest.mark.parametrize(
    "text",
    [
        "bump_steer over -20:20 rack -15,0,15 = 0.1",
        "camber steer 12 in -5:-3",
        "scrub_radius = 20",
        "toe_in steer 10 travel 15 = 0",
        "bump_steer_rate = 0",
        "ackermann_percent steer 15 = 60",
        "roll_centre_z roll 1 = 20",
    ],
)
def test_slopes_of_residuals(axle, text):
    goals = [parse_goal(text, axle)]
    free = [Free("tie_rod_inner", "z", -9, 9), Free("tie_rod_outer", "y", -9, 9), Free("upper_ball_joint", "x", -9, 9)]
    exact = jacobian(axle, goals, free)
    for k in range(3):
        h = 1e-3
        ahead, behind = (
            np.concatenate(residuals(moved_axle(axle, free, way * h * np.eye(3)[k]), goals)) for way in (1.0, -1.0)
        )
        numeric = (ahead - behind) / (2 * h)
        assert exact[:, k] == pytest.approx(numeric, abs=1e-5 * max(1.0, float(np.max(np.abs(exact)))))


def test_a_known_point_is_recovered_from_its_curves():
    free = [INNER_Z, Free("tie_rod_outer", "z", -8.0, 8.0), Free("tie_rod_inner", "y", -8.0, 8.0)]
    truth = np.array([2.5, -1.75, 3.25])
    made = moved_axle(FRONT, free, truth)
    goals = []
    for rack in (-20.0, 0.0, 20.0):
        for travel in (-25.0, -12.0, 12.0, 25.0):
            value = tw.sweep(made, [rack], [travel], sides=["left"])["bump_steer"][0, 0, 0]
            goals.append(
                parse_goal(
                    f"bump_steer travel {travel} rack {rack} side left = {value!r}".replace("np.float64(", "").replace(
                        ")", ""
                    ),
                    FRONT,
                )
            )
    found = tune(FRONT, free, goals, starts=1)
    assert found.answers[0].moves == pytest.approx(truth, abs=1e-6)
    assert found.answers[0].determined


def test_what_is_not_determined_is_said():
    # inner and outer joint up together by the same amount do nearly, and along the rod exactly, nothing: two coordinates, one goal value
    goal = parse_goal("bump_steer travel 25 side left = 0", FRONT)
    found = tune(FRONT, [INNER_Z, Free("tie_rod_outer", "z", -8.0, 8.0)], [goal], starts=1)
    answer = found.answers[0]
    assert answer.cost < 1e-20
    assert not answer.determined
    assert answer.directions[-1].effect < 1e-6


def test_bump_steer_is_flattened_and_the_sides_stay_mirror_images():
    found = tune(FRONT, [INNER_Z], [FLAT])
    assert found.after[0].miss < 0.2 * found.before[0].miss
    assert found.tuned.symmetric
    assert found.tuned.right.points["tie_rod_inner"] == pytest.approx(
        found.tuned.left.points["tie_rod_inner"] * [1, -1, 1]
    )
    assert found.answers[0].binding == ()
    assert found.answers[0].cost < found.cost_before


def test_tuning_agrees_with_the_locus():
    # the locus takes the least largest, tuning the least squares: near each other
    found = tune(FRONT, [INNER_Z], [parse_goal("bump_steer over -25:25 side left = 0", FRONT)], starts=1)
    places = locus(FRONT, travel=np.linspace(-25, 25, 21), reach=40.0)
    middle = places.first.size // 2
    assert found.tuned.left.points["tie_rod_inner"][2] == pytest.approx(places.best[middle], abs=0.15)


def test_bounds_bind_and_are_named():
    found = tune(FRONT, [Free("tie_rod_inner", "z", -1.0, 1.0)], [FLAT], starts=2)
    assert found.answers[0].binding == ("tie_rod_inner.z at +1 mm",)
    assert found.answers[0].moves[0] == pytest.approx(1.0, abs=1e-6)


def test_grid_is_solved_again():
    free = [INNER_Z, Free("tie_rod_outer", "z", -8.0, 8.0)]
    goals = [parse_goal("bump_steer over -25:25 rack -15,0,15 = 0", FRONT)]
    smooth, coarse = tune(FRONT, free, goals, starts=1), tune(FRONT, free, goals, starts=1, grid=1.0)
    places = [coarse.tuned.left.points[f.point][2] for f in free]
    assert places == pytest.approx(np.round(places), abs=1e-9)
    rounded = moved_axle(FRONT, free, np.round(smooth.answers[0].moves))
    plain = sum(float(np.sum(r**2)) for r in residuals(rounded, goals))
    assert coarse.answers[0].cost <= plain + 1e-12
    assert coarse.answers[0].cost >= smooth.answers[0].cost


def test_goals_that_pull_apart_trade_off():
    goals = [parse_goal("bump_steer over -25:25 = 0", FRONT), parse_goal("bump_steer over -25:25 rack 25 = 0", FRONT)]
    found = trade_off(FRONT, [INNER_Z], goals, steps=5)
    assert np.all(np.diff(found.rms[:, 0]) >= -1e-9)
    assert np.all(np.diff(found.rms[:, 1]) <= 1e-9)
    assert found.rms[0, 0] < found.rms[-1, 0]


def test_a_range_that_is_kept_costs_nothing():
    goals = [parse_goal("scrub_radius in 20:30", FRONT)]
    assert sum(float(np.sum(r**2)) for r in residuals(FRONT, goals)) == 0.0
    assert SCALES["mm"] == 1.0


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("tie_rod_inner.z", "how far it may move"),
        ("tie_rod_iner.z=-1:1", "is not a coordinate"),
        ("tie_rod_inner.w=-1:1", "is not a coordinate"),
        ("tie_rod_inner.z=1:-1", "lower bound first"),
        ("tie_rod_inner.z=a:b", "no pair of numbers"),
        ("tie_rod_inner.z=2:4", "is not between"),
        ("tie_rod_inner.z=-1:inf", "no range"),
    ],
)
def test_bad_bounds_are_one_sentence(text, words):
    with pytest.raises(InputError, match=words):
        parse_free(text, FRONT)


def test_impossible_requests():
    with pytest.raises(InputError, match="nothing is free"):
        tune(FRONT, [], [FLAT])
    with pytest.raises(InputError, match="no goal"):
        tune(FRONT, [INNER_Z], [])
    with pytest.raises(InputError, match="given twice"):
        tune(FRONT, [INNER_Z, INNER_Z], [FLAT])
    with pytest.raises(InputError, match="as drawn"):
        tune(FRONT, [INNER_Z], [parse_goal("bump_steer over -400:400 = 0", FRONT)])
    with pytest.raises(InputError, match="grid"):
        tune(FRONT, [INNER_Z], [FLAT], grid=-1.0)
    with pytest.raises(InputError, match="no multiple"):
        tune(FRONT, [Free("tie_rod_inner", "z", -1.0, 1.0)], [FLAT], grid=50.0, starts=1)
    with pytest.raises(InputError, match="two goals"):
        trade_off(FRONT, [INNER_Z], [FLAT])
