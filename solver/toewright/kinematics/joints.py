"""Where every joint stands and how far every link has turned, from solved poses."""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np

from toewright.core.types import FloatArray
from toewright.model.axle import Corner

UPRIGHT_POINTS = {
    "double-wishbone": ("upper_ball_joint", "lower_ball_joint", "tie_rod_outer", "wheel_centre"),
    "strut": ("strut_axis_point", "lower_ball_joint", "tie_rod_outer", "wheel_centre"),
}
"""Points that move with the upright, by corner kind; the inner tie rod joint moves with the rack, all others stand still."""

LINK_ANGLES = {
    "double-wishbone": ("upper_arm_angle", "lower_arm_angle", "tie_rod_angle"),
    "strut": ("lower_arm_angle", "tie_rod_angle", "strut_angle", "strut_length"),
}
"""What ``link_angles`` gives for each corner kind."""


def rotation_matrices(poses: FloatArray) -> FloatArray:
    """Rotation of the upright from its design orientation: poses (..., 6) to matrices (..., 3, 3).

    Source: O. A. Bauchau, L. Trainelli, The vectorial parameterization of rotation, Nonlinear Dynamics 32 (2003), sec. 5.
    """
    g = poses[..., 2:5]
    square = np.sum(g * g, axis=-1)[..., np.newaxis, np.newaxis]
    cross = np.zeros((*g.shape[:-1], 3, 3))
    cross[..., 0, 1], cross[..., 0, 2], cross[..., 1, 2] = -g[..., 2], g[..., 1], -g[..., 0]
    cross -= np.swapaxes(cross, -1, -2)
    outer = g[..., :, np.newaxis] * g[..., np.newaxis, :]
    rotation: FloatArray = ((1.0 - square) * np.eye(3) + 2.0 * outer + 2.0 * cross) / (1.0 + square)
    return rotation


def joint_positions(
    corner: Corner, poses: FloatArray, rack_travel: FloatArray, rack_axis: FloatArray
) -> dict[str, FloatArray]:
    """Every named point of a corner at every pose.

    Args:
        corner: the corner.
        poses: (..., 6), NaN where not ok.
        rack_travel: (...) mm, broadcastable to the poses.
        rack_axis: (3,) unit vector, zero without a rack.

    Returns:
        Point name to (..., 3) mm; NaN where the pose is NaN, for points that stand still too.
    """
    rotation = rotation_matrices(poses)
    centre = corner.points["wheel_centre"]
    moved = centre + poses[..., [0, 1, 5]]
    there = np.where(np.isnan(poses[..., :1]), np.nan, 0.0)
    found: dict[str, FloatArray] = {}
    for name, point in corner.points.items():
        if name in UPRIGHT_POINTS[corner.kind]:
            found[name] = moved + np.einsum("...ij,j->...i", rotation, point - centre)
        elif name == "tie_rod_inner":
            found[name] = point + np.asarray(rack_travel)[..., np.newaxis] * rack_axis + there
        else:
            found[name] = np.broadcast_to(point, moved.shape) + there
    return found


def _arm_angle(corner: Corner, arm: str, joint: FloatArray) -> FloatArray:
    """Rotation of a wishbone about its pivot axis from design, deg, + where the ball joint goes up."""
    front, rear = corner.points[f"{arm}_pivot_front"], corner.points[f"{arm}_pivot_rear"]
    axis = (front - rear) / np.linalg.norm(front - rear)
    before = corner.points[f"{arm}_ball_joint"] - rear
    if np.cross(axis, before)[2] < 0.0:
        axis = -axis
    before = before - axis * (before @ axis)
    after = joint - rear
    after = after - axis * (after @ axis)[..., np.newaxis]
    angle: FloatArray = np.degrees(np.arctan2(np.cross(before, after) @ axis, after @ before))
    return angle


def _angle_between(before: FloatArray, after: FloatArray) -> FloatArray:
    cross = np.linalg.norm(np.cross(before, after), axis=-1)
    angle: FloatArray = np.degrees(np.arctan2(cross, after @ before))
    return angle


def link_angles(corner: Corner, joints: Mapping[str, FloatArray]) -> dict[str, FloatArray]:
    """How far each link has turned from its design position: names of LINK_ANGLES to (...) deg (the strut's length in mm).

    ``joints`` is what ``joint_positions`` gave. Arms turn about their pivot axis, + where the ball joint goes up; the tie rod's and
    the strut's is the angle between their directions then and now.
    """
    found: dict[str, FloatArray] = {}
    for arm in ("upper", "lower"):
        name = f"{arm}_ball_joint"
        if name in joints:
            found[f"{arm}_arm_angle"] = _arm_angle(corner, arm, joints[name])
    points = corner.points
    rod = points["tie_rod_outer"] - points["tie_rod_inner"]
    found["tie_rod_angle"] = _angle_between(rod, joints["tie_rod_outer"] - joints["tie_rod_inner"])
    if corner.kind == "strut":
        strut = points["strut_top_mount"] - points["strut_axis_point"]
        now = joints["strut_top_mount"] - joints["strut_axis_point"]
        found["strut_angle"] = _angle_between(strut, now)
        found["strut_length"] = np.linalg.norm(now, axis=-1)
    return found
