"""What results mean, in sentences with units and places: limits, turning, riding, remarks."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np

from toewright.kinematics.summary import mirror_images
from toewright.views.words import number

if TYPE_CHECKING:
    from collections.abc import Sequence

    from toewright.core.types import FloatArray
    from toewright.kinematics.limits import AxleLimits
    from toewright.kinematics.riding import RideMaps
    from toewright.kinematics.sheet import CornerSheet
    from toewright.kinematics.summary import Place
    from toewright.kinematics.turning import TurnMaps
    from toewright.model.axle import Axle
    from toewright.views.toe import ToeScale

SHOWN_FROM = 3.0
"""Mean steer (deg) from which Ackermann figures are shown: below, static toe dominates them."""

_AS_PRINTED = 0.005
"""Half the last decimal of a printed steer angle: what reads as SHOWN_FROM counts as it."""

SLIPS = ("slip_front_left", "slip_front_right", "slip_rear_left", "slip_rear_right")


def ackermann_shown(mean_steer: FloatArray) -> np.ndarray[Any, np.dtype[np.bool_]]:
    """Where Ackermann figures are shown: mean steer (N,) in deg of SHOWN_FROM or more either way."""
    shown: np.ndarray[Any, np.dtype[np.bool_]] = np.abs(mean_steer) >= SHOWN_FROM - _AS_PRINTED
    return shown


def sheet_remarks(axle: Axle, sheets: Sequence[CornerSheet]) -> list[str]:
    """The file's remarks and those on the design position, with the side; once where both sides have the same."""
    found = list(axle.remarks)
    for sheet in sheets:
        others = [s for s in sheets if s is not sheet]
        for remark in sheet.remarks:
            shared = mirror_images(axle) or all(remark in s.remarks for s in others)
            text = f"{'both sides' if shared else sheet.side}: {remark}"
            if text not in found:
                found.append(text)
    return found


def limit_sentences(axle: Axle, limits: AxleLimits) -> list[str]:
    """The limits of an axle, one sentence each; of a symmetric axle the left side only."""
    found = []
    if limits.stroke is not None:
        found.append(f"rack stroke {limits.stroke:g} mm each way")
    shown = [stop for stop in limits.stops if not axle.symmetric or stop.side == "left"]
    for stop in shown:
        sentence = f"{stop.side}: stops at {stop.place}"
        if limits.stroke is not None and stop.along == "rack_travel":
            spare = abs(stop.rack_travel) - limits.stroke
            sentence += f", {spare:.1f} mm beyond the stroke" if spare >= 0 else f", {-spare:.1f} mm INSIDE THE STROKE"
        sentence += f": {stop.cause}"
        found.append(sentence)
    if limits.stroke is not None and not any(stop.along == "rack_travel" for stop in shown):
        found.append(f"no lock within {limits.searched:.0f} mm of rack travel either way")
    if limits.smallest_transmission is not None:
        angle = limits.smallest_transmission.value
        spare = min(angle, 180.0 - angle)
        found.append(
            f"transmission angle nearest to a lock: {angle:.1f} deg ({spare:.1f} deg from it; 90 is best), "
            f"{_place(axle, limits.smallest_transmission)}"
        )
    if limits.largest_steer is not None and axle.rack is not None:
        angle = limits.largest_steer.value
        side = "left" if angle > 0 else "right"
        found.append(f"largest steer angle: {abs(angle):.1f} deg to the {side}, {_place(axle, limits.largest_steer)}")
    if axle.symmetric and found:
        found.append("the right side is the mirror image")
    return found


def _place(axle: Axle, place: Place) -> str:
    rack = "" if axle.rack is None else f"rack {number(place.rack_travel, 1)} mm, "
    return f"{place.side} wheel at {rack}wheel travel {number(place.wheel_travel, 1)} mm"


def largest_slip(turned: TurnMaps) -> FloatArray:
    """Largest slip angle of the four wheels by magnitude, (N,) deg."""
    slips: FloatArray = np.max(np.abs([turned[name] for name in SLIPS]), axis=0)
    return slips


def _extreme(values: FloatArray, among: np.ndarray[Any, Any]) -> int | None:
    score = np.where(among & np.isfinite(values), np.abs(values), -1.0)
    return int(np.argmax(score)) if np.any(score >= 0.0) else None


