"""toewright: steering and suspension geometry from hardpoints.

    import toewright as tw
    axle = tw.load("hardpoints/marten_front.toml")
    maps = tw.sweep(axle, rack=[-20, 0, 20], travel=[-25, 0, 25])
    maps["bump_steer"]          # (side, rack_travel, wheel_travel), deg, toe-in +

Axes are ISO 8855 (x forward, y left, z up), lengths mm, angles deg. Names are loaded when first used.
"""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from toewright.kinematics.limits import AxleLimits, limits
    from toewright.kinematics.maps import CornerMaps, Stop
    from toewright.kinematics.riding import RideMaps, ride
    from toewright.kinematics.slopes import Slopes, slopes
    from toewright.kinematics.sweep import design_pose, sweep
    from toewright.kinematics.turning import TurnMaps, turn
    from toewright.model.axle import Axle, Corner
    from toewright.model.errors import InputError
    from toewright.model.files import load, loads
    from toewright.studies.comparison import Comparison, compare
    from toewright.studies.goals import parse_goal
    from toewright.studies.locus import Locus, locus
    from toewright.studies.residuals import parse_free
    from toewright.studies.sensitivity import Sensitivity, parse_figure, sensitivity
    from toewright.studies.shims import ShimTable, shims
    from toewright.studies.tolerance import Tolerance, tolerance
    from toewright.studies.tuning import Tuning, tune
    from toewright.studies.verdicts import check_targets
    from toewright.views.report import write_report

__version__ = "0.1.0"

_HOMES = {
    "Axle": "toewright.model.axle",
    "AxleLimits": "toewright.kinematics.limits",
    "Comparison": "toewright.studies.comparison",
    "Corner": "toewright.model.axle",
    "CornerMaps": "toewright.kinematics.maps",
    "InputError": "toewright.model.errors",
    "Locus": "toewright.studies.locus",
    "RideMaps": "toewright.kinematics.riding",
    "Sensitivity": "toewright.studies.sensitivity",
    "ShimTable": "toewright.studies.shims",
    "Slopes": "toewright.kinematics.slopes",
    "Stop": "toewright.kinematics.maps",
    "Tolerance": "toewright.studies.tolerance",
    "Tuning": "toewright.studies.tuning",
    "TurnMaps": "toewright.kinematics.turning",
    "check_targets": "toewright.studies.verdicts",
    "compare": "toewright.studies.comparison",
    "design_pose": "toewright.kinematics.sweep",
    "limits": "toewright.kinematics.limits",
    "load": "toewright.model.files",
    "loads": "toewright.model.files",
    "locus": "toewright.studies.locus",
    "parse_figure": "toewright.studies.sensitivity",
    "parse_free": "toewright.studies.residuals",
    "parse_goal": "toewright.studies.goals",
    "ride": "toewright.kinematics.riding",
    "sensitivity": "toewright.studies.sensitivity",
    "shims": "toewright.studies.shims",
    "slopes": "toewright.kinematics.slopes",
    "sweep": "toewright.kinematics.sweep",
    "tolerance": "toewright.studies.tolerance",
    "tune": "toewright.studies.tuning",
    "turn": "toewright.kinematics.turning",
    "write_report": "toewright.views.report",
}

__all__ = [
    "Axle",
    "AxleLimits",
    "Comparison",
    "Corner",
    "CornerMaps",
    "InputError",
    "Locus",
    "RideMaps",
    "Sensitivity",
    "ShimTable",
    "Slopes",
    "Stop",
    "Tolerance",
    "Tuning",
    "TurnMaps",
    "check_targets",
    "compare",
    "design_pose",
    "limits",
    "load",
    "loads",
    "locus",
    "parse_figure",
    "parse_free",
    "parse_goal",
    "ride",
    "sensitivity",
    "shims",
    "slopes",
    "sweep",
    "tolerance",
    "tune",
    "turn",
    "write_report",
]


def __getattr__(name: str) -> Any:
    if name not in _HOMES:
        raise AttributeError(f"module 'toewright' has no attribute {name!r}")
    return getattr(import_module(_HOMES[name]), name)


def __dir__() -> list[str]:
    return sorted([*globals(), *_HOMES])
