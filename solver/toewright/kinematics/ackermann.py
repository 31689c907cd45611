"""Where the wheels of an axle would have to point: Ackermann geometry with the true contact points.

All in the body's xy plane. A wheel at c with steer angle delta has the normal (-sin delta, cos delta); its turn centre is where
that normal meets the line x = x_r of the other axle. The law cot(outer) - cot(inner) = t / L (any text on vehicle dynamics, such as
R. N. Jazar, Vehicle Dynamics, ch. 7) is the special case of contact points at +-t/2.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np

from toewright.core.types import FloatArray

DEFINITIONS: Mapping[str, str] = {
    "ideal-inner": "100 (inner - outer) / (ideal inner - outer): the ideal inner wheel shares the turn centre of the outer wheel",
    "ideal-outer": "100 (inner - outer) / (inner - ideal outer): the ideal outer wheel shares the turn centre of the inner wheel",
    "single-track": "100 (inner - outer) / (ideal inner - ideal outer): both ideal wheels share the turn centre of one wheel "
    "in the middle of the axle that is steered by the mean of both",
}
"""Definitions of Ackermann percent by name; angles are magnitudes."""

STRAIGHT = 0.5
"""Mean steer (deg) below which Ackermann percent is left empty: it is a quotient of two vanishing differences."""

ROUNDING = 1e-9
"""Mean steer (deg) that is no more than rounding: straight ahead."""


@dataclass(frozen=True)
class Ackermann:
    """Ackermann geometry of an axle at N positions, deg and %."""

    ideal_inner: FloatArray
    error: FloatArray
    percent: FloatArray
    inner: FloatArray
    outer: FloatArray


def _ideal(steer: FloatArray, own: FloatArray, other: FloatArray, x_r: float) -> FloatArray:
    """Steer (deg) of a wheel at ``other`` (N, 2) that shares the turn centre of a wheel at ``own`` (N, 2) steered by ``steer``."""
    s, c = np.sin(np.radians(steer)), np.cos(np.radians(steer))
    along = other[:, 0] - x_r
    # y_c - c_iy = (c_oy - c_iy) + (c_ox - x_r) cot(delta), multiplied by sin(delta) so that straight ahead is no special case
    across = (own[:, 1] - other[:, 1]) * s + (own[:, 0] - x_r) * c
    angle: FloatArray = np.degrees(np.arctan(along * s / across))
    return angle


def ackermann_geometry(
    steer: FloatArray, contact: FloatArray, x_r: float, *, front: bool, definition: str = "ideal-inner"
) -> Ackermann:
    """Ackermann geometry of an axle.

    Args:
        steer: (2, N) steer angle of left and right, deg, left +.
        contact: (2, N, 2) contact points x, y, mm.
        x_r: x of the other axle's line, mm.
        front: a front axle's outer wheel is the right one when it steers to the left; a rear axle's is the left one. Straight
            ahead, where there is no outer wheel, it is taken as in a turn to the left.
        definition: one of DEFINITIONS, for the percentage.

    Raises:
        ValueError: for an unknown definition.
    """
    if definition not in DEFINITIONS:
        raise ValueError(f"ackermann is {definition!r}; allowed are {', '.join(DEFINITIONS)}")
    mean = 0.5 * (steer[0] + steer[1])
    turn = np.where(
        np.abs(mean) < ROUNDING, 0.0, mean
    )  # straight ahead counts as a turn to the left, whatever rounding says
    right_is_outer = (turn >= 0.0) if front else (turn < 0.0)
    pick = np.where(right_is_outer, 1, 0)
    rows = np.arange(mean.size)
    outer, inner = steer[pick, rows], steer[1 - pick, rows]
    outer_at, inner_at = contact[pick, rows], contact[1 - pick, rows]
    ideal_inner = _ideal(outer, outer_at, inner_at, x_r)
    big, small = np.abs(inner), np.abs(outer)
    if definition == "ideal-inner":
        ideal_difference = np.abs(ideal_inner) - small
    elif definition == "ideal-outer":
        ideal_difference = big - np.abs(_ideal(inner, inner_at, outer_at, x_r))
    else:
        middle = 0.5 * (outer_at + inner_at)
        ideal_difference = np.abs(_ideal(mean, middle, inner_at, x_r)) - np.abs(_ideal(mean, middle, outer_at, x_r))
    with np.errstate(divide="ignore", invalid="ignore"):
        percent = 100.0 * (big - small) / ideal_difference
    percent = np.where((np.abs(mean) < STRAIGHT) | ~np.isfinite(percent), np.nan, percent)
    return Ackermann(ideal_inner, big - np.abs(ideal_inner), percent, inner, outer)


def normals_meet(steer: FloatArray, contact: FloatArray) -> FloatArray:
    """Where the normals of two wheels meet, (N, 2) mm; NaN where they are parallel. steer (2, N) deg, contact (2, N, 2) mm."""
    angle = np.radians(steer)
    normal = np.stack([-np.sin(angle), np.cos(angle)], axis=-1)
    between = contact[1] - contact[0]
    cross = normal[0, :, 0] * normal[1, :, 1] - normal[0, :, 1] * normal[1, :, 0]
    with np.errstate(divide="ignore", invalid="ignore"):
        far = (between[:, 0] * normal[1, :, 1] - between[:, 1] * normal[1, :, 0]) / cross
        met = contact[0] + far[:, np.newaxis] * normal[0]
    return np.where((np.abs(cross) < 1e-12)[:, np.newaxis], np.nan, met)


@dataclass(frozen=True)
class SlipFit:
    """Motion of a car at walking pace with the least slip.

    Attributes:
        centre: (N, 2) mm, instantaneous centre; NaN where the motion is straight on.
        slip: (W, N) deg, slip angle of each wheel, velocity to the left of the heading +.
        curvature: (N,) 1/mm, + to the left.
    """

    centre: FloatArray
    slip: FloatArray
    curvature: FloatArray


STRAIGHT_CURVATURE = 1e-9
"""Curvature (1/mm) below which the motion counts as straight on: a radius of 1000 km."""


def _bend(
    v: tuple[FloatArray, FloatArray],
    square: FloatArray,
    px: FloatArray,
    py: FloatArray,
    qx: FloatArray,
    qy: FloatArray,
    sx: FloatArray,
    sy: FloatArray,
) -> FloatArray:
    """Second derivative of the velocity's direction: first derivatives p and q and second derivative s of the velocity v."""
    first = v[0] * py - v[1] * px
    turn: FloatArray = (qx * py + v[0] * sy - qy * px - v[1] * sx) / square
    return turn - first * 2.0 * (v[0] * qx + v[1] * qy) / square**2


