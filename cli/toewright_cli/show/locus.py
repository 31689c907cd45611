"""The locus of the inner tie rod joint on the terminal and as JSON."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np

from toewright.views.words import axle_words, number, span_words
from toewright_cli.console import print_table, say
from toewright_cli.outputs import source_of

if TYPE_CHECKING:
    from collections.abc import Sequence

    from toewright.model.axle import Axle
    from toewright.studies.locus import Locus
    from toewright_cli.outputs import Table

ROWS = 11
"""Rows of the compact table."""

CAUTION = (
    "Geometry only: check clearance, rack mounting and joint tilt before you move it; after the change set the toe again, "
    "tighten, and measure the bump steer on the car."
)


def _across(found: Locus) -> str:
    return "z" if found.plane == "front" else "x"


def locus_table(found: Locus) -> Table:
    """Every place that was tried: y, the other coordinate, and the largest |bump steer| at each rack position."""
    names = ["tie_rod_inner_y", f"tie_rod_inner_{_across(found)}"]
    names += [f"bump_steer_most_rack_{rack:g}" for rack in found.rack.tolist()]

    def rows() -> Any:
        for n, y in enumerate(found.first.tolist()):
            for m, other in enumerate(found.second.tolist()):
                yield [y, other, *found.worst[:, n, m].tolist()]

    return names, rows()


def locus_document(axle: Axle, found: Locus) -> dict[str, Any]:
    """Everything for JSON."""
    return {
        **source_of(axle),
        "side": found.side,
        "plane": found.plane,
        "units": "mm, deg per wheel",
        "limit_deg": found.limit,
        "rack_travel": found.rack,
        "wheel_travel": found.travel,
        "present": {"joint": found.joint, "largest_bump_steer": found.present},
        "y": found.first,
        _across(found): found.second,
        "largest_bump_steer": found.worst,
        "best": {
            "y": found.first,
            _across(found): found.best,
            "largest_bump_steer": found.best_worst,
            "low": found.low,
            "high": found.high,
        },
        "line_of_arc_centres": {"point": found.held.point, "direction": found.held.direction},
        "held_toe": {
            "outer_joint": found.held.outer,
            "rack_needed": found.held.rack,
            "misfit_of_the_arc_mm": found.held.misfit[0],
        },
        "caution": CAUTION,
    }


def print_locus(axle: Axle, found: Locus) -> None:
    """What there is now, the line of centres, and a table of the best places."""
    across = _across(found)
    index = "xyz".index(across)
    say(axle.title, style="bold")
    say(f"{axle.path}: {axle_words(axle)}")
    say(
        f"{found.side} wheel, wheel travel {span_words(found.travel.tolist())}; places of tie_rod_inner "
        f"{number(float(found.first[0] - found.joint[1]), 0)} to {number(float(found.first[-1] - found.joint[1]), 0)} mm in y and "
        f"{number(float(found.second[0] - found.joint[index]), 0)} to {number(float(found.second[-1] - found.joint[index]), 0)} mm in "
        f"{across} about where it is; every place solved with a rod that keeps the static toe"
    )
    say("")
    joint = ", ".join(f"{letter} = {found.joint[i]:.2f}" for i, letter in enumerate("xyz"))
    say(f"Now, at {joint} mm:", style="bold")
    for rack, value in zip(found.rack.tolist(), found.present.tolist(), strict=True):
        say(
            f"- largest bump steer {value:.3f} deg per wheel at rack {number(rack, 1)} mm (either way, over the travel)"
        )
    held = found.held
    share = held.misfit[0]
    say("")
    say("With the toe held, the outer joint's path over the travel is an arc:", style="bold")
    step = (found.joint[0] - held.point[0]) / held.direction[0] if abs(held.direction[0]) > 1e-6 else 0.0
    on_line = held.point + step * held.direction
    say(
        f"- its centre at the joint's x: y = {on_line[1]:.2f}, z = {on_line[2]:.2f} mm "
        f"({number(float(on_line[1] - found.joint[1]), 2)} and {number(float(on_line[2] - found.joint[2]), 2)} mm from the joint); "
        f"the path leaves that arc by {share:.4f} mm (root mean square)"
    )
    slope = held.direction / held.direction[0] if abs(held.direction[0]) > 1e-6 else held.direction
    say(
        f"- all centres lie on a line: y changes by {number(float(slope[1]), 3)} and z by {number(float(slope[2]), 3)} mm per mm of x"
    )
    say("")
    say(
        f"Best {across} for each y, at rack {number(float(found.rack[0]), 1)} mm; limit {found.limit:g} deg per wheel",
        style="bold",
    )
    rows = []
    chosen: Sequence[int] = sorted(
        {*np.linspace(0, found.first.size - 1, ROWS).round().astype(int).tolist(), found.first.size // 2}
    )
    for n in chosen:
        ends = (float(found.low[n]), float(found.high[n]))
        stretch = "none" if np.isnan(ends[0]) else f"{ends[0]:.2f} to {ends[1]:.2f}"
        rows.append(
            [
                f"{found.first[n]:.1f}",
                number(float(found.first[n] - found.joint[1]), 1),
                f"{found.best[n]:.2f}" if np.isfinite(found.best[n]) else "-",
                number(float(found.best[n] - found.joint[index]), 2),
                f"{found.best_worst[n]:.4f}" if np.isfinite(found.best_worst[n]) else "-",
                stretch,
            ]
        )
    headings = ["y\nmm", "move y\nmm", f"best {across}\nmm", f"move {across}\nmm"]
    headings += ["bump steer left\ndeg per wheel", f"{across} within the limit\nmm"]
    print_table(headings, rows, right=range(6))
    say(CAUTION)
