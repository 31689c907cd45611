"""One file per command."""

from __future__ import annotations

from collections.abc import Mapping

COMMANDS: Mapping[str, tuple[str, str]] = {
    "new": ("new", "new"),
    "import": ("import_", "import_points"),
    "check": ("check", "check"),
    "sweep": ("sweep", "sweep"),
    "turn": ("turn", "turn"),
    "ride": ("ride", "ride"),
    "sensitivity": ("sensitivity", "sensitivity"),
    "tune": ("tune", "tune"),
    "locus": ("locus", "locus"),
    "tolerance": ("tolerance", "tolerance"),
    "compare": ("compare", "compare"),
    "report": ("report", "report"),
    "shims": ("shims", "shims"),
    "draw": ("draw", "draw"),
    "schema": ("schema", "schema"),
}
"""Each command: its module here and the function in it; ``toewright --help`` lists them in this order."""
