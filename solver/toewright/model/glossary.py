"""Every quantity: name, symbol, unit, sign and definition. Columns, labels, tables and documents come from here.

Axes are ISO 8855 (x forward, y left, z up), lengths mm, angles deg. In all formulas s = +1 on the left and -1 on the right, a is the
wheel's spin axis pointing to the vehicle's left, k the steering axis pointing up, c the contact point, g the steering axis met with the
horizontal plane through c, h = unit(a_y, -a_x, 0) the wheel's heading and l = z x h its left normal.
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
        unit: "mm", "deg", "deg/mm", "deg/deg", "mm/mm", "rad/mm", "%", or "-" for what has none.
        label: in words, for tables and axes.
        sign: what a positive number means, in a few words; empty for words and states.
        definition: exact definition, with its source where a standard or a book has it.
    """

    name: str
    symbol: str
    unit: str
    label: str
    sign: str
    definition: str


_Row = tuple[str, str, str, str, str, str]

_CONTACT = "c = p + r unit(-z + a_z a) with wheel centre p and loaded radius r"
_XYZ = "x forward, y left, z up"

_MOTION: tuple[_Row, ...] = (
    ("side", "", "-", "side", "", "left or right; s = +1 left, -1 right in formulas"),
    ("status", "", "-", "status", "",
     "ok; locked: at or beyond a stop where tie rod and steering arm are in line (transmission angle within 15 deg of 0 or 180); "
     "out-of-reach: at or beyond any other stop of the links"),
    ("rack_travel", "", "mm", "rack travel", "along the rack axis +",
     "displacement of the rack along its axis from the design position; the axis points to the left unless rack.axis says otherwise"),
    ("wheel_travel", "", "mm", "wheel travel", "bump +, rebound -",
     "vertical displacement from the design position relative to the body, of the wheel centre or of the contact point (travel_at)"),
    ("hand_wheel_angle", "", "deg", "hand-wheel angle", "to the left +",
     "360 rack_travel / travel_per_turn, with the sign that makes it + where the wheels turn to the left (a rack behind the axle moves to the "
     "right for that)"),
)  # fmt: skip

_CORNER: tuple[_Row, ...] = (
    ("steer_angle", "delta", "deg", "steer angle", "to the left +",
     "atan2(-a_x, a_y): angle of the wheel plane from x about z (ISO 8855:2011, 7.1)"),
    ("toe_in", "", "deg", "toe-in", "toe-in +", "-s steer_angle of one wheel: + where its front is nearer the centre plane (ISO 8855:2011, 7.1)"),
    ("camber", "epsilon", "deg", "camber", "top outboard +", "-s asin(a_z), against the body (sign as ISO 8855 and SAE J670)"),
    ("caster", "tau", "deg", "caster", "top rearward +", "atan2(-k_x, k_z): steering axis in side view (sign as ISO 8855 and SAE J670); past 90 deg where the axis tips past horizontal"),
    ("kingpin_inclination", "sigma", "deg", "kingpin inclination", "top inboard +",
     "atan2(-s k_y, k_z): steering axis in front view (sign as ISO 8855 and SAE J670); past 90 deg where the axis tips past horizontal"),
    ("scrub_radius", "", "mm", "scrub radius", "steering axis inboard +",
     "s (c - g).l, kingpin offset at ground (sign as D. C. Barton, J. D. Fieldhouse, Automotive Chassis Engineering, Springer 2018, 3.1.5.3)"),
    ("mechanical_trail", "", "mm", "mechanical trail", "steering axis ahead +", "(g - c).h, caster offset at ground"),
    ("wheel_centre_offset", "", "mm", "kingpin offset at wheel centre", "steering axis inboard +",
     "as scrub_radius, with the horizontal plane through, and the point at, the wheel centre"),
    ("wheel_centre_trail", "", "mm", "caster offset at wheel centre", "steering axis ahead +",
     "as mechanical_trail, with the horizontal plane through, and the point at, the wheel centre"),
    ("bump_steer", "", "deg", "bump steer", "toe-in +", "toe_in(rack, travel) - toe_in(rack, 0) of one wheel, at fixed rack"),
    ("bump_steer_rate", "", "deg/mm", "bump-steer rate", "toe-in with bump +", "d toe_in / d wheel_travel at fixed rack, exact"),
    ("steer_rate", "", "deg/mm", "steer rate", "left with rack travel +", "d steer_angle / d rack_travel at fixed wheel travel, exact"),
    ("camber_gain", "", "deg/mm", "camber gain", "top outboard with bump +", "d camber / d wheel_travel at fixed rack, exact"),
    ("transmission_angle", "mu", "deg", "transmission angle", "90 best, 0 or 180 lock",
     "angle at the outer tie rod joint between the tie rod and the arm to the steering axis, both projected on the plane normal to that axis"),
    ("wheel_centre_x", "p_x", "mm", "wheel centre x", "forward +", "position of the wheel centre"),
    ("wheel_centre_y", "p_y", "mm", "wheel centre y", "left +", "position of the wheel centre"),
    ("wheel_centre_z", "p_z", "mm", "wheel centre z", "up +", "position of the wheel centre"),
    ("contact_x", "c_x", "mm", "contact point x", "forward +", _CONTACT),
    ("contact_y", "c_y", "mm", "contact point y", "left +", _CONTACT),
    ("contact_z", "c_z", "mm", "contact point z", "up +", _CONTACT),
)  # fmt: skip

