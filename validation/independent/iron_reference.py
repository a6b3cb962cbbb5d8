"""Reference values for iron parts that have no closed form, from an independent general-purpose library.

The field is found here with second-order (biquadratic) quadrilateral elements of scikit-fem, in another unknown,
on another kind of mesh and with another outer boundary than the program's own:

  unknown   u = A_phi / r, smooth on the axis, so that B_z = 2 u + r du/dr and B_r = -r du/dz;
            weak form  int nu (B_r b_r + B_z b_z) r dr dz = int J v r^2 dr dz  for every test function v
  mesh      a tensor grid of rectangles, graded geometrically into every edge of the drawn parts, and into the
            points where the field is read, for the gradient of an element is far less accurate than its value
  outside   a closed cylinder far away, solved twice: with u = 0 on it (flux kept in: energy too low) and with
            H_tangential = 0 on it (flux leaves squarely, nothing beyond costs energy: energy too high). The open
            space lies between the two, so the error of the far boundary is bounded, not guessed.
  error     each number is solved on a grid and on its bisection; the change is kept as the error of the grid,
            and half the distance between the two outer conditions as the error of the boundary.

Run:  python3 -m venv V && V/bin/pip install scikit-fem==12.0.2 && V/bin/python iron_reference.py
It writes iron_reference.json beside itself. The validation table reads that file only.
"""

import json
import pathlib
import platform

import numpy as np
import scipy
import skfem
from scipy.sparse.linalg import splu
from skfem import Basis, BilinearForm, ElementQuad2, LinearForm, MeshQuad
from skfem.helpers import grad

MU0 = 4e-7 * np.pi


def graded(breaks, fine, growth, coarse):
    """Grid lines through all `breaks` (mm), of size `fine` there, growing by `growth` away from them to `coarse`."""
    lines = [breaks[0]]
    for a, b in zip(breaks[:-1], breaks[1:]):
        half, steps, size = (b - a) / 2, [], fine
        while sum(steps) < half:
            steps.append(min(size, coarse))
            size *= growth
        steps = np.array(steps) * half / sum(steps)
        left = a + np.cumsum(steps)
        right = b - np.cumsum(steps)
        lines += list(left) + list(right[::-1][1:]) + [b]
    return np.array(lines)


def bisected(lines):
    return np.sort(np.concatenate([lines, (lines[1:] + lines[:-1]) / 2]))


def far_lines(start, end, first, growth):
    """Grid lines from `start` outward to `end` (either sign), steps growing by `growth`."""
    sign, lines, step = np.sign(end - start), [start], first
    while abs(lines[-1] - start) < abs(end - start):
        lines.append(lines[-1] + sign * step)
        step *= growth
    lines = np.array(lines[1:])
    return start + (lines - start) * (end - start) / (lines[-1] - start)


class Device:
    """Rectangles r0, r1, z0, z1 in mm: one coil of one turn and 1 A, iron parts of constant permeability."""

    def __init__(self, coil, iron, mover, band, fields, reach=2000.0, far_growth=1.11):
        self.coil, self.iron, self.mover, self.band = coil, iron, mover, band
        self.fields, self.reach, self.far_growth = fields, reach, far_growth

    def grid(self, fine):
        boxes = [self.coil] + [b for _, b, _ in self.iron]
        m = next(b for n, b, _ in self.iron if n == self.mover)
        band = self.band
        rs = sorted({0.0, m[1] + band[0]} | {x for b in boxes for x in b[:2]} | {p[0] for p in self.fields.values()})
        zs = sorted({m[2] - band[1], m[3] + band[2]} | {x for b in boxes for x in b[2:]} | {p[1] for p in self.fields.values()})
        r = graded(rs, fine, 1.35, 0.5)
        z = graded(zs, fine, 1.35, 0.5)
        r = np.concatenate([r, far_lines(r[-1], self.reach, 20 * fine, self.far_growth)])
        z = np.concatenate([far_lines(z[0], -self.reach, 20 * fine, self.far_growth)[::-1], z, far_lines(z[-1], self.reach, 20 * fine, self.far_growth)])
        return r, z


