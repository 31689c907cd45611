"""What a pose's status means, in one place."""

from __future__ import annotations

from toewright.core import layout

OK = layout.OK
OUT_OF_REACH = layout.OUT_OF_REACH
LOCKED = layout.LOCKED

STATUS_NAMES = ("ok", "out-of-reach", "locked")
"""Name of each status number."""

LOCK_MARGIN = layout.LOCK_MARGIN
"""A stop is called locked where the transmission angle is within this of 0 or 180 deg."""

STATUS_MEANINGS = {
    "ok": "solved; every length holds to 1e-9 mm",
    "out-of-reach": "at or beyond the place where the links can go no further, while the tie rod still has its lever",
    "locked": (
        "at or beyond the place where tie rod and steering arm come into line (transmission angle within "
        f"{LOCK_MARGIN:.0f} deg of 0 or 180) and the steering locks"
    ),
}

STOP_CAUSES = {
    "out-of-reach": "the links are at the end of their reach there, while the tie rod still has its lever",
    "locked": "the tie rod and the steering arm come into line and the steering locks",
}
"""Why a linkage stops, in words."""


def state_words(status: str) -> str:
    """A status with its meaning: ``locked, which is at or beyond the place where ...``."""
    return f"{status}, which is {STATUS_MEANINGS[status]}"
