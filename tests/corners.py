"""Corners for tests: made in memory, so that they may be as abstract as a check needs."""

from __future__ import annotations

from collections.abc import Mapping
from pathlib import Path

import numpy as np

from toewright.model.axle import Axle, Corner, Rack, Setup, Vehicle, Wheel

HARDPOINTS = Path(__file__).parent.parent / "hardpoints"
SAMPLES = sorted(HARDPOINTS.glob("*.toml"))

PLAIN = {
    "double-wishbone": {
        "upper_pivot_front": [118.0, 262.0, 291.0],
        "upper_pivot_rear": [-126.0, 268.0, 283.0],
        "upper_ball_joint": [-9.0, 528.0, 312.0],
        "lower_pivot_front": [131.0, 214.0, 124.0],
        "lower_pivot_rear": [-142.0, 221.0, 118.0],
        "lower_ball_joint": [5.0, 561.0, 116.0],
        "tie_rod_inner": [62.0, 228.0, 148.0],
        "tie_rod_outer": [71.0, 548.0, 152.0],
        "wheel_centre": [0.0, 602.0, 228.0],
    },
    "strut": {
        "lower_pivot_front": [24.0, 356.0, 211.0],
        "lower_pivot_rear": [-262.0, 371.0, 219.0],
        "lower_ball_joint": [9.0, 691.0, 192.0],
        "strut_top_mount": [-37.0, 566.0, 806.0],
        "strut_axis_point": [-9.0, 622.0, 402.0],
        "tie_rod_inner": [-149.0, 338.0, 233.0],
        "tie_rod_outer": [-133.0, 667.0, 226.0],
        "wheel_centre": [0.0, 741.0, 302.0],
    },
}
"""A usual left corner of each kind, mm."""


def make_axle(
    points: Mapping[str, object],
    kind: str = "double-wishbone",
    *,
    right: Mapping[str, object] | None = None,
    radius: float = 228.0,
    toe_in: float = -0.1,
    camber: float = -1.5,
    rack_axis: tuple[float, float, float] | None = (0.0, 1.0, 0.0),
    stroke: float = 30.0,
    vehicle: Vehicle | None = None,
) -> Axle:
    """An axle with this left corner, the right one its mirror image unless given."""
    left = Corner("left", kind, {k: np.array(v, dtype=float) for k, v in points.items()})  # type: ignore[arg-type]
    other = left.mirrored()
    if right is not None:
        other = Corner("right", kind, {k: np.array(v, dtype=float) for k, v in right.items()})  # type: ignore[arg-type]
    return Axle(
        title="test axle",
        vehicle=vehicle or Vehicle(wheelbase=1550.0),
        wheel=Wheel(radius),
        setup=Setup(toe_in, camber),
        rack=None if rack_axis is None else Rack(np.array(rack_axis), stroke),
        left=left,
        right=other,
        symmetric=right is None,
    )


def scatter(kind: str, size: float, seed: int) -> dict[str, np.ndarray]:
    """The plain corner with every coordinate moved by a normal deviate of this size (mm)."""
    rng = np.random.default_rng(seed)
    return {name: np.array(p) + rng.normal(0.0, size, 3) for name, p in PLAIN[kind].items()}