def least_slip(steer: FloatArray, contact: FloatArray, origin: FloatArray) -> SlipFit:
    """The instantaneous centre that minimises the sum of squared slip angles.

    The motion is written by its sideslip and curvature at ``origin``, which is regular straight ahead; Newton's method with the exact
    second derivatives of the slip angles.

    Args:
        steer: (W, N) steer angle of each wheel, deg.
        contact: (W, N, 2) contact points, mm.
        origin: (2,) a point of the other axle's line, mm.
    """
    heading = np.radians(steer)
    rx, ry = contact[..., 0] - origin[0], contact[..., 1] - origin[1]
    count = steer.shape[1]
    beta, kappa = np.zeros(count), np.zeros(count)
    length = float(np.nanmax(np.abs(rx))) if np.isfinite(rx).any() else 1.0
    for _ in range(60):
        vx, vy = np.cos(beta) - kappa * ry, np.sin(beta) + kappa * rx
        square, v = vx * vx + vy * vy, (vx, vy)
        slip = np.arctan2(vy, vx) - heading
        slip = np.arctan2(np.sin(slip), np.cos(slip))
        # derivatives of the velocity by beta and kappa
        bx, by, kx, ky = -np.sin(beta), np.cos(beta), -ry, rx
        sb, sk = (vx * by - vy * bx) / square, (vx * ky - vy * kx) / square

        zero = np.zeros_like(rx)
        sbb = _bend(v, square, bx + zero, by + zero, bx + zero, by + zero, -np.cos(beta) + zero, -np.sin(beta) + zero)
        sbk = _bend(v, square, bx + zero, by + zero, kx, ky, zero, zero)
        skk = _bend(v, square, kx, ky, kx, ky, zero, zero)
        gb, gk = np.sum(slip * sb, axis=0), np.sum(slip * sk, axis=0)
        hbb = np.sum(sb * sb + slip * sbb, axis=0)
        hbk = np.sum(sb * sk + slip * sbk, axis=0)
        hkk = np.sum(sk * sk + slip * skk, axis=0)
        det = hbb * hkk - hbk * hbk
        plain = det <= 0.0  # far from the minimum: Gauss-Newton instead
        hbb, hbk = np.where(plain, np.sum(sb * sb, axis=0), hbb), np.where(plain, np.sum(sb * sk, axis=0), hbk)
        hkk = np.where(plain, np.sum(sk * sk, axis=0), hkk)
        det = hbb * hkk - hbk * hbk
        db, dk = -(hkk * gb - hbk * gk) / det, -(hbb * gk - hbk * gb) / det
        beta, kappa = beta + db, kappa + dk
        if not np.nanmax(np.abs(np.append(db, dk * length)), initial=0.0) > 1e-15:
            break
    straight = np.abs(kappa) < STRAIGHT_CURVATURE
    with np.errstate(divide="ignore", invalid="ignore"):
        centre = origin + np.stack([-np.sin(beta) / kappa, np.cos(beta) / kappa], axis=-1)
    return SlipFit(np.where(straight[:, np.newaxis], np.nan, centre), np.degrees(slip), kappa)