def ackermann_sentences(turned: TurnMaps) -> list[str]:
    """Which wheel turns more, in words, and the worst Ackermann error."""
    large = ackermann_shown(turned["mean_steer"])
    if not np.any(large):
        return [
            f"Ackermann figures begin at {SHOWN_FROM:g} deg of mean steer, below which static toe dominates them: none here."
        ]
    more = turned.inner_turns_more[large]
    if np.all(more > 0.0):
        words = "the inner wheel turns more than the outer at every position shown"
    elif np.all(more < 0.0):
        words = "the outer wheel turns more than the inner at every position shown (reverse Ackermann)"
    elif np.all(np.abs(more) < 1e-6):
        words = "both wheels turn alike (parallel steer)"
    else:
        reverse = np.abs(turned["mean_steer"][large])[more < 0.0]
        low, high = f"{reverse.min():.1f}", f"{reverse.max():.1f}"
        span = low if low == high else f"{low} to {high}"
        words = f"the outer wheel turns more than the inner (reverse Ackermann) at mean steer {span} deg, the inner more elsewhere"
    found = [f"From {SHOWN_FROM:g} deg of mean steer (below, static toe dominates): {words}."]
    worst = _extreme(turned["ackermann_error"], large)
    if worst is not None:
        error = float(turned["ackermann_error"][worst])
        verb = "more" if error > 0 else "less"
        found.append(
            f"Largest Ackermann error: the inner wheel turns {abs(error):.2f} deg {verb} than ideal, at rack "
            f"{number(float(turned.rack_travel[worst]), 1)} mm "
            f"(mean steer {abs(turned['mean_steer'][worst]):.1f} deg to the {'left' if turned['mean_steer'][worst] > 0 else 'right'})."
        )
    return found


def circle_sentences(turned: TurnMaps) -> list[str]:
    """Slip at walking pace and the smallest turning circle, in words."""
    found = []
    slip = largest_slip(turned)
    worst = _extreme(slip, np.isfinite(slip))
    if worst is not None:
        found.append(
            f"Most slip at walking pace: {slip[worst]:.2f} deg on one wheel, at rack {number(float(turned.rack_travel[worst]), 1)} mm."
        )
    circle = turned["kerb_circle"]
    if np.isfinite(circle).any():
        least = int(np.nanargmin(circle))
        wall = turned["wall_circle"][least]
        walls = f", wall to wall {wall / 1000:.2f} m" if np.isfinite(wall) else ""
        found.append(
            f"Smallest turning circle: kerb to kerb {circle[least] / 1000:.2f} m{walls}, at rack "
            f"{number(float(turned.rack_travel[least]), 1)} mm; "
            f"turn radius {turned['turn_radius'][least] / 1000:.2f} m at the other axle."
        )
    return found


def ride_sentences(
    ridden: RideMaps, motion: str, rows: np.ndarray[Any, Any], scale: ToeScale, alike: bool
) -> list[str]:
    """The worst place of a motion, named; and the rate at its middle."""
    unit = "deg of roll" if motion == "roll" else "mm of bump"
    at = ridden["roll_angle" if motion == "roll" else "bump"]
    found = []
    if motion == "roll":
        steer = ridden["axle_steer"][rows]
        if np.isfinite(steer).any():
            k = int(rows[int(np.nanargmax(np.abs(steer)))])
            value = float(ridden["axle_steer"][k])
            middle = int(rows[int(np.argmin(np.abs(at[rows])))])
            found.append(
                f"Worst place: the axle steers {abs(value):.3f} deg to the {'left' if value > 0 else 'right'} at "
                f"{number(float(at[k]), 1)} {unit}; roll steer {number(float(ridden['roll_steer'][middle]), 4)} deg/deg "
                f"at {number(float(at[middle]), 1)} deg."
            )
    else:
        changes: list[tuple[float, int, str]] = []
        for side in ("left", "right"):
            values: FloatArray = ridden[f"bump_steer_{side}"][rows]
            if np.isfinite(values).any():
                k = int(np.nanargmax(np.abs(values)))
                changes.append((float(values[k]), int(rows[k]), side))
        if changes:
            value, k, side = max(changes, key=lambda change: abs(change[0]))
            wheel = "each wheel" if alike else f"{side} wheel"
            found.append(
                f"Worst place: toe changes by {scale.text(value)}, {wheel}, at {number(float(at[k]), 1)} {unit}."
            )
    ends = []
    for way in (1.0, -1.0):
        lost = (ridden.status[rows] != 0) & (at[rows] * way >= 0.0)
        if lost.any():
            k = int(rows[int(np.argmin(np.where(lost, np.abs(at[rows]), np.inf)))])
            ends.append(
                f"from {number(float(at[k]), 1)} {unit} {'up' if way > 0 else 'down'} ({ridden.status_names[k]})"
            )
    if ends:
        found.append(f"Not reached: {' and '.join(dict.fromkeys(ends))}.")
    return found
