"""The report: one HTML page that holds everything, needs no network, and says where its numbers come from."""

from __future__ import annotations

import platform
from collections.abc import Callable
from datetime import UTC, datetime
from typing import TYPE_CHECKING

from toewright.model.axle import Axle
from toewright.views.report_blocks import Section, clean
from toewright.views.report_judgement import (
    against_section,
    glance_section,
    limits_section,
    remarks_section,
    targets_section,
)
from toewright.views.report_sections import (
    bump_steer_section,
    design_section,
    hardpoints_section,
    job_section,
    linkage_section,
    ride_section,
    turn_section,
)
from toewright.views.words import axle_words

if TYPE_CHECKING:
    from pathlib import Path

LARGEST_TEXT = 100_000
"""Characters of the input file that are shown."""

CAUTIONS = (
    "Steering can kill. These are computed figures of rigid links without play, compliance or wear: verify them on the vehicle before "
    "anyone drives it.",
    "Measure the hardpoints again on the built car, at its ride height and with its tyres; a few tenths of a millimetre at a tie rod "
    "change the bump steer.",
    "After every change: retighten and lock every joint and recheck toe, camber, free movement from lock to lock over the whole travel, "
    "and that no rod end or joint binds.",
    "Competition and road rules, the makers of the parts, and a qualified engineer have the last word.",
)
"""What every report says."""


def write_report(
    axle: Axle,
    *,
    against: Axle | None = None,
    made: datetime | None = None,
    step: Callable[[int], None] | None = None,
) -> str:
    """The report of an axle as HTML text.

    Args:
        axle: the axle.
        against: another one that it is compared with: what changed from that one to ``axle``.
        made: date and time on the page; now when not given.
        step: called with 1 after each section, for progress; there are as many as ``section_count``.

    Raises:
        InputError: if a linkage is locked in its design position, or a target of the file is at fault.
    """
    from jinja2 import Environment, PackageLoader, StrictUndefined

    from toewright import __version__

    environment = Environment(
        loader=PackageLoader("toewright.views"),
        autoescape=True,
        undefined=StrictUndefined,
        trim_blocks=True,
        lstrip_blocks=True,
    )
    environment.filters["keep"] = _keep_sign
    sections: list[Section] = []
    for build in _builders(axle, against):
        sections.append(build())
        if step is not None:
            step(1)
    moment = (made or datetime.now(UTC)).astimezone(UTC)
    return environment.get_template("report.html").render(
        title=clean(axle.title),
        words=clean(axle_words(axle)),
        sections=[glance_section(sections), *sections],
        cautions=CAUTIONS,
        trace=_trace(axle, against, moment),
        source=source_text(axle),
        made=f"{moment:%Y-%m-%d %H:%M} UTC",
        version=__version__,
    )


def _keep_sign(text: str) -> str:
    """The same words with the sign held to the word before it, so that no line begins with it."""
    return text.replace(" +", "\u00a0+").replace(" -", "\u00a0-")


def section_count(against: Axle | None = None) -> int:
    """Steps of ``write_report``."""
    return 10 if against is None else 11


def _builders(axle: Axle, against: Axle | None) -> list[Callable[[], Section]]:
    found: list[Callable[[], Section]] = [
        lambda: job_section(axle),
        lambda: hardpoints_section(axle),
        lambda: linkage_section(axle),
        lambda: design_section(axle),
        lambda: bump_steer_section(axle),
        lambda: ride_section(axle),
        lambda: turn_section(axle),
        lambda: limits_section(axle),
        lambda: remarks_section(axle),
        lambda: targets_section(axle),
    ]
    if against is not None:
        found.append(lambda: against_section(against, axle))
    return found


def _trace(axle: Axle, against: Axle | None, moment: datetime) -> list[tuple[str, str]]:
    """What the numbers can be traced by: files, hashes, versions."""
    from importlib.metadata import version

    from toewright import __version__

    rows = []
    for words, of in (("input", axle), ("compared with", against)):
        if of is not None:
            rows.append((f"{words}: file", "none (made in memory)" if of.path is None else clean(str(of.path.name))))
            rows.append((f"{words}: SHA-256", of.sha256 or "none (made in memory)"))
    libraries = ", ".join(f"{name} {version(name)}" for name in ("numpy", "numba", "matplotlib"))
    rows.append(("made", f"{moment:%Y-%m-%d %H:%M} UTC"))
    rows.append(("versions", f"toewright {__version__}; Python {platform.python_version()}; {libraries}"))
    return rows


def source_text(axle: Axle) -> str | None:
    """The text of the input file, when it still is the one that was read."""
    import hashlib

    if axle.path is None or axle.sha256 is None:
        return None
    try:
        raw = axle.path.read_bytes()
    except OSError:
        return None
    if hashlib.sha256(raw).hexdigest() != axle.sha256:
        return None
    text = raw.decode("utf-8-sig")
    visible = "".join(c if c.isprintable() or c in "\n\t" else " " for c in text.replace("\r\n", "\n"))
    return visible if len(visible) <= LARGEST_TEXT else visible[:LARGEST_TEXT] + "\n(cut)"


def save_report(page: str, path: Path, *, force: bool = False) -> None:
    """Write the page.

    Raises:
        InputError: if the target is refused or can't be written.
    """
    from toewright.model.writing import write_text

    write_text(path, page, force=force)
