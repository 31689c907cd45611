"""An axle as plain data: ISO 8855 axes (x forward, y left, z up), mm and deg, whatever the file said."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field, replace
from pathlib import Path
from typing import Any, Literal

import numpy as np

from toewright.core.types import FloatArray

Side = Literal["left", "right"]
Kind = Literal["double-wishbone", "strut"]
AxleEnd = Literal["front", "rear"]

POINT_NAMES: Mapping[str, tuple[str, ...]] = {
    "double-wishbone": (
        "upper_pivot_front",
        "upper_pivot_rear",
        "upper_ball_joint",
        "lower_pivot_front",
        "lower_pivot_rear",
        "lower_ball_joint",
        "tie_rod_inner",
        "tie_rod_outer",
        "wheel_centre",
    ),
    "strut": (
        "lower_pivot_front",
        "lower_pivot_rear",
        "lower_ball_joint",
        "strut_top_mount",
        "strut_axis_point",
        "tie_rod_inner",
        "tie_rod_outer",
        "wheel_centre",
    ),
}
"""Hardpoints of each corner kind, in the order of files and tables."""

MIRROR = np.array([1.0, -1.0, 1.0])


@dataclass(frozen=True)
class Corner:
    """One corner.

    Attributes:
        side: "left" or "right".
        kind: "double-wishbone" or "strut".
        points: name to (3,) mm, the names of POINT_NAMES.
    """

    side: Side
    kind: Kind
    points: Mapping[str, FloatArray]

    @property
    def sign(self) -> float:
        """+1 on the left, -1 on the right: s of all formulas."""
        return 1.0 if self.side == "left" else -1.0

    def mirrored(self) -> Corner:
        """The mirror image on the other side of the car."""
        other: Side = "right" if self.side == "left" else "left"
        return replace(self, side=other, points={name: point * MIRROR for name, point in self.points.items()})

    def replace_points(self, moved: Mapping[str, FloatArray]) -> Corner:
        """The same corner with some points (3,) mm elsewhere.

        Raises:
            KeyError: if the corner has no such point.
        """
        for name in moved:
            if name not in self.points:
                raise KeyError(f"{name!r} is not a point of a {self.kind} corner")
        return replace(self, points={**self.points, **{k: np.asarray(v, dtype=float) for k, v in moved.items()}})


@dataclass(frozen=True)
class Wheel:
    """Wheel of both sides, mm; what is None was not given."""

    loaded_radius: float
    tyre_width: float | None = None
    rim_diameter: float | None = None
    rim_width: float | None = None


@dataclass(frozen=True)
class Setup:
    """Static angles of each wheel, deg: toe-in +, top outboard +."""

    toe_in: float = 0.0
    camber: float = 0.0


@dataclass(frozen=True)
class Rack:
    """Steering rack: axis (3,) unit vector, stroke mm each way, travel mm for one turn of the hand wheel."""

    axis: FloatArray
    stroke: float
    travel_per_turn: float | None = None


@dataclass(frozen=True)
class Vehicle:
    """What the axle's results need to know of the car; mm; what is None was not given.

    Attributes:
        axle: "front" or "rear".
        wheelbase: to the other axle.
        other_axle: file of the other axle.
        cg_height: centre of gravity above the road.
        brake_share: share of the braking force at this axle, 0 to 1.
        brakes, drive: where the torque is reacted, "outboard" (upright) or "inboard" (body).
        front_overhang: front axle to the foremost body corner.
        body_width: at that corner.
    """

    axle: AxleEnd = "front"
    wheelbase: float | None = None
    other_axle: Path | None = None
    cg_height: float | None = None
    brake_share: float | None = None
    brakes: Literal["outboard", "inboard"] | None = None
    drive: Literal["outboard", "inboard"] | None = None
    front_overhang: float | None = None
    body_width: float | None = None


@dataclass(frozen=True)
class Axle:
    """One axle with both corners.

    Attributes:
        symmetric: the right corner is the mirror image of the left one.
        path, sha256: the file it came from and the hash of its bytes; None for an axle made in memory.
        remarks: what looked odd on reading, each one sentence.
        extra: the file's tables ``targets``, ``tolerance`` and ``adjusters`` as read.
        axes, length_unit: what the file is written in; ``extra`` is in these, everything else in ISO 8855 and mm.
    """

    title: str
    vehicle: Vehicle
    wheel: Wheel
    setup: Setup
    rack: Rack | None
    left: Corner
    right: Corner
    symmetric: bool = True
    path: Path | None = None
    sha256: str | None = None
    remarks: tuple[str, ...] = ()
    extra: Mapping[str, Any] = field(default_factory=dict)
    axes: str = "iso-8855"
    length_unit: str = "mm"

    def corner(self, side: str) -> Corner:
        """The corner on one side.

        Raises:
            ValueError: if side is neither "left" nor "right".
        """
        if side not in ("left", "right"):
            raise ValueError(f"side is {side!r}; allowed are 'left' and 'right'")
        return self.left if side == "left" else self.right

    def with_points(self, moved: Mapping[tuple[str, str], FloatArray]) -> Axle:
        """The axle with points elsewhere: {(side, point): (3,) mm}. On a symmetric axle a left point takes the right along."""
        left = self.left.replace_points({p: v for (s, p), v in moved.items() if s == "left"})
        right = self.right.replace_points({p: v for (s, p), v in moved.items() if s == "right"})
        if self.symmetric and not any(s == "right" for s, _ in moved):
            return replace(self, left=left, right=left.mirrored())
        return replace(self, left=left, right=right, symmetric=False)
