"""Where the steering ends, in words."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from toewright_cli.console import say
from toewright_cli.show.words import number

if TYPE_CHECKING:
    from toewright.kinematics.limits import AxleLimits
    from toewright.kinematics.summary import Place
    from toewright.model.axle import Axle


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


def print_limits(axle: Axle, limits: AxleLimits) -> None:
    """The limits as a list."""
    say("Limits, over the stroke and the default wheel travel:", style="bold")
    for sentence in limit_sentences(axle, limits):
        say(f"- {sentence}")


def limits_document(axle: Axle, limits: AxleLimits) -> dict[str, Any]:
    """The limits for ``--json``."""

    def place(spot: Place | None) -> dict[str, Any] | None:
        if spot is None:
            return None
        return {
            "side": spot.side,
            "rack_travel": spot.rack_travel,
            "wheel_travel": spot.wheel_travel,
            "deg": spot.value,
        }

    return {
        "stroke_mm": limits.stroke,
        "searched_mm": limits.searched,
        "stops": [
            {
                "side": stop.side,
                "status": stop.status,
                "along": stop.along,
                "rack_travel": stop.rack_travel,
                "wheel_travel": stop.wheel_travel,
                "sentence": stop.sentence,
            }
            for stop in limits.stops
        ],
        "inside_the_stroke": len(limits.inside),
        "transmission_angle_nearest_to_lock": place(limits.smallest_transmission),
        "largest_steer_angle": place(limits.largest_steer),
    }