def inside(box, r, z):
    return (r > box[0]) & (r < box[1]) & (z > box[2]) & (z < box[3])


def solve(device, r_lines, z_lines, closed):
    """Inductance (H per turn squared), force on the mover per A^2 and fields per A. `closed`: u = 0 outside."""
    mesh = MeshQuad.init_tensor(r_lines * 1e-3, z_lines * 1e-3)
    basis = Basis(mesh, ElementQuad2(), intorder=6)
    centre = mesh.p[:, mesh.t].mean(axis=1) * 1e3
    nu = np.full(mesh.nelements, 1 / MU0)
    current = np.zeros(mesh.nelements)
    c = device.coil
    current[inside(c, *centre)] = 1 / ((c[1] - c[0]) * (c[3] - c[2]) * 1e-6)
    is_mover = np.zeros(mesh.nelements, bool)
    for name, box, mu_r in device.iron:
        here = inside(box, *centre)
        nu[here] = 1 / (MU0 * mu_r)
        if name == device.mover:
            is_mover |= here
    nu_q = nu[:, None] * np.ones(basis.X.shape[-1])
    j_q = current[:, None] * np.ones(basis.X.shape[-1])

    @BilinearForm
    def energy(u, v, w):
        r = w.x[0]
        b_z, c_z = 2 * u + r * grad(u)[0], 2 * v + r * grad(v)[0]
        b_r, c_r = -r * grad(u)[1], -r * grad(v)[1]
        return w.nu * (b_z * c_z + b_r * c_r) * r

    @LinearForm
    def drive(v, w):
        return w.j * v * w.x[0] ** 2

    matrix, load = energy.assemble(basis, nu=nu_q), drive.assemble(basis, j=j_q)
    far = device.reach * 1e-3 * (1 - 1e-9)
    edge = basis.get_dofs(lambda x: (x[0] > far) | (abs(x[1]) > far)).all() if closed else np.array([], int)
    free = np.setdiff1d(np.arange(basis.N), edge)
    u = np.zeros(basis.N)
    inner = matrix[free][:, free].tocsc()
    factor = splu(inner, permc_spec="MMD_AT_PLUS_A", options=dict(SymmetricMode=True), diag_pivot_thresh=0.0)
    u[free] = factor.solve(load[free])
    for _ in range(2):  # the far elements are huge: refine away the round-off they bring
        u[free] += factor.solve(load[free] - inner @ u[free])
    energy_defect = abs(float(load @ u) - float(u[free] @ (inner @ u[free]))) / float(load @ u)
    assert energy_defect < 1e-9, energy_defect

    out = {"inductance": 2 * np.pi * float(load @ u)}
    field = basis.interpolate(u)
    r = basis.global_coordinates().value[0]
    b_z = 2 * field.value + r * field.grad[0]
    b_r = -r * field.grad[1]
    out["force_coil"] = float(-2 * np.pi * np.sum(j_q * b_r * r * basis.dx))
    # Force on the mover from Maxwell's stress, spread over the air around it: the weight is 1 on the mover and
    # falls to 0 within air, so nothing is read on a single surface.
    if device.mover is not None:
        box = next(b for n, b, _ in device.iron if n == device.mover)
        band = device.band
        x = basis.global_coordinates().value * 1e3
        g_r, g_z = weight(box, band, x[0], x[1])
        t_zz, t_rz = (b_z**2 - b_r**2) / 2, b_r * b_z
        air = (~is_mover)[:, None]
        out["force_mover"] = float(-2 * np.pi * np.sum(air * nu_q * (t_zz * g_z + t_rz * g_r) * 1e3 * r * basis.dx))
    for name, point in device.fields.items():
        probe = np.array(point)[:, None] * 1e-3
        cell = mesh.element_finder()(*probe)
        local = mesh.mapping().invF(probe[:, :, None], tind=cell)
        value, slope = 0.0, np.zeros(2)
        for i in range(basis.Nbfun):
            phi = basis.elem.gbasis(mesh.mapping(), local, i, tind=cell)[0]
            dof = basis.element_dofs[i, cell]
            value += float(u[dof][0] * phi.value[0, 0])
            slope += u[dof][0] * phi.grad[:, 0, 0]
        out[name + ".b_z"] = float(2 * value + probe[0, 0] * slope[0])
        if point[0] > 0:
            out[name + ".b_r"] = float(-probe[0, 0] * slope[1])
    return out


