"""Goals as residuals of a least-squares problem, with the exact slopes by hardpoint coordinates.

A goal that wants a value gives (figure - value), one that wants a range gives by how much the figure is outside. Each is divided by
the SCALES of its unit, multiplied by its weight, and by 1/sqrt(K) over its K places, so that goals weigh alike whatever their places.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np

from toewright.core import layout
from toewright.core.types import FloatArray
from toewright.kinematics.batch import solve_batch
from toewright.kinematics.design import COORDINATES, SIDES, coordinate_index, design_vectors
from toewright.kinematics.slopes import derive
from toewright.model.axle import Axle
from toewright.model.errors import InputError
from toewright.model.glossary import quantity
from toewright.studies.goals import Goal
from toewright.studies.verdicts import goal_sides, measure, rack_positions, travel_positions

SCALES: Mapping[str, float] = {"deg": 0.05, "mm": 1.0, "deg/mm": 0.001, "deg/deg": 0.01, "%": 2.0, "-": 0.1}
"""What counts as one unit of miss: a goal of weight 1 missed by this much has a residual of 1."""

LOST = 1e3
"""Residual of a place that the linkage does not reach."""

STEP = 1e-3
"""Step (mm) of the five-point differences that stand in where a figure of the whole axle has no closed slope."""


@dataclass(frozen=True)
class Free:
    """A coordinate that may move.

    Attributes:
        point, letter: such as tie_rod_inner and z.
        low, high: how far it may move from where it is, mm.
    """

    point: str
    letter: str
    low: float
    high: float

    @property
    def name(self) -> str:
        """``tie_rod_inner.z``."""
        return f"{self.point}.{self.letter}"


def parse_free(text: str, axle: Axle) -> Free:
    """A free coordinate from ``tie_rod_inner.z=-10:10`` (mm from where it is).

    Raises:
        InputError: for an unknown coordinate or bad bounds.
    """
    name, separator, bounds = text.partition("=")
    parts = bounds.split(":")
    if not separator or len(parts) != 2:
        raise InputError(
            f"--free {text}: write POINT.x, .y or .z and how far it may move, such as tie_rod_inner.z=-10:10"
        )
    try:
        coordinate_index(axle.left.kind, name.strip())
    except ValueError as error:
        raise InputError(f"--free {text}: {error}") from error
    try:
        low, high = (float(part) for part in parts)
    except ValueError as error:
        raise InputError(
            f"--free {text}: {bounds!r} is no pair of numbers; write LO:HI in mm, such as -10:10"
        ) from error
    if not (np.isfinite(low) and np.isfinite(high)) or low >= high:
        raise InputError(f"--free {text}: {low:g} to {high:g} is no range; write the lower bound first")
    if not low <= 0.0 <= high:
        raise InputError(
            f"--free {text}: the present place, 0, is not between {low:g} and {high:g}; bounds are moves from where the point is"
        )
    point, _, letter = name.strip().rpartition(".")
    return Free(point, letter, low, high)


def moved_axle(axle: Axle, free: Sequence[Free], moves: FloatArray) -> Axle:
    """The axle with the free coordinates of the left corner moved by moves (F,) mm, the right one as its mirror image moves."""
    points: dict[tuple[str, str], FloatArray] = {}
    for side in SIDES if not axle.symmetric else ("left",):
        corner = axle.corner(side)
        for one, move in zip(free, moves, strict=True):
            key = (side, one.point)
            place = points.get(key, corner.points[one.point]).copy()
            place[COORDINATES.index(one.letter)] += move * (corner.sign if one.letter == "y" else 1.0)
            points[key] = place
    return axle.with_points(points)


def _outside(goal: Goal, values: FloatArray) -> tuple[FloatArray, FloatArray]:
    """By how much values miss a goal, signed, and the slope of that by the value."""
    miss = np.where(values < goal.low, values - goal.low, np.where(values > goal.high, values - goal.high, 0.0))
    return miss, np.where(miss != 0.0, 1.0, 1.0 if goal.low == goal.high else 0.0)


def residuals(axle: Axle, goals: Sequence[Goal]) -> list[FloatArray]:
    """Residuals of each goal, (K,) each; LOST where the linkage does not get there."""
    return [_residual(goal, measure(axle, goal).values)[0] for goal in goals]


def _residual(goal: Goal, values: FloatArray) -> tuple[FloatArray, FloatArray]:
    scale = goal.weight / (SCALES[quantity(goal.name).unit] * np.sqrt(values.size))
    miss, slope = _outside(goal, values)
    lost = np.isnan(values)
    return np.where(lost, LOST, miss * scale), np.where(lost, 0.0, slope * scale)


def jacobian(axle: Axle, goals: Sequence[Goal], free: Sequence[Free]) -> FloatArray:
    """Slopes (sum of K, F) of all residuals by the free moves, per mm."""
    rows = []
    for goal in goals:
        values = measure(axle, goal).values
        slopes = corner_slopes(axle, goal, free) if goal.kind == "corner" else axle_slopes(axle, goal, free)
        rows.append(_residual(goal, values)[1][:, np.newaxis] * np.where(np.isfinite(slopes), slopes, 0.0))
    return np.concatenate(rows)


def corner_slopes(axle: Axle, goal: Goal, free: Sequence[Free]) -> FloatArray:
    """Exact slopes (K, F) of a corner figure by the free moves, the rack following where the steer is given."""
    rack, travel = rack_positions(axle, goal), travel_positions(goal)
    both = np.append(travel, 0.0)
    name = "toe_in" if goal.name == "bump_steer" else goal.name
    count = len(free)
    found = []
    follow = _rack_follows(axle, goal, free, rack) if goal.at_steer is not None else None
    for side in goal_sides(goal):
        corner = axle.corner(side)
        design = design_vectors(axle, [side])
        parameters = [coordinate_index(corner.kind, one.name) for one in free] + [layout.DESIGN_SIZE]
        poses = solve_batch(design, rack, both, columns=("grip",)).poses
        at_rack, at_travel = np.repeat(rack, both.size)[np.newaxis], np.tile(both, rack.size)[np.newaxis]
        slopes = derive(design, poses.reshape(1, -1, 6), at_rack, at_travel, parameters, [name])
        slopes = slopes.reshape(rack.size, both.size, count + 1)
        mirror = np.array([corner.sign if one.letter == "y" else 1.0 for one in free])
        by_free = slopes[..., :count] * mirror
        if follow is not None:
            by_free = by_free + slopes[..., count:] * follow[:, np.newaxis]
        if goal.name == "bump_steer":
            by_free = by_free - by_free[:, -1:]
        found.append(by_free[:, :-1].reshape(-1, count))
    return np.concatenate(found)


def _rack_follows(axle: Axle, goal: Goal, free: Sequence[Free], rack: FloatArray) -> FloatArray:
    """Slopes (R, F) of the rack travel that keeps the mean steer, by the implicit function theorem."""
    travel = np.array([goal.at_travel[0] if goal.at_travel else 0.0])
    by_rack, by_free = np.zeros(rack.size), np.zeros((rack.size, len(free)))
    for side in SIDES:
        corner = axle.corner(side)
        design = design_vectors(axle, [side])
        poses = solve_batch(design, rack, travel, columns=("grip",)).poses.reshape(1, -1, 6)
        parameters = [coordinate_index(corner.kind, one.name) for one in free] + [layout.DESIGN_SIZE]
        at_travel = np.repeat(travel, rack.size)[np.newaxis]
        slopes = derive(design, poses, rack[np.newaxis], at_travel, parameters, ["steer_angle"])[0, :, 0]
        mirror = np.array([corner.sign if one.letter == "y" else 1.0 for one in free])
        by_free += 0.5 * slopes[:, :-1] * mirror
        by_rack += 0.5 * slopes[:, -1]
    return -by_free / by_rack[:, np.newaxis]


def axle_slopes(axle: Axle, goal: Goal, free: Sequence[Free]) -> FloatArray:
    """Five-point differences (K, F) of a figure of the whole axle; each evaluation is an exact solve."""
    columns = []
    for k in range(len(free)):
        ahead = []
        for factor in (1.0, -1.0, 2.0, -2.0):
            moves = np.zeros(len(free))
            moves[k] = factor * STEP
            ahead.append(measure(moved_axle(axle, free, moves), goal).values)
        columns.append((8.0 * (ahead[0] - ahead[1]) - (ahead[2] - ahead[3])) / (12.0 * STEP))
    return np.stack(columns, axis=1)
