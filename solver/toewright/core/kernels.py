"""The linkage solver: rows, Newton steps, continuation, measures and derivatives, compiled.

One upright has five unknowns: the wheel centre's x and y displacement p and the rotation R as a Gibbs vector
(the wheel centre's z follows explicitly from the drive). Five rows hold it, all of one form::

    t = p - b - s rack,  u = R a,  g = sig/2 t.t + u.t + c,  dg = (u + sig t).dp + (u x t).w

``sig = 1`` is a distance row (a: joint on the upright, b: joint on the body, c = (a.a - L^2)/2), ``sig = 0`` a slide
row (a: a normal of the strut's axis, fixed in the upright). w is the small rotation, dR = [w] R. Everything is
relative to the design wheel centre, which keeps the numbers small.

Two ways through: blocks of LANES designs walk a grid together (straight-line code that the compiler vectorises), and
a scalar walker with adaptive strides takes over where a lane's own checks are not certain of the branch.
The functions call each other, so they share this file: the disk cache of numba does not see edits elsewhere.
"""

from __future__ import annotations

import math

import numpy as np
from numba import njit

from toewright.core import layout as _layout

LANES = 16
"""Designs that go through a block together: two AVX-512 or four AVX2 registers of doubles."""

ROWS = 40  # packed design: five rows of a, b, sig, c come first, then:
RACK = 40
SPIN = 43
RADIUS = 46
SIDE = 47
TAU = 48  # steering axis K = B - TAU p + R A
AXIS_A = 49
AXIS_B = 52
LOWER = 55  # lower ball joint on the upright
ROW_SCALE = 58  # 1 / gradient size of each row: turns a row's value into mm
LEVER = 63  # wheel centre to tie rod outer joint, the length that weighs rotations
INVERSE_DET = 64
ORIGIN = 65  # wheel centre at design
HYPOT = 68  # sqrt(1 - spin_z^2) at design
PACKED = 69

# A block is one flat array of vectors of LANES numbers, so that the compiler knows them apart: the packed designs, then
X = PACKED  # pose, six
SLOPE = X + 6  # its tangent along the line, five
MOVE = SLOPE + 5  # squared size of the last Newton step
FIRST = MOVE + 1  # and of the first one
GRIP = FIRST + 1  # determinant over its design value
BEFORE = GRIP + 1  # the same at the pose before
OLD = BEFORE + 1  # the pose before the last one, five, and its tangent, five
OLD_SLOPE = OLD + 5
NEW = OLD_SLOPE + 5  # the last pose, and its tangent
NEW_SLOPE = NEW + 5
RACK_AT = NEW_SLOPE + 5  # where a measured pose stands
TRAVEL_AT = RACK_AT + 1
OUT = TRAVEL_AT + 1  # measures
WEIGHT = OUT + len(_layout.COLUMNS)  # weights of one objective
GRADIENT = WEIGHT + len(_layout.OBJECTIVE_TERMS)  # its slopes by a, b, c of the five rows, then by the origin
BLOCK = GRADIENT + 7 * 5 + 3
WEIGHTS = len(_layout.OBJECTIVE_TERMS)
DESIGN = _layout.DESIGN_SIZE
STATUS_OK = _layout.OK
STATUS_OUT_OF_REACH = _layout.OUT_OF_REACH
STATUS_LOCKED = _layout.LOCKED
TOE_IN, CAMBER, DESIGN_RADIUS = _layout.TOE_IN, _layout.CAMBER, _layout.RADIUS
DESIGN_RACK, DESIGN_SIDE, DESIGN_KIND = _layout.RACK_AXIS, _layout.SIDE, _layout.KIND

# Tolerances, all relative to the lever (about 100 mm on a car), with their reasons:
STEP_TOLERANCE = 1e-7  # a Newton step of 1e-5 mm leaves an error of its square over the curvature radius: < 1e-11 mm
LANE_ITERATIONS = 5
LANE_CORRECTION = 0.05  # a lane trusts a prediction that Newton moves by less than this share of the stride
FARTHEST_SPAN = 3.0  # cubic extrapolation reaches at most this many times the last stride; else the tangent alone
LANE_GRIP = 0.1  # below this share of the design determinant a fold is near: the walker decides
GRIP_CHANGE = 1.6  # largest change of the determinant between neighbouring strides
WALK_ITERATIONS = 6
WALK_CORRECTION = 0.1  # the walker's own bound on Newton's first move, as a share of the stride
WALK_CONTRACTION = 0.25  # each Newton move must be this much smaller than the one before
WALK_STEP_TOLERANCE = 1e-11  # the last Newton move at a walked pose
WALK_STRIDE = 0.06  # longest stride
WALK_SHORTEST = 1e-8  # a shorter stride than this (1e-6 mm) means the path ends here
NO_GRIP = 1e-9  # rows (scaled to unit gradients) with a smaller determinant at design are dependent: locked where drawn
LEAST_GRIP = 1e-3  # below this share of the design determinant the path counts as ended: rates there mean nothing
LOCKED_SINE = math.sin(math.radians(_layout.LOCK_MARGIN))

TO_DEG = 180.0 / math.pi

STRIDE, END = _layout.STRIDE_MARK, _layout.END_MARK

FAST = {"reassoc", "contract", "arcp", "nsz", "afn"}  # not nnan/ninf: NaN marks a lost lane
inline = njit(forceinline=True, error_model="numpy", fastmath=FAST)
compiled = njit(cache=True, error_model="numpy", nogil=True)
vectorised = njit(cache=True, error_model="numpy", nogil=True, fastmath=FAST)


# --------------------------------------------------------------------------------------------- one pose, any number type


@inline
def _rotation(x, y, z):
    """Rotation matrix (row by row) of the Gibbs vector tan(angle/2) * axis."""
    n = 1.0 / (1.0 + x * x + y * y + z * z)
    xx, yy, zz = 2.0 * x * x * n, 2.0 * y * y * n, 2.0 * z * z * n
    xy, xz, yz = 2.0 * x * y * n, 2.0 * x * z * n, 2.0 * y * z * n
    sx, sy, sz = 2.0 * x * n, 2.0 * y * n, 2.0 * z * n
    return (1.0 - yy - zz, xy - sz, xz + sy, xy + sz, 1.0 - xx - zz, yz - sx, xz - sy, yz + sx, 1.0 - xx - yy)


@inline
def _turn(r, x, y, z):
    return (r[0] * x + r[1] * y + r[2] * z, r[3] * x + r[4] * y + r[5] * z, r[6] * x + r[7] * y + r[8] * z)


@inline
def _gibbs_slope(x, y, z, wx, wy, wz):
    """Rate of the Gibbs vector under the small rotation w from the left."""
    hx, hy, hz = 0.5 * wx, 0.5 * wy, 0.5 * wz
    dot = hx * x + hy * y + hz * z
    return (hx + hy * z - hz * y + dot * x, hy + hz * x - hx * z + dot * y, hz + hx * y - hy * x + dot * z)


@inline
def _drive(P, q, lane, r, travel, contact):
    """Wheel-centre z from the drive, its slopes by w_x and w_y, and the turned spin axis.

    contact = 1 holds the contact point's height, 0 the wheel centre's: c_z = p_z - radius sqrt(1 - a_z^2).
    """
    ax, ay, az = _turn(r, P[(SPIN + 0) * q + lane], P[(SPIN + 1) * q + lane], P[(SPIN + 2) * q + lane])
    radius = contact * P[RADIUS * q + lane]
    hyp = np.sqrt(1.0 - az * az)
    kappa = -radius * az / hyp
    pz = travel + radius * (hyp - P[HYPOT * q + lane])
    return pz, kappa * ay, -kappa * ax, ax, ay, az


@inline
def _row(P, q, lane, row, r, px, py, pz, kx, ky):
    """Gradient of one row by (p_x, p_y, w_x, w_y, w_z), by p_z, by t, and its value."""
    k = 8 * row
    ax, ay, az = P[k * q + lane], P[(k + 1) * q + lane], P[(k + 2) * q + lane]
    ux, uy, uz = _turn(r, ax, ay, az)
    tx = px - P[(k + 3) * q + lane]
    ty = py - P[(k + 4) * q + lane]
    tz = pz - P[(k + 5) * q + lane]
    sig = P[(k + 6) * q + lane]
    gx, gy, gz = ux + sig * tx, uy + sig * ty, uz + sig * tz
    value = 0.5 * sig * (tx * tx + ty * ty + tz * tz) + ux * tx + uy * ty + uz * tz + P[(k + 7) * q + lane]
    return (
        gx,
        gy,
        uy * tz - uz * ty + gz * kx,
        uz * tx - ux * tz + gz * ky,
        ux * ty - uy * tx,
        gz,
        value,
    )


