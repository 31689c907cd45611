"""Colours of the pictures: calm, and told apart by people with any kind of colour vision (by lightness as well as by hue)."""

from __future__ import annotations

from typing import TYPE_CHECKING

from toewright.views.style import INK, PAPER, TOE_STOPS

if TYPE_CHECKING:
    from matplotlib.colors import Colormap

UPPER_ARM = "#5a4d92"
LOWER_ARM = "#51ba8d"
TIE_ROD = "#9e3e44"
RACK = "#2a3338"
HOUSING = "#d1d6db"
UPRIGHT = "#818f9e"
DAMPER = UPPER_ARM
ROD = "#b9b4d8"
KINGPIN = "#1c2226"
JOINT = "#343c42"
CONTACT = "#1c2226"
TYRE = "#59636b"
RIM = "#93a0a8"

FLOOR = "#f1f2ec"
GRID = "#d3d7cf"

NEUTRAL = "#a9a59a"
"""Middle of the colour scale of bump steer: thin lines in the pale middle of the maps' scale would not be seen on paper."""

GHOST = 0.24
"""Opacity of a ghosted pose against a solid one."""


def bump_steer_colours() -> Colormap:
    """Colour scale of bump steer for lines: the maps' blue for toe-out and amber for toe-in, grey at zero."""
    from matplotlib.colors import LinearSegmentedColormap

    stops = (TOE_STOPS[0], TOE_STOPS[1], NEUTRAL, TOE_STOPS[-2], TOE_STOPS[-1])
    return LinearSegmentedColormap.from_list("toewright-toe-lines", stops)


def tones() -> list[int]:
    """Red, green and blue (0 to 255), one after the other, of all colours from dark to light, for pictures with a table of colours."""
    import numpy as np
    from matplotlib.colors import to_rgb

    named = (UPPER_ARM, LOWER_ARM, TIE_ROD, RACK, HOUSING, UPRIGHT, ROD, TYRE, FLOOR, GRID, INK)
    mixed = [
        np.array(to_rgb(name)) * (1.0 - abs(share)) + max(share, 0.0)
        for name in named
        for share in (-0.6, -0.35, -0.15, 0.0, 0.2, 0.45, 0.75)
    ]
    scale = bump_steer_colours()(np.linspace(0.0, 1.0, 17))[:, :3]
    return [int(value) for value in np.round(255.0 * np.array([*mixed, *scale, to_rgb(PAPER)])).ravel()]
