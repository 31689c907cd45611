"""What is possible in an axle but odd: each one sentence with what to look at."""

from __future__ import annotations

import numpy as np

from toewright.model.axle import Axle, Corner

ROAD_SHARE = 0.2
"""A wheel centre farther than this share of the loaded radius from where the radius puts it over z = 0 is odd."""

STEEP_ARM = 20.0
"""A lower arm that falls outward by more than this (deg) looks like full droop."""


def find_remarks(axle: Axle) -> tuple[str, ...]:
    """What is possible but odd in an axle, each one sentence; none for a usual one."""
    found: list[str] = []
    corners = (axle.left,) if axle.symmetric else (axle.left, axle.right)
    for corner in corners:
        found += _height(corner, axle.wheel.loaded_radius)
        found += _places(corner)
        found += _arms(corner)
    if not axle.symmetric:
        found += _sides(axle)
    return tuple(found + _wheel(axle) + _setup(axle) + _rack(axle) + _vehicle(axle))


def _height(corner: Corner, radius: float) -> list[str]:
    height = float(corner.points["wheel_centre"][2])
    if abs(height - radius) <= ROAD_SHARE * radius:
        return []
    if 0.0 < height < radius:
        fault = "nearer the ground than the tyre allows"
    else:
        fault = "below the ground" if height <= 0.0 else "too high for the tyre to reach the ground"
    return [
        f"{corner.side}.points.wheel_centre is {height:.1f} mm above z = 0, {fault} (wheel.loaded_radius {radius:.1f} mm) if z = 0 is the "
        "road: correct one of them; angles and paths do not depend on where z = 0 is"
    ]


def _places(corner: Corner) -> list[str]:
    points, side, found = corner.points, corner.side, []
    if points["tie_rod_inner"][1] * corner.sign < 0.0:
        found.append(
            f"{side}.points.tie_rod_inner lies beyond the car's centre plane: right only where the rods start at the rack's middle"
        )
    if abs(points["wheel_centre"][1]) < abs(points["lower_ball_joint"][1]):
        found.append(f"{side}.points.wheel_centre is inboard of lower_ball_joint: check their y")
    if abs(points["tie_rod_outer"][1]) < abs(points["tie_rod_inner"][1]):
        found.append(f"{side}.points.tie_rod_outer is inboard of tie_rod_inner: check that they are not exchanged")
    if corner.kind == "strut":
        axis = points["strut_top_mount"] - points["strut_axis_point"]
        lean = float(np.degrees(np.arctan2(np.hypot(axis[0], axis[1]), abs(axis[2]))))
        if lean > 35.0:
            found.append(
                f"{side}.points.strut_axis_point: the strut leans by {lean:.0f} deg: check that the point is on the damper's axis"
            )
    return found


def _arms(corner: Corner) -> list[str]:
    points, side, found = corner.points, corner.side, []
    for arm in ("upper", "lower"):
        if f"{arm}_ball_joint" not in points:
            continue
        front, rear, ball = (points[f"{arm}_{part}"] for part in ("pivot_front", "pivot_rear", "ball_joint"))
        if front[0] < rear[0]:
            found.append(
                f"{side}.points.{arm}_pivot_front is behind {arm}_pivot_rear: check that they are not exchanged, and that x is forward"
            )
        if abs(ball[1]) < max(abs(front[1]), abs(rear[1])):
            found.append(f"{side}.points.{arm}_ball_joint is inboard of an {arm} pivot: check their y")
        run = ball - 0.5 * (front + rear)
        slope = float(np.degrees(np.arctan2(run[2], abs(run[1]))))
        if arm == "lower" and abs(slope) > STEEP_ARM:
            posture = "falls" if slope < 0.0 else "rises"
            state = "at full droop" if slope < 0.0 else "at full bump"
            found.append(
                f"{side}.points.lower_ball_joint: the lower arm {posture} {abs(slope):.0f} deg outward, as {state}: give the points of the "
                "design position"
            )
    return found


def _sides(axle: Axle) -> list[str]:
    found = []
    left, right = axle.left.points["wheel_centre"], axle.right.points["wheel_centre"]
    gap = float(np.max(np.abs(left - right * np.array([1.0, -1.0, 1.0]))))
    if gap > 50.0:
        found.append(
            f"right.points.wheel_centre differs by up to {gap:.0f} mm from the left one's mirror image: check both"
        )
    return found


def _wheel(axle: Axle) -> list[str]:
    wheel, found = axle.wheel, []
    rim, radius = wheel.rim_diameter, wheel.loaded_radius
    if rim is not None and rim >= 2.0 * radius:
        found.append(
            f"wheel.rim_diameter = {rim:.0f} mm is larger than the tyre ({2 * radius:.0f} mm across): correct one"
        )
    if rim is not None and rim < 0.7 * radius:
        found.append(f"wheel.rim_diameter = {rim:.0f} mm is small for the tyre: check that it is no radius")
    if wheel.rim_width is not None and wheel.tyre_width is not None and wheel.rim_width > 1.3 * wheel.tyre_width:
        found.append(f"wheel.rim_width = {wheel.rim_width:.0f} mm is wider than the tyre: check both widths")
    return found


def _setup(axle: Axle) -> list[str]:
    found = []
    if abs(axle.setup.toe_in) > 3.0:
        word = "toe-in" if axle.setup.toe_in > 0.0 else "toe-out"
        size = abs(axle.setup.toe_in)
        found.append(
            f"setup.toe_in = {axle.setup.toe_in:+.3g} means {size:.3g} deg {word} of each wheel: check that deg are meant, not mm"
        )
    if abs(axle.setup.camber) > 8.0:
        found.append(f"setup.camber = {axle.setup.camber:+.3g} deg (top outboard +) is unusually much: check it")
    return found


def _rack(axle: Axle) -> list[str]:
    rack, found = axle.rack, list[str]()
    if rack is None:
        return found
    if abs(float(rack.axis[1])) < 0.9:
        found.append("rack.axis is more than 25 deg off the car's y axis: check it")
    turns = 2.0 * rack.stroke / rack.travel_per_turn if rack.travel_per_turn is not None else 1.0
    if not 0.2 <= turns <= 8.0:
        found.append(
            f"rack.travel_per_turn and rack.stroke (each way) make {turns:.2g} turns of the hand wheel from lock to lock: check both"
        )
    return found


def _vehicle(axle: Axle) -> list[str]:
    missing = other_axle_missing(axle)
    return [] if missing is None else [missing]


def other_axle_missing(axle: Axle) -> str | None:
    """What is wrong where ``vehicle.other_axle`` names a file that is not there; None where all is well."""
    other = axle.vehicle.other_axle
    if other is None or other.is_file():
        return None
    return f"vehicle.other_axle: there is no file {other}: correct the name (it counts from this file's folder)"