@inline
def _shifted(P, q, lane, rack, px, py, pz):
    """p - s rack: the displacement as the tie rod's inner joint sees it."""
    x, y = px - P[RACK * q + lane] * rack, py - P[(RACK + 1) * q + lane] * rack
    return x, y, pz - P[(RACK + 2) * q + lane] * rack


@inline
def _rows(P, q, lane, r, rack, px, py, pz, kx, ky):
    """All five rows of ``_row``; the tie rod, last, has its inner joint moved by the rack.

    (np.int64 because numba would compile a function anew for each literal number it is called with.)
    """
    tx, ty, tz = _shifted(P, q, lane, rack, px, py, pz)
    return (
        _row(P, q, lane, np.int64(0), r, px, py, pz, kx, ky),
        _row(P, q, lane, np.int64(1), r, px, py, pz, kx, ky),
        _row(P, q, lane, np.int64(2), r, px, py, pz, kx, ky),
        _row(P, q, lane, np.int64(3), r, px, py, pz, kx, ky),
        _row(P, q, lane, np.int64(4), r, tx, ty, tz, kx, ky),
    )


@inline
def _factor(r0, r1, r2, r3, r4):
    """Elimination without pivoting (rows come ordered): multipliers, upper triangle, inverse pivots, determinant."""
    i0 = 1.0 / r0[0]
    a01, a02, a03, a04 = r0[1], r0[2], r0[3], r0[4]
    m10, m20, m30, m40 = r1[0] * i0, r2[0] * i0, r3[0] * i0, r4[0] * i0
    a11, a12, a13, a14 = r1[1] - m10 * a01, r1[2] - m10 * a02, r1[3] - m10 * a03, r1[4] - m10 * a04
    b21, b22, b23, b24 = r2[1] - m20 * a01, r2[2] - m20 * a02, r2[3] - m20 * a03, r2[4] - m20 * a04
    b31, b32, b33, b34 = r3[1] - m30 * a01, r3[2] - m30 * a02, r3[3] - m30 * a03, r3[4] - m30 * a04
    b41, b42, b43, b44 = r4[1] - m40 * a01, r4[2] - m40 * a02, r4[3] - m40 * a03, r4[4] - m40 * a04
    i1 = 1.0 / a11
    m21, m31, m41 = b21 * i1, b31 * i1, b41 * i1
    a22, a23, a24 = b22 - m21 * a12, b23 - m21 * a13, b24 - m21 * a14
    c32, c33, c34 = b32 - m31 * a12, b33 - m31 * a13, b34 - m31 * a14
    c42, c43, c44 = b42 - m41 * a12, b43 - m41 * a13, b44 - m41 * a14
    i2 = 1.0 / a22
    m32, m42 = c32 * i2, c42 * i2
    a33, a34 = c33 - m32 * a23, c34 - m32 * a24
    d43, d44 = c43 - m42 * a23, c44 - m42 * a24
    i3 = 1.0 / a33
    m43 = d43 * i3
    a44 = d44 - m43 * a34
    i4 = 1.0 / a44
    det = r0[0] * a11 * a22 * a33 * a44
    return (
        m10, m20, m30, m40, m21, m31, m41, m32, m42, m43,
        a01, a02, a03, a04, a12, a13, a14, a23, a24, a34,
        i0, i1, i2, i3, i4, det,
    )  # fmt: skip


@inline
def _solve(f, b0, b1, b2, b3, b4):
    """Solution of J x = b with the factors of J."""
    b1 = b1 - f[0] * b0
    b2 = b2 - f[1] * b0 - f[4] * b1
    b3 = b3 - f[2] * b0 - f[5] * b1 - f[7] * b2
    b4 = b4 - f[3] * b0 - f[6] * b1 - f[8] * b2 - f[9] * b3
    x4 = b4 * f[24]
    x3 = (b3 - f[19] * x4) * f[23]
    x2 = (b2 - f[17] * x3 - f[18] * x4) * f[22]
    x1 = (b1 - f[14] * x2 - f[15] * x3 - f[16] * x4) * f[21]
    x0 = (b0 - f[10] * x1 - f[11] * x2 - f[12] * x3 - f[13] * x4) * f[20]
    return x0, x1, x2, x3, x4


@inline
def _solve_transposed(f, b0, b1, b2, b3, b4):
    """Solution of J^T y = b with the same factors."""
    y0 = b0 * f[20]
    y1 = (b1 - f[10] * y0) * f[21]
    y2 = (b2 - f[11] * y0 - f[14] * y1) * f[22]
    y3 = (b3 - f[12] * y0 - f[15] * y1 - f[17] * y2) * f[23]
    y4 = (b4 - f[13] * y0 - f[16] * y1 - f[18] * y2 - f[19] * y3) * f[24]
    y3 = y3 - f[9] * y4
    y2 = y2 - f[7] * y3 - f[8] * y4
    y1 = y1 - f[4] * y2 - f[5] * y3 - f[6] * y4
    y0 = y0 - f[0] * y1 - f[1] * y2 - f[2] * y3 - f[3] * y4
    return y0, y1, y2, y3, y4


@inline
def _rack_slope(P, q, lane, r4):
    """Minus the tie rod row's slope by rack travel: the right-hand side of the rack tangent."""
    return r4[0] * P[RACK * q + lane] + r4[1] * P[(RACK + 1) * q + lane] + r4[5] * P[(RACK + 2) * q + lane]


@inline
def _angle(y, x):
    """atan2 without branches, full double precision (rational form of the Cephes library, S. L. Moshier)."""
    ay, ax = abs(y), abs(x)
    low, high = min(ay, ax), max(ay, ax)
    steep = low > 0.66 * high
    num = low - high if steep else low
    den = low + high if steep else high
    v = num / den
    z = v * v
    top = (((-8.750608600031904122785e-1 * z - 1.615753718733365076637e1) * z - 7.500855792314704667340e1) * z
           - 1.228866684490136173410e2) * z - 6.485021904942025371773e1  # fmt: skip
    bottom = ((((z + 2.485846490142306297962e1) * z + 1.650270098316988542046e2) * z + 4.328810604912902668951e2) * z
              + 4.853903996359136964868e2) * z + 1.945506571482613964425e2  # fmt: skip
    angle = v + v * z * top / bottom
    angle = angle + 0.25 * math.pi if steep else angle
    angle = 0.5 * math.pi - angle if ay > ax else angle
    angle = math.pi - angle if x < 0.0 else angle
    return TO_DEG * (-angle if y < 0.0 else angle)


@inline
def _axis_at_height(kx, ky, kz, qx, qy, qz, z):
    """Where the steering axis (through q along k) meets the horizontal plane at z."""
    n = (z - qz) / kz
    return qx + kx * n, qy + ky * n


@inline
def _measure(P, q, lane, r, rack, px, py, pz, ax, ay, az):
    """Everything of one pose that needs no derivative; angles as (y, x) pairs for atan2.

    Returns spin axis, contact point, heading pieces, axis direction, ground point, offsets and pairs.
    Definitions: the glossary (toewright.model.glossary).
    """
    radius, side, tau = P[RADIUS * q + lane], P[SIDE * q + lane], P[TAU * q + lane]
    inverse = 1.0 / np.sqrt(ax * ax + ay * ay)
    hyp = (ax * ax + ay * ay) * inverse
    cx, cy, cz = px + radius * az * ax * inverse, py + radius * az * ay * inverse, pz - radius * hyp
    hx, hy = ay * inverse, -ax * inverse
    kx, ky, kz = _turn(r, P[AXIS_A * q + lane], P[(AXIS_A + 1) * q + lane], P[(AXIS_A + 2) * q + lane])
    kx = kx + P[AXIS_B * q + lane] - tau * px
    ky = ky + P[(AXIS_B + 1) * q + lane] - tau * py
    kz = kz + P[(AXIS_B + 2) * q + lane] - tau * pz
    qx, qy, qz = _turn(r, P[LOWER * q + lane], P[(LOWER + 1) * q + lane], P[(LOWER + 2) * q + lane])
    qx, qy, qz = qx + px, qy + py, qz + pz
    gx, gy = _axis_at_height(kx, ky, kz, qx, qy, qz, cz)
    ex, ey = _axis_at_height(kx, ky, kz, qx, qy, qz, pz)
    scrub = side * ((cx - gx) * -hy + (cy - gy) * hx)
    trail = (gx - cx) * hx + (gy - cy) * hy
    centre_offset = side * ((px - ex) * -hy + (py - ey) * hx)
    centre_trail = (ex - px) * hx + (ey - py) * hy
    # transmission angle: tie rod against the arm from its outer joint to the steering axis, seen along the axis
    ox, oy, oz = _turn(r, P[32 * q + lane], P[33 * q + lane], P[34 * q + lane])
    ox, oy, oz = ox + px, oy + py, oz + pz
    fx, fy, fz = qx - ox, qy - oy, qz - oz
    ex2 = P[35 * q + lane] + P[RACK * q + lane] * rack - ox
    ey2 = P[36 * q + lane] + P[(RACK + 1) * q + lane] * rack - oy
    ez2 = P[37 * q + lane] + P[(RACK + 2) * q + lane] * rack - oz
    kk = kx * kx + ky * ky + kz * kz
    triple = kx * (ey2 * fz - ez2 * fy) + ky * (ez2 * fx - ex2 * fz) + kz * (ex2 * fy - ey2 * fx)
    sine = np.sqrt(kk * triple * triple)
    ek, fk = ex2 * kx + ey2 * ky + ez2 * kz, fx * kx + fy * ky + fz * kz
    cosine = kk * (ex2 * fx + ey2 * fy + ez2 * fz) - ek * fk
    return cx, cy, cz, hyp, kx, ky, kz, kk, gx, gy, scrub, trail, centre_offset, centre_trail, sine, cosine


