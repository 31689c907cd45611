"""A flat road that is tilted against the body: contact points on it, and the wheel travels that stand both tyres on it."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from toewright.core.types import FloatArray, StatusArray
from toewright.kinematics.batch import PoseList, solve_poses
from toewright.kinematics.design import design_vectors
from toewright.kinematics.status import OK, OUT_OF_REACH
from toewright.model.axle import Axle

ROLL_ITERATIONS = 12
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

    Newton on the distance of the two tyres from a common road, with the exact slope of each contact.

    Args:
        axle: the axle.
        roll: (M,) deg, right side down +.
        rack: (M,) mm.
        travel_at: what the wheel travel is the height of.
    """
    designs = design_vectors(axle)
    radius = axle.wheel.loaded_radius
    half = 0.5 * float(axle.left.points["wheel_centre"][1] - axle.right.points["wheel_centre"][1])
    travel = half * np.tan(np.radians(roll))
    done = np.zeros(roll.size, dtype=bool)
    for _ in range(ROLL_ITERATIONS):
        poses = solve_poses(designs, np.stack([rack, rack]), np.stack([-travel, travel]), travel_at=travel_at)
        contact = contact_on(poses, radius, roll)
        gap = contact.height[0] - contact.height[1]
        slope = -contact.height_slope[0] - contact.height_slope[1]
        done = np.abs(gap) < ROLL_TOLERANCE
        if np.all(done | np.isnan(gap)):
            break
        travel = np.where(done | np.isnan(gap), travel, travel - gap / slope)
    lost = ~done
    status = np.max(poses.status, axis=0).astype(np.int8)
    status[lost & (status == OK)] = OUT_OF_REACH
    by_roll = -np.radians(1.0) * (contact.height_by_roll[0] - contact.height_by_roll[1]) / slope
    return Rolled(travel, by_roll, poses, status)
