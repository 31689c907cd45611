"""Ackermann geometry, least slip and turning, against laws, published values and constructions."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
import scipy.optimize
from corners import HARDPOINTS, PLAIN, make_axle
from hypothesis import given
from hypothesis import strategies as st

import toewright as tw
from toewright.kinematics.ackermann import STRAIGHT, ackermann_geometry, least_slip, normals_meet
from toewright.model.axle import Vehicle
from toewright.model.errors import InputError

L, T = 1550.0, 1200.0


def textbook(inner, outer, wheelbase=L, track=T, definition="ideal-inner"):
    """Contact points at +-t/2 on the axle's line, a left turn: left is the inner wheel."""
    steer = np.array([[inner], [outer]])
    contact = np.array([[[0.0, 0.5 * track]], [[0.0, -0.5 * track]]])
    return ackermann_geometry(steer, contact, -wheelbase, front=True, definition=definition)


@pytest.mark.parametrize(("definition", "percent"), [("ideal-inner", 39), ("ideal-outer", 54), ("single-track", 46)])
def test_the_three_definitions(definition, percent):
    # inner 28, outer 24, wheelbase 1550, contact points 1200 apart: 39, 54 or 46 percent (recomputed by hand from the cot law)
    assert round(float(textbook(28.0, 24.0, definition=definition).percent[0])) == percent


def test_cot_law():
    # cot(outer) - cot(inner) = t / L (any vehicle dynamics text, e.g. R. N. Jazar, Vehicle Dynamics, ch. 7)
    for outer in (1.0, 5.0, 17.0, 33.0):
        found = textbook(30.0, outer).ideal_inner[0]
        assert 1 / np.tan(np.radians(outer)) - 1 / np.tan(np.radians(found)) == pytest.approx(T / L, rel=1e-13)


def test_published_inner_and_outer():
    # L 2.6, t 1.5, inner 28: outer 22.141055622745; rear-axle centre radius 5.639888810; outer front wheel 6.898599786 m
    # (inputs and law printed in the source above, results recomputed)
    made = textbook(28.0, 22.141055622745, 2600.0, 1500.0)
    assert made.ideal_inner[0] == pytest.approx(28.0, abs=1e-11)
    assert made.error[0] == pytest.approx(0.0, abs=1e-11)
    assert made.percent[0] == pytest.approx(100.0, abs=1e-9)
    steer = np.radians([[28.0], [22.141055622745], [0.0], [0.0]])
    contact = np.array([[[0.0, 750.0]], [[0.0, -750.0]], [[-2600.0, 750.0]], [[-2600.0, -750.0]]])
    fit = least_slip(np.degrees(steer), contact, np.array([-2600.0, 0.0]))
    assert fit.centre[0] == pytest.approx([-2600.0, 5639.888810], abs=6e-7)
    assert np.linalg.norm(fit.centre[0] - [0.0, -750.0]) == pytest.approx(6898.599786, abs=6e-7)
    assert np.max(np.abs(fit.slip)) < 1e-10  # four consistent wheels roll without slip


@pytest.mark.parametrize(("length", "steer", "radius"), [(2500.0, 30.0, 4330.127), (3000.0, 45.0, 3000.0)])
def test_single_track_radius(length, steer, radius):
    # R = L / tan(steer) of the equivalent single-track car; published with three decimals of a metre
    contact = np.array([[[0.0, 0.0]], [[0.0, 0.0]], [[-length, 0.0]], [[-length, 0.0]]])
    fit = least_slip(np.array([[steer], [steer], [0.0], [0.0]]), contact, np.array([-length, 0.0]))
    assert np.linalg.norm(fit.centre[0] - [-length, 0.0]) == pytest.approx(radius, abs=6e-4)


def test_parallel_steer_is_zero_percent():
    for definition in ("ideal-inner", "ideal-outer", "single-track"):
        assert textbook(20.0, 20.0, definition=definition).percent[0] == pytest.approx(0.0, abs=1e-12)