@inline
def _spin_rates(hyp, ax, ay, az, wx, wy, wz, radius):
    """Rates of steer and camber angle (rad, camber as asin a_z) and of the contact point against the wheel centre."""
    bx, by, bz = wy * az - wz * ay, wz * ax - wx * az, wx * ay - wy * ax
    inverse = 1.0 / hyp
    steer = (ax * by - ay * bx) * inverse * inverse
    lean = bz * inverse
    fall = -az * bz * inverse  # rate of hyp
    dx = radius * ((bz * ax + az * bx) * inverse - az * ax * fall * inverse * inverse)
    dy = radius * ((bz * ay + az * by) * inverse - az * ay * fall * inverse * inverse)
    return steer, lean, dx, dy, -radius * fall


@inline
def _newton(B, q, lane, rack, travel, contact, along_rack):
    """One Newton step of one lane: pose updated, tangent along the line, squared step size and grip stored."""
    up = 1.0 - along_rack
    px, py = B[X * q + lane], B[(X + 1) * q + lane]
    g0, g1, g2 = B[(X + 2) * q + lane], B[(X + 3) * q + lane], B[(X + 4) * q + lane]
    r = _rotation(g0, g1, g2)
    pz, kx, ky, _, _, _ = _drive(B, q, lane, r, travel, contact)
    r0, r1, r2, r3, r4 = _rows(B, q, lane, r, rack, px, py, pz, kx, ky)
    f = _factor(r0, r1, r2, r3, r4)
    s0, s1, s2, s3, s4 = _solve(f, -r0[6], -r1[6], -r2[6], -r3[6], -r4[6])
    tie = along_rack * _rack_slope(B, q, lane, r4) - up * r4[5]
    d0, d1, d2, d3, d4 = _solve(f, -up * r0[5], -up * r1[5], -up * r2[5], -up * r3[5], tie)
    v0, v1, v2 = _gibbs_slope(g0, g1, g2, s2, s3, s4)
    e0, e1, e2 = _gibbs_slope(g0, g1, g2, d2, d3, d4)
    lever = B[LEVER * q + lane]
    B[X * q + lane], B[(X + 1) * q + lane] = px + s0, py + s1
    B[(X + 2) * q + lane], B[(X + 3) * q + lane], B[(X + 4) * q + lane] = g0 + v0, g1 + v1, g2 + v2
    B[(X + 5) * q + lane] = pz + kx * s2 + ky * s3
    B[SLOPE * q + lane], B[(SLOPE + 1) * q + lane] = d0, d1
    B[(SLOPE + 2) * q + lane], B[(SLOPE + 3) * q + lane], B[(SLOPE + 4) * q + lane] = e0, e1, e2
    B[MOVE * q + lane] = s0 * s0 + s1 * s1 + lever * lever * (s2 * s2 + s3 * s3 + s4 * s4)
    B[GRIP * q + lane] = f[25] * B[INVERSE_DET * q + lane]


@inline
def _measure_lane(B, q, lane, contact):
    """COLUMNS of one lane at the pose in X, RACK_AT, TRAVEL_AT; of an angle its column gets the y of atan2(y, x).

    Returns the x of the five angles (steer, camber, caster, inclination, transmission) and the five row values.
    """
    rack, travel = B[RACK_AT * q + lane], B[TRAVEL_AT * q + lane]
    px, py = B[X * q + lane], B[(X + 1) * q + lane]
    r = _rotation(B[(X + 2) * q + lane], B[(X + 3) * q + lane], B[(X + 4) * q + lane])
    pz, kx, ky, ax, ay, az = _drive(B, q, lane, r, travel, contact)
    r0, r1, r2, r3, r4 = _rows(B, q, lane, r, rack, px, py, pz, kx, ky)
    f = _factor(r0, r1, r2, r3, r4)
    zx, zy, z2, z3, z4 = _solve(f, -r0[5], -r1[5], -r2[5], -r3[5], -r4[5])
    zz = 1.0 + kx * z2 + ky * z3
    yx, yy, y2, y3, y4 = _solve(f, 0.0, 0.0, 0.0, 0.0, _rack_slope(B, q, lane, r4))
    yz = kx * y2 + ky * y3
    m = _measure(B, q, lane, r, rack, px, py, pz, ax, ay, az)
    cx, cy, cz, hyp, k0, k1, k2, kk, gx, gy, scrub, trail, offset, centre_trail, sine, cosine = m
    radius, side = B[RADIUS * q + lane], B[SIDE * q + lane]
    zsteer, zlean, zdx, zdy, zdz = _spin_rates(hyp, ax, ay, az, z2, z3, z4, radius)
    ysteer, _, ydx, ydy, ydz = _spin_rates(hyp, ax, ay, az, y2, y3, y4, radius)
    ox, oy, oz = B[ORIGIN * q + lane], B[(ORIGIN + 1) * q + lane], B[(ORIGIN + 2) * q + lane]
    inverse = 1.0 / np.sqrt(kk)
    B[OUT * q + lane], B[(OUT + 1) * q + lane] = -ax, side * ax
    B[(OUT + 2) * q + lane], B[(OUT + 3) * q + lane], B[(OUT + 4) * q + lane] = -side * az, -k0, -side * k1
    B[(OUT + 5) * q + lane], B[(OUT + 6) * q + lane] = scrub, trail
    B[(OUT + 7) * q + lane], B[(OUT + 8) * q + lane] = offset, centre_trail
    B[(OUT + 9) * q + lane] = -side * TO_DEG * zsteer
    B[(OUT + 10) * q + lane] = TO_DEG * ysteer
    B[(OUT + 11) * q + lane] = -side * TO_DEG * zlean
    B[(OUT + 12) * q + lane] = sine
    B[(OUT + 13) * q + lane], B[(OUT + 14) * q + lane], B[(OUT + 15) * q + lane] = ox + px, oy + py, oz + pz
    B[(OUT + 16) * q + lane], B[(OUT + 17) * q + lane], B[(OUT + 18) * q + lane] = ox + cx, oy + cy, oz + cz
    B[(OUT + 19) * q + lane], B[(OUT + 20) * q + lane], B[(OUT + 21) * q + lane] = ox + gx, oy + gy, oz + cz
    B[(OUT + 22) * q + lane], B[(OUT + 23) * q + lane], B[(OUT + 24) * q + lane] = ax, ay, az
    B[(OUT + 25) * q + lane], B[(OUT + 26) * q + lane] = k0 * inverse, k1 * inverse
    B[(OUT + 27) * q + lane] = k2 * inverse
    B[(OUT + 28) * q + lane], B[(OUT + 29) * q + lane], B[(OUT + 30) * q + lane] = zx + zdx, zy + zdy, zz + zdz
    B[(OUT + 31) * q + lane], B[(OUT + 32) * q + lane], B[(OUT + 33) * q + lane] = zx, zy, zz
    B[(OUT + 34) * q + lane], B[(OUT + 35) * q + lane], B[(OUT + 36) * q + lane] = z2, z3, z4
    B[(OUT + 37) * q + lane], B[(OUT + 38) * q + lane], B[(OUT + 39) * q + lane] = yx + ydx, yy + ydy, yz + ydz
    B[(OUT + 40) * q + lane], B[(OUT + 41) * q + lane], B[(OUT + 42) * q + lane] = yx, yy, yz
    B[(OUT + 43) * q + lane], B[(OUT + 44) * q + lane], B[(OUT + 45) * q + lane] = y2, y3, y4
    B[(OUT + 47) * q + lane] = f[25] * B[INVERSE_DET * q + lane]
    return (ay, hyp, k2, k2, cosine, r0[6], r1[6], r2[6], r3[6], r4[6])


