"""Hardpoint files as text, for tests of the model."""

from __future__ import annotations

import re

from corners import PLAIN

SIGNS = {"iso-8855": (1.0, 1.0, 1.0), "sae-j670": (1.0, -1.0, -1.0)}
MM = {"mm": 1.0, "m": 1000.0, "in": 25.4}
RADIUS = {"double-wishbone": 228.0, "strut": 302.0}


def points_text(kind: str, side: str = "left", axes: str = "iso-8855", unit: str = "mm") -> str:
    """The points of the plain corner as lines of TOML."""
    mirror = 1.0 if side == "left" else -1.0
    lines = []
    for name, (x, y, z) in PLAIN[kind].items():
        numbers = (v * s / MM[unit] for v, s in zip((x, y * mirror, z), SIGNS[axes], strict=True))
        lines.append(f"{name} = [{', '.join(repr(v + 0.0) for v in numbers)}]")
    return "\n".join(lines)


def file_text(
    kind: str = "double-wishbone", axes: str = "iso-8855", unit: str = "mm", *, right: bool = False, rack: bool = True
) -> str:
    """A whole file with every table, in any axes and unit."""

    def length(mm: float) -> str:
        return repr(mm / MM[unit])

    lateral = "-1.0" if axes == "sae-j670" else "1.0"
    parts = [
        "# the plain corner",
        "schema = 1",
        'title = "Polecat 2, front axle"',
        f'axes = "{axes}"',
        f'length_unit = "{unit}"',
        "",
        "[vehicle]",
        'axle = "front"',
        f"wheelbase = {length(1550.0)}",
        f"cg_height = {length(290.0)}",
        "brake_share = 0.62",
        'brakes = "outboard"',
        'drive = "inboard"',
        f"front_overhang = {length(700.0)}",
        f"body_width = {length(1350.0)}",
        "",
        "[wheel]",
        f"loaded_radius = {length(RADIUS[kind])}",
        f"tyre_width = {length(190.0)}",
        f"rim_diameter = {length(254.0)}",
        f"rim_width = {length(178.0)}",
        "",
        "[setup]                # static",
        "toe_in = -0.10",
        "camber = -1.50",
        "",
    ]
    if rack:
        parts += [
            "[rack]",
            f"axis = [0.0, {lateral}, 0.0]",
            f"stroke = {length(30.0)}",
            f"travel_per_turn = {length(86.0)}",
            "",
        ]
    for side in ("left", "right") if right else ("left",):
        parts += [f"[{side}]", f'type = "{kind}"', f"[{side}.points]", points_text(kind, side, axes, unit), ""]
    return "\n".join(parts)


def changed(text: str, old: str, new: str) -> str:
    """The text with the one line that starts with ``old`` (a regular expression) replaced by ``new``."""
    found, count = re.subn(rf"^{old}.*$", lambda _: new, text, flags=re.MULTILINE)
    assert count == 1, (old, count)
    return found