_VECTORS: tuple[_Row, ...] = (
    ("wheel_centre", "p", "mm", "wheel centre", _XYZ, "position of the wheel centre"),
    ("contact_point", "c", "mm", "contact point", _XYZ, _CONTACT),
    ("kingpin_ground_point", "g", "mm", "steering axis at ground", _XYZ,
     "where the steering axis meets the horizontal plane through the contact point"),
    ("spin_axis", "a", "-", "spin axis", "to the vehicle's left on both sides",
     "unit vector of the wheel's axis; at design (-sin d cos e, cos d cos e, sin e) with d = -s toe_in, e = -s camber"),
    ("steering_axis", "k", "-", "steering axis", "from the lower to the upper joint, up",
     "unit vector, lower to upper ball joint; strut: lower ball joint to top mount"),
    ("wheel_heading", "h", "-", "wheel heading", "forward", "unit(a_y, -a_x, 0): where the wheel rolls on a road parallel to the body's xy plane"),
    ("wheel_normal", "l", "-", "wheel normal", "to the left", "z x h: the wheel's lateral direction in the road"),
    ("contact_travel_slope", "", "mm/mm", "contact path over travel", _XYZ, "d contact_point / d wheel_travel at fixed rack, exact"),
    ("wheel_centre_travel_slope", "", "mm/mm", "wheel-centre path over travel", _XYZ, "d wheel_centre / d wheel_travel at fixed rack, exact"),
    ("twist_travel", "", "rad/mm", "upright's rotation over travel", "right-hand rule", "angular velocity of the upright per mm of wheel travel"),
    ("contact_rack_slope", "", "mm/mm", "contact path over rack", _XYZ, "d contact_point / d rack_travel at fixed wheel travel, exact"),
    ("wheel_centre_rack_slope", "", "mm/mm", "wheel-centre path over rack", _XYZ, "d wheel_centre / d rack_travel at fixed wheel travel, exact"),
    ("twist_rack", "", "rad/mm", "upright's rotation over rack", "right-hand rule", "angular velocity of the upright per mm of rack travel"),
)  # fmt: skip

_LINKS: tuple[_Row, ...] = (
    ("upper_arm_angle", "", "deg", "upper arm rotation", "ball joint up +", "rotation of the upper wishbone about its pivot axis from design"),
    ("lower_arm_angle", "", "deg", "lower arm rotation", "ball joint up +", "rotation of the lower wishbone about its pivot axis from design"),
    ("tie_rod_angle", "", "deg", "tie rod swing", "never negative", "angle between the tie rod's directions now and at design"),
    ("strut_angle", "", "deg", "strut swing", "never negative", "angle between the strut's directions now and at design"),
    ("strut_length", "", "mm", "strut length", "never negative", "top mount to the strut's axis point"),
)  # fmt: skip

_SLIP = "angle of the velocity at the contact point, in a slow turn about the turn centre, against the wheel's heading (ISO 8855: slip angle)"
_CENTRE = "point of the road about which the sum of the squared slip angles of all four wheels is least"