def weight(box, band, r, z):
    """Gradient (per mm) of a weight that is 1 on the box and falls to 0 over `band` = (outward, below, above) mm."""
    f_r = np.maximum(r - box[1], 0) / band[0]
    f_z = np.where(z > box[3], (z - box[3]) / band[2], np.where(z < box[2], (box[2] - z) / band[1], 0.0))
    g_r, g_z = np.maximum(1 - f_r, 0), np.maximum(1 - f_z, 0)
    slope_r = np.where((f_r > 0) & (f_r < 1), -1 / band[0], 0.0)
    slope_z = np.where((f_z > 0) & (f_z < 1), np.where(z > box[3], -1 / band[2], 1 / band[1]), 0.0)
    return slope_r * g_z, slope_z * g_r


def reference(device, fine):
    r0, z0 = device.grid(fine)
    r1, z1 = bisected(r0), bisected(z0)
    runs = {}
    for closed in (True, False):
        runs[closed] = (solve(device, r0, z0, closed), solve(device, r1, z1, closed))
        print(fine, closed, len(r1) * len(z1), runs[closed], flush=True)
    out = {}
    for key in runs[True][0]:
        low, high = runs[True][1][key], runs[False][1][key]
        grid = max(abs(runs[k][1][key] - runs[k][0][key]) for k in runs)
        out[key] = {"value": (low + high) / 2, "error": grid + abs(high - low) / 2, "grid_change": grid,
                    "boundary_half_distance": abs(high - low) / 2}
    return out


# A rod of constant permeability standing off-centre in a longer coil; nothing closes the circuit.
ROD = Device(coil=(5, 8, -15, 15), iron=[("rod", (0, 4, -10, 12), 500.0)], mover="rod", band=(1.0, 5.0, 3.0),
             fields={"on_axis": (0, 20), "beside": (12, 0)})
# A plunger that a pot of constant permeability pulls in through a sleeve gap: thin gaps, sharp edges, a force.
POT = Device(coil=(7, 14, 4, 26),
             iron=[("bottom", (0, 17, 0, 3), 1000.0), ("shell", (15, 17, 3, 27), 1000.0),
                   ("top", (5.4, 17, 27, 30), 1000.0), ("plunger", (0, 5, 5, 40), 1000.0)],
             mover="plunger", band=(0.4, 2.0, 5.0), fields={"in_gap": (0, 4), "above": (0, 45)})

if __name__ == "__main__":
    result = {
        "made_by": {"library": "scikit-fem", "version": skfem.__version__, "elements": "ElementQuad2 (biquadratic)",
                    "scipy": scipy.__version__, "numpy": np.__version__, "python": platform.python_version()},
        "mu0": MU0, "unit_of_inputs": "mm",
        "conventions": "one turn, 1 A; inductance in H, force in N (positive along +z), fields in T",
        "cases": {},
    }
    for name, device, fine in (("rod", ROD, 4e-3), ("pot", POT, 2e-3)):
        result["cases"][name] = {
            "inputs": {"coil": device.coil, "iron": [{"name": n, "box": b, "mu_r": m} for n, b, m in device.iron],
                       "mover": device.mover, "fields": device.fields, "far_boundary": device.reach,
                       "finest_step": fine / 2},
            "values": reference(device, fine),
        }
    path = pathlib.Path(__file__).with_name("iron_reference.json")
    path.write_text(json.dumps(result, indent=1) + "\n")