def test_straight_ahead_is_left_empty():
    assert np.isnan(textbook(STRAIGHT - 0.05, STRAIGHT - 0.05).percent[0])
    assert np.isfinite(textbook(STRAIGHT + 0.05, STRAIGHT + 0.05).percent[0])
    zero = textbook(0.0, 0.0)
    assert zero.ideal_inner[0] == 0.0
    assert np.isnan(zero.percent[0])


def test_normals():
    met = normals_meet(np.array([[28.0], [24.0]]), np.array([[[0.0, 600.0]], [[0.0, -600.0]]]))[0]
    for angle, y in ((28.0, 600.0), (24.0, -600.0)):
        assert (met - [0.0, y]) @ [np.cos(np.radians(angle)), np.sin(np.radians(angle))] == pytest.approx(0.0, abs=1e-9)
    assert np.isnan(normals_meet(np.array([[5.0], [5.0]]), np.array([[[0.0, 600.0]], [[0.0, -600.0]]]))).all()


@given(st.integers(-350, 350), st.integers(-60, 60), st.integers(-40, 40), st.integers(-40, 40))
def test_least_slip_is_a_minimum(steer, difference, rear_left, rear_right):
    steers = 0.1 * np.array([[steer + difference], [steer - difference], [rear_left], [rear_right]])
    contact = np.array([[[3.0, 610.0]], [[-5.0, -600.0]], [[-1550.0, 590.0]], [[-1550.0, -595.0]]])
    origin = np.array([-1550.0, 0.0])
    fit = least_slip(steers, contact, origin)

    def cost(x):
        v = np.stack([np.cos(x[0]) - x[1] * (contact[:, 0, 1]), np.sin(x[0]) + x[1] * (contact[:, 0, 0] + 1550.0)])
        slip = np.arctan2(v[1], v[0]) - np.radians(steers[:, 0])
        return float(np.sum(np.arctan2(np.sin(slip), np.cos(slip)) ** 2))

    ours = float(np.sum(np.radians(fit.slip) ** 2))
    best = min(
        scipy.optimize.minimize(cost, [0.0, k], method="Nelder-Mead", options={"xatol": 1e-12, "fatol": 1e-18}).fun
        for k in (0.0, 2e-4, -2e-4)
    )
    assert ours <= best + 1e-9


def ackermann_axle():
    """Vertical kingpins through the wheel centres and level links, so that the linkage is planar and steer is exact."""
    points = {
        "upper_pivot_front": [120.0, 250.0, 330.0],
        "upper_pivot_rear": [-120.0, 250.0, 330.0],
        "upper_ball_joint": [0.0, 625.0, 330.0],
        "lower_pivot_front": [120.0, 250.0, 130.0],
        "lower_pivot_rear": [-120.0, 250.0, 130.0],
        "lower_ball_joint": [0.0, 625.0, 130.0],
        "tie_rod_inner": [-142.0, 250.0, 230.0],
        "tie_rod_outer": [-138.1, 566.4, 230.0],
        "wheel_centre": [0.0, 625.0, 230.0],
    }
    return make_axle(points, toe_in=0.0, camber=0.0, stroke=60.0, radius=230.0, vehicle=Vehicle(wheelbase=2800.0))


