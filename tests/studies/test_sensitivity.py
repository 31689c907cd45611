"""Sensitivities against central differences and against re-solves."""

from __future__ import annotations

import numpy as np
import pytest
from corners import HARDPOINTS

import toewright as tw
from toewright.core import layout
from toewright.kinematics.design import design_vector
from toewright.model.errors import InputError
from toewright.studies.as_built import rebuild
from toewright.studies.residuals import Free, moved_axle
from toewright.studies.sensitivity import default_figures, figure_words, parse_figure, sensitivity
from toewright.studies.verdicts import rack_for_steer

FRONT = tw.load(HARDPOINTS / "marten_front.toml")
IBEX = tw.load(HARDPOINTS / "ibex_front.toml")
SOME = ("tie_rod_inner.z", "tie_rod_outer.y", "upper_ball_joint.x", "lower_pivot_rear.z", "wheel_centre.y")


def by_hand(axle, text, coordinate, step):
    """A figure with a coordinate moved, through the public solver."""
    point, _, letter = coordinate.rpartition(".")
    moved = moved_axle(axle, [Free(point, letter, -np.inf, np.inf)], np.array([step]))
    words = text.split()
    place = {words[i]: float(words[i + 1]) for i in range(1, len(words), 2)}
    if words[0] == "ackermann_percent":
        return float(tw.turn(moved, [rack_for_steer(moved, place["steer"])])["ackermann_percent"][0])
    if words[0] == "roll_centre_z":
        return float(tw.ride(moved, ["bump"], travel=[0.0])["roll_centre_z"][0])
    maps = tw.sweep(moved, [place.get("rack", 0.0)], [place.get("travel", 0.0)], sides=["left"])
    return float(maps[words[0]][0, 0, 0])


FIGURES = (
    "bump_steer travel 25",
    "bump_steer travel -25 rack 20",
    "bump_steer_rate",
    "camber_gain",
    "scrub_radius",
    "mechanical_trail",
    "steer_rate",
    "ackermann_percent steer 15",
    "roll_centre_z",
)


@pytest.mark.parametrize("axle", [FRONT, IBEX], ids=["symmetric", "unequal sides"])
@pytest.mark.parametrize("text", FIGURES)
def test_slopes_and_resolves(axle, text):
    found = sensitivity(axle, [parse_figure(text, axle)], coordinates=SOME)
    assert found.present[0] == pytest.approx(by_hand(axle, text, SOME[0], 0.0), abs=1e-9)
    largest = np.max(np.abs(found.slopes))
    for c, name in enumerate(SOME):
        h = 0.02
        values = [by_hand(axle, text, name, way * h) for way in (1, -1, 2, -2)]
        central = (8 * (values[0] - values[1]) - (values[2] - values[3])) / (12 * h)
        assert found.slopes[0, c] == pytest.approx(central, abs=1e-6 * largest)  # 1e-6 of the largest
        assert found.upper[0, c] == pytest.approx(by_hand(axle, text, name, 1.0), abs=1e-8)
        assert found.lower[0, c] == pytest.approx(by_hand(axle, text, name, -1.0), abs=1e-8)


def test_the_point_to_blame():
    found = sensitivity(FRONT, [parse_figure("bump_steer travel 25", FRONT)])
    names = [found.coordinates[c] for c in found.ranked(0)]
    assert names[:2] == ["tie_rod_inner.z", "tie_rod_outer.z"]
    assert found.exact == (True,)
    assert not found.curved[0, found.ranked(0)[0]]


def test_where_the_linear_figure_misleads_it_is_said():
    # along x the rod's height hardly changes: the first order nearly vanishes over a long range, the second does not
    found = sensitivity(FRONT, [parse_figure("bump_steer travel 25", FRONT)], reach=40.0)
    assert found.curved.any()
    for c in np.flatnonzero(found.curved[0]):
        ends = (found.lower[0, c], found.upper[0, c])
        if np.all(np.isfinite(ends)):
            linear = found.slopes[0, c] * 40.0
            assert max(abs(ends[1] - found.present[0] - linear), abs(ends[0] - found.present[0] + linear)) > 0.19 * abs(
                linear
            )


def test_default_figures_have_words():
    words = [figure_words(goal) for goal in default_figures(FRONT)]
    assert "bump steer at wheel travel +25 mm" in words
    assert any(text.startswith("Ackermann percent") for text in words)
    assert "roll-centre height at design" in words
    rear = [goal.name for goal in default_figures(tw.load(HARDPOINTS / "marten_rear.toml"))]
    assert "steer_rate" not in rear


def test_as_built_moves_parts():
    figure = parse_figure("camber", FRONT)
    found = sensitivity(FRONT, [figure], as_built=True, coordinates=["upper_pivot_front.y", "tie_rod_inner.y"])
    design = design_vector(FRONT, "left")
    h = 0.01
    for c, point in enumerate(("upper_pivot_front", "tie_rod_inner")):
        ends = [rebuild(design, {point: np.array([0.0, way * h, 0.0])})[layout.CAMBER] for way in (1, -1)]
        assert found.slopes[0, c] == pytest.approx((ends[0] - ends[1]) / (2 * h), rel=1e-5)
    # as drawn the camber is set again, so nothing changes it
    assert sensitivity(FRONT, [figure], coordinates=["upper_pivot_front.y"]).slopes[0, 0] == pytest.approx(
        0.0, abs=1e-12
    )


def test_refusals():
    with pytest.raises(InputError, match="names several places"):
        parse_figure("bump_steer over -25:25", FRONT)
    with pytest.raises(InputError, match="did you mean"):
        parse_figure("bump_ster travel 3", FRONT)
    with pytest.raises(InputError, match="no figure of one wheel"):
        sensitivity(FRONT, [parse_figure("roll_centre_z", FRONT)], as_built=True)
    with pytest.raises(InputError, match="has no value"):
        sensitivity(FRONT, [parse_figure("bump_steer travel 900", FRONT)])
    with pytest.raises(InputError, match="above 0"):
        sensitivity(FRONT, reach=0.0)
    with pytest.raises(InputError, match="has no such"):
        sensitivity(FRONT, coordinates=["strut_top_mount.x"])
    with pytest.raises(InputError, match="can't be moved"):
        sensitivity(FRONT, [parse_figure("camber", FRONT)], as_built=True, coordinates=["wheel_centre.x"])
