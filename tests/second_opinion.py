"""The same linkage solved another way: coordinates of the upright's points as unknowns, small steps from the design position.

Nothing of the production solver is used: rigid distances between points in place of a rotation, and a plain walk along the
rack, then along wheel travel, so that the branch is right by continuity.
"""

from __future__ import annotations

import numpy as np
import scipy.optimize

from toewright.model.axle import Axle


class PointModel:
    """One corner in point coordinates.

    Unknowns: 3 coordinates of each upright point. Double wishbone: upper ball joint, lower ball joint, tie rod outer, wheel centre.
    Strut: a point on the strut's axis, lower ball joint, tie rod outer, wheel centre, and a second point on the axis.
    """

    def __init__(self, axle: Axle, side: str) -> None:
        corner = axle.corner(side)
        p = corner.points
        self.rack = axle.rack.axis if axle.rack is not None else np.zeros(3)
        self.inner = p["tie_rod_inner"]
        lower = [(1, p["lower_pivot_front"]), (1, p["lower_pivot_rear"])]
        if corner.kind == "double-wishbone":
            names = ["upper_ball_joint", "lower_ball_joint", "tie_rod_outer", "wheel_centre"]
            self.start = np.array([p[n] for n in names])
            self.to_body = [(0, p["upper_pivot_front"]), (0, p["upper_pivot_rear"]), *lower]
            rigid = [(0, 1), (0, 2), (0, 3), (1, 2), (1, 3), (2, 3)]
            self.top = None
        else:
            names = ["strut_axis_point", "lower_ball_joint", "tie_rod_outer", "wheel_centre"]
            second = 0.5 * (p["strut_axis_point"] + p["strut_top_mount"])
            self.start = np.array([*(p[n] for n in names), second])
            self.to_body = lower
            rigid = [(0, 1), (0, 2), (0, 3), (1, 2), (1, 3), (2, 3), (4, 1), (4, 2), (4, 3)]
            self.top = p["strut_top_mount"]
        self.rigid = [(i, j, float(np.sum((self.start[i] - self.start[j]) ** 2))) for i, j in rigid]
        self.arms = [(i, b, float(np.sum((self.start[i] - b) ** 2))) for i, b in self.to_body]
        self.rod = float(np.sum((self.start[2] - self.inner) ** 2))
        s = corner.sign
        toe, camber = np.radians(-s * axle.setup.toe_in), np.radians(-s * axle.setup.camber)
        self.spin = np.array([-np.sin(toe) * np.cos(camber), np.cos(toe) * np.cos(camber), np.sin(camber)])

    def equations(self, unknowns: np.ndarray, rack: float, travel: float) -> np.ndarray:
        """What must vanish, mm^2 or mm."""
        q = unknowns.reshape(-1, 3)
        rows = [float((q[i] - q[j]) @ (q[i] - q[j])) - d for i, j, d in self.rigid]
        rows += [float((q[i] - b) @ (q[i] - b)) - d for i, b, d in self.arms]
        rod = q[2] - self.inner - rack * self.rack
        rows.append(float(rod @ rod) - self.rod)
        if self.top is not None:
            along, to_top = q[4] - q[0], self.top - q[0]
            rows += [along[1] * to_top[2] - along[2] * to_top[1], along[2] * to_top[0] - along[0] * to_top[2]]
        rows.append(1e2 * (q[3][2] - self.start[3][2] - travel))
        return np.array(rows)

    def jacobian(self, unknowns: np.ndarray, rack: float) -> np.ndarray:
        """Derivatives of the equations."""
        q = unknowns.reshape(-1, 3)
        size = q.shape[0]
        rows = []
        for i, j, _ in self.rigid:
            row = np.zeros((size, 3))
            row[i], row[j] = 2 * (q[i] - q[j]), 2 * (q[j] - q[i])
            rows.append(row)
        for i, b, _ in self.arms:
            row = np.zeros((size, 3))
            row[i] = 2 * (q[i] - b)
            rows.append(row)
        row = np.zeros((size, 3))
        row[2] = 2 * (q[2] - self.inner - rack * self.rack)
        rows.append(row)
        if self.top is not None:
            a, t = q[4] - q[0], self.top - q[0]
            for m, n in ((1, 2), (2, 0)):
                row = np.zeros((size, 3))
                row[4][m], row[4][n] = t[n], -t[m]
                row[0][m], row[0][n] = a[n] - t[n], t[m] - a[m]
                rows.append(row)
        row = np.zeros((size, 3))
        row[3][2] = 1e2
        rows.append(row)
        return np.array([r.ravel() for r in rows])

    def newton(self, unknowns: np.ndarray, rack: float, travel: float) -> np.ndarray:
        """Newton from a near start; raises ArithmeticError where it does not settle."""
        for _ in range(12):
            step = np.linalg.solve(self.jacobian(unknowns, rack), -self.equations(unknowns, rack, travel))
            unknowns = unknowns + step
            if np.max(np.abs(step)) < 1e-11:
                return unknowns
        if np.max(np.abs(step)) < 1e-9:
            return unknowns
        raise ArithmeticError("no convergence")

    def walk(self, rack: float, travel: float, stride: float = 0.5, rack_first: bool = True) -> np.ndarray:
        """Unknowns at a pose, reached along one axis and then along the other in strides of at most ``stride`` mm.

        Raises ArithmeticError where a step does not settle or the determinant leaps, as where a step hops over a toggle.
        """
        unknowns, at = self.start.ravel(), [0.0, 0.0]
        det = np.linalg.det(self.jacobian(unknowns, 0.0))
        for axis in (0, 1) if rack_first else (1, 0):
            goal = (rack, travel)[axis]
            for k in range(1, (n := int(np.ceil(abs(goal) / stride))) + 1):
                at[axis] = goal * k / n
                unknowns = self.newton(unknowns, *at)
                before, det = det, np.linalg.det(self.jacobian(unknowns, at[0]))
                if not 0.4 < det / before < 2.5:
                    raise ArithmeticError("the determinant leaps: a toggle is near")
        return unknowns

    def root(self, guess: np.ndarray, rack: float, travel: float) -> np.ndarray:
        """The same by scipy.optimize.root from a guess."""
        found = scipy.optimize.root(lambda x: self.equations(x, rack, travel), guess, method="hybr", tol=1e-13)
        return np.asarray(found.x)

    def spin_axis(self, unknowns: np.ndarray) -> np.ndarray:
        """The wheel's axis, by the best rotation between the points (Kabsch 1976)."""
        q = unknowns.reshape(-1, 3)
        before, after = self.start - self.start[3], q - q[3]
        u, _, vt = np.linalg.svd(after.T @ before)
        return np.asarray(u @ np.diag([1.0, 1.0, np.sign(np.linalg.det(u @ vt))]) @ vt @ self.spin)