def test_trapezoid():
    # Trapezoid with one track rod: L 2.8, pivots 1.25 apart, arms 0.150, rod 1.2 behind the axle's line: its ends at half of
    # rod length (see below) inner -> outer 10 -> 9.69783846, 20 -> 18.78086504, 30 -> 27.16721949, 40 -> 34.68105521.
    # Construction that is exact through the public solver: the right corner's tie rod is the trapezoid's rod itself, its inner end
    # carried by the left corner's outer joint. The left wheel is turned by the inner angle; where its arm's end lies is exact; the
    # right corner is then solved with a toe link whose fixed inner joint stands there, reached from the design by a rack
    # displacement along the chord.
    arm, half = 150.0, 625.0
    reach = arm * np.sin(np.arccos(np.clip((half - 600.0) / arm, -1, 1)))  # rod of 1.2: its ends at +-600 when straight
    ends = np.array([[-reach, 600.0], [-reach, -600.0]])
    assert np.linalg.norm(ends[0] - [0.0, half]) == pytest.approx(arm)
    for inner, outer in ((10.0, 9.69783846), (20.0, 18.78086504), (30.0, 27.16721949), (40.0, 34.68105521)):
        d = np.radians(inner)  # a left turn: the left wheel is the inner one
        turned = np.array([[np.cos(d), -np.sin(d)], [np.sin(d), np.cos(d)]]) @ (ends[0] - [0.0, half]) + [0.0, half]
        chord = turned - ends[0]
        right = {
            "upper_pivot_front": [120.0, -250.0, 330.0],
            "upper_pivot_rear": [-120.0, -250.0, 330.0],
            "upper_ball_joint": [0.0, -half, 330.0],
            "lower_pivot_front": [120.0, -250.0, 130.0],
            "lower_pivot_rear": [-120.0, -250.0, 130.0],
            "lower_ball_joint": [0.0, -half, 130.0],
            "tie_rod_inner": [*ends[0], 230.0],
            "tie_rod_outer": [*ends[1], 230.0],
            "wheel_centre": [0.0, -half, 230.0],
        }
        left = {n: np.array(p) * [1.0, -1.0, 1.0] for n, p in right.items()}
        axis = (*(chord / np.linalg.norm(chord)), 0.0)
        axle = make_axle(left, right=right, toe_in=0.0, camber=0.0, rack_axis=axis, radius=230.0)
        maps = tw.sweep(axle, [float(np.linalg.norm(chord))], [0.0], sides=["right"])
        assert maps["steer_angle"][0, 0, 0] == pytest.approx(outer, abs=6e-9)


def test_perfect_ackermann_by_construction():
    # the right corner's outer joint is moved along its arm until, at one rack position, both wheels share the turn centre
    base = ackermann_axle()
    rack = 32.0

    def with_right(shift):
        right = dict(base.right.points)
        right["tie_rod_outer"] = right["tie_rod_outer"] + np.array([0.0, shift, 0.0])
        return replace(base, right=replace(base.right, points=right), symmetric=False)

    shift = scipy.optimize.brentq(
        lambda y: tw.turn(with_right(y), [rack])["ackermann_error"][0], -55.0, 55.0, xtol=1e-13
    )
    turned = tw.turn(with_right(shift), [rack])
    assert abs(turned["mean_steer"][0]) > 8.0
    assert turned["ackermann_error"][0] == pytest.approx(0.0, abs=1e-9)
    assert turned["ackermann_percent"][0] == pytest.approx(
        100.0, abs=1e-7
    )  # the error over a difference of a degree or so
    for name in ("slip_front_left", "slip_front_right", "slip_rear_left", "slip_rear_right"):
        assert turned[name][0] == pytest.approx(0.0, abs=1e-8)  # four consistent wheels
    assert turned["centre_x"][0] == pytest.approx(-2800.0, abs=1e-5)
    assert turned["turn_radius"][0] == pytest.approx(abs(turned["centre_y"][0]), abs=1e-6)
    assert turned["normals_meet_x"][0] == pytest.approx(-2800.0, abs=1e-5)


def test_parallel_steer_axle():
    # the right corner is the left one moved over, not mirrored: both wheels turn alike
    base = ackermann_axle()
    moved = {name: p - [0.0, 1250.0, 0.0] for name, p in base.left.points.items()}
    axle = replace(base, right=replace(base.right, points=moved), symmetric=False)
    turned = tw.turn(axle, np.linspace(-40, 40, 9))
    assert turned["steer_left"] == pytest.approx(turned["steer_right"], abs=1e-10)
    large = np.abs(turned["mean_steer"]) > 1.0
    assert large.sum() == 8
    assert turned["ackermann_percent"][large] == pytest.approx(0.0, abs=1e-8)


