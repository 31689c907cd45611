"""Where the steering ends, in words."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from toewright.views.sentences import limit_sentences
from toewright_cli.console import say

if TYPE_CHECKING:
    from toewright.kinematics.limits import AxleLimits
    from toewright.kinematics.summary import Place
    from toewright.model.axle import Axle


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
