"""Where each number stands in the plain arrays that the kernels take and return.

The design vector (one per corner, lengths in mm, angles in deg, ISO 8855 axes)::

    0:27   nine points of three coordinates, in the slots of SLOTS
    27     static toe-in        28  static camber        29  loaded radius
    30:33  rack axis, unit vector (zero where there is no rack)
    33     side, +1 left, -1 right
    34     kind, 0 double wishbone, 1 strut

A strut uses slot 0 for its top mount and slot 1 for the point on its axis; slot 2 stays zero.
"""

from __future__ import annotations

from typing import Final

SLOTS: Final = {
    "double-wishbone": (
        "upper_pivot_front",
        "upper_pivot_rear",
        "upper_ball_joint",
        "lower_pivot_front",
        "lower_pivot_rear",
        "lower_ball_joint",
        "tie_rod_inner",
        "tie_rod_outer",
        "wheel_centre",
    ),
    "strut": (
        "strut_top_mount",
        "strut_axis_point",
        "",
        "lower_pivot_front",
        "lower_pivot_rear",
        "lower_ball_joint",
        "tie_rod_inner",
        "tie_rod_outer",
        "wheel_centre",
    ),
}
"""Point name of each of the nine slots, by corner kind."""

KINDS: Final = ("double-wishbone", "strut")

TOE_IN: Final = 27
CAMBER: Final = 28
RADIUS: Final = 29
RACK_AXIS: Final = 30
SIDE: Final = 33
KIND: Final = 34
DESIGN_SIZE: Final = 35

POSE_SIZE: Final = 6
"""A pose: wheel-centre displacement x, y from design (mm), Gibbs vector (3), displacement z (mm)."""

COLUMNS: Final = (
    "steer_angle",
    "toe_in",
    "camber",
    "caster",
    "kingpin_inclination",
    "scrub_radius",
    "mechanical_trail",
    "wheel_centre_offset",
    "wheel_centre_trail",
    "bump_steer_rate",
    "steer_rate",
    "camber_gain",
    "transmission_angle",
    "wheel_centre_x",
    "wheel_centre_y",
    "wheel_centre_z",
    "contact_x",
    "contact_y",
    "contact_z",
    "kingpin_ground_x",
    "kingpin_ground_y",
    "kingpin_ground_z",
    "spin_axis_x",
    "spin_axis_y",
    "spin_axis_z",
    "steering_axis_x",
    "steering_axis_y",
    "steering_axis_z",
    "contact_travel_x",
    "contact_travel_y",
    "contact_travel_z",
    "wheel_centre_travel_x",
    "wheel_centre_travel_y",
    "wheel_centre_travel_z",
    "twist_travel_x",
    "twist_travel_y",
    "twist_travel_z",
    "contact_rack_x",
    "contact_rack_y",
    "contact_rack_z",
    "wheel_centre_rack_x",
    "wheel_centre_rack_y",
    "wheel_centre_rack_z",
    "twist_rack_x",
    "twist_rack_y",
    "twist_rack_z",
    "residual",
    "grip",
)
"""What the measuring kernel gives for a pose, in its order. ``*_travel_*`` and ``*_rack_*`` are
derivatives by wheel travel and by rack travel (mm/mm; the twist, which is the upright's angular velocity, in rad/mm);
``residual`` is the largest length error (mm); ``grip`` the determinant of the rows over its design value."""

COLUMN_INDEX: Final = {name: index for index, name in enumerate(COLUMNS)}

OK: Final = 0
OUT_OF_REACH: Final = 1
LOCKED: Final = 2

LOCK_MARGIN: Final = 15.0
"""Where the linkage can go no further, tie rod and steering arm count as in line when the transmission angle is within this
(deg) of 0 or 180. Stops of the rack lie within 2 deg; stops of the wheel travel lie anywhere, so the border is a convention."""

OBJECTIVE_TERMS: Final = ("steer_angle", "camber", "contact_x", "contact_y", "contact_z")
"""What one objective may weigh per pose in the contracted derivative."""

STRIDE_MARK: Final = -1
"""On a line of the grid: a mere stride on the way to the next requested position."""
END_MARK: Final = -2
"""On a line of the grid: no more positions."""