def test_rod_behind_and_inboard_turns_the_inner_wheel_more():
    # a steering arm whose joint lies inboard of the kingpin, rack behind the axle (common practice, no source)
    turned = tw.turn(ackermann_axle(), np.linspace(-40, 40, 9))
    large = np.abs(turned["mean_steer"]) > 3.0
    assert np.all(turned.inner_turns_more[large] > 0.0)
    # the same arm put outboard turns the outer wheel more
    axle = ackermann_axle()
    points = dict(axle.left.points)
    points["tie_rod_outer"] = points["tie_rod_outer"] * [1.0, 0.0, 1.0] + [
        0.0,
        2 * 625.0 - points["tie_rod_outer"][1],
        0.0,
    ]
    turned = tw.turn(
        make_axle(points, toe_in=0.0, camber=0.0, vehicle=Vehicle(wheelbase=2800.0)), np.linspace(-30, 30, 7)
    )
    large = np.abs(turned["mean_steer"]) > 3.0
    assert np.all(turned.inner_turns_more[large] < 0.0)


@pytest.mark.parametrize("name", ["marten_front", "linnet_front"])
def test_left_and_right_turns_mirror(name):
    axle = tw.load(HARDPOINTS / f"{name}.toml")
    rack = np.linspace(-25, 25, 11)
    turned = tw.turn(axle, rack)
    for one, two, sign in (
        ("steer_left", "steer_right", -1),
        ("ackermann_error", "ackermann_error", 1),
        ("slip_front_left", "slip_front_right", -1),
        ("slip_rear_left", "slip_rear_right", -1),
        ("centre_y", "centre_y", -1),
        ("centre_x", "centre_x", 1),
        ("turn_radius", "turn_radius", 1),
        ("kerb_circle", "kerb_circle", 1),
        ("wall_circle", "wall_circle", 1),
        ("camber_left", "camber_right", 1),
    ):
        a, b = turned[one], sign * turned[two][::-1]
        off = np.abs(rack) > 1.0  # straight ahead the centre is at infinity
        assert a[off] == pytest.approx(b[off], rel=1e-7, abs=1e-7), one


def test_columns_agree_with_the_sweep():
    axle = tw.load(HARDPOINTS / "ibex_front.toml")
    rack = np.linspace(-60, 60, 7)
    turned = tw.turn(axle, rack, travel=20.0)
    maps = tw.sweep(axle, rack, [20.0])
    for s, side in enumerate(("left", "right")):
        assert turned[f"steer_{side}"] == pytest.approx(maps["steer_angle"][s, :, 0], abs=1e-10)
        assert turned[f"scrub_radius_{side}"] == pytest.approx(maps["scrub_radius"][s, :, 0], abs=1e-9)
    mean_rate = maps["steer_rate"].mean(axis=0)[:, 0]
    assert turned["steering_ratio"] == pytest.approx(360.0 / 52.0 / mean_rate, rel=1e-9)
    assert turned["hand_wheel_angle"] == pytest.approx(360.0 * rack / 52.0)


@pytest.mark.parametrize("sample", ["marten_front", "linnet_front", "ibex_front"])
def test_the_hand_wheel_turns_left_for_a_left_turn(sample):
    axle = tw.load(HARDPOINTS / f"{sample}.toml")
    stroke = axle.rack.stroke
    turned = tw.turn(axle, np.linspace(-stroke, stroke, 9))
    assert np.abs(turned["hand_wheel_angle"]) == pytest.approx(
        360.0 * np.abs(turned.rack_travel) / axle.rack.travel_per_turn
    )
    off = np.abs(turned["mean_steer"]) > 1.0
    assert off.sum() == 8
    assert np.all(np.sign(turned["hand_wheel_angle"][off]) == np.sign(turned["mean_steer"][off]))
    assert np.all(turned["steering_ratio"] > 0.0)
    behind = axle.left.points["tie_rod_outer"][0] < axle.left.points["wheel_centre"][0]
    assert (turned["hand_wheel_angle"][0] > 0.0) == behind == (sample == "linnet_front")


