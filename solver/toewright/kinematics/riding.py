"""The axle over bumps and in roll: toe, camber, track, recession, roll centre, swing arms and anti figures, with exact rates."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any, ClassVar

import numpy as np
from numpy.typing import ArrayLike

from toewright.core import layout
from toewright.core.types import FloatArray, StatusArray
from toewright.kinematics.batch import PoseList, solve_batch
from toewright.kinematics.design import SIDES, design_vectors
from toewright.kinematics.road import Contact, contact_on, roll_axle, vectors
from toewright.kinematics.status import OK
from toewright.kinematics.sweep import check_positions, default_travel
from toewright.kinematics.tables import ResultTable
from toewright.model.axle import Axle

MOTIONS = ("bump", "roll", "single")
"""What the axle does: both wheels together, the body rolls on a flat road, one wheel alone."""

ANTI_COLUMNS = (
    "anti_dive_left",
    "anti_dive_right",
    "anti_lift_left",
    "anti_lift_right",
    "anti_squat_left",
    "anti_squat_right",
)

RIDE_COLUMNS = (
    "motion",
    "bump",
    "roll_angle",
    "status",
    "wheel_travel_left",
    "wheel_travel_right",
    "toe_in_left",
    "toe_in_right",
    "axle_steer",
    "camber_left",
    "camber_right",
    "camber_road_left",
    "camber_road_right",
    "track_change",
    "recession_left",
    "recession_right",
    "roll_centre_y",
    "roll_centre_z",
    "swing_arm_left",
    "swing_arm_right",
    "bump_steer_rate_left",
    "bump_steer_rate_right",
    *ANTI_COLUMNS,
)
"""Columns of the long table, in its order; ``axle_steer_rate``, ``roll_steer``, the bump steer and the camber gains follow."""

LARGEST_ROLL = 3.0
"""Default roll angles reach this far either way (deg)."""


@dataclass(frozen=True)
class RideMaps(ResultTable):
    """An axle riding: RIDE_COLUMNS over positions, of all motions one after the other.

    Attributes:
        rack_travel: mm, the same at all positions.
        moving_side: the wheel that moves in ``single``.
    """

    rack_travel: float
    moving_side: str

    order: ClassVar[tuple[str, ...]] = RIDE_COLUMNS

    @property
    def motion(self) -> np.ndarray[Any, np.dtype[np.str_]]:
        """(N,) names of MOTIONS."""
        return self.labels["motion"]

    def part(self, motion: str) -> np.ndarray[Any, np.dtype[np.bool_]]:
        """Mask (N,) of the positions of one motion."""
        return np.asarray(self.motion == motion)


def default_roll(positions: int = 21) -> FloatArray:
    """Roll angles (n,) deg, either way."""
    return np.linspace(-LARGEST_ROLL, LARGEST_ROLL, positions)


def ride(
    axle: Axle,
    motions: Sequence[str] = MOTIONS,
    *,
    travel: ArrayLike | None = None,
    roll: ArrayLike | None = None,
    rack: float = 0.0,
    side: str = "left",
) -> RideMaps:
    """Move an axle over its travel and in roll, at one rack position.

    Args:
        axle: the axle.
        motions: which of MOTIONS, in which order.
        travel: (T,) mm, bump +, ascending: positions of ``bump`` and ``single``; 21 over a usual range when not given.
        roll: (P,) deg, right side down +, ascending: positions of ``roll``; 21 over +-3 deg when not given.
        rack: rack travel, mm.
        side: the wheel that moves in ``single``.

    Raises:
        ValueError: for an unknown motion or side, or bad positions.
    """
    unknown = [name for name in motions if name not in MOTIONS]
    if unknown or not motions:
        raise ValueError(f"motion is {unknown[0] if unknown else 'missing'!r}; allowed are {', '.join(MOTIONS)}")
    if side not in SIDES:
        raise ValueError(f"side is {side!r}; allowed are 'left' and 'right'")
    at_travel = check_positions(travel, default_travel(axle), "travel")
    at_roll = check_positions(roll, default_roll(), "roll")
    zero, grid = _grid(axle, at_travel, rack)
    parts = []
    for motion in motions:
        if motion == "roll":
            rolled = roll_axle(axle, at_roll, np.full(at_roll.size, rack))
            state = _State(
                bump=np.zeros(at_roll.size),
                roll=at_roll,
                travel=np.stack([-rolled.travel, rolled.travel]),
                rates=np.stack([-rolled.travel_by_roll, rolled.travel_by_roll]),
                poses=rolled.poses,
                status=rolled.status,
            )
        else:
            travels, rates, poses = np.stack([at_travel, at_travel]), np.ones((2, at_travel.size)), grid
            if motion == "single":
                stays = 1 - SIDES.index(side)
                travels[stays], rates[stays] = 0.0, 0.0
                poses = _still(grid, zero, stays)
            status = np.max(poses.status, axis=0).astype(np.int8)
            state = _State(at_travel, np.zeros(at_travel.size), travels, rates, poses, status)
        parts.append((_figures(axle, state, zero, rolling=motion == "roll"), state.status))
    columns = {name: np.concatenate([part[0][name] for part in parts]) for name in parts[0][0]}
    words = np.concatenate([np.full(part[1].size, motion) for motion, part in zip(motions, parts, strict=True)])
    return RideMaps(
        labels={"motion": words},
        columns=columns,
        status=np.concatenate([part[1] for part in parts]),
        notes=_notes(axle),
        rack_travel=float(rack),
        moving_side=side,
    )


def _grid(axle: Axle, travel: FloatArray, rack: float) -> tuple[PoseList, PoseList]:
    """Both corners at zero travel, (2, 1), and over travel, (2, T): one batch, the same kernel as a sweep."""
    batch = solve_batch(design_vectors(axle), np.array([rack]), np.append(travel, 0.0))
    parts = [getattr(batch, name)[:, 0] for name in ("values", "poses", "status", "iterations", "ends")]
    zero, grid = ([part[:, cut] for part in parts] for cut in (slice(-1, None), slice(0, -1)))
    return PoseList(layout.COLUMNS, *zero), PoseList(layout.COLUMNS, *grid)


def _still(grid: PoseList, zero: PoseList, stays: int) -> PoseList:
    """The list with one side held at zero travel."""
    parts = []
    for name in ("values", "poses", "status", "iterations", "ends"):
        part = getattr(grid, name).copy()
        part[stays] = getattr(zero, name)[stays]
        parts.append(part)
    return PoseList(grid.columns, *parts)


@dataclass(frozen=True)
class _State:
    """Solved positions of one motion: bump and roll (N,), travel and its rates by the position (2, N), poses (2, N)."""

    bump: FloatArray
    roll: FloatArray
    travel: FloatArray
    rates: FloatArray
    poses: PoseList
    status: StatusArray


def _figures(axle: Axle, state: _State, zero: PoseList, *, rolling: bool) -> dict[str, FloatArray]:
    """Columns of one motion; ``zero`` is both corners at zero travel."""
    poses, roll, travel, status = state.poses, state.roll, state.travel, state.status
    contact = contact_on(poses, axle.wheel.loaded_radius, roll)
    at_zero = contact_on(zero, axle.wheel.loaded_radius, np.zeros(1))
    signs = np.array([[1.0], [-1.0]])
    centre = vectors(poses, "wheel_centre")
    start = vectors(zero, "wheel_centre")
    across = np.stack([np.zeros_like(roll), np.cos(np.radians(roll)), -np.sin(np.radians(roll))], axis=-1)
    track = np.sum((contact.point[0] - contact.point[1]) * across, axis=-1)
    centre_y, centre_z = roll_centre(contact, roll)
    swing = _swing_arm(contact, poses, signs)
    steer_slope = -signs * poses["bump_steer_rate"]
    steer_rate = 0.5 * np.sum(steer_slope * state.rates, axis=0)
    nothing = np.full(roll.size, np.nan)
    columns = {
        "bump": state.bump.copy(),
        "roll_angle": roll.copy(),
        "wheel_travel_left": travel[0] + 0.0,
        "wheel_travel_right": travel[1] + 0.0,
        "axle_steer": np.mean(poses["steer_angle"] - zero["steer_angle"], axis=0),
        "track_change": track - (at_zero.point[0, :, 1] - at_zero.point[1, :, 1]),
        "roll_centre_y": centre_y,
        "roll_centre_z": centre_z,
        "axle_steer_rate": nothing if rolling else steer_rate,
        "roll_steer": steer_rate if rolling else nothing.copy(),
    }
    camber_road = -signs * np.degrees(np.arcsin(contact.lean))
    for s, name in enumerate(SIDES):
        columns[f"toe_in_{name}"] = poses["toe_in"][s].copy()
        columns[f"bump_steer_{name}"] = poses["toe_in"][s] - zero["toe_in"][s]
        columns[f"camber_{name}"] = poses["camber"][s].copy()
        columns[f"camber_road_{name}"] = camber_road[s]
        columns[f"recession_{name}"] = start[s, :, 0] - centre[s, :, 0]
        columns[f"swing_arm_{name}"] = swing[s]
        columns[f"bump_steer_rate_{name}"] = poses["bump_steer_rate"][s].copy()
        columns[f"camber_gain_{name}"] = poses["camber_gain"][s].copy()
    columns |= _anti_figures(axle, contact, vectors(poses, "wheel_centre_travel"))
    kept = {"bump", "roll_angle"}
    for name, values in columns.items():
        if name not in kept:
            values[status != OK] = np.nan
    ordered = {name: columns[name] for name in RIDE_COLUMNS if name in columns}
    return ordered | {name: values for name, values in columns.items() if name not in ordered}


def roll_centre(contact: Contact, roll: FloatArray) -> tuple[FloatArray, FloatArray]:
    """Roll centre in the road's frame: lateral place (N,) from where the body's centre plane meets the road, and height (N,), mm.

    Each wheel's line runs through its contact point, normal to its contact path over its own wheel travel at fixed rack and fixed road.
    Parallel lines that are one line (a symmetric axle with level arms) meet in the middle; other parallel lines give NaN.
    """
    angle = np.radians(roll)
    c, s = np.cos(angle), np.sin(angle)

    def front(vector: FloatArray) -> tuple[FloatArray, FloatArray]:
        return vector[..., 1] * c - vector[..., 2] * s, vector[..., 1] * s + vector[..., 2] * c

    y, z = front(contact.point)
    dy, dz = front(contact.slope)
    size = np.hypot(dy, dz)
    dy, dz = dy / size, dz / size
    y0, z0 = 0.5 * (y[0] + y[1]), 0.5 * (z[0] + z[1])
    left, right = (dy[k] * (y[k] - y0) + dz[k] * (z[k] - z0) for k in (0, 1))
    det = dy[0] * dz[1] - dz[0] * dy[1]
    with np.errstate(divide="ignore", invalid="ignore"):
        at_y, at_z = (left * dz[1] - dz[0] * right) / det, (dy[0] * right - left * dy[1]) / det
    parallel = np.abs(det) < 1e-12
    same = parallel & (np.abs(left) + np.abs(right) < 1e-9)
    at_y = np.where(parallel, np.where(same, 0.0, np.nan), at_y) + y0
    at_z = np.where(parallel, np.where(same, 0.0, np.nan), at_z) + z0
    slope = (z[0] - z[1]) / (y[0] - y[1])
    road = z0 + slope * (at_y - y0)
    # the body's centre plane y = 0 is the line (-z s, z c) of this frame; it meets the road line where z c = z0 + slope (-z s - y0)
    up = (z0 - slope * y0) / (c + slope * s)
    return at_y + up * s, at_z - road


def _swing_arm(contact: Contact, poses: PoseList, signs: FloatArray) -> FloatArray:
    centre, speed = vectors(poses, "wheel_centre"), vectors(poses, "wheel_centre_travel")
    twist = vectors(poses, "twist_travel")
    ahead = contact.point[..., 0] - centre[..., 0]
    with np.errstate(divide="ignore", invalid="ignore"):
        instant = centre[..., 1] + (twist[..., 1] * ahead - speed[..., 2]) / twist[..., 0]
    return signs * (contact.point[..., 1] - instant)


def _anti_figures(axle: Axle, contact: Contact, centre_slope: FloatArray) -> dict[str, FloatArray]:
    """Anti figures, %: 100 share slope wheelbase / cg_height, the slope dx/dz where the torque is reacted; NaN where data is missing."""
    vehicle = axle.vehicle
    count = contact.height.shape[1]
    figures = {name: np.full(count, np.nan) for name in ANTI_COLUMNS}
    if vehicle.wheelbase is None or vehicle.cg_height is None:
        return figures
    lever = 100.0 * vehicle.wheelbase / vehicle.cg_height
    slopes = {
        "outboard": contact.fixed_slope[..., 0] / contact.fixed_slope[..., 2],
        "inboard": centre_slope[..., 0] / centre_slope[..., 2],
    }
    front = vehicle.axle == "front"
    for s, side in enumerate(SIDES):
        if vehicle.brakes is not None and vehicle.brake_share is not None:
            braking = lever * vehicle.brake_share * slopes[vehicle.brakes][s]
            figures[f"anti_dive_{side}" if front else f"anti_lift_{side}"] = braking if front else -braking
        if vehicle.drive is not None:
            driving = lever * slopes[vehicle.drive][s]
            figures[f"anti_lift_{side}" if front else f"anti_squat_{side}"] = driving if front else -driving
    return figures


def _notes(axle: Axle) -> tuple[str, ...]:
    vehicle = axle.vehicle
    missing = [
        f"vehicle.{name}"
        for name in ("wheelbase", "cg_height", "brake_share", "brakes")
        if getattr(vehicle, name) is None
    ]
    if missing:
        return (f"Anti figures under braking are left empty: {', '.join(missing)} not given.",)
    where = "the upright (outboard)" if vehicle.brakes == "outboard" else "the body (inboard)"
    return (f"Braking: {100 * (vehicle.brake_share or 0):g} % at this axle, torque reacted at {where}.",)
