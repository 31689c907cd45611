"""Is this a corner that can be built? What is impossible is refused, what is odd becomes a remark."""

from __future__ import annotations

from collections.abc import Callable
from itertools import combinations

import numpy as np

from toewright.core.types import FloatArray
from toewright.model.axle import Axle, Corner
from toewright.model.errors import InputError

COINCIDENT = 0.01
"""Two joints nearer than this (mm) are one point."""

LEAST_LEVER = 1.0
"""A joint nearer than this (mm) to the axis it should turn about gives no lever."""

SMALLEST_SPREAD, LARGEST_SPREAD = 60.0, 4000.0
"""Extent of a corner's points (mm): a model car's and a heavy lorry's corner lie inside."""

SMALLEST_RADIUS, LARGEST_RADIUS = 40.0, 1500.0
"""Loaded radius (mm), likewise."""

Refuse = Callable[[str, str], InputError]


def _axis_distance(point: FloatArray, first: FloatArray, second: FloatArray) -> float:
    direction = (second - first) / np.linalg.norm(second - first)
    offset = point - first
    return float(np.linalg.norm(offset - direction * (offset @ direction)))


def check_corner(corner: Corner, file: str, key: str) -> None:
    """Refuse a corner that the solver could not mean anything with.

    Raises:
        InputError: coincident points, a pivot axis without length, a joint without a lever, the wrong side, a steering axis that
            lies flat or upside down.
    """
    points = corner.points
    for first, second in combinations(points, 2):
        distance = float(np.linalg.norm(points[first] - points[second]))
        if distance < COINCIDENT:
            raise InputError(
                f"{file}: {key}.points: {first} and {second} coincide ({distance:.3g} mm apart); move one of them"
            )
    for name, point in points.items():
        if name != "tie_rod_inner" and point[1] * corner.sign < 0.0:
            raise InputError(
                f"{file}: {key}.points.{name}: y = {point[1]:+.6g} mm (ISO 8855, + to the left) is on the other side of the car "
                f"than a {corner.side} corner; change its sign, or put the point under the other side"
            )
    for arm in ("upper", "lower"):
        if f"{arm}_ball_joint" not in points:
            continue
        front, rear, ball = (points[f"{arm}_{part}"] for part in ("pivot_front", "pivot_rear", "ball_joint"))
        if _axis_distance(ball, front, rear) < LEAST_LEVER:
            raise InputError(
                f"{file}: {key}.points.{arm}_ball_joint lies on the axis of its own pivots, so the {arm} arm has no length; "
                f"check it against {arm}_pivot_front and {arm}_pivot_rear"
            )
    lower = points["lower_ball_joint"]
    top_name = "upper_ball_joint" if corner.kind == "double-wishbone" else "strut_top_mount"
    top = points[top_name]
    rise = float(top[2] - lower[2])
    if rise < 0.2 * float(np.linalg.norm(top - lower)):
        raise InputError(
            f"{file}: {key}.points.{top_name}: is {rise:+.6g} mm above lower_ball_joint, so the steering axis does not stand up; "
            f"check the z of both (up is +) and that they are not exchanged"
        )
    if _axis_distance(points["tie_rod_outer"], lower, top) < LEAST_LEVER:
        raise InputError(
            f"{file}: {key}.points.tie_rod_outer lies on the steering axis, so the tie rod can't steer; move it off the line "
            f"lower_ball_joint - {top_name}"
        )


def check_size(axle: Axle, file: str, unit: str) -> None:
    """Refuse numbers of the wrong order of magnitude.

    Raises:
        InputError: where the points or the radius look like another unit.
    """
    for corner in (axle.left, axle.right):
        stack = np.array(list(corner.points.values()))
        spread = float(np.max(np.ptp(stack, axis=0)))
        if not SMALLEST_SPREAD <= spread <= LARGEST_SPREAD:
            raise InputError(
                f"{file}: length_unit = {unit!r}: the points of the {corner.side} corner span {spread:.4g} mm, which no car has; "
                f"{_unit_guess(spread, unit)}"
            )
    radius = axle.wheel.loaded_radius
    if not SMALLEST_RADIUS <= radius <= LARGEST_RADIUS:
        raise InputError(f"{file}: wheel.loaded_radius: {radius:.4g} mm is no wheel's; {_unit_guess(radius, unit)}")


def _unit_guess(size: float, unit: str) -> str:
    raw = size / {"mm": 1.0, "m": 1000.0, "in": 25.4}[unit]
    for name, factor in (("mm", 1.0), ("m", 1000.0), ("in", 25.4)):
        if name != unit and 100.0 <= raw * factor <= 2000.0:
            return f'these look like {name}: set length_unit = "{name}"'
    return "check the numbers and length_unit"


def find_remarks(axle: Axle) -> tuple[str, ...]:
    """What is possible but odd, each one sentence with a remedy."""
    remarks: list[str] = []
    corners = (axle.left,) if axle.symmetric else (axle.left, axle.right)
    radius = axle.wheel.loaded_radius
    for corner in corners:
        points, side = corner.points, corner.side
        height = float(points["wheel_centre"][2])
        if abs(height - radius) > 0.2 * radius:
            remarks.append(
                f"{side}: wheel_centre is {height:.1f} mm above z = 0 but loaded_radius is {radius:.1f} mm: if z = 0 is the road, "
                "one of them is wrong (angles and paths do not depend on it)"
            )
        if corner.points["tie_rod_inner"][1] * corner.sign < 0.0:
            remarks.append(
                f"{side}: tie_rod_inner lies beyond the car's centre plane; right only for a rack with centre joints"
            )
        for arm in ("upper", "lower"):
            if f"{arm}_ball_joint" not in points:
                continue
            front, rear = points[f"{arm}_pivot_front"], points[f"{arm}_pivot_rear"]
            ball = points[f"{arm}_ball_joint"]
            if front[0] < rear[0]:
                remarks.append(
                    f"{side}: {arm}_pivot_front is behind {arm}_pivot_rear: check that they are not exchanged"
                )
            middle = 0.5 * (front + rear)
            if abs(ball[1]) < max(abs(front[1]), abs(rear[1])):
                remarks.append(f"{side}: {arm}_ball_joint is inboard of the {arm} pivots: check their y")
            slope = float(np.degrees(np.arctan2(ball[2] - middle[2], abs(ball[1] - middle[1]))))
            if arm == "lower" and slope < -20.0:
                remarks.append(
                    f"{side}: the lower arm falls {-slope:.0f} deg outward, as at full droop: take the points at the design height"
                )
        if abs(points["wheel_centre"][1]) < abs(points["lower_ball_joint"][1]):
            remarks.append(f"{side}: wheel_centre is inboard of lower_ball_joint: check their y")
    if abs(axle.setup.toe_in) > 3.0:
        remarks.append(
            f"setup.toe_in = {axle.setup.toe_in:+.3g} deg each wheel is unusually large: degrees, not mm, are meant"
        )
    if axle.rack is not None and abs(float(axle.rack.axis[1])) < 0.9:
        remarks.append("rack.axis is more than 25 deg from the car's y axis: check it")
    if axle.wheel.rim_diameter is not None and axle.wheel.rim_diameter > 2.0 * radius:
        remarks.append(
            f"wheel.rim_diameter {axle.wheel.rim_diameter:.0f} mm is larger than the tyre ({2 * radius:.0f} mm across): a diameter is meant"
        )
    return tuple(remarks)
