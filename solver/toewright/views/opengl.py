"""Is there an OpenGL that VTK can draw with? Asked in a child process, because VTK without one takes the process down with it.

The answer is kept in the user's cache folder, for as long as the machine, VTK, the display and the installed libraries stay the same.
"""

from __future__ import annotations

import hashlib
import json
import os
import platform
import subprocess
import sys
from collections.abc import Mapping
from importlib.metadata import version
from pathlib import Path

VARIABLE = "VTK_DEFAULT_OPENGL_WINDOW"
"""Environment variable by which VTK chooses the class of its windows; an empty value here leaves the choice to VTK."""

PATIENCE = 30.0
"""Seconds that one class may take to draw a tiny picture."""

REMEDY = "to draw with OpenGL install libegl1 and libgl1-mesa-dri, or libosmesa6 (names of Debian's packages)"
"""What to do where there is none."""

PROBE = """
import sys
try:
    import resource
    resource.setrlimit(resource.RLIMIT_CORE, (0, 0))
except ImportError:
    pass
import vtkmodules.vtkRenderingOpenGL2
from vtkmodules.vtkFiltersSources import vtkSphereSource
from vtkmodules.vtkRenderingCore import vtkActor, vtkPolyDataMapper, vtkRenderer, vtkRenderWindow
from vtkmodules.vtkCommonCore import vtkUnsignedCharArray
window = vtkRenderWindow()
window.SetOffScreenRendering(1)
window.SetSize(32, 32)
renderer = vtkRenderer()
renderer.SetBackground(1.0, 1.0, 1.0)
window.AddRenderer(renderer)
source, mapper, actor = vtkSphereSource(), vtkPolyDataMapper(), vtkActor()
mapper.SetInputConnection(source.GetOutputPort())
actor.SetMapper(mapper)
actor.GetProperty().SetColor(1.0, 0.0, 0.0)
renderer.AddActor(actor)
window.Render()
pixels = vtkUnsignedCharArray()
window.GetRGBACharPixelData(0, 0, 31, 31, 1, pixels)
def pixel(x, y):
    return [pixels.GetValue(4 * (32 * y + x) + channel) for channel in range(3)]
corner, middle = pixel(1, 1), pixel(16, 16)
drawn = min(corner) > 250 and middle[0] > 60 and max(middle[1:]) < 40
sys.exit(0 if drawn else 1)
"""
"""The child's program: a red ball on white, 32 by 32 pixels, read back; it ends with 0 where they are right."""


def candidates(environment: Mapping[str, str]) -> tuple[str, ...]:
    """Window classes worth a probe, the best first: what the user has set, then silent ones, then one that needs a display."""
    if not sys.platform.startswith("linux"):
        return ("",)
    known = ("vtkEGLRenderWindow", "vtkOSOpenGLRenderWindow")
    shown = ("vtkXOpenGLRenderWindow",) if environment.get("DISPLAY") else ()
    chosen = environment.get(VARIABLE, "")
    return tuple(dict.fromkeys((*((chosen,) if chosen else ()), *known, *shown)))


def draws(window_class: str, environment: Mapping[str, str]) -> bool:
    """True where a child process draws with that class and reads the right pixels back."""
    child = {name: value for name, value in environment.items() if name != VARIABLE}
    if window_class:
        child[VARIABLE] = window_class
    try:
        done = subprocess.run(
            [sys.executable, "-P", "-c", PROBE],
            env=child,
            stdin=subprocess.DEVNULL,
            stdout=subprocess.DEVNULL,
            stderr=subprocess.DEVNULL,
            timeout=PATIENCE,
            check=False,
        )
    except (OSError, subprocess.TimeoutExpired):
        return False
    return done.returncode == 0


def cache_folder(environment: Mapping[str, str]) -> Path:
    """The user's cache folder for toewright; it need not exist."""
    if sys.platform == "darwin":
        return Path.home() / "Library" / "Caches" / "toewright"
    if sys.platform == "win32":
        return Path(environment.get("LOCALAPPDATA", Path.home() / "AppData" / "Local")) / "toewright" / "cache"
    return Path(environment.get("XDG_CACHE_HOME") or Path.home() / ".cache") / "toewright"


def _stamp(place: str) -> list[int]:
    try:
        seen = Path(place).stat()
    except OSError:
        return []
    return [seen.st_mtime_ns, seen.st_size]


def machine(environment: Mapping[str, str], classes: tuple[str, ...]) -> str:
    """A key that changes with the machine, VTK, the display, the classes in question and the installed libraries."""
    drivers = ("/usr/lib/dri", "/usr/lib64/dri", f"/usr/lib/{platform.machine()}-linux-gnu/dri")
    vendors = ("/usr/share/glvnd/egl_vendor.d", "/etc/glvnd/egl_vendor.d")
    names = ("DISPLAY", "LD_LIBRARY_PATH", "LD_PRELOAD")
    facts = [
        platform.node(),
        platform.machine(),
        sys.executable,
        version("vtk"),
        classes,
        [environment.get(name) for name in names],
        [_stamp(place) for place in ("/etc/ld.so.cache", *drivers, *vendors)],
    ]
    return hashlib.sha256(json.dumps(facts).encode()).hexdigest()[:24]


def first_that_draws(classes: tuple[str, ...], environment: Mapping[str, str]) -> str | None:
    """The first class that draws, from the cache or by probing; None where none does.

    A cache that cannot be read or written only costs the time of another probe.
    """
    key = machine(environment, classes)
    place = cache_folder(environment) / "opengl.json"
    try:
        kept = json.loads(place.read_text(encoding="utf-8"))
    except (OSError, ValueError):
        kept = {}
    if not isinstance(kept, dict):
        kept = {}
    if key in kept and (kept[key] is None or kept[key] in classes):
        return None if kept[key] is None else str(kept[key])
    found = next((name for name in classes if draws(name, environment)), None)
    kept = dict(list(kept.items())[-15:]) | {key: found}
    try:
        place.parent.mkdir(parents=True, exist_ok=True)
        temporary = place.with_name(f"opengl.{os.getpid()}.json")
        temporary.write_text(json.dumps(kept, indent=1), encoding="utf-8")
        temporary.replace(place)
    except OSError:
        return found
    return found


def _use(window_class: str | None) -> bool:
    if window_class is None:
        return False
    if window_class:
        os.environ[VARIABLE] = window_class
    return True


def use_offscreen() -> bool:
    """Choose a window class for pictures; False where none works, and then nothing may open a VTK window."""
    return _use(first_that_draws(candidates(os.environ), os.environ))


def has_display(environment: Mapping[str, str]) -> bool:
    """Is there a screen to open a window on?"""
    return not sys.platform.startswith("linux") or bool(environment.get("DISPLAY"))


def use_window() -> bool:
    """Choose a window class for a window on the screen; False where there is no display or it cannot draw there."""
    if not has_display(os.environ):
        return False
    classes = ("vtkXOpenGLRenderWindow",) if sys.platform.startswith("linux") else ("",)
    return _use(first_that_draws(classes, os.environ))
