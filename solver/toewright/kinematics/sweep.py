"""Sweeps of an axle: both corners over rack travel and wheel travel together."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
from numpy.typing import ArrayLike

from toewright.core import layout
from toewright.core.types import FloatArray
from toewright.kinematics.batch import Batch, solve_batch
from toewright.kinematics.design import SIDES, design_vectors
from toewright.kinematics.joints import joint_positions, link_angles
from toewright.kinematics.maps import VECTORS, CornerMaps, Stop
from toewright.kinematics.status import OK, STATUS_NAMES
from toewright.model.axle import Axle

POSITIONS = 21
"""Positions along rack and along travel when none are given."""

TRAVEL_SHARE = 0.11
"""Default wheel travel each way, as a share of the loaded radius: 25 mm on a small racing wheel, 35 mm on a road car's."""


def default_rack(axle: Axle, positions: int = POSITIONS) -> FloatArray:
    """Rack positions (n,) mm over the whole stroke; the single position 0 for an axle without a rack."""
    if axle.rack is None:
        return np.zeros(1)
    return np.linspace(-axle.rack.stroke, axle.rack.stroke, positions)


def default_travel(axle: Axle, positions: int = POSITIONS) -> FloatArray:
    """Wheel travel (n,) mm either way, the loaded radius times TRAVEL_SHARE rounded to 5 mm."""
    reach = max(5.0, 5.0 * round(axle.wheel.loaded_radius * TRAVEL_SHARE / 5.0))
    return np.linspace(-reach, reach, positions)


def check_positions(values: ArrayLike | None, default: FloatArray, name: str) -> FloatArray:
    """Positions (n,) as an array, or the default.

    Raises:
        ValueError: if they are not finite numbers that ascend.
    """
    if values is None:
        return default
    positions = np.atleast_1d(np.asarray(values, dtype=float))
    if positions.ndim != 1 or positions.size == 0 or not np.all(np.isfinite(positions)):
        raise ValueError(f"{name} must be one or more finite numbers (mm)")
    if np.any(np.diff(positions) <= 0.0):
        raise ValueError(f"{name} must ascend (mm)")
    return positions


def sweep(
    axle: Axle,
    rack: ArrayLike | None = None,
    travel: ArrayLike | None = None,
    *,
    travel_at: str = "wheel-centre",
    sides: Sequence[str] = SIDES,
) -> CornerMaps:
    """Solve the corners of an axle over a grid of rack travel and wheel travel.

    Args:
        axle: the axle.
        rack: (R,) rack travel in mm, + to the left, ascending; 21 positions over the stroke when not given.
        travel: (T,) wheel travel in mm, + bump, ascending; 21 positions over a usual range when not given.
        travel_at: "wheel-centre" or "contact-point": what the wheel travel is the height of.
        sides: which corners.

    Returns:
        CornerMaps with axes (side, rack_travel, wheel_travel).

    Raises:
        ValueError: for positions that are not finite or do not ascend, an unknown side or an unknown ``travel_at``.
    """
    at_rack = check_positions(rack, default_rack(axle), "rack")
    at_travel = check_positions(travel, default_travel(axle), "travel")
    batch = solve_batch(
        design_vectors(axle, sides), at_rack, at_travel, travel_at=travel_at, columns=(*layout.COLUMNS, "bump_steer")
    )
    return corner_maps(axle, tuple(sides), at_rack, at_travel, travel_at, batch)


def design_pose(axle: Axle, *, sides: Sequence[str] = SIDES) -> CornerMaps:
    """The design position alone: axes (side, 1, 1)."""
    return sweep(axle, [0.0], [0.0], sides=sides)


def corner_maps(
    axle: Axle, sides: tuple[str, ...], rack: FloatArray, travel: FloatArray, travel_at: str, batch: Batch
) -> CornerMaps:
    """Dress a batch of one axle's corners as CornerMaps; the batch holds layout.COLUMNS and bump_steer."""
    hidden = {f"{stem}_{letter}" for stem in VECTORS.values() for letter in "xyz"}
    shown = {f"{stem}_{letter}" for stem in ("wheel_centre", "contact") for letter in "xyz"}
    scalars = {
        name: np.ascontiguousarray(batch[name])
        for name in batch.columns
        if name not in {"residual", "grip"} and (name not in hidden or name in shown)
    }
    vectors = {
        name: np.stack([batch[f"{stem}_{letter}"] for letter in "xyz"], axis=-1) for name, stem in VECTORS.items()
    }
    axis = axle.rack.axis if axle.rack is not None else np.zeros(3)
    corners = [axle.corner(side) for side in sides]
    joints = [joint_positions(c, batch.poses[i], rack[:, np.newaxis], axis) for i, c in enumerate(corners)]
    return CornerMaps(
        sides=sides,
        rack_travel=rack,
        wheel_travel=travel,
        travel_at=travel_at,
        status=batch.status,
        iterations=batch.iterations,
        residual=batch["residual"],
        scalars=scalars,
        vectors=vectors,
        joints=tuple(joints),
        link_angles=tuple(link_angles(c, j) for c, j in zip(corners, joints, strict=True)),
        poses=batch.poses,
        stops=find_stops(sides, rack, travel, batch),
    )


def find_stops(sides: Sequence[str], rack: FloatArray, travel: FloatArray, batch: Batch) -> tuple[Stop, ...]:
    """The first stop in each direction, per side: along the rack, and along travel at the rack position that stops earliest."""
    stops: list[Stop] = []
    for s, side in enumerate(sides):
        bad = batch.status[s] != OK
        ends = batch.ends[s]
        at_rack = np.broadcast_to(rack[:, np.newaxis], bad.shape)
        at_travel = np.broadcast_to(travel, bad.shape)
        short_of_rack = bad & (np.abs(ends[..., 0] - at_rack) > 0.0)
        short_of_travel = bad & ~short_of_rack
        for along, mask, asked, index in (
            ("rack_travel", short_of_rack, at_rack, 0),
            ("wheel_travel", short_of_travel, at_travel, 1),
        ):
            for sign in (1.0, -1.0):
                there = mask & (asked * sign > 0.0)
                if not there.any():
                    continue
                place = np.unravel_index(np.argmin(np.where(there, np.abs(ends[..., index]), np.inf)), there.shape)
                stops.append(
                    Stop(
                        side=side,
                        status=STATUS_NAMES[batch.status[s][place]],
                        along=along,
                        rack_travel=float(ends[place][0]),
                        wheel_travel=float(ends[place][1]),
                        requested=float(np.max(np.abs(np.where(there, asked, 0.0))) * sign),
                    )
                )
    return tuple(stops)
