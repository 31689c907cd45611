"""Is this a corner that can be built? What can't be is refused here; what is only odd is a remark (``model.remarks``)."""

from __future__ import annotations

from dataclasses import dataclass
from itertools import combinations

import numpy as np

from toewright.core.types import FloatArray
from toewright.model.axle import Axle, Corner
from toewright.model.errors import InputError
from toewright.model.frames import AXIS_SIGNS, MM_PER, from_iso

COINCIDENT = 0.01
"""Two joints nearer than this (mm) are one point."""

LEAST_LEVER = 1.0
"""A joint nearer than this (mm) to the axis it should turn about gives no lever; a rod that passes it so near has none either."""

LEAST_RISE = 0.2
"""A steering axis that rises by less than this share of its length lies rather than stands."""

SMALLEST_SPREAD, LARGEST_SPREAD = 60.0, 4000.0
"""Extent of a corner's points (mm): a model car's and a heavy lorry's corner lie inside."""

LENGTHS = {
    "wheel.loaded_radius": (20.0, 1500.0),
    "wheel.tyre_width": (5.0, 1500.0),
    "wheel.rim_diameter": (20.0, 2000.0),
    "wheel.rim_width": (5.0, 1500.0),
    "vehicle.wheelbase": (100.0, 20000.0),
    "vehicle.cg_height": (5.0, 5000.0),
    "vehicle.front_overhang": (5.0, 10000.0),
    "vehicle.body_width": (50.0, 5000.0),
    "rack.stroke": (0.5, 1000.0),
    "rack.travel_per_turn": (0.5, 5000.0),
}
"""Smallest and largest (mm) that any car has, from a model car to a heavy lorry."""


@dataclass(frozen=True)
class FileFrame:
    """A file's name, axes and length unit: messages speak of its own numbers."""

    file: str
    axes: str
    unit: str

    def shown(self, point: FloatArray) -> str:
        """A point (3,) mm as it stands in the file."""
        return "[" + ", ".join(f"{v + 0.0:.6g}" for v in from_iso(point, self.axes, self.unit)) + "]"

    def left_is(self) -> str:
        """Sign of y on the left."""
        return "y > 0" if AXIS_SIGNS[self.axes][1] > 0 else "y < 0"

    def right_is(self) -> str:
        """Sign of y on the right."""
        return "y < 0" if AXIS_SIGNS[self.axes][1] > 0 else "y > 0"


def distance_to_axis(point: FloatArray, first: FloatArray, second: FloatArray) -> float:
    """Distance (mm) of a point (3,) from the line through two others."""
    direction = (second - first) / np.linalg.norm(second - first)
    return float(np.linalg.norm(np.cross(direction, point - first)))


def check_corner(corner: Corner, frame: FileFrame) -> None:
    """Refuse a corner that the solver could not mean anything with.

    Raises:
        InputError: coincident points (so links and axes without length), points on the wrong side, a joint without a lever about
            the axis it should turn about, a steering axis that does not stand up.
    """
    _check_distances(corner, frame)
    _check_side(corner, frame)
    _check_arms(corner, frame)
    _check_steering(corner, frame)


def _key(corner: Corner, name: str) -> str:
    return f"{corner.side}.points.{name}"


def _check_distances(corner: Corner, frame: FileFrame) -> None:
    points = corner.points
    for first, second in combinations(points, 2):
        distance = float(np.linalg.norm(points[first] - points[second]))
        if distance < COINCIDENT:
            raise InputError(
                f"{frame.file}: {_key(corner, first)} = {frame.shown(points[first])} and {second} coincide ({distance:.2g} mm apart), "
                f"{_without(first, second)}; correct one of them"
            )


def _without(first: str, second: str) -> str:
    """What has no length when two points coincide."""
    pair = {first, second}
    if pair == {"tie_rod_inner", "tie_rod_outer"}:
        return "so the tie rod has no length"
    if pair == {"strut_top_mount", "strut_axis_point"}:
        return "so the strut has no direction"
    if all("pivot" in name for name in pair) and first.split("_")[0] == second.split("_")[0]:
        return f"so the {first.split('_')[0]} arm has no pivot axis"
    return "but they are two joints"