def test_straight_ahead_does_not_hang_on_rounding():
    contact = np.array([[[0.0, 600.0]] * 3, [[0.0, -600.0]] * 3])
    steer = np.array([[-0.1 - 1e-15, -0.1, -0.1 + 1e-15], [0.1, 0.1, 0.1]])
    for front in (True, False):
        found = ackermann_geometry(steer, contact, -1500.0 if front else 1500.0, front=front)
        assert np.ptp(found.error) < 1e-12
        assert np.ptp(found.inner) < 1e-12
        assert found.inner[1] == (-0.1 if front else 0.1)  # as in a turn to the left


def test_other_axle_enters():
    front = tw.load(HARDPOINTS / "marten_front.toml")
    alone = replace(front, vehicle=replace(front.vehicle, other_axle=None))
    both, one = tw.turn(front, [20.0]), tw.turn(alone, [20.0])
    assert both["steer_left"] == pytest.approx(one["steer_left"])
    assert abs(both["slip_rear_left"][0] - one["slip_rear_left"][0]) > 0.05  # the rear's static toe
    assert "Marten 04, rear axle" in " ".join(both.notes)
    assert "stand straight" in " ".join(one.notes)
    rear = tw.load(HARDPOINTS / "marten_rear.toml")
    turned = tw.turn(rear, [0.0])
    assert turned["slip_rear_left"][0] == pytest.approx(turned["slip_rear_left"][0])
    assert turned.status_names.tolist() == ["ok"]


def test_four_wheel_steering(tmp_path):
    text = (HARDPOINTS / "marten_rear.toml").read_text().replace("[setup]", "[rack]\nstroke = 10.0\n\n[setup]")
    (tmp_path / "marten_rear.toml").write_text(text)
    (tmp_path / "front.toml").write_text((HARDPOINTS / "marten_front.toml").read_text())
    axle = tw.load(tmp_path / "front.toml")
    still, moved = tw.turn(axle, [20.0]), tw.turn(axle, [20.0], other_rack=0.2)
    assert abs(moved["turn_radius"][0] - still["turn_radius"][0]) > 100.0


def test_refusals(tmp_path):
    axle = make_axle(PLAIN["double-wishbone"], vehicle=Vehicle())
    with pytest.raises(InputError, match=r"vehicle.wheelbase: is missing"):
        tw.turn(axle, [0.0])
    good = make_axle(PLAIN["double-wishbone"])
    with pytest.raises(InputError, match="roll"):
        tw.turn(good, [0.0], travel=5.0, roll=1.0)
    with pytest.raises(ValueError, match="ideal-inner"):
        tw.turn(good, [0.0], ackermann="percent")
    with pytest.raises(InputError, match="other_axle"):
        tw.turn(good, [0.0], other_rack=0.5)
    missing = replace(good, vehicle=Vehicle(wheelbase=1550.0, other_axle=tmp_path / "none.toml"))
    with pytest.raises(InputError, match=r"none.toml"):
        tw.turn(missing, [0.0])


def test_unreachable_rack_is_not_ok():
    turned = tw.turn(make_axle(PLAIN["double-wishbone"]), [-80.0, 0.0, 20.0])
    assert turned.status_names.tolist() == ["locked", "ok", "ok"]
    assert np.isnan(turned["ackermann_error"][0])
    assert turned.to_dataframe().columns[0] == "rack_travel"
    assert turned.to_xarray()["steer_left"].attrs["sign"] == "to the left +"
