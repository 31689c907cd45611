"""A flat road that is tilted against the body: contact points on it, and the wheel travels that stand both tyres on it."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np

from toewright.core.types import FloatArray, StatusArray
from toewright.kinematics.batch import PoseList, solve_poses
from toewright.kinematics.design import design_vectors
from toewright.kinematics.status import OK, OUT_OF_REACH
from toewright.model.axle import Axle

ROLL_ITERATIONS = 30
"""Newton takes 3 to 5; the rest is for guesses beyond reach, which are halved back."""

ROLL_SHORTEST = 0.1
"""Where a guess beyond reach is this near (mm) to a travel within, there is no road."""

ROLL_DIRECT = 5.0
"""Up to this roll (deg) the travel of wheels that move straight up is guess enough; beyond, more than one travel can stand both
tyres on the road, and the one that the car rolls into from upright is walked to."""

ROLL_STRIDE = 1.0
"""Stride (deg) of that walk."""

ROLL_TOLERANCE = 1e-10
"""Largest distance (mm) of a tyre from the common road where the search ends."""


def road_normal(roll: FloatArray) -> FloatArray:
    """Normal (..., 3) of the road in body axes for a roll angle (...) in deg, right side of the body down + (ISO 8855)."""
    angle = np.radians(np.asarray(roll, dtype=float))
    return np.stack([np.zeros_like(angle), np.sin(angle), np.cos(angle)], axis=-1)


def vectors(poses: PoseList, stem: str) -> FloatArray:
    """A vector result of a pose list, (N, M, 3)."""
    return np.stack([poses[f"{stem}_{letter}"] for letter in "xyz"], axis=-1)


@dataclass(frozen=True)
class Contact:
    """Contact of wheels with a road of given normal; leading axes (...) as the poses.

    Attributes:
        point: (..., 3) mm, where the tyre's circle is nearest to the road.
        slope: (..., 3) mm/mm, its derivative by wheel travel at fixed rack and fixed road.
        fixed_slope: (..., 3) mm/mm, the same of the point fixed to the upright that is at the contact now.
        height: (...) mm along the normal.
        height_slope: (...) mm/mm by wheel travel.
        height_by_roll: (...) mm/rad, derivative of the height by the roll angle at fixed wheel travel.
        lean: (...) component of the spin axis along the normal.
    """

    point: FloatArray
    slope: FloatArray
    fixed_slope: FloatArray
    height: FloatArray
    height_slope: FloatArray
    height_by_roll: FloatArray
    lean: FloatArray


def contact_on(poses: PoseList, radius: float, roll: FloatArray) -> Contact:
    """Contact of solved wheels with the road of a roll angle: c = p + radius unit(-n + (a.n) a).

    Args:
        poses: (N, M) poses with all columns.
        radius: loaded radius, mm.
        roll: (M,) deg.
    """
    normal = road_normal(roll)
    turned = np.stack([np.zeros(len(normal)), normal[:, 2], -normal[:, 1]], axis=-1)  # d normal / d roll
    centre, spin = vectors(poses, "wheel_centre"), vectors(poses, "spin_axis")
    speed, twist = vectors(poses, "wheel_centre_travel"), vectors(poses, "twist_travel")
    spin_slope = np.cross(twist, spin)
    lean, lean_slope = np.sum(spin * normal, axis=-1), np.sum(spin_slope * normal, axis=-1)
    down = np.sqrt(1.0 - lean**2)
    raw = lean[..., np.newaxis] * spin - normal
    raw_slope = lean_slope[..., np.newaxis] * spin + lean[..., np.newaxis] * spin_slope
    down_slope = -lean * lean_slope / down
    direction = raw / down[..., np.newaxis]
    direction_slope = (raw_slope - direction * down_slope[..., np.newaxis]) / down[..., np.newaxis]
    point = centre + radius * direction
    by_roll = np.sum(centre * turned, axis=-1) + radius * lean * np.sum(spin * turned, axis=-1) / down
    return Contact(
        point=point,
        slope=speed + radius * direction_slope,
        fixed_slope=speed + np.cross(twist, radius * direction),
        height=np.sum(point * normal, axis=-1),
        height_slope=np.sum(speed * normal, axis=-1) - radius * down_slope,
        height_by_roll=by_roll,
        lean=lean,
    )


@dataclass(frozen=True)
class Rolled:
    """An axle rolled on a flat road.

    Attributes:
        travel: (M,) mm, wheel travel of the right wheel; the left one's is its negative.
        travel_by_roll: (M,) mm/deg, its derivative by the roll angle, exact.
        poses: (2, M) left and right.
        status: (M,).
    """

    travel: FloatArray
    travel_by_roll: FloatArray
    poses: PoseList
    status: StatusArray


def roll_axle(axle: Axle, roll: FloatArray, rack: FloatArray, *, travel_at: str = "wheel-centre") -> Rolled:
    """Roll an axle: equal and opposite wheel travels that put both tyres on one road.

    Newton on the distance of the two tyres from a common road, with the exact slope of each contact; large angles in strides from
    upright.

    Args:
        axle: the axle.
        roll: (M,) deg, right side down +.
        rack: (M,) mm.
        travel_at: what the wheel travel is the height of.
    """
    half = 0.5 * float(axle.left.points["wheel_centre"][1] - axle.right.points["wheel_centre"][1])
    found = _balance(axle, roll, rack, half * np.tan(np.radians(roll)), travel_at)
    far = np.flatnonzero(~found.done | (np.abs(roll) > ROLL_DIRECT))
    if far.size:
        walked = _walk_roll(axle, roll[far], rack[far], travel_at)
        start = found.travel.copy()
        start[far] = walked.travel
        found = _balance(axle, roll, rack, start, travel_at)
        found.done[far] &= walked.done
        found.why[far] = walked.why
    status = np.where(found.done, np.int8(OK), found.why)
    return Rolled(found.travel, found.by_roll, found.poses, status)


@dataclass(frozen=True)
class _Balanced:
    """Axles on a road (M,); ``why`` is the status of the last pose tried that was beyond reach."""

    travel: FloatArray
    by_roll: FloatArray
    poses: PoseList
    done: np.ndarray[Any, np.dtype[np.bool_]]
    why: StatusArray


def _balance(axle: Axle, roll: FloatArray, rack: FloatArray, travel: FloatArray, travel_at: str) -> _Balanced:
    """Newton from a guess of the right wheel's travel (M,) on the distance of the two tyres from one road."""
    designs, radius = design_vectors(axle), axle.wheel.loaded_radius
    near = np.zeros_like(travel)  # within reach, unless the rack itself is beyond
    why = np.full(travel.size, OUT_OF_REACH, dtype=np.int8)
    for _ in range(ROLL_ITERATIONS):
        poses = solve_poses(designs, np.stack([rack, rack]), np.stack([-travel, travel]), travel_at=travel_at)
        contact = contact_on(poses, radius, roll)
        gap = contact.height[0] - contact.height[1]
        slope = -contact.height_slope[0] - contact.height_slope[1]
        done, beyond = np.abs(gap) < ROLL_TOLERANCE, np.isnan(gap)
        why = np.where(beyond, np.max(poses.status, axis=0), why).astype(np.int8)
        if np.all(done | (beyond & (np.abs(travel - near) < ROLL_SHORTEST))):
            break
        near = np.where(beyond, near, travel)
        travel = np.where(done, travel, np.where(beyond, 0.5 * (travel + near), travel - gap / slope))
    by_roll = -np.radians(1.0) * (contact.height_by_roll[0] - contact.height_by_roll[1]) / slope
    return _Balanced(travel, by_roll, poses, done, why)


def _walk_roll(axle: Axle, roll: FloatArray, rack: FloatArray, travel_at: str) -> _Balanced:
    """Roll from upright in strides; where a stride finds no road the walk has ended and ``done`` is False."""
    steps = max(1, int(np.ceil(np.max(np.abs(roll)) / ROLL_STRIDE)))
    found = _balance(axle, 0.0 * roll, rack, 0.0 * roll, travel_at)
    alive, why = found.done, found.why
    for step in range(1, steps + 1):
        guess = np.where(alive, found.travel + found.by_roll * roll / steps, 0.0)
        found = _balance(axle, roll * (step / steps), rack, guess, travel_at)
        why = np.where(alive, found.why, why)
        alive = alive & found.done
    return _Balanced(found.travel, found.by_roll, found.poses, alive, why)
