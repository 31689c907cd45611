"""The axle in a turn: both wheels on one rack, Ackermann quality, turn centre, slip at walking pace, turning circles."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any, ClassVar

import numpy as np
from numpy.typing import ArrayLike

from toewright.core.types import FloatArray, StatusArray
from toewright.kinematics.ackermann import DEFINITIONS, ackermann_geometry, least_slip, normals_meet
from toewright.kinematics.batch import PoseList, solve_poses
from toewright.kinematics.design import design_vectors
from toewright.kinematics.road import roll_axle
from toewright.kinematics.status import OK
from toewright.kinematics.sweep import check_positions, default_rack
from toewright.kinematics.tables import ResultTable
from toewright.model.axle import Axle
from toewright.model.errors import InputError
from toewright.model.files import load
from toewright.model.remarks import other_axle_missing

TURN_COLUMNS = (
    "rack_travel",
    "hand_wheel_angle",
    "status",
    "steer_left",
    "steer_right",
    "mean_steer",
    "ideal_inner_steer",
    "ackermann_error",
    "ackermann_percent",
    "normals_meet_x",
    "normals_meet_y",
    "centre_x",
    "centre_y",
    "slip_front_left",
    "slip_front_right",
    "slip_rear_left",
    "slip_rear_right",
    "turn_radius",
    "kerb_circle",
    "steering_ratio",
    "camber_left",
    "camber_right",
    "scrub_radius_left",
    "scrub_radius_right",
    "mechanical_trail_left",
    "mechanical_trail_right",
)
"""Columns of the long table, in its order."""


@dataclass(frozen=True)
class TurnMaps(ResultTable):
    """An axle turning: TURN_COLUMNS over rack travel, then ``wall_circle``.

    Attributes:
        definition: name of the definition of Ackermann percent, one of toewright.kinematics.ackermann.DEFINITIONS.
        inner_turns_more: (N,) deg, |inner| - |outer|: + where the inner wheel turns more, - for reverse Ackermann.
    """

    definition: str
    inner_turns_more: FloatArray

    dimension: ClassVar[str] = "rack_travel"
    order: ClassVar[tuple[str, ...]] = TURN_COLUMNS

    @property
    def rack_travel(self) -> FloatArray:
        """(N,) mm."""
        return self.columns["rack_travel"]


@dataclass(frozen=True)
class _Wheels:
    """Both wheels of an axle at N positions: steer (2, N) deg, contact (2, N, 2) mm in this file's axes."""

    steer: FloatArray
    contact: FloatArray
    status: StatusArray
    poses: PoseList | None


def _own_wheels(axle: Axle, rack: FloatArray, travel: float, roll: float | None) -> _Wheels:
    if roll is None:
        poses = solve_poses(design_vectors(axle), rack, np.full(rack.size, travel))
        status = np.max(poses.status, axis=0).astype(np.int8)
    else:
        rolled = roll_axle(axle, np.full(rack.size, roll), rack)
        poses, status = rolled.poses, rolled.status
    contact = np.stack([poses["contact_x"], poses["contact_y"]], axis=-1)
    return _Wheels(poses["steer_angle"], contact, status, poses)


def design_x(axle: Axle) -> float:
    """Mean x of both wheel centres at design, mm."""
    return 0.5 * float(axle.left.points["wheel_centre"][0] + axle.right.points["wheel_centre"][0])


def other_axle_x(axle: Axle) -> float:
    """x of the other axle's line (mm): behind a front axle, ahead of a rear one, by the wheelbase.

    Raises:
        InputError: if the file gives no wheelbase.
    """
    base = axle.vehicle.wheelbase
    if base is None:
        raise InputError(f"{axle.path or axle.title}: vehicle.wheelbase: is missing; turning needs it, add it")
    return design_x(axle) + (-base if axle.vehicle.axle == "front" else base)