@inline
def _gradient_lane(B, q, lane, contact):
    """Add one pose's share of the objective's slopes by the parameters of the rows (adjoint of the solve).

    With lambda = J^-T (d objective / d unknowns), each row's own parameters give -lambda_i (d g_i / d parameter).
    """
    rack, travel = B[RACK_AT * q + lane], B[TRAVEL_AT * q + lane]
    px, py = B[X * q + lane], B[(X + 1) * q + lane]
    r = _rotation(B[(X + 2) * q + lane], B[(X + 3) * q + lane], B[(X + 4) * q + lane])
    pz, kx, ky, ax, ay, az = _drive(B, q, lane, r, travel, contact)
    rows = _rows(B, q, lane, r, rack, px, py, pz, kx, ky)
    f = _factor(rows[0], rows[1], rows[2], rows[3], rows[4])
    radius, side = B[RADIUS * q + lane], B[SIDE * q + lane]
    hyp = np.sqrt(ax * ax + ay * ay)
    w0, w1 = TO_DEG * B[WEIGHT * q + lane], -side * TO_DEG * B[(WEIGHT + 1) * q + lane]
    w2, w3, w4 = B[(WEIGHT + 2) * q + lane], B[(WEIGHT + 3) * q + lane], B[(WEIGHT + 4) * q + lane]
    s, c, dx, dy, dz = _spin_rates(hyp, ax, ay, az, 1.0, 0.0, 0.0, radius)
    b2 = w0 * s + w1 * c + w2 * dx + w3 * dy + w4 * (dz + kx)
    s, c, dx, dy, dz = _spin_rates(hyp, ax, ay, az, 0.0, 1.0, 0.0, radius)
    b3 = w0 * s + w1 * c + w2 * dx + w3 * dy + w4 * (dz + ky)
    s, c, dx, dy, dz = _spin_rates(hyp, ax, ay, az, 0.0, 0.0, 1.0, radius)
    b4 = w0 * s + w1 * c + w2 * dx + w3 * dy + w4 * dz
    y = _solve_transposed(f, w2, w3, b2, b3, b4)
    _gradient_row(B, q, lane, np.int64(0), r, px, py, pz, rows[0], y[0])
    _gradient_row(B, q, lane, np.int64(1), r, px, py, pz, rows[1], y[1])
    _gradient_row(B, q, lane, np.int64(2), r, px, py, pz, rows[2], y[2])
    _gradient_row(B, q, lane, np.int64(3), r, px, py, pz, rows[3], y[3])
    tx, ty, tz = _shifted(B, q, lane, rack, px, py, pz)
    _gradient_row(B, q, lane, np.int64(4), r, tx, ty, tz, rows[4], y[4])
    B[(GRADIENT + 35) * q + lane] += w2
    B[(GRADIENT + 36) * q + lane] += w3
    B[(GRADIENT + 37) * q + lane] += w4


@inline
def _gradient_row(B, q, lane, row, r, px, py, pz, slopes, y):
    k, to = 8 * row, GRADIENT + 7 * row
    tx, ty, tz = px - B[(k + 3) * q + lane], py - B[(k + 4) * q + lane], pz - B[(k + 5) * q + lane]
    B[to * q + lane] -= y * (r[0] * tx + r[3] * ty + r[6] * tz)
    B[(to + 1) * q + lane] -= y * (r[1] * tx + r[4] * ty + r[7] * tz)
    B[(to + 2) * q + lane] -= y * (r[2] * tx + r[5] * ty + r[8] * tz)
    B[(to + 3) * q + lane] += y * slopes[0]
    B[(to + 4) * q + lane] += y * slopes[1]
    B[(to + 5) * q + lane] += y * slopes[5]
    B[(to + 6) * q + lane] -= y


# ---------------------------------------------------------------------------------------------------- packing a design


@compiled
def pack(design, out):
    """Rows and constants of one design vector (DESIGN,) into out (PACKED,); real or complex."""
    rad = math.pi / 180.0
    side = design[DESIGN_SIDE]
    wx, wy, wz = design[24], design[25], design[26]
    toe, camber = -side * design[TOE_IN] * rad, -side * design[CAMBER] * rad
    spin_x, spin_y, spin_z = -np.sin(toe) * np.cos(camber), np.cos(toe) * np.cos(camber), np.sin(camber)
    out[SPIN], out[SPIN + 1], out[SPIN + 2] = spin_x, spin_y, spin_z
    out[RADIUS], out[SIDE] = design[DESIGN_RADIUS], side
    out[HYPOT] = np.sqrt(1.0 - spin_z * spin_z)
    for i in range(3):
        out[RACK + i] = design[DESIGN_RACK + i]
        out[ORIGIN + i] = design[24 + i]
        out[LOWER + i] = design[15 + i] - design[24 + i]
    strut = design[DESIGN_KIND].real > 0.5
    for row in range(5):
        if strut and row < 2:
            continue
        joint = 6 if row < 2 else (15 if row < 4 else 21)
        base = 3 * row if row < 2 else (9 + 3 * (row - 2) if row < 4 else 18)
        length2 = 0.0 * spin_x
        square = 0.0 * spin_x
        for i in range(3):
            a, b = design[joint + i] - design[24 + i], design[base + i] - design[24 + i]
            out[8 * row + i], out[8 * row + 3 + i] = a, b
            square += a * a
            length2 += (a - b) * (a - b)
        out[8 * row + 6] = 1.0
        out[8 * row + 7] = 0.5 * (square - length2)
        out[ROW_SCALE + row] = 1.0 / np.sqrt(length2)
    if strut:
        ex, ey, ez = design[0] - design[3], design[1] - design[4], design[2] - design[5]
        qx, qy, qz = design[3] - wx, design[4] - wy, design[5] - wz
        size = np.sqrt(ex * ex + ey * ey + ez * ez)
        # two normals of the strut's axis, as long as the axis so that rows weigh alike; x-ish and y-ish for an upright strut
        if abs(ex.real) > abs(ez.real):
            n0x, n0y, n0z = ey, -ex, 0.0 * ex
        else:
            n0x, n0y, n0z = ez, 0.0 * ex, -ex
        n1x, n1y, n1z = (ey * n0z - ez * n0y) / size, (ez * n0x - ex * n0z) / size, (ex * n0y - ey * n0x) / size
        for row in range(2):
            nx, ny, nz = (n0x, n0y, n0z) if row == 0 else (n1x, n1y, n1z)
            out[8 * row], out[8 * row + 1], out[8 * row + 2] = nx, ny, nz
            for i in range(3):
                out[8 * row + 3 + i] = design[i] - design[24 + i]
            out[8 * row + 6] = 0.0
            out[8 * row + 7] = nx * qx + ny * qy + nz * qz
            out[ROW_SCALE + row] = 1.0 / np.sqrt(nx * nx + ny * ny + nz * nz)
    out[TAU] = 1.0 if strut else 0.0
    for i in range(3):
        lower = design[15 + i] - design[24 + i]
        out[AXIS_A + i] = -lower if strut else design[6 + i] - design[15 + i]
        out[AXIS_B + i] = design[i] - design[24 + i] if strut else 0.0 * lower
    out[LEVER] = np.sqrt(out[32] * out[32] + out[33] * out[33] + out[34] * out[34])
    out[INVERSE_DET] = 1.0


@compiled
def _order_rows(real, packed):
    """Order the four arm rows of ``packed`` by scaled partial pivoting at the design pose ``real``; the tie rod stays last."""
    a = np.empty((4, 5))
    for row in range(4):
        k = 8 * row
        ux, uy, uz = real[k], real[k + 1], real[k + 2]
        tx, ty, tz = -real[k + 3], -real[k + 4], -real[k + 5]
        scale, sig = real[ROW_SCALE + row], real[k + 6]
        a[row, 0], a[row, 1] = (ux + sig * tx) * scale, (uy + sig * ty) * scale
        a[row, 2], a[row, 3] = (uy * tz - uz * ty) * scale, (uz * tx - ux * tz) * scale
        a[row, 4] = (ux * ty - uy * tx) * scale
    for j in range(4):
        best = j
        for i in range(j + 1, 4):
            if abs(a[i, j]) > abs(a[best, j]):
                best = i
        if best != j:
            for m in range(5):
                a[j, m], a[best, m] = a[best, m], a[j, m]
            for m in range(8):
                packed[8 * j + m], packed[8 * best + m] = packed[8 * best + m], packed[8 * j + m]
            packed[ROW_SCALE + j], packed[ROW_SCALE + best] = packed[ROW_SCALE + best], packed[ROW_SCALE + j]
        for i in range(j + 1, 4):
            factor = a[i, j] / a[j, j]
            for m in range(j, 5):
                a[i, m] -= factor * a[j, m]


