"""Published and exact values, run through the public solver. Each source stands beside its check."""

from __future__ import annotations

import numpy as np
import pytest
import scipy.optimize
from corners import PLAIN, make_axle

import toewright as tw

# Planar four-bar, 19 positions: D. Park, MathGroup mailing list, message mg64453, 17 Feb 2006. Ground pivots (0, 0) and (5, 7),
# crank 13 at angle a about the first, coupler 7, follower 8 at angle b about the second; both roots b, sorted, 6 digits.
FOUR_BAR = {
    0: (0.0, 277.628), 5: (8.14157, 279.009), 10: (16.3816, 281.034), 15: (24.8218, 283.798), 20: (33.5778, 287.445),
    25: (42.7897, 292.171), 30: (52.6316, 298.233), 35: (63.3125, 305.928), 40: (75.0545, 315.54), 45: (88.0132, 327.201),
    50: (102.111, 340.683), 55: (116.839, 355.264), 60: (9.92425, 131.266), 65: (23.8027, 144.4), 70: (36.4951, 155.625),
    75: (47.9915, 164.805), 80: (58.473, 172.123), 85: (68.1628, 177.873), 90: (77.2632, 182.348),
}  # fmt: skip
MM = 20.0  # one unit of the table, mm


def four_bar_corner(a, b):
    """Front view of a corner with all pivot axes along x: lower arm = crank, upright = coupler, upper arm = follower."""
    lower = MM * 13.0 * np.array([np.cos(np.radians(a)), np.sin(np.radians(a))])
    upper = MM * (np.array([5.0, 7.0]) + 8.0 * np.array([np.cos(np.radians(b)), np.sin(np.radians(b))]))
    points = {
        "upper_pivot_front": [100.0, 5.0 * MM, 7.0 * MM],
        "upper_pivot_rear": [-100.0, 5.0 * MM, 7.0 * MM],
        "upper_ball_joint": [0.0, *upper],
        "lower_pivot_front": [100.0, 0.0, 0.0],
        "lower_pivot_rear": [-100.0, 0.0, 0.0],
        "lower_ball_joint": [0.0, *lower],
        "tie_rod_inner": [110.0, 0.0, 0.0],  # a copy of the lower arm, so that toe stays zero
        "tie_rod_outer": [110.0, *lower],
        "wheel_centre": [0.0, *lower],
    }
    return make_axle(points, toe_in=0.0, camber=0.0)


def exact_follower(a, guess):
    """The follower's angle to full precision near a printed one."""
    pin = 13.0 * np.array([np.cos(np.radians(a)), np.sin(np.radians(a))])

    def gap(b):
        end = np.array([5.0, 7.0]) + 8.0 * np.array([np.cos(np.radians(b)), np.sin(np.radians(b))])
        return np.hypot(*(end - pin)) - 7.0

    return scipy.optimize.brentq(gap, guess - 0.05, guess + 0.05, xtol=1e-14)


@pytest.mark.parametrize(("column", "crossing"), [(0, 1), (1, 0)], ids=["branch of b = 0", "branch of b = 277.6"])
def test_four_bar_keeps_its_branch(column, crossing):
    # a = 90 is the fold of the drive (the crank pin is at its highest) and can't be a pose driven by height
    angles = [a for a in FOUR_BAR if a < 90]
    axle = four_bar_corner(45.0, exact_follower(45, FOUR_BAR[45][column]))
    heights = [13.0 * MM * (np.sin(np.radians(a)) - np.sin(np.radians(45.0))) for a in angles]
    maps = tw.sweep(axle, [0.0], heights, sides=["left"])
    assert np.all(maps.status == 0)
    upper = maps.joints[0]["upper_ball_joint"][0] / MM - [0.0, 5.0, 7.0]
    found = np.degrees(np.arctan2(upper[:, 2], upper[:, 1])) % 360.0
    for a, b in zip(angles, found, strict=True):
        printed = FOUR_BAR[a][column if a < 60 else crossing]  # the sorted columns change places at a = 60
        digits = 5 - int(np.floor(np.log10(max(printed, 1.0))))
        difference = (b - printed + 180.0) % 360.0 - 180.0
        assert abs(difference) <= 0.51 * 10.0**-digits, a  # half of the last printed digit
    assert np.max(np.abs(maps["spin_axis"][..., 0])) < 1e-11  # no toe