def _other_wheels(
    axle: Axle, own_design: FloatArray, rack: FloatArray, travel: float, roll: float | None, ratio: float
) -> tuple[_Wheels, str]:
    x_r = other_axle_x(axle)
    place = axle.vehicle.other_axle
    if place is None:
        if ratio != 0.0:
            raise InputError(
                f"{axle.path or axle.title}: vehicle.other_axle: is missing, so its rack can't be moved; name its file"
            )
        contact = np.empty((2, rack.size, 2))
        contact[..., 0] = x_r
        contact[..., 1] = own_design[:, np.newaxis]
        status = np.zeros(rack.size, dtype=np.int8)
        return _Wheels(
            np.zeros((2, rack.size)), contact, status, None
        ), "the other axle's wheels stand straight at this axle's track"
    missing = other_axle_missing(axle)
    if missing is not None:
        raise InputError(f"{axle.path or axle.title}: {missing}, or leave it out")
    try:
        other = load(place)
    except InputError as error:
        raise InputError(f"{axle.path or axle.title}: vehicle.other_axle: {error}") from error
    if other.vehicle.axle == axle.vehicle.axle:
        raise InputError(
            f"{axle.path or axle.title}: vehicle.other_axle: {place} is a {other.vehicle.axle} axle too; name the other one"
        )
    if ratio != 0.0 and other.rack is None:
        raise InputError(
            f"{place}: has no [rack], so it can't steer; leave the ratio of the other rack out, or add a [rack] table"
        )
    wheels = _own_wheels(other, ratio * rack, travel, roll)
    shift = np.array([x_r - design_x(other), 0.0])
    steered = "its own toe and bump steer" + (f", its rack at {ratio:g} times this one's travel" if ratio else "")
    return (
        _Wheels(wheels.steer, wheels.contact + shift, wheels.status, wheels.poses),
        f"the other axle is {other.title} with {steered}",
    )