@compiled
def _inverse_det(P, q, lane, det):
    """1 / determinant at design, the scale of all later ones; NaN where the rows are dependent there."""
    lever = P[LEVER * q + lane]
    scaled = det / (lever * lever * lever)
    for row in range(5):
        scaled *= P[(ROW_SCALE + row) * q + lane]
    return 1.0 / det if abs(scaled) > NO_GRIP else math.nan


@compiled
def _pack_block(designs, first, contact, B):
    """Pack LANES designs from ``first`` on into a block, at their design pose with its tangent along the rack; the last one fills up."""
    one, real = np.empty(PACKED), np.empty(PACKED)
    for lane in range(LANES):
        pack(designs[min(first + lane, designs.shape[0] - 1)], one)
        for k in range(PACKED):
            real[k] = one[k]
        _order_rows(real, one)
        for k in range(PACKED):
            B[k * LANES + lane] = one[k]
    for k in range(6 * LANES):
        B[X * LANES + k] = 0.0
    _correct(B, 0.0, 0.0, contact, 1.0)
    for lane in range(LANES):  # the determinant at design scales all later ones
        B[INVERSE_DET * LANES + lane] = _inverse_det(B, np.int64(LANES), lane, B[GRIP * LANES + lane])
        B[GRIP * LANES + lane] = 1.0


@inline
def _copy(source, start, target, at, count):
    for k in range(count):
        target[at + k] = source[start + k]


# ------------------------------------------------------------------------------------------------- lanes walking a grid


@vectorised
def _correct(B, rack, travel, contact, along_rack):
    """Newton on a block at one grid point: pose in and out, tangent along the line, step sizes, grip.

    Returns the number of iterations; a lane that is still moving afterwards is left for the checks to find.
    """
    iterations = 0
    pending = 1
    while pending > 0 and iterations < LANE_ITERATIONS:
        pending = 0
        for lane in range(LANES):
            _newton(B, LANES, lane, rack, travel, contact, along_rack)
            pending += 1 if B[MOVE * LANES + lane] > (STEP_TOLERANCE * B[LEVER * LANES + lane]) ** 2 else 0
        if iterations == 0:
            for lane in range(LANES):
                B[FIRST * LANES + lane] = B[MOVE * LANES + lane]
        iterations += 1
    return iterations


@vectorised
def _accept(B, stride):
    """Turn a lane to NaN where the step is not certain to have stayed on its branch; count those left."""
    alive = 0
    for lane in range(LANES):
        lever = B[LEVER * LANES + lane]
        small = (STEP_TOLERANCE * lever) ** 2
        m0, m1 = B[X * LANES + lane] - B[NEW * LANES + lane], B[(X + 1) * LANES + lane] - B[(NEW + 1) * LANES + lane]
        m2 = B[(X + 2) * LANES + lane] - B[(NEW + 2) * LANES + lane]
        m3 = B[(X + 3) * LANES + lane] - B[(NEW + 3) * LANES + lane]
        m4 = B[(X + 4) * LANES + lane] - B[(NEW + 4) * LANES + lane]
        move = stride * stride + m0 * m0 + m1 * m1 + 4.0 * lever * lever * (m2 * m2 + m3 * m3 + m4 * m4)
        g, b = B[GRIP * LANES + lane], B[BEFORE * LANES + lane]
        good = (
            (B[MOVE * LANES + lane] <= small)
            & (B[FIRST * LANES + lane] <= LANE_CORRECTION * LANE_CORRECTION * move + small)
            & (g >= LANE_GRIP)
            & (g <= GRIP_CHANGE * b)
            & (b <= GRIP_CHANGE * g)
        )
        B[X * LANES + lane] = B[X * LANES + lane] if good else math.nan
        B[BEFORE * LANES + lane] = g
        alive += 1 if good else 0
    return alive


@vectorised
def _predict(B, c0, c1, c2, c3):
    """Hermite extrapolation from two solved poses and their tangents; the last pose becomes the one before."""
    for k in range(5 * LANES):
        old, old_slope = B[OLD * LANES + k], B[OLD_SLOPE * LANES + k]
        new, slope = B[NEW * LANES + k], B[NEW_SLOPE * LANES + k]
        B[X * LANES + k] = c0 * old + c1 * old_slope + c2 * new + c3 * slope


@vectorised
def _shift(B):
    """The solved pose becomes the last one, the last one the one before."""
    for k in range(5 * LANES):
        B[OLD * LANES + k] = B[NEW * LANES + k]
        B[OLD_SLOPE * LANES + k] = B[NEW_SLOPE * LANES + k]
        B[NEW * LANES + k] = B[X * LANES + k]
        B[NEW_SLOPE * LANES + k] = B[SLOPE * LANES + k]


@compiled
def _line(B, fixed, values, keep, along_rack, contact, at, nodes, counts, grips):
    """Walk a block outward along one grid line, from the pose in X with its tangent and GRIP, keeping requested nodes.

    values (n,): positions from the origin outward; keep (n,): node number on the line, STRIDE or END.
    Node j goes to nodes[at + j] (6 * LANES,), its Newton count to counts, its grip to grips.
    """
    for lane in range(LANES):
        B[BEFORE * LANES + lane] = B[GRIP * LANES + lane]
    _shift(B)
    position, last = 0.0, 0.0
    for i in range(values.size):
        if keep[i] == END:
            break
        span = position - last
        if abs(values[i] - position) > FARTHEST_SPAN * abs(span):  # the first step, or a very short one before
            _predict(B, 0.0, 0.0, 1.0, values[i] - position)
        else:
            u = (values[i] - last) / span
            c1, c3 = span * u * (1.0 - u) ** 2, span * u * u * (u - 1.0)
            _predict(B, (2.0 * u - 3.0) * u * u + 1.0, c1, (3.0 - 2.0 * u) * u * u, c3)
        if along_rack > 0.5:
            count = _correct(B, values[i], fixed, contact, along_rack)
        else:
            count = _correct(B, fixed, values[i], contact, along_rack)
        alive = _accept(B, values[i] - position)
        if keep[i] >= 0:
            j = at + keep[i]
            _copy(B, X * LANES, nodes[j], 0, 6 * LANES)
            _copy(B, GRIP * LANES, grips[j], 0, LANES)
            counts[j] = count
        if alive == 0:
            break
        _shift(B)
        last = position
        position = values[i]


@compiled
def _block_grid(
    B, rack, rack_line, rack_keep, travel, travel_line, travel_keep, contact,
    nodes, counts, grips, starts, start_counts, start_grips,
):  # fmt: skip
    """All grid nodes of one block: nodes (R * T, 6 * LANES), NaN where a lane gave up."""
    for n in range(nodes.shape[0]):
        counts[n] = 0
        for lane in range(LANES):
            nodes[n, lane] = math.nan
    for n in range(rack.size):
        start_counts[n] = 0
        for k in range(6 * LANES):
            starts[n, k] = math.nan
    size = (GRIP + 1 - X) * LANES
    origin, state = np.empty(size), np.empty(size)
    _copy(B, X * LANES, origin, 0, size)
    for lane in range(LANES):
        if math.isnan(B[INVERSE_DET * LANES + lane]):
            origin[lane] = math.nan
    for i in range(rack.size):
        if rack[i] == 0.0:
            _copy(origin, 0, starts[i], 0, 6 * LANES)
    for way in range(2):
        _copy(origin, 0, B, X * LANES, size)
        _line(B, 0.0, rack_line[way], rack_keep[way], 1.0, contact, np.int64(0), starts, start_counts, start_grips)
    for i in range(rack.size):
        _copy(starts[i], 0, B, X * LANES, 6 * LANES)
        count = _correct(B, rack[i], 0.0, contact, 0.0)  # a last polish, and the tangent along travel
        _copy(B, X * LANES, state, 0, size)
        at = i * travel.size
        for j in range(travel.size):
            if travel[j] == 0.0:
                _copy(B, X * LANES, nodes[at + j], 0, 6 * LANES)
                counts[at + j] = start_counts[i] + count
        for way in range(2):
            _copy(state, 0, B, X * LANES, size)
            _line(B, rack[i], travel_line[way], travel_keep[way], 0.0, contact, at, nodes, counts, grips)


# ------------------------------------------------------------------------------------------- measures and derivatives


