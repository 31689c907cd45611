"""Pictures of build scatter: bands of the bump-steer curve, and what makes the spread."""

from __future__ import annotations

from typing import TYPE_CHECKING

from toewright.model.glossary import axis_label
from toewright.views.style import INK, QUIET, SERIES, new_figure, styled, zero_lines

if TYPE_CHECKING:
    from matplotlib.figure import Figure

    from toewright.studies.tolerance import Tolerance

BARS = 12
"""Scatters in the bar picture, the largest first."""


def tolerance_figure(title: str, found: Tolerance) -> Figure:
    """Bump steer of the left wheel over travel with its 5 to 95 % band, left minus right, and the shares of the spread."""
    with styled():
        figure = new_figure(13.0, 5.2, f"{title}: {found.builds:,} builds", "")
        curve, between, bars = figure.subplots(1, 3, width_ratios=(1.15, 1.0, 1.1))
        for axes, band, middle, colour, words in (
            (curve, found.bands[0], found.nominal[0], SERIES[0], "left wheel"),
            (between, found.difference, found.nominal[0] - found.nominal[1], SERIES[3], "left minus right"),
        ):
            axes.fill_betweenx(
                found.travel, band[:, 0], band[:, 2], color=colour, alpha=0.25, label="5 to 95 % of the builds"
            )
            axes.plot(band[:, 1], found.travel, color=colour, label="half of the builds")
            axes.plot(middle, found.travel, color=INK, linewidth=1.0, linestyle="--", label="as drawn")
            zero_lines(axes, x=True)
            axes.set_title(f"Bump steer, {words}")
            axes.set_xlabel(axis_label("bump_steer"))
            axes.set_ylabel(axis_label("wheel_travel"))
            if axes is curve:
                axes.legend(loc="best")
        top = list(reversed(found.shares[:BARS]))
        places = range(len(top))
        bars.barh(places, [100.0 * s.total for s in top], color=SERIES[2], height=0.62, label="Sobol index, total")
        bars.plot(
            [100.0 * s.linear for s in top], places, "D", color=INK, markersize=4.0, label="by exact slopes alone"
        )
        bars.set_yticks(list(places), [s.name for s in top])
        bars.set_xlabel("share of the variance (%)")
        bars.set_title(f"What makes the spread at {found.travel[-1]:+g} mm")
        bars.grid(axis="y", visible=False)
        bars.tick_params(axis="y", length=0, labelcolor=QUIET)
        bars.legend(loc="lower right")
    return figure
