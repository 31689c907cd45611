"""After an import: what is usual and what is odd about the points that were read."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from toewright.model.axle import Corner
from toewright.model.importing import Reading

STEEP = 10.0
"""An arm steeper than this (deg) may not have been taken at the design height."""


HANGING = 5.0
"""Two wishbones that fall outward by more than this (deg) on average are those of a wheel that hangs."""


@dataclass(frozen=True)
class Sanity:
    """One line of the list: what was looked at, what was found, and whether it is as usual."""

    what: str
    found: str
    usual: bool


def sanity_list(readings: Sequence[Reading], loaded_radius: float) -> tuple[Sanity, ...]:
    """Plausibility of imported corners, ``loaded_radius`` in mm; nothing here stops an import."""
    found: list[Sanity] = []
    for reading in readings:
        which = f"{reading.corner.side}: " if len(readings) > 1 else ""
        found += [Sanity(which + row.what, row.found, row.usual) for row in _of_corner(reading, loaded_radius)]
    if len(readings) == 2:
        found.append(_centre_plane(readings))
    return tuple(found)


def _of_corner(reading: Reading, loaded_radius: float) -> list[Sanity]:
    corner, points = reading.corner, reading.corner.points
    centre, lower = points["wheel_centre"], points["lower_ball_joint"]
    height, track = float(centre[2]), 2.0 * abs(float(centre[1]))
    extent = np.ptp(np.array(list(points.values())), axis=0)
    handed = "left-handed: right only if the table's own axes are" if reading.axes.mirrors else "right-handed"
    rows = [
        Sanity(
            "wheel centre near its radius above the road",
            f"{height:.1f} mm, radius {loaded_radius:.1f} mm",
            abs(height - loaded_radius) <= 0.1 * loaded_radius,
        ),
        Sanity(
            f"{corner.side} side at y {'>' if corner.sign > 0 else '<'} 0",
            f"wheel centre y = {centre[1]:+.1f} mm",
            bool(centre[1] * corner.sign > 0),
        ),
        Sanity("track of a car", f"{track:.0f} mm, if y = 0 is the centre plane", 700.0 <= track <= 2600.0),
        Sanity("size of a corner", " x ".join(f"{v:.0f}" for v in extent) + " mm", 250.0 <= max(extent) <= 1500.0),
        Sanity("axes of the table", f"{reading.axes.text}, {handed}", not reading.axes.mirrors),
        *_order(corner),
    ]
    slopes = {arm: _slope(corner, arm) for arm in ("upper", "lower") if f"{arm}_ball_joint" in points}
    hanging = len(slopes) == 2 and sum(slopes.values()) < -2.0 * HANGING
    rows += [
        Sanity(
            f"{arm} arm near level, not at full droop",
            f"{_tilt(angle)} outward",
            abs(angle) <= STEEP and not (hanging and angle < 0.0),
        )
        for arm, angle in slopes.items()
    ]
    outboard = float((centre[1] - lower[1]) * corner.sign)
    rows.append(Sanity("wheel centre outboard of lower ball joint", f"{outboard:+.1f} mm", outboard > 0.0))
    return rows


def _order(corner: Corner) -> list[Sanity]:
    """Front ahead of rear, upper above lower, pivots inboard of ball joints, tie rod near the rack's height."""
    points = corner.points
    rows = []
    for arm in ("upper", "lower"):
        if f"{arm}_ball_joint" in points:
            front, rear, ball = (points[f"{arm}_{part}"] for part in ("pivot_front", "pivot_rear", "ball_joint"))
            ahead = float(front[0] - rear[0])
            rows.append(Sanity(f"{arm} front pivot ahead of the rear one", f"{ahead:+.1f} mm", ahead > 0.0))
            inside = float(min(abs(ball[1]) - abs(front[1]), abs(ball[1]) - abs(rear[1])))
            rows.append(Sanity(f"{arm} pivots inboard of the ball joint", f"by {inside:.1f} mm", inside > 0.0))
    top = "upper_ball_joint" if corner.kind == "double-wishbone" else "strut_top_mount"
    rise = float(points[top][2] - points["lower_ball_joint"][2])
    rows.append(Sanity(f"{top.replace('_', ' ')} above lower ball joint", f"{rise:+.1f} mm", rise > 0.0))
    rod = points["tie_rod_outer"] - points["tie_rod_inner"]
    reach = float(rod[1] * corner.sign)
    rows.append(Sanity("tie rod's inner joint inboard of its outer one", f"by {reach:.1f} mm", reach > 0.0))
    slope = float(np.degrees(np.arctan2(rod[2], np.hypot(rod[0], rod[1]))))
    rows.append(
        Sanity("tie rod near the rack's height", f"outer end {rod[2]:+.1f} mm, {_tilt(slope)}", abs(slope) <= 12.0)
    )
    return rows


def _slope(corner: Corner, arm: str) -> float:
    points = corner.points
    run = points[f"{arm}_ball_joint"] - 0.5 * (points[f"{arm}_pivot_front"] + points[f"{arm}_pivot_rear"])
    return float(np.degrees(np.arctan2(run[2], abs(run[1]))))


def _tilt(angle: float) -> str:
    return f"{'rising' if angle >= 0.0 else 'falling'} {abs(angle):.1f} deg"


def _centre_plane(readings: Sequence[Reading]) -> Sanity:
    one, other = (reading.corner.points["wheel_centre"] for reading in readings)
    middle = 0.5 * float(one[1] + other[1])
    return Sanity("centre plane midway between the wheels", f"midway is y = {middle:+.1f} mm", abs(middle) <= 5.0)