@compiled
def _load_poses(B, flat, size, m, rack, travel, first, lanes):
    """Bring pose m of each design of the block into X, RACK_AT and TRAVEL_AT; flat holds (N, size, 6) poses."""
    shared = rack.shape[0] == 1 and travel.shape[0] == 1
    for lane in range(LANES):
        design = first + min(lane, lanes - 1)
        at = 6 * (design * size + m)
        B[X * LANES + lane] = flat[at]
        B[(X + 1) * LANES + lane] = flat[at + 1]
        B[(X + 2) * LANES + lane] = flat[at + 2]
        B[(X + 3) * LANES + lane] = flat[at + 3]
        B[(X + 4) * LANES + lane] = flat[at + 4]
        if not shared:
            B[RACK_AT * LANES + lane] = rack[min(design, rack.shape[0] - 1), m]
            B[TRAVEL_AT * LANES + lane] = travel[min(design, travel.shape[0] - 1), m]
    if shared:
        for lane in range(LANES):
            B[RACK_AT * LANES + lane] = rack[0, m]
            B[TRAVEL_AT * LANES + lane] = travel[0, m]


@vectorised
def _measure_block(B, contact):
    """All COLUMNS of a block at the poses in X, RACK_AT and TRAVEL_AT."""
    for lane in range(LANES):
        m = _measure_lane(B, LANES, lane, contact)
        B[OUT * LANES + lane] = _angle(B[OUT * LANES + lane], m[0])
        B[(OUT + 1) * LANES + lane] = -B[SIDE * LANES + lane] * B[OUT * LANES + lane]
        B[(OUT + 2) * LANES + lane] = _angle(B[(OUT + 2) * LANES + lane], m[1])
        B[(OUT + 3) * LANES + lane] = _angle(B[(OUT + 3) * LANES + lane], m[2])
        B[(OUT + 4) * LANES + lane] = _angle(B[(OUT + 4) * LANES + lane], m[3])
        B[(OUT + 12) * LANES + lane] = _angle(B[(OUT + 12) * LANES + lane], m[4])
        e0, e1 = abs(m[5]) * B[ROW_SCALE * LANES + lane], abs(m[6]) * B[(ROW_SCALE + 1) * LANES + lane]
        e2, e3 = abs(m[7]) * B[(ROW_SCALE + 2) * LANES + lane], abs(m[8]) * B[(ROW_SCALE + 3) * LANES + lane]
        e4 = abs(m[9]) * B[(ROW_SCALE + 4) * LANES + lane]
        B[(OUT + 46) * LANES + lane] = max(max(max(e0, e1), max(e2, e3)), e4)


@inline
def _store_columns(B, at, stride, lanes, columns, target):
    """Chosen measures of a block to target: lane l goes to row at + l * stride of a table with columns.size cells a row."""
    C = columns.size
    for c in range(C):
        source = (OUT + columns[c]) * LANES
        for lane in range(lanes):
            target[(at + lane * stride) * C + c] = B[source + lane]


@vectorised
def _heading_block(B):
    """The first two COLUMNS, steer angle and toe-in, of a block at the poses in X: all that bump steer needs."""
    for lane in range(LANES):
        r = _rotation(B[(X + 2) * LANES + lane], B[(X + 3) * LANES + lane], B[(X + 4) * LANES + lane])
        ax, ay, _ = _turn(r, B[SPIN * LANES + lane], B[(SPIN + 1) * LANES + lane], B[(SPIN + 2) * LANES + lane])
        B[OUT * LANES + lane] = _angle(-ax, ay)
        B[(OUT + 1) * LANES + lane] = -B[SIDE * LANES + lane] * B[OUT * LANES + lane]


@compiled
def measure_poses(designs, poses, rack, travel, contact, columns, out):
    """Chosen COLUMNS of given poses: poses (N, M, 6), rack and travel (N or 1, M), columns (C,), out (N, M, C)."""
    B = np.zeros(BLOCK * LANES)
    flat, target = poses.reshape(-1), out.reshape(-1)
    M = poses.shape[1]
    for first in range(0, designs.shape[0], LANES):
        _pack_block(designs, first, contact, B)
        lanes = min(LANES, designs.shape[0] - first)
        for m in range(M):
            _load_poses(B, flat, poses.shape[1], m, rack, travel, first, lanes)
            _measure_block(B, contact)
            _store_columns(B, first * M + m, M, lanes, columns, target)