def _check_side(corner: Corner, frame: FileFrame) -> None:
    for name, point in corner.points.items():
        wrong = point[1] * corner.sign < (LEAST_LEVER if name == "wheel_centre" else 0.0)
        if name != "tie_rod_inner" and wrong:
            is_there = frame.left_is() if corner.side == "left" else frame.right_is()
            raise InputError(
                f"{frame.file}: {_key(corner, name)} = {frame.shown(point)}: is not on the {corner.side} side, where {is_there} "
                f"({frame.axes}); change the sign of y, or put the point under the other side"
            )


def _check_arms(corner: Corner, frame: FileFrame) -> None:
    points = corner.points
    for arm in ("upper", "lower"):
        if f"{arm}_ball_joint" not in points:
            continue
        front, rear, ball = (points[f"{arm}_{part}"] for part in ("pivot_front", "pivot_rear", "ball_joint"))
        if distance_to_axis(ball, front, rear) < LEAST_LEVER:
            raise InputError(
                f"{frame.file}: {_key(corner, f'{arm}_ball_joint')} = {frame.shown(ball)}: lies on the axis of {arm}_pivot_front and "
                f"{arm}_pivot_rear, so the {arm} arm has no length; correct one of the three"
            )


def _check_steering(corner: Corner, frame: FileFrame) -> None:
    points = corner.points
    lower = points["lower_ball_joint"]
    top_name = "upper_ball_joint" if corner.kind == "double-wishbone" else "strut_top_mount"
    top = points[top_name]
    rise = float(top[2] - lower[2])
    if rise < LEAST_RISE * float(np.linalg.norm(top - lower)):
        where = f"only {rise:.4g} mm above" if rise >= 0.0 else f"{-rise:.4g} mm below"
        raise InputError(
            f"{frame.file}: {_key(corner, top_name)} = {frame.shown(top)}: is {where} lower_ball_joint, so the steering axis does not "
            "stand up; correct the z of one, or exchange them"
        )
    outer, inner = points["tie_rod_outer"], points["tie_rod_inner"]
    if distance_to_axis(outer, lower, top) < LEAST_LEVER:
        raise InputError(
            f"{frame.file}: {_key(corner, 'tie_rod_outer')} = {frame.shown(outer)}: lies on the steering axis (lower_ball_joint to "
            f"{top_name}), so the tie rod can't steer; move it off that line"
        )
    axis = (top - lower) / np.linalg.norm(top - lower)
    rod = (outer - inner) / np.linalg.norm(outer - inner)
    if abs(float(np.dot(rod, np.cross(axis, outer - lower)))) < LEAST_LEVER:
        raise InputError(
            f"{frame.file}: {_key(corner, 'tie_rod_inner')} = {frame.shown(inner)}: the tie rod points at the steering axis, so the "
            "linkage is locked where it stands; correct tie_rod_inner or tie_rod_outer"
        )


def check_size(axle: Axle, frame: FileFrame) -> None:
    """Refuse numbers of the wrong order of magnitude, first those that another unit would explain.

    Raises:
        InputError: where the points or a length are no car's.
    """
    for corner in (axle.left, axle.right):
        spread = float(np.max(np.ptp(np.array(list(corner.points.values())), axis=0)))
        if not SMALLEST_SPREAD <= spread <= LARGEST_SPREAD:
            raise InputError(
                f'{frame.file}: length_unit = "{frame.unit}": the points of the {corner.side} corner span {spread:.6g} mm, which no car '
                f"has; {_unit_guess(spread, frame.unit, 150.0, 2500.0)}"
            )
    for key, (low, high) in LENGTHS.items():
        table, name = key.split(".")
        value = getattr(getattr(axle, table), name, None)
        if value is not None and not low <= value <= high:
            raw = value / MM_PER[frame.unit]
            raise InputError(
                f'{frame.file}: {key} = {raw:.6g}: is {value:.6g} mm with length_unit = "{frame.unit}", which no car has; '
                f"{_unit_guess(value, frame.unit, low, high, 'this looks like')}"
            )


def _unit_guess(size: float, unit: str, low: float, high: float, words: str = "they look like") -> str:
    raw = size / MM_PER[unit]
    fits = [name for name, factor in MM_PER.items() if name != unit and low <= raw * factor <= high]
    if words.startswith("they"):
        if len(fits) == 1:
            return f'{words} {fits[0]}: set length_unit = "{fits[0]}"'
        return "correct the points or length_unit"
    return f"{words} {' or '.join(fits)}: write it in {unit}" if fits else "correct it"
