"""Every quantity: name, symbol, unit, sign and definition. Columns, labels, tables and documents come from here.

Axes are ISO 8855 (x forward, y left, z up), lengths mm, angles deg. In all formulas s = +1 on the left and -1 on the right,
a is the wheel's spin axis pointing to the vehicle's left, c the contact point, g the steering axis met with the horizontal plane
through c, h = unit(a_y, -a_x, 0) the wheel's heading and l = z x h its left normal.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass


@dataclass(frozen=True)
class Quantity:
    """One entry.

    Attributes:
        name: column name.
        symbol: as in formulas; empty where there is none.
        unit: "mm", "deg", "deg/mm", "deg/deg", "mm/mm", "rad/mm", "%", or "-".
        label: in words, for tables and axes.
        sign: what a positive number means, in words.
        definition: exact definition, with its source where a standard has it.
    """

    name: str
    symbol: str
    unit: str
    label: str
    sign: str
    definition: str


_TABLE = (
    # ---- motion
    ("rack_travel", "r", "mm", "rack travel", "+ along the rack axis, to the left unless the file says otherwise",
     "displacement of the rack along its axis from the design position"),
    ("wheel_travel", "z", "mm", "wheel travel", "bump +, rebound -",
     "vertical displacement from the design position relative to the body, of the wheel centre or of the contact point (travel_at)"),
    ("hand_wheel_angle", "", "deg", "hand-wheel angle", "+ with positive rack travel",
     "360 deg times rack travel over travel_per_turn"),
    ("status", "", "-", "status", "", "ok, out-of-reach or locked"),
    # ---- corner
    ("steer_angle", "delta", "deg", "steer angle", "to the left +",
     "angle of the wheel plane from x about z, atan2(-a_x, a_y) (ISO 8855:2011, 7.1.1)"),
    ("toe_in", "", "deg", "toe-in", "toe-in +", "-s steer_angle of one wheel: + where its front is nearer the centre plane"),
    ("camber", "eps", "deg", "camber", "top outboard +", "-s asin(a_z), against the body"),
    ("caster", "tau", "deg", "caster", "top rearward +", "atan2(-k_x, k_z) of the steering axis k, pointing up"),
    ("kingpin_inclination", "sigma", "deg", "kingpin inclination", "top inboard +", "atan2(-s k_y, k_z) of the steering axis k"),
    ("scrub_radius", "", "mm", "scrub radius", "steering axis inboard +",
     "kingpin offset at ground, s (c - g).l (sign as D. C. Barton, J. D. Fieldhouse, Automotive Chassis Engineering, 2018, 3.1.5.3)"),
    ("mechanical_trail", "", "mm", "mechanical trail", "steering axis ahead +", "caster offset at ground, (g - c).h"),
    ("wheel_centre_offset", "", "mm", "kingpin offset at wheel centre", "steering axis inboard +",
     "as scrub_radius, with the plane through and the point at the wheel centre"),
    ("wheel_centre_trail", "", "mm", "caster offset at wheel centre", "steering axis ahead +",
     "as mechanical_trail, with the plane through and the point at the wheel centre"),
    ("bump_steer", "", "deg", "bump steer", "toe-in +", "toe_in(rack, travel) - toe_in(rack, 0) of one wheel, at fixed rack"),
    ("bump_steer_rate", "", "deg/mm", "bump-steer rate", "toe-in with bump +", "d toe_in / d wheel_travel at fixed rack, exact"),
    ("steer_rate", "", "deg/mm", "steer rate", "left with rack travel +", "d steer_angle / d rack_travel at fixed wheel travel, exact"),
    ("camber_gain", "", "deg/mm", "camber gain", "top outboard with bump +", "d camber / d wheel_travel at fixed rack, exact"),
    ("transmission_angle", "mu", "deg", "transmission angle", "90 best, 0 or 180 lock",
     "angle at the outer tie rod joint between the tie rod and the arm to the steering axis, both seen along the steering axis"),
    ("wheel_centre_x", "", "mm", "wheel centre x", "forward +", "position of the wheel centre"),
    ("wheel_centre_y", "", "mm", "wheel centre y", "left +", "position of the wheel centre"),
    ("wheel_centre_z", "", "mm", "wheel centre z", "up +", "position of the wheel centre"),
    ("contact_x", "", "mm", "contact point x", "forward +", "wheel centre + loaded_radius unit(-z + a_z a)"),
    ("contact_y", "", "mm", "contact point y", "left +", "wheel centre + loaded_radius unit(-z + a_z a)"),
    ("contact_z", "", "mm", "contact point z", "up +", "wheel centre + loaded_radius unit(-z + a_z a)"),
    # ---- vectors
    ("wheel_centre", "p", "mm", "wheel centre", "x forward, y left, z up", "position of the wheel centre"),
    ("contact_point", "c", "mm", "contact point", "x forward, y left, z up", "wheel centre + loaded_radius unit(-z + a_z a)"),
    ("kingpin_ground_point", "g", "mm", "steering axis at ground", "x forward, y left, z up",
     "where the steering axis meets the horizontal plane through the contact point"),
    ("spin_axis", "a", "-", "spin axis", "to the vehicle's left on both sides", "unit vector of the wheel's rotation"),
    ("steering_axis", "k", "-", "steering axis", "pointing up",
     "unit vector, lower to upper ball joint; strut: lower ball joint to top mount"),
    ("contact_travel_slope", "", "mm/mm", "contact path over travel", "x forward, y left, z up", "d contact_point / d wheel_travel, exact"),
    ("wheel_centre_travel_slope", "", "mm/mm", "wheel-centre path over travel", "x forward, y left, z up", "d wheel_centre / d wheel_travel, exact"),
    ("twist_travel", "", "rad/mm", "upright's rotation over travel", "right-hand rule", "angular velocity of the upright per mm of wheel travel"),
    ("contact_rack_slope", "", "mm/mm", "contact path over rack", "x forward, y left, z up", "d contact_point / d rack_travel, exact"),
    ("wheel_centre_rack_slope", "", "mm/mm", "wheel-centre path over rack", "x forward, y left, z up", "d wheel_centre / d rack_travel, exact"),
    ("twist_rack", "", "rad/mm", "upright's rotation over rack", "right-hand rule", "angular velocity of the upright per mm of rack travel"),
    # ---- links
    ("upper_arm_angle", "", "deg", "upper arm rotation", "ball joint up +", "rotation of the upper wishbone about its pivot axis from design"),
    ("lower_arm_angle", "", "deg", "lower arm rotation", "ball joint up +", "rotation of the lower wishbone about its pivot axis from design"),
    ("tie_rod_angle", "", "deg", "tie rod swing", "never negative", "angle between the tie rod's directions now and at design"),
    ("strut_angle", "", "deg", "strut swing", "never negative", "angle between the strut's directions now and at design"),
    ("strut_length", "", "mm", "strut length", "never negative", "top mount to the strut's axis point"),
    # ---- turning
    ("steer_left", "", "deg", "steer angle, left wheel", "to the left +", "steer_angle of the left wheel"),
    ("steer_right", "", "deg", "steer angle, right wheel", "to the left +", "steer_angle of the right wheel"),
    ("mean_steer", "", "deg", "mean steer angle", "to the left +", "mean of steer_left and steer_right"),
    ("ideal_inner_steer", "", "deg", "ideal inner steer angle", "to the left +",
     "steer of the inner wheel whose normal goes through the turn centre of the outer wheel: where the outer wheel's normal meets the line of the "
     "other axle (ISO 8855:2011, Ackermann geometry, with the true contact points)"),
    ("ackermann_error", "", "deg", "Ackermann error", "inner wheel turns too much +", "|inner steer| - |ideal inner steer|"),
    ("ackermann_percent", "", "%", "Ackermann percent", "100 true Ackermann, 0 parallel, - reverse",
     "by default 100 (|inner| - |outer|) / (|ideal inner| - |outer|); other definitions by name; empty within 0.5 deg of straight ahead"),
    ("normals_meet_x", "", "mm", "wheel normals meet, x", "forward +", "where the normals of both wheels of this axle meet"),
    ("normals_meet_y", "", "mm", "wheel normals meet, y", "left +", "where the normals of both wheels of this axle meet"),
    ("centre_x", "", "mm", "turn centre x", "forward +", "point about which the sum of the four squared slip angles is least"),
    ("centre_y", "", "mm", "turn centre y", "left +", "point about which the sum of the four squared slip angles is least"),
    ("slip_front_left", "", "deg", "slip angle, front left", "velocity to the left of the wheel's heading +",
     "velocity direction at the contact point about the turn centre, against the wheel's heading"),
    ("slip_front_right", "", "deg", "slip angle, front right", "velocity to the left of the wheel's heading +",
     "velocity direction at the contact point about the turn centre, against the wheel's heading"),
    ("slip_rear_left", "", "deg", "slip angle, rear left", "velocity to the left of the wheel's heading +",
     "velocity direction at the contact point about the turn centre, against the wheel's heading"),
    ("slip_rear_right", "", "deg", "slip angle, rear right", "velocity to the left of the wheel's heading +",
     "velocity direction at the contact point about the turn centre, against the wheel's heading"),
    ("turn_radius", "", "mm", "turn radius", "never negative", "turn centre to the middle of the other axle, in the road plane"),
    ("kerb_circle", "", "mm", "kerb-to-kerb circle", "never negative",
     "diameter of the circle of the outer front tyre: twice the largest distance of a front contact point from the turn centre, plus the tyre width where it is given"),
    ("wall_circle", "", "mm", "wall-to-wall circle", "never negative", "diameter of the circle of the outermost body corner"),
    ("steering_ratio", "", "-", "steering ratio", "+ where both turn the same way", "d hand_wheel_angle / d mean_steer, exact"),
    ("camber_left", "", "deg", "camber, left", "top outboard +", "camber of the left wheel against the body"),
    ("camber_right", "", "deg", "camber, right", "top outboard +", "camber of the right wheel against the body"),
    ("scrub_radius_left", "", "mm", "scrub radius, left", "steering axis inboard +", "scrub_radius of the left wheel"),
    ("scrub_radius_right", "", "mm", "scrub radius, right", "steering axis inboard +", "scrub_radius of the right wheel"),
    ("mechanical_trail_left", "", "mm", "mechanical trail, left", "steering axis ahead +", "mechanical_trail of the left wheel"),
    ("mechanical_trail_right", "", "mm", "mechanical trail, right", "steering axis ahead +", "mechanical_trail of the right wheel"),
    # ---- riding
    ("motion", "", "-", "motion", "", "bump: both wheels together; roll: the body rolls on a flat road; single: one wheel moves"),
    ("bump", "", "mm", "bump", "bump +", "wheel travel of both wheels, or of the moving one"),
    ("roll_angle", "phi", "deg", "roll angle", "right side of the body down +", "rotation of the body about x against the road (ISO 8855)"),
    ("wheel_travel_left", "", "mm", "wheel travel, left", "bump +", "wheel travel of the left wheel"),
    ("wheel_travel_right", "", "mm", "wheel travel, right", "bump +", "wheel travel of the right wheel"),
    ("toe_in_left", "", "deg", "toe-in, left", "toe-in +", "toe_in of the left wheel"),
    ("toe_in_right", "", "deg", "toe-in, right", "toe-in +", "toe_in of the right wheel"),
    ("axle_steer", "", "deg", "axle steer", "to the left +", "mean steer angle of both wheels less its value at zero travel"),
    ("axle_steer_rate", "", "deg/mm", "axle-steer rate", "left with bump +", "d axle_steer / d bump, exact; not in roll"),
    ("roll_steer", "", "deg/deg", "roll steer", "left with roll to the right +", "d axle_steer / d roll_angle on one flat road, exact"),
    ("camber_gain_left", "", "deg/mm", "camber gain, left", "top outboard with bump +", "camber_gain of the left wheel"),
    ("camber_gain_right", "", "deg/mm", "camber gain, right", "top outboard with bump +", "camber_gain of the right wheel"),
    ("camber_road_left", "", "deg", "camber to road, left", "top outboard +", "camber of the left wheel against the normal of the road"),
    ("camber_road_right", "", "deg", "camber to road, right", "top outboard +", "camber of the right wheel against the normal of the road"),
    ("track_change", "", "mm", "track change", "wider +", "change of the contact points' distance along the road across the car"),
    ("recession_left", "", "mm", "wheel recession, left", "rearward +", "minus the change of the wheel centre's x"),
    ("recession_right", "", "mm", "wheel recession, right", "rearward +", "minus the change of the wheel centre's x"),
    ("roll_centre_y", "", "mm", "roll centre, lateral", "left +", "place of the roll centre along the road from where the body's centre plane meets it"),
    ("roll_centre_z", "", "mm", "roll-centre height", "above the road +",
     "each wheel's line through its contact point, normal to its contact path over its own travel at fixed rack: where both lines meet, above the line through the contact points"),
    ("swing_arm_left", "", "mm", "front-view swing arm, left", "instant centre inboard +",
     "s (c_y - y_ic): ic is the upright's point in the transverse plane through c that moves neither in y nor in z over wheel travel"),
    ("swing_arm_right", "", "mm", "front-view swing arm, right", "instant centre inboard +",
     "s (c_y - y_ic): ic is the upright's point in the transverse plane through c that moves neither in y nor in z over wheel travel"),
    ("bump_steer_rate_left", "", "deg/mm", "bump-steer rate, left", "toe-in with bump +", "bump_steer_rate of the left wheel"),
    ("bump_steer_rate_right", "", "deg/mm", "bump-steer rate, right", "toe-in with bump +", "bump_steer_rate of the right wheel"),
    ("anti_dive_left", "", "%", "anti-dive, left", "the braking force lifts the nose +",
     "front axle, braking: 100 brake_share slope wheelbase / cg_height; slope dx/dz of the point fixed to the upright at the contact (outboard brakes) or of the wheel centre (inboard)"),
    ("anti_dive_right", "", "%", "anti-dive, right", "the braking force lifts the nose +", "as anti_dive_left, of the right wheel"),
    ("anti_lift_left", "", "%", "anti-lift, left", "the force resists the lift +",
     "rear axle, braking, or driven front axle: as anti_dive_left with this axle's share and the sign of its load change"),
    ("anti_lift_right", "", "%", "anti-lift, right", "the force resists the lift +", "as anti_lift_left, of the right wheel"),
    ("anti_squat_left", "", "%", "anti-squat, left", "the driving force lifts the tail +",
     "driven rear axle: 100 slope wheelbase / cg_height, the slope from the wheel centre (inboard drive) or the upright's contact point (outboard)"),
    ("anti_squat_right", "", "%", "anti-squat, right", "the driving force lifts the tail +", "as anti_squat_left, of the right wheel"),
)  # fmt: skip

GLOSSARY: Mapping[str, Quantity] = {row[0]: Quantity(*row) for row in _TABLE}
"""Every quantity by name."""


def quantity(name: str) -> Quantity:
    """An entry by name.

    Raises:
        KeyError: if there is no such quantity.
    """
    if name not in GLOSSARY:
        raise KeyError(f"{name!r} is not in the glossary")
    return GLOSSARY[name]


def axis_label(name: str, unit: str | None = None) -> str:
    """Label of an axis or a column with unit and sign in words: ``bump steer (deg, toe-in +)``."""
    entry = quantity(name)
    sign = f", {entry.sign}" if entry.sign and len(entry.sign) <= 48 else ""
    return f"{entry.label} ({unit or entry.unit}{sign})"


def explain(names: Iterable[str]) -> list[tuple[str, str, str, str]]:
    """Label, unit, sign and definition of quantities, in the order given, each once: rows of a table."""
    entries = [quantity(name) for name in dict.fromkeys(names)]
    return [(e.label, e.unit, e.sign, e.definition) for e in entries]
