"""The workshop table: what each step of each adjuster does to bump steer, and what else it moves."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import ClassVar

import numpy as np

from toewright.core import layout
from toewright.core.types import FloatArray
from toewright.kinematics.batch import solve_batch
from toewright.kinematics.design import design_vector
from toewright.kinematics.sweep import check_positions, default_travel
from toewright.kinematics.tables import ResultTable
from toewright.model.axle import Axle
from toewright.model.errors import InputError
from toewright.studies.adjusters import Adjuster, read_adjusters
from toewright.studies.as_built import at_height, rebuild, rod_for_toe

SIDE_EFFECTS = (
    "camber",
    "caster",
    "kingpin_inclination",
    "scrub_radius",
    "mechanical_trail",
    "steer_rate",
    "transmission_angle",
)
"""Static figures shown beside the bump steer."""

SHIM_COLUMNS = (
    "adjuster",
    "adjustment",
    "status",
    "toe_before",
    "rod_longer",
    "rod_turns",
    "toe_in_set",
    "bump_steer_low",
    "bump_steer_high",
    "bump_steer_most",
    "bump_steer_rate",
    *SIDE_EFFECTS,
)


@dataclass(frozen=True)
class ShimTable(ResultTable):
    """Rows of SHIM_COLUMNS: every step of every adjuster, one adjuster at a time, the others as they are.

    Attributes:
        side: "left" or "right".
        travel: (T,) mm from the ride height.
        ride_height: mm of wheel travel at which the car stands.
        adjusters: as declared, in the order of the rows.
    """

    side: str
    travel: FloatArray
    ride_height: float
    adjusters: tuple[Adjuster, ...]

    order: ClassVar[tuple[str, ...]] = SHIM_COLUMNS

    def rows_of(self, name: str) -> np.ndarray[tuple[int, ...], np.dtype[np.intp]]:
        """Row numbers of one adjuster."""
        return np.flatnonzero(self.labels["adjuster"] == name)


def shims(
    axle: Axle,
    *,
    side: str = "left",
    travel: Sequence[float] | FloatArray | None = None,
    ride_height: float = 0.0,
) -> ShimTable:
    """Step through every adjuster of an axle, set the toe again with the tie rod, and measure.

    The car stands at its ride height, with the declared static toe there. One adjuster is moved; all parts keep their dimensions and the
    upright settles (toewright.studies.as_built). Then the tie rod sets the declared toe again, except where the adjuster is the tie rod
    itself. Bump steer is the change of toe from there.

    Args:
        axle: the axle, with [adjusters].
        side: which corner.
        travel: (T,) mm from the ride height, bump +, ascending.
        ride_height: wheel travel (mm) at which the car stands.

    Raises:
        InputError: without adjusters, for bad ones, for a ride height that can't be reached, or a step that can't be put together.
        ValueError: for bad positions.
    """
    adjusters = read_adjusters(axle)
    at = check_positions(travel, default_travel(axle), "travel")
    design = design_vector(axle, side)
    sign = float(design[layout.SIDE])
    try:
        stands, _ = rod_for_toe(at_height(design, ride_height), axle.setup.toe_in)
    except InputError as error:
        raise InputError(f"{axle.path or axle.title}: ride height {ride_height:+g} mm: {error}") from error
    pitch = next((a.thread_pitch for a in adjusters if a.thread_pitch is not None), None)
    names, amounts, designs, before, longer = [], [], [], [], []
    for adjuster in adjusters:
        for amount in adjuster.amounts.tolist():
            try:
                changed = rebuild(stands, adjuster.shift(amount, sign), adjuster.longer(amount))
                done, more = (
                    (changed, 0.0) if adjuster.thread_pitch is not None else rod_for_toe(changed, axle.setup.toe_in)
                )
            except InputError as error:
                raise InputError(
                    f"{axle.path or axle.title}: adjusters.{adjuster.name} at {amount:+g} {adjuster.unit}: {error}"
                ) from error
            names.append(adjuster.name)
            amounts.append(amount)
            designs.append(done)
            before.append(float(changed[layout.TOE_IN]))
            longer.append(more)
    batch = solve_batch(
        np.array(designs), np.zeros(1), np.append(at, 0.0), columns=("toe_in", "bump_steer_rate", *SIDE_EFFECTS)
    )
    toe = batch["toe_in"][:, 0]
    bump = toe[:, :-1] - toe[:, -1:]
    columns: dict[str, FloatArray] = {
        "adjustment": np.array(amounts),
        "toe_before": np.array(before),
        "rod_longer": np.array(longer),
        "rod_turns": np.array(longer) / pitch if pitch else np.full(len(names), np.nan),
        "toe_in_set": toe[:, -1].copy(),
        "bump_steer_low": bump[:, 0].copy(),
        "bump_steer_high": bump[:, -1].copy(),
        "bump_steer_most": np.max(np.abs(bump), axis=1),
        "bump_steer_rate": batch["bump_steer_rate"][:, 0, -1].copy(),
        **{name: batch[name][:, 0, -1].copy() for name in SIDE_EFFECTS},
    }
    thread = (
        "no thread of the tie rod is declared, so its turns are left empty"
        if pitch is None
        else f"tie rod thread: {pitch:g} mm for one turn"
    )
    return ShimTable(
        labels={"adjuster": np.array(names)},
        columns=columns,
        status=np.max(batch.status[:, 0], axis=1).astype(np.int8),
        notes=(
            f"Measured from the ride height {ride_height:+g} mm (wheel travel against the drawing, bump +), rack at 0 mm.",
            "After each step the toe is set again with the tie rod, except on the tie rod's own rows.",
            f"{thread[0].upper()}{thread[1:]}.",
        ),
        side=side,
        travel=at,
        ride_height=ride_height,
        adjusters=adjusters,
    )