_TURNING: tuple[_Row, ...] = (
    ("steer_left", "", "deg", "steer angle, left wheel", "to the left +", "steer_angle of the left wheel"),
    ("steer_right", "", "deg", "steer angle, right wheel", "to the left +", "steer_angle of the right wheel"),
    ("mean_steer", "", "deg", "mean steer angle", "to the left +", "mean of steer_left and steer_right"),
    ("ideal_inner_steer", "", "deg", "ideal inner steer angle", "to the left +",
     "atan((c_ix - x_r)/(y_c - c_iy)): steer of the inner wheel (i) whose normal goes through the turn centre of the outer one (o; straight "
     "ahead, where neither is, as in a left turn), "
     "y_c = c_oy + (c_ox - x_r) cot(delta_o) on the line x = x_r of the other axle (ISO 8855:2011, 7.1: Ackermann geometry)"),
    ("ackermann_error", "", "deg", "Ackermann error", "inner wheel turns too much +", "|inner steer| - |ideal inner steer|"),
    ("ackermann_percent", "", "%", "Ackermann percent", "100 true Ackermann, 0 parallel, - reverse",
     "by default 100 (|inner| - |outer|)/(|ideal inner| - |outer|), other definitions by name; empty within 0.5 deg of straight ahead"),
    ("normals_meet_x", "", "mm", "wheel normals meet, x", "forward +", "where the normals of both wheels of this axle meet in the road"),
    ("normals_meet_y", "", "mm", "wheel normals meet, y", "left +", "where the normals of both wheels of this axle meet in the road"),
    ("centre_x", "", "mm", "turn centre x", "forward +", _CENTRE),
    ("centre_y", "", "mm", "turn centre y", "left +", _CENTRE),
    *((f"slip_{axle}_{side}", "", "deg", f"slip angle, {axle} {side}", "velocity left of the wheel's heading +", _SLIP)
      for axle in ("front", "rear") for side in ("left", "right")),
    ("turn_radius", "R", "mm", "turn radius", "never negative", "turn centre to the middle of the other axle, in the road"),
    ("kerb_circle", "", "mm", "kerb-to-kerb circle", "never negative",
     "diameter of the circle of the outer front tyre: twice the larger distance of a front contact point from the turn centre, plus the "
     "tyre's width where it is given"),
    ("wall_circle", "", "mm", "wall-to-wall circle", "never negative", "diameter of the circle of the outermost front body corner"),
    ("steering_ratio", "", "-", "steering ratio", "hand wheel and mean steer alike +", "d hand_wheel_angle / d mean_steer, exact"),
)  # fmt: skip

_RIDING: tuple[_Row, ...] = (
    ("motion", "", "-", "motion", "", "bump: both wheels together; roll: the body rolls on a flat road; single: one wheel moves"),
    ("bump", "", "mm", "bump", "bump +, rebound -", "wheel travel of both wheels, or of the one that moves"),
    ("roll_angle", "phi", "deg", "roll angle", "right side of the body down +", "rotation of the body about x against the road (ISO 8855)"),
    ("axle_steer", "", "deg", "axle steer", "to the left +", "mean steer angle of both wheels less its value at zero travel and the same rack"),
    ("bump_steer_left", "", "deg", "bump steer, left", "toe-in +", "toe_in of the left wheel less its value at zero travel and the same rack"),
    ("bump_steer_right", "", "deg", "bump steer, right", "toe-in +", "toe_in of the right wheel less its value at zero travel and the same rack"),
    ("axle_steer_rate", "", "deg/mm", "axle steer rate", "left with bump +",
     "d axle_steer / d wheel travel of both wheels, or of the one that moves, exact"),
    ("roll_steer", "", "deg/deg", "roll steer", "to the left with roll +", "d axle_steer / d roll_angle at fixed rack, exact"),
    ("track_change", "", "mm", "track change", "wider +", "change of the contact points' distance across the car, along the road"),
    ("roll_centre_y", "", "mm", "roll centre, lateral", "left +", "place of the roll centre along the road from where the body's centre plane meets it"),
    ("roll_centre_z", "", "mm", "roll-centre height", "above the road +",
     "front view: each wheel's line runs through its contact point, normal to its path (dy_c, dz_c) over its own travel at fixed rack and "
     "road; where both lines meet, above the line through the contact points"),
)  # fmt: skip

_ANTI = "100 share (dx/dz) wheelbase / cg_height, dx/dz the path slope of the point fixed to the upright at the contact (outboard) or of the wheel centre (inboard)"


def _both(name: str, label: str, unit: str, sign: str, definition: str) -> tuple[_Row, _Row]:
    """The same quantity of the left and of the right wheel."""
    left, right = (
        (f"{name}_{side}", "", unit, f"{label}, {side}", sign, f"{definition}; {side} wheel")
        for side in ("left", "right")
    )
    return left, right


