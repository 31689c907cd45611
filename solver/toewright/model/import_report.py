"""After an import: the sanity list, and the hardpoint file that is written."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from toewright.model.axle import Corner
from toewright.model.importing import Reading


@dataclass(frozen=True)
class Sanity:
    """One line of the list: what was looked at, what was found, and whether it is as usual."""

    what: str
    found: str
    usual: bool


def sanity_list(reading: Reading, loaded_radius: float) -> tuple[Sanity, ...]:
    """Plausibility of an imported corner; nothing here stops an import."""
    corner = reading.corner
    points = corner.points
    height = float(points["wheel_centre"][2])
    rod = points["tie_rod_outer"] - points["tie_rod_inner"]
    slope = float(np.degrees(np.arctan2(rod[2], np.hypot(rod[0], rod[1]))))
    track = 2.0 * abs(float(points["wheel_centre"][1]))
    found = [
        Sanity(
            "wheel centre near its radius above the road",
            f"{height:.1f} mm, radius {loaded_radius:.1f} mm",
            abs(height - loaded_radius) <= 0.1 * loaded_radius,
        ),
        Sanity(
            "tie rod near the rack's height",
            f"outer joint {rod[2]:+.1f} mm above the inner one, {slope:+.1f} deg",
            abs(slope) <= 12.0,
        ),
        Sanity(
            f"{corner.side} side at y {'>' if corner.sign > 0 else '<'} 0",
            f"wheel centre y = {points['wheel_centre'][1]:+.1f} mm",
            bool(points["wheel_centre"][1] * corner.sign > 0),
        ),
        Sanity("track of a car", f"{track:.0f} mm between wheel centres", 700.0 <= track <= 2600.0),
        Sanity("axes right-handed", reading.axes.text, not reading.axes.mirrors),
        Sanity(
            "wheel centre outboard of the lower ball joint", f"{_outboard(corner):+.1f} mm", _outboard(corner) > 0.0
        ),
    ]
    for arm in ("upper", "lower"):
        if f"{arm}_ball_joint" in points:
            middle = 0.5 * (points[f"{arm}_pivot_front"] + points[f"{arm}_pivot_rear"])
            run = points[f"{arm}_ball_joint"] - middle
            angle = float(np.degrees(np.arctan2(run[2], abs(run[1]))))
            found.append(
                Sanity(f"{arm} arm not far from level (full droop?)", f"{angle:+.1f} deg outward", abs(angle) <= 20.0)
            )
    return tuple(found)


def _outboard(corner: Corner) -> float:
    return float((corner.points["wheel_centre"][1] - corner.points["lower_ball_joint"][1]) * corner.sign)


def _quoted(text: str) -> str:
    import json

    return json.dumps(text, ensure_ascii=False)


def _point_rows(corner: Corner) -> str:
    width = max(len(name) for name in corner.points)
    return "\n".join(
        f"{name:<{width}} = [{', '.join(_number(v) for v in point)}]" for name, point in corner.points.items()
    )


def _number(value: float) -> str:
    return repr(round(float(value), 9) + 0.0)


def hardpoint_text(
    left: Corner,
    right: Corner | None,
    *,
    title: str,
    source: str,
    loaded_radius: float,
    axle: str,
    wheelbase: float | None,
    stroke: float | None,
) -> str:
    """A hardpoint file from imported corners, mm and ISO 8855; ``right`` None for a mirror image."""
    parts = [
        f"# Imported by toewright from {source}: check the points against the drawing before you rely on them.",
        "# mm; x forward, y left, z up (ISO 8855).",
        "schema = 1",
        f"title = {_quoted(title)}",
        "",
        "[vehicle]",
        f'axle = "{axle}"',
        f"wheelbase = {_number(wheelbase)}"
        if wheelbase is not None
        else "# wheelbase = 1550.0     # needed for Ackermann and the turning circle",
        "",
        "[wheel]",
        f"loaded_radius = {_number(loaded_radius)}",
        "# rim_diameter = 254.0    # toe in mm is measured across it",
        "",
        "[setup]                    # static, each wheel: put in what the car has",
        "toe_in = 0.0               # deg, toe-in +",
        "camber = 0.0               # deg, top outboard +",
        "",
    ]
    if stroke is not None:
        parts += ["[rack]", f"stroke = {_number(stroke)}              # mm each way", ""]
    else:
        parts += [
            "# [rack]                   # leave out for toe links",
            "# stroke = 30.0            # mm each way",
            "",
        ]
    parts += ["[left]", f'type = "{left.kind}"', "[left.points]", _point_rows(left)]
    if right is not None:
        parts += ["", "[right]", f'type = "{right.kind}"', "[right.points]", _point_rows(right)]
    return "\n".join(parts) + "\n"
