"""What a pose's status means, in one place."""

from __future__ import annotations

from toewright.core import layout

OK = layout.OK
OUT_OF_REACH = layout.OUT_OF_REACH
LOCKED = layout.LOCKED

STATUS_NAMES = ("ok", "out-of-reach", "locked")
"""Name of each status number."""

STATUS_MEANINGS = {
    "ok": "solved; every length holds to 1e-9 mm",
    "out-of-reach": "no assembly exists there: the arms are stretched out before the wheel gets so far",
    "locked": "the linkage is at or beyond its toggle: tie rod and steering arm come into line and the steering locks",
}
