"""The picture of a comparison: change of bump steer as maps, curves of all files over each other, roll steer and Ackermann error."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from toewright.studies.comparison import Comparison
from toewright.views.plots_ride import draw_ride_curves
from toewright.views.plots_sweep import footer_of, has_map, panel_curves, panel_maps, panel_over_rack
from toewright.views.plots_turn import draw_error
from toewright.views.sentences import ackermann_shown
from toewright.views.style import ROW, results_figure, styled

if TYPE_CHECKING:
    from matplotlib.figure import Figure


def comparison_figure(compared: Comparison, *, plain: bool = False) -> Figure:
    """Changes of the bump-steer map from the first file, and the curves of all files over each other.

    Args:
        compared: the comparison, of six files at most.
        plain: without title and foot.
    """
    axles, maps = compared.axles, compared.maps
    sides = ("left",) if compared.mirrored else ("left", "right")
    panels = [(k, side) for side in sides for k in range(1, len(axles)) if has_map(maps[k])]
    over_travel = maps[0].wheel_travel.size > 1
    heights = [ROW * 1.12 * -(-len(panels) // 2)] if panels else []
    heights += [ROW] * len(sides) + [ROW]
    with styled():
        figure = results_figure(sum(heights), f"Comparison of {len(axles)} files", footer_of(axles), plain=plain)
        parts = list(np.atleast_1d(np.asarray(figure.subfigures(len(heights), 1, height_ratios=heights))))
        if panels:
            titles = [f"Change of bump steer, {'ABCDEF'[k]} - A, {side} wheel" for k, side in panels]
            fields = [compared.change(k, "bump_steer")[maps[k].side_index(side)] for k, side in panels]
            panel_maps(parts.pop(0), titles, [maps[k] for k, _ in panels], fields)
        for side in sides:
            draw = panel_curves if over_travel else panel_over_rack
            draw(parts.pop(0), axles, maps, side)
        turning = [t for t in compared.turns if np.any(ackermann_shown(t["mean_steer"]))]
        both = bool(turning) and len(turning) == len(axles)
        grid = np.atleast_1d(np.asarray(parts.pop(0).subplots(1, 2)))
        draw_ride_curves(grid[0], axles, compared.rides, "roll", "axle_steer")
        grid[0].set_title("Roll steer")
        if both:
            draw_error(grid[1], axles, turning)
        else:
            draw_ride_curves(grid[1], axles, compared.rides, "roll", "roll_centre_z")
            grid[1].set_title("Roll-centre height in roll")
        return figure