def turn(
    axle: Axle,
    rack: ArrayLike | None = None,
    *,
    travel: float = 0.0,
    roll: float | None = None,
    ackermann: str = "ideal-inner",
    other_rack: float = 0.0,
) -> TurnMaps:
    """Turn an axle by its rack.

    Args:
        axle: the axle; its file's ``wheelbase`` is needed, its ``other_axle`` is used when named.
        rack: (N,) rack travel in mm, ascending; 21 positions over the stroke when not given.
        travel: wheel travel of all wheels, mm, bump +.
        roll: roll angle in deg, right side down +; in place of ``travel``.
        ackermann: definition of Ackermann percent, one of toewright.kinematics.ackermann.DEFINITIONS.
        other_rack: rack travel of the other axle per mm of this one's, for four-wheel steering.

    Raises:
        InputError: without a wheelbase, for a wrong other axle, or where both travel and roll are given.
        ValueError: for bad positions or an unknown definition.
    """
    at = check_positions(rack, default_rack(axle), "rack")
    if roll is not None and travel != 0.0:
        raise InputError(
            "wheel travel and roll angle can't both be given: a roll angle sets the travels; leave one out"
        )
    if ackermann not in DEFINITIONS:
        raise ValueError(f"ackermann is {ackermann!r}; allowed are {', '.join(DEFINITIONS)}")
    front = axle.vehicle.axle == "front"
    x_r = other_axle_x(axle)
    own = _own_wheels(axle, at, travel, roll)
    design = _own_wheels(axle, np.zeros(1), 0.0, None)
    other, other_words = _other_wheels(axle, design.contact[:, 0, 1], at, travel, roll, other_rack)
    poses = own.poses
    assert poses is not None
    status = np.maximum(own.status, other.status)
    steer, contact = own.steer, own.contact
    mean = 0.5 * (steer[0] + steer[1])
    quality = ackermann_geometry(steer, contact, x_r, front=front, definition=ackermann)
    meet = normals_meet(steer, contact)
    middle = np.array([x_r, 0.0])
    fit = least_slip(np.concatenate([steer, other.steer]), np.concatenate([contact, other.contact]), middle)
    fronts, rears = (fit.slip[:2], fit.slip[2:]) if front else (fit.slip[2:], fit.slip[:2])
    base = 0.5 * (other.contact[0] + other.contact[1])
    front_contact = contact if front else other.contact
    reach = np.max(np.linalg.norm(front_contact - fit.centre, axis=-1), axis=0)
    ratio = np.full(at.size, np.nan)
    hand = np.full(at.size, np.nan)
    if axle.rack is not None and axle.rack.travel_per_turn is not None:
        per_mm = _left_sign(design) * 360.0 / axle.rack.travel_per_turn
        hand = per_mm * at
        with np.errstate(divide="ignore", invalid="ignore"):
            ratio = per_mm / (0.5 * (poses["steer_rate"][0] + poses["steer_rate"][1]))
    tyre = axle.wheel.tyre_width
    columns: dict[str, FloatArray] = {
        "rack_travel": at,
        "hand_wheel_angle": hand,
        "steer_left": steer[0],
        "steer_right": steer[1],
        "mean_steer": mean,
        "ideal_inner_steer": quality.ideal_inner,
        "ackermann_error": quality.error,
        "ackermann_percent": quality.percent,
        "normals_meet_x": meet[:, 0],
        "normals_meet_y": meet[:, 1],
        "centre_x": fit.centre[:, 0],
        "centre_y": fit.centre[:, 1],
        "slip_front_left": fronts[0],
        "slip_front_right": fronts[1],
        "slip_rear_left": rears[0],
        "slip_rear_right": rears[1],
        "turn_radius": np.linalg.norm(fit.centre - base, axis=-1),
        "kerb_circle": 2.0 * reach + (tyre or 0.0),
        "steering_ratio": ratio,
        **{
            f"{name}_{side}": poses[name][s].copy()
            for name in ("camber", "scrub_radius", "mechanical_trail")
            for s, side in enumerate(("left", "right"))
        },
        "wall_circle": _wall_circle(axle, x_r, fit.centre),
    }
    _blank(columns, status, keep=("rack_travel", "hand_wheel_angle"))
    kerb = (
        f"with the tyre's width of {tyre:g} mm"
        if tyre
        else "from the contact points alone (wheel.tyre_width is not given)"
    )
    return TurnMaps(
        labels={},
        columns=columns,
        status=status,
        notes=(
            f"Ackermann percent by {ackermann}: {DEFINITIONS[ackermann]}.",
            f"Slip angles: {other_words}.",
            f"Kerb-to-kerb circle: {kerb}.",
        ),
        definition=ackermann,
        inner_turns_more=np.where(status == OK, np.abs(quality.inner) - np.abs(quality.outer), np.nan),
    )


def _left_sign(design: _Wheels) -> float:
    """+1 where rack travel to + turns the wheels to the left, -1 where it turns them to the right (a rack behind the axle)."""
    assert design.poses is not None
    return -1.0 if float(np.sum(design.poses["steer_rate"][:, 0])) < 0.0 else 1.0


def _wall_circle(axle: Axle, x_r: float, centre: FloatArray) -> FloatArray:
    vehicle = axle.vehicle
    if vehicle.front_overhang is None or vehicle.body_width is None:
        return np.full(len(centre), np.nan)
    front_x = (design_x(axle) if vehicle.axle == "front" else x_r) + vehicle.front_overhang
    corners = np.array([[front_x, 0.5 * vehicle.body_width], [front_x, -0.5 * vehicle.body_width]])
    circle: FloatArray = 2.0 * np.max(np.linalg.norm(corners[:, np.newaxis] - centre, axis=-1), axis=0)
    return circle


def _blank(columns: Mapping[str, Any], status: StatusArray, keep: tuple[str, ...]) -> None:
    for name, values in columns.items():
        if name not in keep:
            values[status != OK] = np.nan