_SIDES: tuple[_Row, ...] = (
    *_both("wheel_travel", "wheel travel", "mm", "bump +, rebound -", "wheel_travel"),
    *_both("toe_in", "toe-in", "deg", "toe-in +", "toe_in"),
    *_both("camber", "camber", "deg", "top outboard +", "camber against the body"),
    *_both("camber_road", "camber to road", "deg", "top outboard +", "camber against the normal of the road"),
    *_both("scrub_radius", "scrub radius", "mm", "steering axis inboard +", "scrub_radius"),
    *_both("mechanical_trail", "mechanical trail", "mm", "steering axis ahead +", "mechanical_trail"),
    *_both("recession", "wheel recession", "mm", "rearward +", "minus the change of the wheel centre's x from zero travel and the same rack"),
    *_both("swing_arm", "front-view swing arm", "mm", "instant centre inboard +",
           "s (c_y - y_ic), ic the upright's point in the transverse plane through c that moves neither in y nor in z over wheel travel"),
    *_both("bump_steer_rate", "bump-steer rate", "deg/mm", "toe-in with bump +", "bump_steer_rate"),
    *_both("camber_gain", "camber gain", "deg/mm", "top outboard with bump +", "camber_gain"),
    *_both("anti_dive", "anti-dive", "%", "braking lifts the nose +", f"front axle, braking: {_ANTI}; share = brake_share"),
    *_both("anti_lift", "anti-lift", "%", "brakes: tail down +; drive: nose down +",
           f"rear axle, braking: minus {_ANTI}, share = brake_share; driven front axle: the same without the minus, share = 1"),
    *_both("anti_squat", "anti-squat", "%", "driving lifts the tail +", f"driven rear axle: minus {_ANTI}; share = 1"),
)  # fmt: skip

_LIMITS: tuple[_Row, ...] = (
    ("rack_stroke", "", "mm", "rack stroke", "each way, never negative", "rack.stroke of the file"),
    ("smallest_transmission_angle", "", "deg", "smallest transmission angle", "90 best, 0 or 180 lock",
     "the transmission_angle farthest from 90 deg, over the whole map of both wheels"),
    ("largest_steer_angle", "", "deg", "largest steer angle", "to the left +", "the steer_angle of largest magnitude, over the whole map of both wheels"),
)  # fmt: skip

_WORKSHOP: tuple[_Row, ...] = (
    ("adjuster", "", "-", "adjuster", "", "what the workshop turns or shims, by its name in the file"),
    ("adjustment", "", "-", "adjustment", "in the direction declared +", "mm of displacement, or turns of a thread, from how the car is drawn"),
    ("toe_before", "", "deg", "toe before it is set again", "toe-in +", "toe_in at the ride height after the adjustment, the tie rod untouched"),
    ("rod_longer", "", "mm", "tie rod longer", "longer +", "change of the tie rod's length that sets the declared static toe again"),
    ("rod_turns", "", "-", "turns of the tie rod", "longer +", "rod_longer over the thread's mm for one turn"),
    ("toe_in_set", "", "deg", "toe-in as set", "toe-in +", "toe_in at the ride height when all is done"),
    ("bump_steer_low", "", "deg", "bump steer, full rebound", "toe-in +", "bump_steer from the ride height to the lowest travel"),
    ("bump_steer_high", "", "deg", "bump steer, full bump", "toe-in +", "bump_steer from the ride height to the highest travel"),
    ("bump_steer_most", "", "deg", "largest bump steer", "never negative", "largest |bump_steer| from the ride height over the travel"),
)  # fmt: skip

_TABLE: tuple[_Row, ...] = (*_MOTION, *_CORNER, *_VECTORS, *_LINKS, *_TURNING, *_RIDING, *_SIDES, *_LIMITS, *_WORKSHOP)

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
    """Label of an axis or a column with unit and sign in words: ``bump steer (deg, toe-in +)``; ``unit`` replaces the entry's own."""
    entry = quantity(name)
    unit = unit or entry.unit
    details = ", ".join(part for part in ("" if unit == "-" else unit, entry.sign) if part)
    return f"{entry.label} ({details})" if details else entry.label


def explain(names: Iterable[str]) -> list[tuple[str, str, str, str]]:
    """Label, unit, sign and definition of quantities, in the order given, each once: rows of a table."""
    entries = [quantity(name) for name in dict.fromkeys(names)]
    return [(e.label, e.unit, e.sign, e.definition) for e in entries]


GLOSSARY_HEADINGS = ("name", "symbol", "unit", "label", "sign", "definition")
"""Headings of ``glossary_rows``."""


def glossary_rows(names: Iterable[str] | None = None) -> list[tuple[str, str, str, str, str, str]]:
    """The glossary as plain rows under GLOSSARY_HEADINGS, all of it or the names given; for documents."""
    entries = GLOSSARY.values() if names is None else [quantity(name) for name in dict.fromkeys(names)]
    return [(e.name, e.symbol, e.unit, e.label, e.sign, e.definition) for e in entries]
