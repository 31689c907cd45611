"""Makes the pictures of the README from the samples, with the tool's own commands: ``python tools/readme_pictures.py``.

Each is reduced to WIDTH px and to a table of colours, so that it stays below LARGEST bytes.
"""

from __future__ import annotations

import sys
import tempfile
from pathlib import Path

from PIL import Image

from toewright.views.animation import colour_table
from toewright_cli.app import run

ROOT = Path(__file__).resolve().parent.parent
FOLDER = ROOT / "docs" / "pictures"
WIDTH = 1200
LARGEST = 200_000

COMMANDS = {
    "marten_sheet.png": ["draw", "hardpoints/marten_front.toml", "--locus"],
    "linnet_poses.png": [
        "draw",
        "hardpoints/linnet_front.toml",
        "--pose",
        "rack=0",
        "--pose",
        "rack=60",
        "--pose",
        "rack=-60",
    ],
    "ibex_oblique.png": ["draw", "hardpoints/ibex_front.toml", "--view", "oblique", "--pose", "rack=40,travel=60"],
    "marten_map.png": ["sweep", "hardpoints/marten_front.toml"],
    "marten_places.png": ["locus", "hardpoints/marten_front.toml", "--rack", "0,20"],
    "marten_scatter.png": ["tolerance", "hardpoints/marten_front.toml", "--builds", "100000"],
}
"""Picture and the command that draws it; ``-o``, or ``--plot`` where the picture goes with a table, is added."""


def reduced(path: Path) -> Image.Image:
    """A picture at WIDTH, in so many colours that it stays below LARGEST bytes as a .png."""
    image = Image.open(path).convert("RGB")
    small = image.resize((WIDTH, round(WIDTH * image.height / image.width)), Image.Resampling.LANCZOS)
    return small.quantize(palette=colour_table(small, 160), dither=Image.Dither.NONE)


def main() -> int:
    """Draw all pictures; 1 when one of them came out too large, 2 when a command failed."""
    FOLDER.mkdir(parents=True, exist_ok=True)
    with tempfile.TemporaryDirectory() as folder:
        for name, command in COMMANDS.items():
            drawn = Path(folder) / name
            words = [str(ROOT / word) if word.startswith("hardpoints/") else word for word in command]
            if run([*words, "-o" if words[0] == "draw" else "--plot", str(drawn)]) != 0:
                return 2
            reduced(drawn).save(FOLDER / name, optimize=True)
            if (FOLDER / name).stat().st_size > LARGEST:
                sys.stderr.write(f"{name} is larger than {LARGEST} bytes\n")
                return 1
    return 0


if __name__ == "__main__":
    sys.exit(main())
