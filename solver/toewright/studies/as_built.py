"""The car as it is built: a part is moved or made longer while every other part keeps its dimensions.

A hardpoint file draws a design: move a point there and the links become as long as the new points say. In the workshop it is the other way
round: a shim moves a pivot, a thread makes a rod longer, and the upright takes the place that the unchanged parts allow, with other static
toe and camber. The wheel centre's height is held (the springs are set so).
"""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np

from toewright.core import kernels, layout
from toewright.core.types import FloatArray
from toewright.kinematics.batch import solve_poses
from toewright.kinematics.joints import UPRIGHT_POINTS, rotation_matrices
from toewright.kinematics.status import STATUS_NAMES
from toewright.model.errors import InputError

STEPS = 8
"""A change is made in this many parts, each settled before the next."""

ITERATIONS = 20
SETTLED = 1e-8
"""Largest last Newton step (mm) of a settled pose."""

_ROW_OF_JOINT: Mapping[str, tuple[int, ...]] = {
    "upper_ball_joint": (0, 1),
    "lower_ball_joint": (2, 3),
    "tie_rod_outer": (4,),
}
_ROW_OF_BASE: Mapping[str, Mapping[str, tuple[int, ...]]] = {
    "double-wishbone": {
        "upper_pivot_front": (0,),
        "upper_pivot_rear": (1,),
        "lower_pivot_front": (2,),
        "lower_pivot_rear": (3,),
        "tie_rod_inner": (4,),
    },
    "strut": {
        "strut_top_mount": (0, 1),
        "lower_pivot_front": (2,),
        "lower_pivot_rear": (3,),
        "tie_rod_inner": (4,),
    },
}
MOVABLE: Mapping[str, tuple[str, ...]] = {
    "double-wishbone": (*_ROW_OF_BASE["double-wishbone"], "upper_ball_joint", "lower_ball_joint", "tie_rod_outer"),
    "strut": (*_ROW_OF_BASE["strut"], "lower_ball_joint", "tie_rod_outer"),
}
"""Points that a workshop can move, by corner kind."""


def rebuild(design: FloatArray, moved: Mapping[str, FloatArray], rod_longer: float = 0.0) -> FloatArray:
    """Design vector (35,) of a corner after the workshop has been at it.

    Body points (pivots, top mount, inner tie rod joint) move against the body while the links keep their length; points of the upright
    (ball joints, outer tie rod joint) move against the upright. The upright then settles; its new place is the new design position.

    Args:
        design: (35,) before.
        moved: point name to displacement (3,) in mm.
        rod_longer: change of the tie rod's length, mm.

    Raises:
        InputError: for a point that can't be moved, or where the parts can't be put together any more.
    """
    kind = layout.KINDS[int(design[layout.KIND])]
    for name in moved:
        if name not in MOVABLE[kind]:
            raise InputError(
                f"{name} is no point that a workshop can move on a {kind} corner; there are {', '.join(MOVABLE[kind])}"
            )
    packed = np.empty(kernels.PACKED)
    kernels.pack(design, packed)
    start = packed.copy()
    rod = float(np.linalg.norm(design[18:21] - design[21:24]))
    pose = np.zeros(layout.POSE_SIZE)
    step = 0.0
    for part in range(1, STEPS + 1):
        share = part / STEPS
        packed[:] = start
        for name, shift in moved.items():
            for row in _ROW_OF_BASE[kind].get(name, ()):
                packed[8 * row + 3 : 8 * row + 6] += share * shift
            for row in _ROW_OF_JOINT.get(name, ()):
                _move_joint(packed, row, share * np.asarray(shift, dtype=float))
        if rod_longer:
            longer = rod + share * rod_longer
            packed[39] -= 0.5 * (longer * longer - rod * rod)
        step = kernels.settle(packed, pose, ITERATIONS)
        if not step < SETTLED:
            raise InputError(
                "the parts can't be put together after that change: the linkage has no such place; make the change smaller"
            )
    return _settled_design(design, kind, moved, pose)


def _move_joint(packed: FloatArray, row: int, shift: FloatArray) -> None:
    """Move a joint on the upright while its link keeps its length: c = (a.a - L^2) / 2."""
    a = packed[8 * row : 8 * row + 3]
    packed[8 * row + 7] += float(a @ shift) + 0.5 * float(shift @ shift)
    a += shift


def _settled_design(design: FloatArray, kind: str, moved: Mapping[str, FloatArray], pose: FloatArray) -> FloatArray:
    new = design.copy()
    rotation = rotation_matrices(pose)
    centre = design[24:27]
    place = centre + pose[[0, 1, 5]]
    for slot, name in enumerate(layout.SLOTS[kind]):
        if not name:
            continue
        point = design[3 * slot : 3 * slot + 3] + np.asarray(moved.get(name, np.zeros(3)), dtype=float)
        on_upright = name in UPRIGHT_POINTS[kind]
        new[3 * slot : 3 * slot + 3] = place + rotation @ (point - centre) if on_upright else point
    side = design[layout.SIDE]
    toe, camber = (np.radians(-side * design[k]) for k in (layout.TOE_IN, layout.CAMBER))
    spin = rotation @ np.array([-np.sin(toe) * np.cos(camber), np.cos(toe) * np.cos(camber), np.sin(camber)])
    new[layout.TOE_IN] = -side * np.degrees(np.arctan2(-spin[0], spin[1]))
    new[layout.CAMBER] = -side * np.degrees(np.arcsin(spin[2]))
    return new


def at_height(design: FloatArray, travel: float) -> FloatArray:
    """The corner as it stands at a wheel travel (mm): the same parts, with the pose there as the new design position.

    Raises:
        InputError: where the wheel can't get there.
    """
    if travel == 0.0:
        return design.copy()
    found = solve_poses(design[np.newaxis], np.zeros(1), np.array([travel]))
    if found.status[0, 0] != layout.OK:
        raise InputError(
            f"the wheel can't stand at {travel:+g} mm of travel: {STATUS_NAMES[found.status[0, 0]]}; ask for less"
        )
    return _settled_design(design, layout.KINDS[int(design[layout.KIND])], {}, found.poses[0, 0])


def rod_for_toe(design: FloatArray, toe_in: float) -> tuple[FloatArray, float]:
    """Turn the tie rod until the wheel has a static toe-in (deg): the new design vector and the change of the rod's length (mm).

    Raises:
        InputError: where the rod can't set that toe.
    """
    longer, now = 0.0, design
    for _ in range(30):
        gap = toe_in - now[layout.TOE_IN]
        if abs(gap) < 1e-11:
            return now, longer
        h = 1e-4
        slope = (rebuild(now, {}, h)[layout.TOE_IN] - rebuild(now, {}, -h)[layout.TOE_IN]) / (2.0 * h)
        change = float(np.clip(gap / slope, -5.0, 5.0))
        now = rebuild(now, {}, change)
        longer += change
    raise InputError(f"the tie rod can't set a static toe-in of {toe_in:+.3g} deg; make the change smaller")
