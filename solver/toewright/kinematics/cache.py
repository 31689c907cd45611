"""Are the kernels compiled already? numba keeps them on disk, next to the source or in the user's cache folder."""

from __future__ import annotations

from pathlib import Path

from toewright.core import kernels

NEEDED = ("solve_grid", "measure_poses")


def kernels_cached() -> bool:
    """True where a compiled copy of the kernels, newer than their source, is on disk."""
    source = Path(kernels.__file__).stat().st_mtime
    for name in NEEDED:
        folder = Path(getattr(kernels, name).stats.cache_path)
        found = folder.glob(f"kernels.{name}-*.nbi") if folder.is_dir() else iter(())
        if not any(entry.stat().st_mtime >= source for entry in found):
            return False
    return True
