"""Parts of one corner, and of the rack, from solved joints."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np

from toewright.core.types import FloatArray
from toewright.kinematics.design import SIDES
from toewright.kinematics.maps import CornerMaps
from toewright.kinematics.sheet import TOP_OF_STEERING_AXIS
from toewright.model.axle import POINT_NAMES, Axle, Corner
from toewright.views.scene import palette
from toewright.views.scene.parts import Ball, Label, Part, Tube
from toewright.views.scene.wheel import wheel_parts, wheel_size

THICKNESS = 0.028
"""Radius of a wishbone leg over the loaded radius of the wheel; all other parts are in proportion to it."""

DAMPER_SHARE = 0.58
"""Length of the damper's body over the strut's length at design."""

LEGS = (
    ("upper arm front leg", "upper_pivot_front", "upper_ball_joint", palette.UPPER_ARM, 1.0),
    ("upper arm rear leg", "upper_pivot_rear", "upper_ball_joint", palette.UPPER_ARM, 1.0),
    ("lower arm front leg", "lower_pivot_front", "lower_ball_joint", palette.LOWER_ARM, 1.0),
    ("lower arm rear leg", "lower_pivot_rear", "lower_ball_joint", palette.LOWER_ARM, 1.0),
    ("tie rod", "tie_rod_inner", "tie_rod_outer", palette.TIE_ROD, 0.8),
)
"""Links from joint to joint: name, both points, colour, thickness; those whose points a corner has are drawn."""

KEY = {
    palette.UPPER_ARM: "upper arm",
    palette.LOWER_ARM: "lower arm",
    palette.TIE_ROD: "tie rod",
    palette.UPRIGHT: "upright and hub",
    palette.ROD: "damper rod",
    palette.RACK: "rack",
    palette.HOUSING: "rack housing",
    palette.KINGPIN: "kingpin axis to the ground",
}
"""Words of the colours, for the key."""


@dataclass(frozen=True)
class CornerPose:
    """One solved corner: joints by name, contact point, kingpin axis at ground and spin axis, each (3,)."""

    corner: Corner
    joints: Mapping[str, FloatArray]
    contact_point: FloatArray
    kingpin_ground_point: FloatArray
    spin_axis: FloatArray


def corner_pose(axle: Axle, maps: CornerMaps, side: str, rack_index: int, travel_index: int) -> CornerPose:
    """One pose of one corner out of a sweep; its status must be ok."""
    s = maps.side_index(side)
    place = (rack_index, travel_index)
    return CornerPose(
        corner=axle.corner(side),
        joints={name: values[place] for name, values in maps.joints[s].items()},
        contact_point=maps["contact_point"][s][place],
        kingpin_ground_point=maps["kingpin_ground_point"][s][place],
        spin_axis=maps["spin_axis"][s][place],
    )


def corner_parts(axle: Axle, pose: CornerPose) -> list[Part]:
    """Arms, strut, tie rod, upright, kingpin axis, wheel and joints of one corner."""
    side, joints = pose.corner.side, pose.joints
    r = THICKNESS * axle.wheel.loaded_radius
    parts: list[Part] = [
        Tube(f"{side} {name}", colour, joints[start], joints[end], r * thickness)
        for name, start, end, colour, thickness in LEGS
        if start in joints and end in joints
    ]
    if "strut_top_mount" in joints:
        parts += strut_parts(pose, r)
    parts += upright_parts(pose, r)
    top = joints[TOP_OF_STEERING_AXIS[pose.corner.kind]]
    axis = (top - joints["lower_ball_joint"]) / np.linalg.norm(top - joints["lower_ball_joint"])
    above = top + 0.18 * axle.wheel.loaded_radius * axis
    parts.append(Tube(f"{side} kingpin axis", palette.KINGPIN, pose.kingpin_ground_point, above, 0.22 * r, edge=True))
    parts.append(Ball(f"{side} kingpin axis at ground", palette.KINGPIN, pose.kingpin_ground_point, 0.7 * r))
    parts.append(Ball(f"{side} contact point", palette.CONTACT, pose.contact_point, 0.9 * r))
    parts += wheel_parts(side, wheel_size(axle.wheel), joints["wheel_centre"], pose.spin_axis)
    parts += [
        Ball(
            f"{side} {name.replace('_', ' ')}",
            palette.JOINT,
            joints[name],
            (2.8 if name == "strut_axis_point" else 1.45) * r,
        )
        for name in POINT_NAMES[pose.corner.kind]
    ]
    return parts


def strut_parts(pose: CornerPose, r: float) -> list[Part]:
    """Damper body, fixed to the upright, and the rod that slides out of it up to the top mount."""
    side, joints, points = pose.corner.side, pose.joints, pose.corner.points
    bottom, top = joints["strut_axis_point"], joints["strut_top_mount"]
    axis = (top - bottom) / np.linalg.norm(top - bottom)
    length = DAMPER_SHARE * float(np.linalg.norm(points["strut_top_mount"] - points["strut_axis_point"]))
    mouth = bottom + min(length, 0.97 * float(np.linalg.norm(top - bottom))) * axis
    return [
        Tube(f"{side} damper body", palette.DAMPER, bottom, mouth, 2.6 * r),
        Tube(f"{side} damper rod", palette.ROD, mouth, top, 1.2 * r),
    ]


def upright_parts(pose: CornerPose, r: float) -> list[Part]:
    """The upright: a post between its upper and lower joints, the hub carrier on it, and the steering arm."""
    side, joints = pose.corner.side, pose.joints
    lower = joints["lower_ball_joint"]
    upper = joints["upper_ball_joint" if "upper_ball_joint" in joints else "strut_axis_point"]
    centre, arm = joints["wheel_centre"], joints["tie_rod_outer"]
    post = upper - lower
    share = float(np.clip((centre - lower) @ post / (post @ post), 0.15, 0.85))
    middle = lower + share * post
    root = lower + float(np.clip((arm - lower) @ post / (post @ post), 0.08, 0.92)) * post
    return [
        Tube(f"{side} upright post", palette.UPRIGHT, lower, upper, 1.5 * r),
        Tube(f"{side} hub carrier", palette.UPRIGHT, middle, centre, 2.1 * r),
        Tube(f"{side} steering arm", palette.UPRIGHT, root, arm, 1.2 * r),
    ]


def rack_parts(axle: Axle, poses: Mapping[str, CornerPose]) -> list[Part]:
    """The rack between the inner joints and its housing, which stays on the body; nothing for an axle without a rack.

    The rack lies on the line along its axis through the middle of the inner joints; a joint off that line is carried by a bracket.
    """
    if axle.rack is None:
        return []
    r = THICKNESS * axle.wheel.loaded_radius
    axis = axle.rack.axis / np.linalg.norm(axle.rack.axis)
    drawn = {side: axle.corner(side).points["tie_rod_inner"] for side in SIDES}
    middle = 0.5 * (drawn["left"] + drawn["right"])
    along = {side: float((point - middle) @ axis) for side, point in drawn.items()}
    side, pose = next(iter(poses.items()))
    moved = float((pose.joints["tie_rod_inner"] - drawn[side]) @ axis)
    ends = {side: middle + (place + moved) * axis for side, place in along.items()}
    span = 0.5 * abs(along["left"] - along["right"])
    half = max(span - axle.rack.stroke, 0.3 * span)
    parts: list[Part] = [
        Tube("rack housing", palette.HOUSING, middle - half * axis, middle + half * axis, 1.9 * r),
    ]
    for side in SIDES:
        outward = 1.0 if along[side] > 0.0 else -1.0
        if outward * (along[side] + moved) > half:
            mouth = middle + outward * half * axis
            parts.append(Tube(f"{side} rack end", palette.RACK, mouth, ends[side], 0.95 * r))
    for side, pose in poses.items():
        joint = pose.joints["tie_rod_inner"]
        if np.linalg.norm(joint - ends[side]) > r:
            parts.append(Tube(f"{side} rack bracket", palette.RACK, ends[side], joint, 0.8 * r))
    return parts


def joint_labels(pose: CornerPose) -> list[Label]:
    """Names of a corner's joints, of its contact point and of its kingpin axis at ground."""
    side = pose.corner.side
    labels = [Label(name.replace("_", " "), side, pose.joints[name]) for name in POINT_NAMES[pose.corner.kind]]
    return [*labels, Label("contact point", side, pose.contact_point)]
