"""Plots of a ride: toe and camber over bump, roll steer, and where the roll centre goes."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from toewright.core.types import FloatArray
from toewright.kinematics.riding import RideMaps
from toewright.kinematics.summary import mirror_images
from toewright.model.axle import Axle
from toewright.model.errors import InputError
from toewright.model.glossary import axis_label, quantity
from toewright.views.plots_sweep import TOE_CHANGE, check_cases, footer_of
from toewright.views.style import MARKERS, QUIET, ROW, SERIES, label_y, results_figure, styled, zero_lines
from toewright.views.words import case_labels

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

FAR = 1.5
"""Roll centres farther from the middle of the car than this many tracks are left out: there the lines are nearly parallel."""

_LINES = {"left": "-", "right": "--"}


@dataclass(frozen=True)
class _Panel:
    """One panel: its title, and how to draw it."""

    title: str
    draw: Callable[[Axes], None]


@dataclass(frozen=True)
class _Rides:
    """The files of a figure."""

    axles: Sequence[Axle]
    rides: Sequence[RideMaps]

    @property
    def single(self) -> bool:
        return len(self.rides) == 1

    def alike(self) -> bool:
        """Both wheels do the same in bump, in every file."""
        return all(mirror_images(a) and abs(r.rack_travel) < 1e-9 for a, r in zip(self.axles, self.rides, strict=True))

    def curves(self, axes: Axes, motion: str, names: Sequence[tuple[str, str]]) -> None:
        """Columns over bump or roll: pairs of column and side ("" where it has none)."""
        at = "roll_angle" if motion == "roll" else "bump"
        for k, ridden in enumerate(self.rides):
            rows = np.flatnonzero(ridden.part(motion))
            for n, (name, side) in enumerate(names):
                colour = SERIES[n] if self.single else SERIES[k]
                axes.plot(
                    ridden[at][rows],
                    ridden[name][rows],
                    color=colour,
                    linestyle=_LINES.get(side, "-"),
                    marker="" if self.single or n else MARKERS[k],
                    markevery=max(1, rows.size // 6),
                    label=f"{side} wheel" if side and k == 0 and len(names) > 1 else "_",
                )
        zero_lines(axes, x=True, y=not names[0][0].startswith("camber"))
        axes.set_xlabel(axis_label(at))
        if len(names) > 1:
            axes.legend(loc="best")

    def path(self, axes: Axes, motion: str) -> None:
        """Where the roll centre goes, seen from the front, its ends named."""
        at, unit = ("roll_angle", "deg of roll") if motion == "roll" else ("bump", "mm of bump")
        for k, (axle, ridden) in enumerate(zip(self.axles, self.rides, strict=True)):
            rows = np.flatnonzero(ridden.part(motion))
            y, z = near_roll_centres(axle, ridden["roll_centre_y"][rows], ridden["roll_centre_z"][rows])
            axes.plot(y, z, color=SERIES[k], marker=MARKERS[k], markevery=max(1, rows.size // 10))
            seen = np.flatnonzero(np.isfinite(y))
            for end in dict.fromkeys(seen[[0, -1]] if seen.size else ()):
                leftmost = bool(y[end] < np.nanmean(y))
                axes.annotate(
                    f"{ridden[at][rows][end]:+g} {unit}",
                    (y[end], z[end]),
                    xytext=(-7 if leftmost else 7, 0),
                    textcoords="offset points",
                    ha="right" if leftmost else "left",
                    va="center",
                    fontsize=7.5,
                    color=QUIET,
                )
        axes.margins(x=0.5, y=0.14)
        low, high = axes.get_xlim()
        if high - low < 4.0:
            middle = 0.5 * (low + high)
            axes.set_xlim(middle - 2.0, middle + 2.0)
        axes.set_xlabel(axis_label("roll_centre_y"))
        label_y(axes, axis_label("roll_centre_z"))


def near_roll_centres(axle: Axle, y: FloatArray, z: FloatArray) -> tuple[FloatArray, FloatArray]:
    """Roll centres (N,) mm with NaN for those farther away than FAR tracks."""
    track = abs(float(axle.left.points["wheel_centre"][1] - axle.right.points["wheel_centre"][1]))
    near = (np.abs(y) <= FAR * track) & (np.abs(z) <= FAR * track)
    return np.where(near, y, np.nan), np.where(near, z, np.nan)


def _panels(of: _Rides) -> list[_Panel]:
    motions = [m for m in dict.fromkeys(of.rides[0].motion.tolist()) if all(r.part(m).any() for r in of.rides)]
    both = (("left", "right"), ("left",))[of.alike()]

    def curves(motion: str, stem: str, label: str, sides: Sequence[str]) -> Callable[[Axes], None]:
        def draw(axes: Axes) -> None:
            names = [(f"{stem}_{side}", side) for side in sides] if sides else [(stem, "")]
            of.curves(axes, motion, names)
            label_y(axes, label)

        return draw

    def curves_of(name: str) -> Callable[[str], Callable[[Axes], None]]:
        return lambda motion: curves(motion, name, axis_label(name), ())

    def path(motion: str) -> Callable[[Axes], None]:
        return lambda axes: of.path(axes, motion)

    camber, road = (
        axis_label("camber"),
        f"{quantity('camber_road_left').label.removesuffix(', left')} (deg, top outboard +)",
    )
    wheels = "each wheel" if of.alike() else "left and right wheel"
    track = curves_of("track_change")
    found: list[_Panel] = []
    if "bump" in motions:
        found += [
            _Panel(f"Bump: toe change, {wheels}", curves("bump", "bump_steer", TOE_CHANGE, both)),
            _Panel(f"Bump: camber, {wheels}", curves("bump", "camber", camber, both)),
            _Panel("Bump: track change", track("bump")),
        ]
        if of.alike():
            found.append(_Panel("Bump: roll-centre height", curves_of("roll_centre_z")("bump")))
        else:
            found.append(_Panel("Bump: roll-centre path, seen from the front", path("bump")))
    if "roll" in motions:
        sides = ("left", "right")
        found += [
            _Panel("Roll: toe change of the wheels", curves("roll", "bump_steer", TOE_CHANGE, sides)),
            _Panel("Roll steer", curves_of("axle_steer")("roll")),
            _Panel("Roll: camber to the road", curves("roll", "camber_road", road, sides)),
            _Panel("Roll: roll-centre path, seen from the front", path("roll")),
        ]
    if "single" in motions and "bump" not in motions:
        side = of.rides[0].moving_side
        found += [
            _Panel(f"The {side} wheel alone: toe change", curves("single", "bump_steer", TOE_CHANGE, (side,))),
            _Panel(f"The {side} wheel alone: camber", curves("single", "camber", camber, (side,))),
            _Panel(f"The {side} wheel alone: track change", track("single")),
            _Panel("Roll-centre path, seen from the front", path("single")),
        ]
    return found


def draw_ride_curves(axes: Axes, axles: Sequence[Axle], rides: Sequence[RideMaps], motion: str, name: str) -> None:
    """One column of one motion, of all files."""
    _Rides(axles, rides).curves(axes, motion, [(name, "")])
    label_y(axes, axis_label(name))


def ride_figure(axles: Sequence[Axle], rides: Sequence[RideMaps], *, plain: bool = False) -> Figure:
    """Toe and camber over bump, roll steer and roll-centre path, of one or several files; as many panels as there are motions.

    Args:
        axles: one to six.
        rides: the ride of each, of the same motions and positions.
        plain: without title and foot.

    Raises:
        InputError: if every motion has one position only.
    """
    check_cases(axles, rides)
    counts = [int(np.count_nonzero(rides[0].part(m))) for m in dict.fromkeys(rides[0].motion.tolist())]
    if max(counts) < 2:
        raise InputError("--plot: one position makes no curve; ask for several, such as -25:25:11")
    of = _Rides(axles, rides)
    panels = _panels(of)
    rows = -(-len(panels) // 2)
    labels = case_labels(axles)
    with styled():
        at_rack = f", rack at {rides[0].rack_travel:+g} mm" if rides[0].rack_travel else ""
        title = f"{labels[0]}{at_rack}" if of.single else f"Riding: {len(axles)} files{at_rack}"
        figure = results_figure(ROW * rows, title, footer_of(axles), plain=plain)
        grid = figure.subplots(rows, 2, squeeze=False)
        for axes, panel in zip(grid.flat, panels, strict=False):
            panel.draw(axes)
            axes.set_title(panel.title)
        for axes in grid.flat[len(panels) :]:
            axes.set_axis_off()
        if not of.single:
            from matplotlib.lines import Line2D

            handles = [Line2D([], [], color=SERIES[k], marker=MARKERS[k]) for k in range(len(axles))]
            figure.legend(handles, labels, loc="outside upper right", ncols=2)
        return figure
