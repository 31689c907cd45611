"""Wheel with rim and tyre of the given size; what the file leaves out is guessed from the loaded radius, and said."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from toewright.core.types import FloatArray
from toewright.model.axle import Wheel
from toewright.views.scene import palette
from toewright.views.scene.parts import Part, Revolution, Tube

TYRE_WIDTH_SHARE = 0.70
"""Tyre width over loaded radius where the file gives none."""

RIM_DIAMETER_SHARE = 1.15
"""Rim diameter over loaded radius where the file gives none."""

RIM_WIDTH_SHARE = 0.85
"""Rim width over tyre width where the file gives none."""

SPOKES = 5


@dataclass(frozen=True)
class WheelSize:
    """Sizes that are drawn, mm, and in words which of them are guesses."""

    radius: float
    tyre_width: float
    rim_diameter: float
    rim_width: float
    guessed: tuple[str, ...]

    @property
    def note(self) -> str | None:
        """One sentence on what was guessed; None where the file gives everything."""
        if not self.guessed:
            return None
        return f"The file gives no {' and no '.join(self.guessed)}: drawn in proportion to the loaded radius."


def wheel_size(wheel: Wheel) -> WheelSize:
    """Sizes of a wheel, guessed where not given."""
    names = {"tyre width": wheel.tyre_width, "rim diameter": wheel.rim_diameter, "rim width": wheel.rim_width}
    width = wheel.tyre_width or (
        wheel.rim_width / RIM_WIDTH_SHARE if wheel.rim_width else TYRE_WIDTH_SHARE * wheel.loaded_radius
    )
    return WheelSize(
        radius=wheel.loaded_radius,
        tyre_width=width,
        rim_diameter=wheel.rim_diameter or RIM_DIAMETER_SHARE * wheel.loaded_radius,
        rim_width=wheel.rim_width or RIM_WIDTH_SHARE * width,
        guessed=tuple(name for name, value in names.items() if value is None),
    )


def tyre_profile(size: WheelSize) -> FloatArray:
    """Outer contour (N, 2) of the tyre from bead to bead: along the spin axis, radius; mm."""
    bead = 0.5 * size.rim_diameter
    half, height = 0.5 * size.tyre_width, size.radius - bead
    angle = np.linspace(0.0, np.pi, 17)
    cos, sin = np.cos(angle), np.sin(angle)
    along = -half * np.sign(cos) * np.abs(cos) ** 0.55
    radius = bead + 0.45 * height + 0.55 * height * sin**0.45
    shoulders = np.column_stack([along, radius])
    foot = 0.5 * min(size.rim_width, 0.98 * size.tyre_width)
    return np.vstack([[-foot, bead], shoulders, [foot, bead]])


def rim_profile(size: WheelSize) -> FloatArray:
    """Contour (N, 2) of the rim's barrel: along the spin axis, radius; mm."""
    bead, half = 0.5 * size.rim_diameter, 0.5 * size.rim_width
    well = 0.90 * bead
    return np.array([[-half, bead], [-0.85 * half, 0.95 * bead], [-0.3 * half, well], [0.55 * half, well],
                     [0.85 * half, 0.95 * bead], [half, bead]])  # fmt: skip


def wheel_parts(side: str, size: WheelSize, centre: FloatArray, spin_axis: FloatArray) -> list[Part]:
    """Tyre, rim, spokes and hub of one wheel; ``spin_axis`` (3,) points to the vehicle's left on both sides."""
    outward = spin_axis if side == "left" else -spin_axis
    tyre, rim = tyre_profile(size), rim_profile(size)
    crown = (len(tyre) - 1) // 2
    face = centre + 0.30 * size.rim_width * outward
    hub = 0.20 * size.rim_diameter
    ahead = np.cross(outward, [0.0, 0.0, 1.0]) * (1.0 if side == "left" else -1.0)
    ahead /= np.linalg.norm(ahead)
    up = np.cross(ahead, outward) * (1.0 if side == "left" else -1.0)
    parts: list[Part] = [
        Revolution(f"{side} tyre", palette.TYRE, centre, outward, tyre, (1, crown, len(tyre) - 2), 0.13),
        Revolution(f"{side} rim", palette.RIM, centre, outward, rim, (0, len(rim) - 1), 0.22),
        Tube(f"{side} hub", palette.UPRIGHT, centre - 0.06 * size.rim_width * outward, face, 0.55 * hub),
    ]
    for number in range(SPOKES):
        angle = 2.0 * np.pi * number / SPOKES
        spoke = np.cos(angle) * up + np.sin(angle) * ahead
        start, end = face + 0.4 * hub * spoke, face + 0.45 * size.rim_diameter * spoke
        parts.append(Tube(f"{side} spoke {number + 1}", palette.RIM, start, end, 0.030 * size.rim_diameter, 0.5))
    return parts