@compiled
def solve_grid(
    designs, rack, rack_line, rack_keep, travel, travel_line, travel_keep, contact, poses, iterations, columns, out,
):  # fmt: skip
    """Poses of every design on the grid, and chosen COLUMNS of them: designs (N, DESIGN), poses (N, R * T, 6).

    rack_line and travel_line (2, n) with their keep (2, n) are the ways up and down as ``_line`` takes them; iterations
    (N, R * T); columns (C,), none to measure nothing; out (N, R * T, C). Poses and columns are NaN where a lane was not
    certain of its branch, for ``walk_grid`` to decide.
    """
    count, C = rack.size * travel.size, columns.size
    nodes, counts, grips = np.empty((count, 6 * LANES)), np.empty(count, np.int64), np.empty((count, LANES))
    starts, start_counts = np.empty((rack.size, 6 * LANES)), np.empty(rack.size, np.int64)
    start_grips = np.empty((rack.size, LANES))
    B = np.zeros(BLOCK * LANES)
    flat, target = poses.reshape(-1), out.reshape(-1)
    heading_only = True
    for c in range(C):
        heading_only = heading_only and columns[c] < 2
    for first in range(0, designs.shape[0], LANES):
        _pack_block(designs, first, contact, B)
        _block_grid(
            B, rack, rack_line, rack_keep, travel, travel_line, travel_keep, contact,
            nodes, counts, grips, starts, start_counts, start_grips,
        )  # fmt: skip
        lanes = min(LANES, designs.shape[0] - first)
        for n in range(count):
            for lane in range(lanes):
                at = 6 * ((first + lane) * count + n)
                iterations[first + lane, n] = counts[n]
                lost = math.isnan(nodes[n, lane])
                for k in range(6):
                    flat[at + k] = math.nan if lost else nodes[n, k * LANES + lane]
            if C == 0:
                continue
            _copy(nodes[n], 0, B, X * LANES, 6 * LANES)
            for lane in range(LANES):
                B[RACK_AT * LANES + lane] = rack[n // travel.size]
                B[TRAVEL_AT * LANES + lane] = travel[n % travel.size]
            if heading_only:
                _heading_block(B)
            else:
                _measure_block(B, contact)
            _store_columns(B, first * count + n, count, lanes, columns, target)


@vectorised
def _gradient_block(B, contact):
    for lane in range(LANES):
        _gradient_lane(B, LANES, lane, contact)


@compiled
def contract_gradient(designs, poses, rack, travel, contact, weights, out):
    """Slope of one objective by every hardpoint coordinate: sum over poses of weights . OBJECTIVE_TERMS.

    poses (N, M, 6), rack and travel (N or 1, M), weights (N or 1, M, 5), out (N, 27). The wheel's static angles stay.
    A pose that is NaN makes its design's result NaN.
    """
    B = np.zeros(BLOCK * LANES)
    flat = poses.reshape(-1)
    one, slopes, varied = np.empty(PACKED), np.empty(38), np.empty(DESIGN, np.complex128)
    packed = np.empty(PACKED, np.complex128)
    for first in range(0, designs.shape[0], LANES):
        _pack_block(designs, first, contact, B)
        lanes = min(LANES, designs.shape[0] - first)
        for k in range(38 * LANES):
            B[GRADIENT * LANES + k] = 0.0
        for m in range(poses.shape[1]):
            _load_poses(B, flat, poses.shape[1], m, rack, travel, first, lanes)
            for lane in range(LANES):
                design = min(first + min(lane, lanes - 1), weights.shape[0] - 1)
                for k in range(WEIGHTS):
                    B[(WEIGHT + k) * LANES + lane] = weights[design, m, k]
            _gradient_block(B, contact)
        for lane in range(lanes):
            for k in range(PACKED):
                one[k] = B[k * LANES + lane]
            for k in range(38):
                slopes[k] = B[(GRADIENT + k) * LANES + lane]
            _spread(designs[first + lane], one, slopes, varied, packed, out[first + lane])


@compiled
def _spread(design, one, slopes, varied, packed, out):
    """From slopes by the rows' parameters (a, b, c; origin) to slopes by the 27 coordinates."""
    for k in range(27):
        out[k] = slopes[35 + k - 24] if k >= 24 else 0.0
    strut = design[DESIGN_KIND] > 0.5
    for row in range(5):
        if one[8 * row + 6] < 0.5:
            continue  # slide rows below
        slot = _slots_of(design, one, row)
        joint, base = slot // 9, slot % 9
        pull = slopes[7 * row + 6]
        for i in range(3):
            a, b = one[8 * row + i], one[8 * row + 3 + i]
            by_a, by_b = slopes[7 * row + i] + pull * b, slopes[7 * row + 3 + i] + pull * (a - b)
            out[3 * joint + i] += by_a
            out[3 * base + i] += by_b
            out[24 + i] -= by_a + by_b
    if strut:
        step = 1e-30
        for n in range(9):
            k = n if n < 6 else 18 + n
            for i in range(DESIGN):
                varied[i] = design[i]
            varied[k] += step * 1j
            pack(varied, packed)
            for row in range(5):
                if one[8 * row + 6] > 0.5:
                    continue
                source = 0 if abs(packed[0].real - one[8 * row]) + abs(packed[1].real - one[8 * row + 1]) + abs(
                    packed[2].real - one[8 * row + 2]) < 1e-9 / one[ROW_SCALE + row] else 1  # fmt: skip
                for i in range(6):
                    out[k] += slopes[7 * row + i] * packed[8 * source + i].imag / step
                out[k] += slopes[7 * row + 6] * packed[8 * source + 7].imag / step


@compiled
def _slots_of(design, one, row):
    """Joint and base slot (joint * 9 + base) of a distance row, whatever place the ordering gave it."""
    if row == 4:
        return 7 * 9 + 6
    first = 2 if design[DESIGN_KIND] > 0.5 else 0
    best, found = 1e300, 0
    for source in range(first, 4):
        joint, base = (2, source) if source < 2 else (5, source + 1)
        miss = 0.0
        for i in range(3):
            miss += abs(design[3 * joint + i] - design[24 + i] - one[8 * row + i])
            miss += abs(design[3 * base + i] - design[24 + i] - one[8 * row + 3 + i])
        if miss < best:
            best, found = miss, joint * 9 + base
    return found


@compiled
def derive_poses(designs, poses, rack, travel, contact, parameters, columns, out):
    """Exact slopes of COLUMNS by design-vector entries: out (N, M, C, Q) for columns (C,) and parameters (Q,).

    Parameter DESIGN means rack travel, DESIGN + 1 wheel travel. The complex step (W. Squire, G. Trapp, SIAM Review
    40 (1998) 110-112) through Newton's own step: the implicit function theorem without cancellation.
    """
    B = np.zeros(BLOCK, np.complex128)
    design = np.empty(DESIGN, np.complex128)
    real, scratch = np.empty(PACKED), np.empty(PACKED)
    step = 1e-30
    for n in range(designs.shape[0]):
        pack(designs[n], real)
        for p in range(parameters.size):
            for k in range(DESIGN):
                design[k] = designs[n, k]
            if parameters[p] < DESIGN:
                design[parameters[p]] += step * 1j
            pack(design, B)
            for k in range(PACKED):
                scratch[k] = real[k]
            _order_rows(scratch, B)
            for m in range(poses.shape[1]):
                B[RACK_AT] = rack[min(n, rack.shape[0] - 1), m] + (step * 1j if parameters[p] == DESIGN else 0j)
                B[TRAVEL_AT] = travel[min(n, travel.shape[0] - 1), m] + (step * 1j if parameters[p] > DESIGN else 0j)
                for k in range(6):
                    B[X + k] = poses[n, m, k]
                _newton(B, 1, 0, B[RACK_AT], B[TRAVEL_AT], contact, 1.0)
                _newton(B, 1, 0, B[RACK_AT], B[TRAVEL_AT], contact, 1.0)
                w = _measure_lane(B, 1, 0, contact)
                for c in range(columns.size):
                    k = columns[c]
                    value = B[OUT + k]
                    if k < 5 or k == 12:
                        x = w[0] if k < 2 else (w[1] if k == 2 else (w[2] if k == 3 else (w[3] if k == 4 else w[4])))
                        turn = value.imag * x.real - x.imag * value.real
                        turn = turn / (value.real * value.real + x.real * x.real)
                        out[n, m, c, p] = TO_DEG * turn / step
                    else:
                        out[n, m, c, p] = value.imag / step


# ------------------------------------------------------------------------------------------------- the scalar walker


@compiled
def _eliminate(a):
    """Gauss-Jordan with partial pivoting on a (5, 8): columns 5 to 7 become solutions; returns the determinant."""
    det = 1.0
    for j in range(5):
        best = j
        for i in range(j + 1, 5):
            if abs(a[i, j]) > abs(a[best, j]):
                best = i
        if best != j:
            for m in range(8):
                a[j, m], a[best, m] = a[best, m], a[j, m]
            det = -det
        det *= a[j, j]
        for m in range(j + 1, 8):
            a[j, m] /= a[j, j]
        for i in range(5):
            if i != j:
                for m in range(j + 1, 8):
                    a[i, m] -= a[i, j] * a[j, m]
    return det


@compiled
def _system(P, x, rack, travel, contact, a):
    """Rows at a pose: a (5, 8) = Jacobian, minus value, minus slope by wheel travel, minus slope by rack; x[5] is set."""
    r = _rotation(x[2], x[3], x[4])
    pz, kx, ky, _, _, _ = _drive(P, 1, 0, r, travel, contact)
    x[5] = pz
    rows = _rows(P, 1, 0, r, rack, x[0], x[1], pz, kx, ky)
    for i in range(5):
        row = rows[i]
        a[i, 0], a[i, 1], a[i, 2], a[i, 3], a[i, 4] = row[0], row[1], row[2], row[3], row[4]
        a[i, 5], a[i, 6], a[i, 7] = -row[6], -row[5], 0.0
    a[4, 7] = _rack_slope(P, 1, 0, rows[4])


@compiled
def _leg(P, x, at, along_rack, target, contact, a, trial):
    """Walk x from at = [rack, travel, grip] along one of the two to target, in strides as long as the branch is certain.

    Returns (reached, Newton iterations of the last stride). Where it returns False, at tells how far it came.
    """
    if math.isnan(P[INVERSE_DET]):
        return False, 0
    lever = P[LEVER]
    which = 0 if along_rack > 0.5 else 1
    longest = WALK_STRIDE * lever
    stride = longest
    iterations = 0
    while at[which] != target:
        left = target - at[which]
        last = abs(left) <= stride
        h = left if last else math.copysign(stride, left)
        _system(P, x, at[0], at[1], contact, a)
        det_before = _eliminate(a)
        column = 7 if along_rack > 0.5 else 6
        e0, e1, e2 = _gibbs_slope(x[2], x[3], x[4], a[2, column], a[3, column], a[4, column])
        trial[0], trial[1] = x[0] + h * a[0, column], x[1] + h * a[1, column]
        trial[2], trial[3], trial[4] = x[2] + h * e0, x[3] + h * e1, x[4] + h * e2
        spin = a[2, column] ** 2 + a[3, column] ** 2 + a[4, column] ** 2
        move = h * h * (1.0 + a[0, column] ** 2 + a[1, column] ** 2 + lever * lever * spin)
        goal = target if last else at[which] + h
        rack, travel = (goal, at[1]) if along_rack > 0.5 else (at[0], goal)
        previous, det, good = 0.0, 0.0, False
        iterations = 0
        while iterations < WALK_ITERATIONS:
            _system(P, trial, rack, travel, contact, a)
            det = _eliminate(a)
            e0, e1, e2 = _gibbs_slope(trial[2], trial[3], trial[4], a[2, 5], a[3, 5], a[4, 5])
            trial[0] += a[0, 5]
            trial[1] += a[1, 5]
            trial[2] += e0
            trial[3] += e1
            trial[4] += e2
            size = a[0, 5] ** 2 + a[1, 5] ** 2 + lever * lever * (a[2, 5] ** 2 + a[3, 5] ** 2 + a[4, 5] ** 2)
            done = size <= (WALK_STEP_TOLERANCE * lever) ** 2
            bound = WALK_CORRECTION**2 * move if iterations == 0 else WALK_CONTRACTION**2 * previous
            iterations += 1
            if done:
                ratio = det / det_before
                good = ratio > 0.0 and ratio < GRIP_CHANGE and ratio * GRIP_CHANGE > 1.0
                break
            if not size <= bound:
                break
            previous = size
        if good:
            for k in range(5):
                x[k] = trial[k]
            at[which] = goal
            at[2] = det * P[INVERSE_DET]
            stride = min(longest, 1.5 * abs(h))
        else:
            stride = 0.5 * abs(h)
            if stride < WALK_SHORTEST * lever:
                return False, iterations
    return True, iterations


@compiled
def _begin(designs, n, contact, P, x, at, a):
    """Pack design n and stand at its design pose."""
    pack(designs[n], P)
    for k in range(6):
        x[k] = 0.0
    _system(P, x, 0.0, 0.0, contact, a)
    P[INVERSE_DET] = _inverse_det(P, np.int64(1), np.int64(0), _eliminate(a))
    at[0], at[1], at[2] = 0.0, 0.0, 0.0 if math.isnan(P[INVERSE_DET]) else 1.0


@compiled
def _why(P, x, at, contact):
    """Status of a path that ends at pose x: LOCKED where rod and arm are in line as seen along the steering axis, else OUT_OF_REACH.

    In line: the transmission angle is within LOCK_MARGIN of 0 or 180 deg, or there is no lever at all. A linkage whose rows
    are dependent where it was drawn is LOCKED: it cannot move in any direction.
    """
    if math.isnan(P[INVERSE_DET]):
        return STATUS_LOCKED
    r = _rotation(x[2], x[3], x[4])
    pz, _, _, ax, ay, az = _drive(P, 1, 0, r, at[1], contact)
    m = _measure(P, 1, 0, r, at[0], x[0], x[1], pz, ax, ay, az)
    return STATUS_LOCKED if m[14] <= LOCKED_SINE * math.hypot(m[14], m[15]) else STATUS_OUT_OF_REACH


@compiled
def _finish(P, x, at, contact, a, pose):
    """Status of a pose that was walked to; it is written to pose (6,) when it is ok."""
    if at[2] < LEAST_GRIP:
        return _why(P, x, at, contact)
    _system(P, x, at[0], at[1], contact, a)
    for k in range(6):
        pose[k] = x[k]
    return STATUS_OK


@compiled
def settle(packed, x, iterations):
    """Newton on packed rows (PACKED,) at zero rack and travel from pose x (6,): the last step (mm), NaN where it diverges.

    For rows that were changed after packing, such as a pivot that was shimmed while the link kept its length.
    """
    a = np.empty((5, 8))
    lever = packed[LEVER]
    step = math.nan
    for _ in range(iterations):
        _system(packed, x, 0.0, 0.0, 0.0, a)
        if _eliminate(a) == 0.0:
            return math.nan
        e0, e1, e2 = _gibbs_slope(x[2], x[3], x[4], a[2, 5], a[3, 5], a[4, 5])
        x[0] += a[0, 5]
        x[1] += a[1, 5]
        x[2] += e0
        x[3] += e1
        x[4] += e2
        spin = a[2, 5] ** 2 + a[3, 5] ** 2 + a[4, 5] ** 2
        step = math.sqrt(a[0, 5] ** 2 + a[1, 5] ** 2 + lever * lever * spin)
        if not step < 1e6:
            return math.nan
        if step < WALK_STEP_TOLERANCE * lever:
            break
    return step


@compiled
def walk_poses(designs, rack, travel, contact, poses, status, iterations, ends):
    """Poses by the scalar walker from the design position: rack first, then travel; where that stops, travel first.

    rack and travel (N or 1, M); poses (N, M, 6), status and iterations (N, M); ends (N, M, 2): the rack and wheel
    travel where the first path stopped (the pose itself where it did not).
    """
    P, x, at, a, trial = np.empty(PACKED), np.empty(6), np.empty(3), np.empty((5, 8)), np.empty(6)
    for n in range(designs.shape[0]):
        for m in range(poses.shape[1]):
            r, t = rack[min(n, rack.shape[0] - 1), m], travel[min(n, travel.shape[0] - 1), m]
            for order in range(2):
                along = 1.0 - order
                _begin(designs, n, contact, P, x, at, a)
                reached, count = _leg(P, x, at, along, r if order == 0 else t, contact, a, trial)
                if reached:
                    reached, more = _leg(P, x, at, 1.0 - along, t if order == 0 else r, contact, a, trial)
                    count += more
                result = _finish(P, x, at, contact, a, poses[n, m]) if reached else _why(P, x, at, contact)
                if order == 0 or result == STATUS_OK:
                    status[n, m] = result
                    iterations[n, m] = count
                if order == 0:
                    ends[n, m, 0], ends[n, m, 1] = at[0], at[1]
                if result == STATUS_OK:
                    break


@compiled
def _walk_line(
    P, x, at, along_rack, values, keep, offset, spread, contact, a, trial, poses, status, iterations, ends, first,
):  # fmt: skip
    """Walk outward along a grid line from (x, at), filling in the nodes not yet ok; node j is offset + j * spread.

    Nodes that the lanes solved are walked over, not overwritten. On the first path (``first``) a node that is not
    reached gets its status and the place where the path ended, and so do all nodes farther out.
    """
    reached, result = True, STATUS_OK
    for i in range(values.size):
        if keep[i] == END:
            break
        if keep[i] == STRIDE:
            continue
        count = 0
        if reached:
            reached, count = _leg(P, x, at, along_rack, values[i], contact, a, trial)
            if not reached:
                result = _why(P, x, at, contact)
        if not reached and first < 0.5:
            break
        node = offset + keep[i] * spread
        if status[node] == STATUS_OK:
            continue
        if reached:
            result = _finish(P, x, at, contact, a, poses[node])
        if result == STATUS_OK or first > 0.5:
            status[node] = result
            iterations[node] = count
        if first > 0.5:
            ends[node, 0], ends[node, 1] = at[0], at[1]


@compiled
def _missing(status, offset, spread, keep):
    for i in range(keep.size):
        if keep[i] == END:
            break
        if keep[i] != STRIDE and status[offset + keep[i] * spread] != STATUS_OK:
            return True
    return False


@compiled
def walk_grid(
    designs, which, rack, rack_line, rack_keep, travel, travel_line, travel_keep, contact,
    poses, status, iterations, ends,
):  # fmt: skip
    """Fill in what the lanes left open, for the designs numbered in ``which``: same arrays as ``solve_grid``.

    status (N, R * T) holds OK where the lanes' pose stands. ends (N, R * T, 2): rack and wheel travel where the first
    path to a pose (rack first) stopped.
    """
    P, x, at, a, trial = np.empty(PACKED), np.empty(6), np.empty(3), np.empty((5, 8)), np.empty(6)
    start, begin = np.empty(6), np.empty(3)
    R, T = rack.size, travel.size
    zero, one = np.int64(0), np.int64(1)  # not literals: numba would compile the callee once for each
    row_poses, row_status = np.empty((R, 6)), np.empty(R, np.int8)
    row_iterations, row_ends = np.zeros(R, np.int64), np.empty((R, 2))
    for w in range(which.size):
        n = which[w]
        _begin(designs, n, contact, P, x, at, a)
        for i in range(R):
            row_status[i] = STATUS_OUT_OF_REACH
            if rack[i] == 0.0:
                row_status[i] = STATUS_LOCKED if at[2] < LEAST_GRIP else STATUS_OK
                row_ends[i, 0], row_ends[i, 1] = 0.0, 0.0
            for k in range(6):
                row_poses[i, k] = 0.0
        for way in range(2):
            _begin(designs, n, contact, P, x, at, a)
            _walk_line(
                P, x, at, 1.0, rack_line[way], rack_keep[way], zero, one, contact, a, trial,
                row_poses, row_status, row_iterations, row_ends, 1.0,
            )  # fmt: skip
        for i in range(R):
            for j in range(T):
                node = i * T + j
                if status[n, node] == STATUS_OK:
                    continue
                if row_status[i] != STATUS_OK:
                    status[n, node] = row_status[i]
                    ends[n, node, 0], ends[n, node, 1] = row_ends[i, 0], row_ends[i, 1]
                elif travel[j] == 0.0:
                    status[n, node] = STATUS_OK
                    iterations[n, node] = row_iterations[i]
                    _copy(row_poses[i], 0, poses[n, node], 0, 6)
            if row_status[i] != STATUS_OK:
                continue
            for way in range(2):
                if _missing(status[n], i * T, one, travel_keep[way]):
                    _copy(row_poses[i], 0, x, 0, 6)
                    at[0], at[1], at[2] = rack[i], 0.0, 1.0
                    _walk_line(
                        P, x, at, 0.0, travel_line[way], travel_keep[way], i * T, one, contact, a, trial,
                        poses[n], status[n], iterations[n], ends[n], 1.0,
                    )  # fmt: skip
        # what is still missing: travel first, then rack
        for way in range(2):
            _begin(designs, n, contact, P, x, at, a)
            for i in range(travel_line.shape[1]):
                j = travel_keep[way, i]
                if j == END:
                    break
                if j == STRIDE:
                    continue
                reached, _ = _leg(P, x, at, 0.0, travel_line[way, i], contact, a, trial)
                if not reached:
                    break
                _copy(x, 0, start, 0, 6)
                _copy(at, 0, begin, 0, 3)
                for across in range(2):
                    if _missing(status[n], j, T, rack_keep[across]):
                        _copy(start, 0, x, 0, 6)
                        _copy(begin, 0, at, 0, 3)
                        _walk_line(
                            P, x, at, 1.0, rack_line[across], rack_keep[across], j, T, contact, a, trial,
                            poses[n], status[n], iterations[n], ends[n], 0.0,
                        )  # fmt: skip
                _copy(start, 0, x, 0, 6)
                _copy(begin, 0, at, 0, 3)