# Rotation about an inclined steering axis, exact: s = s0 cos d + (e x s0) sin d + e (e.s0)(1 - cos d), left wheel.
INCLINED = [
    (12.0, 5.0, 20.0, 19.4234352, 2.3691597),
    (12.0, 5.0, -20.0, -19.5385693, -0.9733282),
    (12.0, 5.0, 30.0, 29.0850842, 3.9956476),
    (12.0, 5.0, -30.0, -29.3220886, -0.8929614),
    (10.0, 0.0, 30.0, None, 1.3128188),
    (10.0, 0.0, -30.0, None, 1.3128188),
    (0.0, 6.0, 20.0, 19.8990588, 2.0488088),
    (0.0, 6.0, -20.0, -19.8990588, -2.0488088),
]


def inclined_corner(kpi, caster):
    """The wheel centre on the steering axis: steering at a held wheel height then is a rotation about the ball-joint line."""
    axis = np.array([-np.tan(np.radians(caster)), -np.tan(np.radians(kpi)), 1.0])
    centre = np.array([0.0, 600.0, 230.0])
    points = {
        **PLAIN["double-wishbone"],
        "lower_ball_joint": centre - 110.0 * axis,
        "upper_ball_joint": centre + 90.0 * axis,
        "tie_rod_outer": centre + [90.0, 0.0, -60.0],
        "tie_rod_inner": [80.0, 250.0, 165.0],
        "wheel_centre": centre,
    }
    return make_axle(points, toe_in=0.0, camber=0.0)


def rotation_angle(poses):
    """Rotation angle of the upright, deg, + about the upward axis, from its Gibbs vector tan(angle/2) axis."""
    g = poses[..., 2:5]
    return np.degrees(2.0 * np.arctan(np.linalg.norm(g, axis=-1) * np.sign(g[..., 2])))


@pytest.mark.parametrize(("kpi", "caster", "turn", "steer", "camber"), INCLINED)
def test_camber_by_steer(kpi, caster, turn, steer, camber):
    axle = inclined_corner(kpi, caster)

    def at(rack):
        return tw.sweep(axle, [rack], [0.0], sides=["left"])

    rack = scipy.optimize.brentq(lambda r: rotation_angle(at(r).poses)[0, 0, 0] - turn, 0.0, 1.9 * turn, xtol=1e-13)
    maps = at(rack)
    assert rotation_angle(maps.poses)[0, 0, 0] == pytest.approx(turn, abs=1e-10)
    assert maps["camber"][0, 0, 0] == pytest.approx(camber, abs=6e-8)  # seven printed decimals
    if steer is not None:
        assert maps["steer_angle"][0, 0, 0] == pytest.approx(steer, abs=6e-8)
    assert maps["caster"][0, 0, 0] == pytest.approx(caster, abs=1e-9)
    assert maps["kingpin_inclination"][0, 0, 0] == pytest.approx(kpi, abs=1e-9)


def test_workshop_caster_gauge():
    # caster ~ (camber(-20) - camber(+20)) / (2 sin 20), factor 1.4619022: the "times 1.5" rule of workshop gauges (common practice).
    # With camber as + top outboard a left wheel's sign turns round.
    axle = inclined_corner(0.0, 6.0)
    racks = [
        scipy.optimize.brentq(
            lambda r, d=d: rotation_angle(tw.sweep(axle, [r], [0.0], sides=["left"]).poses)[0, 0, 0] - d,
            0.0,
            1.9 * d,
        )
        for d in (-20.0, 20.0)
    ]
    low, high = (tw.sweep(axle, [r], [0.0], sides=["left"])["camber"][0, 0, 0] for r in racks)
    assert 1.0 / (2.0 * np.sin(np.radians(20.0))) == pytest.approx(1.4619022, abs=5e-8)
    assert (high - low) * 1.4619022 == pytest.approx(6.0, abs=0.02)  # the rule's own error at 6 deg


def test_true_tilt():
    # tan(true tilt)^2 = tan(kpi)^2 + tan(caster)^2, exact
    maps = tw.design_pose(inclined_corner(12.0, 5.0))
    k = maps["steering_axis"][0, 0, 0]
    tilt = np.hypot(k[0], k[1]) / k[2]
    assert tilt**2 == pytest.approx(np.tan(np.radians(12.0)) ** 2 + np.tan(np.radians(5.0)) ** 2, rel=1e-13)


