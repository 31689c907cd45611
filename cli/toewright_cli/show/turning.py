"""A turn on the terminal and as JSON."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np

from toewright.views.sentences import ackermann_sentences, ackermann_shown, circle_sentences, largest_slip
from toewright.views.words import axle_words, number, span_words, spread_indices
from toewright_cli.console import print_table, say
from toewright_cli.outputs import meanings, source_of
from toewright_cli.show.limits import limits_document, print_limits

if TYPE_CHECKING:
    from toewright.kinematics.limits import AxleLimits
    from toewright.kinematics.turning import TurnMaps
    from toewright.model.axle import Axle

ROWS = 11
"""Rows of the compact table, about."""

EXPLAINED = (
    "rack_travel",
    "hand_wheel_angle",
    "steer_angle",
    "mean_steer",
    "ideal_inner_steer",
    "ackermann_error",
    "ackermann_percent",
    "slip_front_left",
    "centre_x",
    "turn_radius",
    "kerb_circle",
    "wall_circle",
    "steering_ratio",
    "transmission_angle",
)
"""What ``--explain`` defines."""


def print_turn(axle: Axle, turned: TurnMaps, limits: AxleLimits, held: str) -> None:
    """The compact table of a turn, then what it means, circles and limits; ``held`` says at what travel or roll."""
    say(axle.title, style="bold")
    say(f"{axle.path}: {axle_words(axle)}")
    solved, asked = int((turned.status == 0).sum()), len(turned)
    say(f"turning: rack {span_words(turned.rack_travel.tolist())}, {held}; {solved} of {asked} reached")
    mean = turned["mean_steer"]
    mirrored = (
        axle.symmetric and held.startswith("wheel") and np.allclose(turned.rack_travel, -turned.rack_travel[::-1])
    )
    one_way = mirrored and bool(np.any(mean >= 0.0))
    places = [i for i in range(asked) if not one_way or not mean[i] < -1e-9]
    zero = min(range(len(places)), key=lambda k: abs(turned.rack_travel[places[k]]))
    chosen = [places[k] for k in spread_indices(len(places), ROWS, zero)]
    say("")
    headings = [
        "rack",
        "hand\nwheel",
        "left",
        "right",
        "mean",
        "ideal\ninner",
        "error\ninner",
        "Ackermann",
        "most\nslip",
        "turn\nradius",
    ]
    units = ["mm", "deg", "deg", "deg", "deg", "deg", "deg", "%", "deg", "m"]
    slip, large = largest_slip(turned), ackermann_shown(mean)
    rows = []
    for i in chosen:
        shown = bool(large[i])
        state = str(turned.status_names[i])
        if state != "ok":
            rows.append([number(float(turned.rack_travel[i]), 1), state, *[""] * 8])
            continue
        rows.append(
            [
                number(float(turned.rack_travel[i]), 1),
                number(float(turned["hand_wheel_angle"][i]), 0),
                number(float(turned["steer_left"][i]), 2),
                number(float(turned["steer_right"][i]), 2),
                number(float(mean[i]), 2),
                number(float(turned["ideal_inner_steer"][i]), 2) if shown else "-",
                number(float(turned["ackermann_error"][i]), 2) if shown else "-",
                number(float(turned["ackermann_percent"][i]), 0) if shown else "-",
                number(float(slip[i]), 2, sign=False),
                number(float(turned["turn_radius"][i]) / 1000.0, 2, sign=False) if shown else "-",
            ]
        )
    print_table([f"{h}\n{u}" for h, u in zip(headings, units, strict=True)], rows, right=range(10))
    say(
        "Steer angles and hand wheel: to the left +. Error: inner wheel turns too much +. Ackermann: 100 true, 0 parallel, - reverse."
    )
    if one_way:
        say("The other way round is the mirror image.")
    for sentence in (*ackermann_sentences(turned), *circle_sentences(turned), *turned.notes):
        say(sentence)
    print_limits(axle, limits)


def turn_document(axle: Axle, turned: TurnMaps, limits: AxleLimits, held: str) -> dict[str, Any]:
    """The summary for ``--json``: all columns, what they mean in words, limits."""
    return {
        **source_of(axle),
        "held": held,
        "definition": turned.definition,
        "quantities": meanings(turned.names),
        "columns": {name: turned.column(name) for name in turned.names},
        "inner_turns_more": turned.inner_turns_more,
        "sentences": [*ackermann_sentences(turned), *circle_sentences(turned), *turned.notes],
        "limits": limits_document(axle, limits),
        "remarks": list(axle.remarks),
    }
