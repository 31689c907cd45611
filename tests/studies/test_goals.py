"""The grammar of goals, and verdicts against direct solves."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
from corners import HARDPOINTS

import toewright as tw
from toewright.model.errors import InputError
from toewright.studies.goals import CORNER_FIGURES, RIDE_FIGURES, TURN_FIGURES, make_goal, parse_goal, read_targets
from toewright.studies.verdicts import check_targets, evaluate, measure, rack_for_steer

FRONT = tw.load(HARDPOINTS / "marten_front.toml")
REAR = tw.load(HARDPOINTS / "marten_rear.toml")


def targets(axle, **tables):
    return replace(axle, extra={"targets": tables})


def test_bump_steer_target_names_the_worst_place():
    verdict = check_targets(targets(FRONT, bump_steer={"over_travel": [-25, 25], "within": 0.05}))[0]
    maps = tw.sweep(FRONT, [0.0], np.linspace(-25, 25, 21))
    worst = float(maps["bump_steer"].ravel()[np.argmax(np.abs(maps["bump_steer"]))])
    assert not verdict.passed
    assert verdict.value == pytest.approx(worst, abs=1e-12)
    assert verdict.miss == pytest.approx(abs(worst) - 0.05)
    assert "wheel travel +25.0 mm" in verdict.worst_place
    assert "MISSED" in verdict.sentence
    assert "deg" in verdict.sentence
    assert "toe-in +" in verdict.sentence


@pytest.mark.parametrize(("low", "high", "kept"), [(27.0, 28.0, True), (27.5, 28.0, False), (10.0, 27.4, False)])
def test_scrub_radius_between(low, high, kept):
    verdict = check_targets(targets(FRONT, scrub_radius={"between": [low, high]}))[0]
    assert verdict.passed is kept


def test_a_limit_met_exactly_is_kept():
    value = float(tw.design_pose(FRONT)["caster"][0, 0, 0])
    assert check_targets(targets(FRONT, caster={"at_most": value}))[0].passed
    assert not check_targets(targets(FRONT, caster={"at_most": value - 1e-6}))[0].passed


def test_ackermann_at_steer_is_taken_both_ways():
    goal = make_goal(FRONT, "ackermann_percent", {"at_steer": 20, "between": [40, 80]}, "here")
    samples = measure(FRONT, goal)
    assert samples.values.size == 2
    assert samples.values[0] == pytest.approx(samples.values[1], abs=1e-6)
    rack = rack_for_steer(FRONT, 20.0)
    assert tw.turn(FRONT, [rack])["mean_steer"][0] == pytest.approx(20.0, abs=1e-9)
    assert samples.values[1] == pytest.approx(tw.turn(FRONT, [rack])["ackermann_percent"][0], abs=1e-9)


def test_ride_figures_in_bump_and_roll():
    ridden = tw.ride(FRONT, ["roll"], roll=[-2.0, 2.0])
    verdict = evaluate(FRONT, [make_goal(FRONT, "roll_centre_z", {"at_roll": [-2, 2], "at_least": 47}, "here")])[0]
    assert verdict.value == pytest.approx(ridden["roll_centre_z"].min())
    assert not verdict.passed
    bump = evaluate(FRONT, [make_goal(FRONT, "track_change", {"over_travel": [-20, 20], "within": 10}, "here")])[0]
    assert bump.passed
    assert evaluate(FRONT, [make_goal(FRONT, "roll_steer", {"within": 0.1}, "here")])[0].passed


@pytest.mark.parametrize("name", [*CORNER_FIGURES, *TURN_FIGURES, *RIDE_FIGURES])
def test_every_figure_can_be_measured(name):
    entry = {"at_steer": 10} if name in TURN_FIGURES else {}
    samples = measure(FRONT, make_goal(FRONT, name, {**entry, "at_least": -1e9}, "here"))
    assert samples.values.size == len(samples.places)
    if not name.startswith(("anti_lift", "anti_squat", "axle_steer_rate")):  # a front axle without drive has none
        assert np.all(np.isfinite(samples.values)), name


def test_places_are_taken_together():
    goal = make_goal(
        FRONT, "camber", {"at_rack": [-20, 20], "at_travel": [-10, 0, 10], "side": "left", "at_most": 0}, "here"
    )
    samples = measure(FRONT, goal)
    maps = tw.sweep(FRONT, [-20.0, 20.0], [-10.0, 0.0, 10.0], sides=["left"])
    assert samples.values == pytest.approx(maps["camber"].ravel())
    assert samples.places[0] == "left wheel, rack -20.0 mm, wheel travel -10.0 mm"


def test_what_is_not_reached_is_missed():
    verdict = check_targets(targets(FRONT, camber={"at_rack": 90, "within": 90}))[0]
    assert not verdict.passed
    assert math.isnan(verdict.value)
    assert "NOT REACHED" in verdict.sentence


def test_several_limits_of_one_figure():
    both = targets(FRONT, camber=[{"within": 2}, {"over_travel": [-25, 25], "at_least": -3, "at_most": 0}])
    assert len(read_targets(both)) == 2
    assert all(v.passed for v in check_targets(both))


@pytest.mark.parametrize(
    ("text", "same"),
    [
        ("bump_steer over -25:25 = 0", {"over_travel": [-25, 25], "equals": 0}),
        (
            "bump_steer over -25:25 rack -20,0,20 = 0 weight 3",
            {"over_travel": [-25, 25], "at_rack": [-20, 0, 20], "equals": 0, "weight": 3},
        ),
        ("camber<=-1", {"at_most": -1}),
        ("camber steer 20 in -3:0", {"at_steer": 20, "between": [-3, 0]}),
        ("scrub_radius >= 10 side left", {"at_least": 10, "side": "left"}),
    ],
)
def test_text_says_the_same_as_a_table(text, same):
    name = text.replace("<", " ").split()[0]
    one, two = parse_goal(text, FRONT), make_goal(FRONT, name, same, "")
    assert replace(one, key="") == two


@pytest.mark.parametrize(
    ("name", "entry", "words"),
    [
        ("bumpsteer", {"within": 1}, "did you mean 'bump_steer'"),
        ("camber", {}, "has no limit"),
        ("camber", {"within": 0}, "above 0"),
        ("camber", {"within": 1, "at_most": 2}, "leave all but one out"),
        ("camber", {"between": [2, 1]}, "does not ascend"),
        ("camber", {"between": 3}, "lower, upper"),
        ("camber", {"witin": 1}, "did you mean 'within'"),
        ("camber", {"over_roll": [-1, 1], "within": 1}, "has no meaning for camber"),
        ("camber", {"over_travel": [-1, 1], "at_travel": 0, "within": 1}, "leave one of them out"),
        ("camber", {"at_least": 2, "at_most": 1}, "exchange them"),
        ("camber", {"within": "wide"}, "is not a number"),
        ("camber", {"within": True}, "is not a number"),
        ("camber", {"within": 1, "side": "near"}, "write"),
        ("camber", {"within": 1, "at_rack": []}, "is empty"),
        ("camber", [1, 2], "write limits such as"),
    ],
)
def test_bad_targets_are_one_sentence(name, entry, words):
    with pytest.raises(InputError, match=words) as caught:
        check_targets(targets(FRONT, **{name: entry}))
    assert "\n" not in str(caught.value)
    assert f"targets.{name}" in str(caught.value)
    assert "marten_front.toml" in str(caught.value)


@pytest.mark.parametrize(
    "text", ["", "camber", "camber =", "camber = x", "camber ovr -1:1 = 0", "camber over 1 = 0", "camber in 3"]
)
def test_bad_text_is_one_sentence(text):
    with pytest.raises(InputError):
        parse_goal(text, FRONT)


def test_steer_that_is_not_there():
    with pytest.raises(InputError, match="ask for less"):
        rack_for_steer(FRONT, 80.0)
    with pytest.raises(InputError, match=r"has no \[rack\]"):
        check_targets(targets(REAR, camber={"at_steer": 5, "within": 9}))