def planar_corner(upper_in, upper_out, lower_in, lower_out, centre, radius=300.0):
    """Front view in m; pivot axes along x, the tie rod a copy of the lower arm."""
    u0, u1, l0, l1, c = (1000.0 * np.array(p) for p in (upper_in, upper_out, lower_in, lower_out, centre))
    points = {
        "upper_pivot_front": [120.0, *u0],
        "upper_pivot_rear": [-120.0, *u0],
        "upper_ball_joint": [0.0, *u1],
        "lower_pivot_front": [120.0, *l0],
        "lower_pivot_rear": [-120.0, *l0],
        "lower_ball_joint": [0.0, *l1],
        "tie_rod_inner": [100.0, *l0],
        "tie_rod_outer": [100.0, *l1],
        "wheel_centre": [0.0, *c],
    }
    return make_axle(points, toe_in=0.0, camber=0.0, radius=radius)


def test_planar_camber_rate():
    # Exact construction: instant centre (-18803/24500, 3117/12250) m; camber rate 1/(0.75 - y_ic), a carrier point at y = 0.75 m
    axle = planar_corner((0.35, 0.42), (0.62, 0.46), (0.25, 0.18), (0.66, 0.15), (0.75, 0.30))
    maps = tw.design_pose(axle, sides=["left"])
    rate = np.degrees(1.0 / (750.0 + 1000.0 * 18803.0 / 24500.0))
    assert rate == pytest.approx(0.0377574533, abs=6e-11)  # as printed
    assert abs(maps["camber_gain"][0, 0, 0]) == pytest.approx(rate, abs=1e-12)
    assert maps["camber_gain"][0, 0, 0] < 0.0  # instant centre inboard: the top goes inboard in bump


@pytest.mark.parametrize(("travel", "shift"), [(20.0, 0.5718958), (40.0, 2.2932270), (60.0, 5.1812070)])
def test_equal_parallel_arms(travel, shift):
    # Exact: the upright translates on an arc of the arm's length 350 mm
    axle = planar_corner((0.30, 0.40), (0.65, 0.40), (0.30, 0.20), (0.65, 0.20), (0.75, 0.30))
    maps = tw.sweep(axle, [0.0], [-travel, 0.0, travel], sides=["left"])
    assert maps["contact_y"][0, 0] - 750.0 == pytest.approx(np.array([-shift, 0.0, -shift]), abs=6e-8)
    for name in ("toe_in", "camber", "caster", "kingpin_inclination"):
        assert np.max(np.abs(maps[name] - maps[name][0, 0, 1])) < 1e-10, name


def test_planar_strut():
    # Exact: arm (0.30, 0.20)-(0.65, 0.18), top (0.55, 0.85) m; arm turned by +8 deg: ball joint (0.64937729, 0.22890522),
    # carrier turned by +0.601523900 deg about x, which is the left wheel's top inboard.
    lower_in, ball, top = (1000.0 * np.array(p) for p in ((0.30, 0.20), (0.65, 0.18), (0.55, 0.85)))
    points = {
        "lower_pivot_front": [120.0, *lower_in],
        "lower_pivot_rear": [-120.0, *lower_in],
        "lower_ball_joint": [0.0, *ball],
        "strut_top_mount": [0.0, *top],
        "strut_axis_point": [0.0, *(0.5 * (ball + top))],
        "tie_rod_inner": [100.0, *lower_in],
        "tie_rod_outer": [100.0, *ball],
        "wheel_centre": [0.0, *ball],
    }
    axle = make_axle(points, "strut", toe_in=0.0, camber=0.0)
    arm = ball - lower_in
    angle = np.arctan2(arm[1], arm[0]) + np.radians(8.0)
    height = lower_in[1] + np.hypot(*arm) * np.sin(angle)
    maps = tw.sweep(axle, [0.0], [height - ball[1]], sides=["left"])
    found = maps.joints[0]["lower_ball_joint"][0, 0]
    assert found[1:] == pytest.approx([649.37729, 228.90522], abs=6e-6)
    assert maps["camber"][0, 0, 0] == pytest.approx(-0.601523900, abs=6e-10)
    assert maps.link_angles[0]["lower_arm_angle"][0, 0] == pytest.approx(8.0, abs=1e-9)
