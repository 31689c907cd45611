"""Picture of the places of the inner tie rod joint."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np

from toewright.views.style import INK, MAP_INK, PAPER, QUIET, SERIES, new_figure, styled

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

    from toewright.studies.locus import Locus

_PLANE_WORDS = {"front": "seen from the front", "top": "seen from above"}
_SIGNS = {"x": "forward +", "y": "left +", "z": "up +"}

MANY = 6
"""Levels of the field, in multiples of the limit: 1, 2, 4 ... above the limit's own line."""


def locus_figure(title: str, found: Locus, *, footer: str = "") -> Figure:
    """One panel for each rack position: largest |bump steer|, the patch within the limit, best places, and the joint now."""
    from toewright.studies.locus import PLANES

    with styled():
        count = found.rack.size
        figure = new_figure(5.6 * min(count, 3) + 1.2, 5.4 * -(-count // 3) + 0.6, title, footer)
        panels = figure.subplots(-(-count // 3), min(count, 3), squeeze=False)
        filled = None
        for k, axes in enumerate(panels.flat[:count]):
            filled = _panel(axes, found, k)
            rack = f"{found.rack[k]:+g}" if found.rack[k] else "0"
            now = f"now {found.present[k]:.3f} deg"
            axes.set_title(f"{found.side} wheel, rack {rack} mm, {_PLANE_WORDS[found.plane]}; {now}")
            across = PLANES[found.plane][1]
            axes.set_xlabel(f"inner joint y (mm, {_SIGNS['y']})")
            axes.set_ylabel(f"inner joint {across} (mm, {_SIGNS[across]})")
        for axes in panels.flat[count:]:
            axes.set_axis_off()
        if filled is not None:
            bar = figure.colorbar(filled, ax=panels, shrink=0.9, aspect=28, pad=0.02)
            bar.set_label("largest bump steer over the travel (deg per wheel, either way)")
        panels.flat[0].legend(loc="lower right", framealpha=0.9, frameon=True, facecolor=PAPER, edgecolor="none")
    return figure


def _panel(axes: Axes, found: Locus, k: int) -> Any:
    from matplotlib.colors import LinearSegmentedColormap

    pale = LinearSegmentedColormap.from_list("toewright-amount", ("#f6f4ef", "#c6d9ea", "#6f9cc9", "#28588f"))
    field = np.ma.masked_invalid(found.worst[k].T)
    levels = found.limit * np.concatenate([[0.0, 1.0], 2.0 ** np.arange(1, MANY)])
    if np.ma.is_masked(field):
        axes.patch.set(hatch="////", edgecolor=QUIET, linewidth=0.0)
    filled = axes.contourf(found.first, found.second, field, levels=levels, cmap=pale, extend="max")
    lines = axes.contour(found.first, found.second, field, levels=levels[2:], colors=MAP_INK, linewidths=0.6)
    axes.clabel(lines, fmt="%g", fontsize=7.5, colors=MAP_INK)
    axes.contour(found.first, found.second, field, levels=[found.limit], colors=SERIES[1], linewidths=2.0)
    axes.grid(False)
    if k == 0:
        axes.plot(found.first, found.best, color=SERIES[1], linewidth=1.4, linestyle="--", label="least bump steer")
    axes.plot([], [], color=SERIES[1], linewidth=2.0, label=f"within {found.limit:g} deg")
    across = "xyz".index({"front": "z", "top": "x"}[found.plane])
    axes.plot(
        found.joint[1], found.joint[across], marker="o", markersize=8, color=PAPER, markeredgecolor=INK,
        markeredgewidth=1.6, linestyle="none", label="now",
    )  # fmt: skip
    axes.set(xlim=(found.first[0], found.first[-1]), ylim=(found.second[0], found.second[-1]))
    return filled
