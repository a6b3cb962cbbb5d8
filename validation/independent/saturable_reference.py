"""Reference values for saturable steel that has no closed form, from an independent general-purpose library.

As iron_reference.py beside it (second-order elements of scikit-fem in u = A_phi / r on graded rectangles, two
outer conditions that enclose open space), with steel of B = mu0 H + Js H/(H + Hs) taken at every quadrature point.
Newton's method from zero, its step halved until the energy falls, to a relative residual of 1e-9.

Each current is solved on a grid and on its bisection. Kept are the flux linkage of one turn, its derivative by the
current (one more solve with the last Hessian), the force on the mover and the field at points.

Run:  V/bin/python saturable_reference.py   (see iron_reference.py for V). It writes saturable_reference.json.
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

from iron_reference import MU0, POT, bisected, far_lines, graded, inside, weight

JS, HS = 2.0, 400.0


def law(b2, steel):
    """H/B, d(H/B)/d(B^2) and energy density at B^2, in steel and in air."""
    b = np.sqrt(np.maximum(b2, 1e-30))
    p = MU0 * HS + JS - b
    root = np.sqrt(p * p + 4 * MU0 * b * HS)
    h = np.where(p > 0, 2 * b * HS / (np.where(p > 0, p, 0) + root), (root - p) / (2 * MU0))
    x = h / HS
    slope = 1 / (MU0 + JS / HS / (1 + x) ** 2)
    coenergy = MU0 * h * h / 2 + JS * HS * np.where(x > 1e-4, x - np.log1p(x), x * x / 2 - x**3 / 3)
    nu = h / b
    return (np.where(steel, nu, 1 / MU0), np.where(steel, (slope - nu) / (2 * b * b), 0.0),
            np.where(steel, b * h - coenergy, b2 / (2 * MU0)))


def fields(r, u):
    return -r * u.grad[1], 2 * np.asarray(u) + r * u.grad[0]


@BilinearForm
def hessian(u, v, w):
    r = w.x[0]
    b_z, c_z = 2 * u + r * grad(u)[0], 2 * v + r * grad(v)[0]
    b_r, c_r = -r * grad(u)[1], -r * grad(v)[1]
    along_u, along_v = w.b_r * b_r + w.b_z * b_z, w.b_r * c_r + w.b_z * c_z
    return (w.nu * (b_z * c_z + b_r * c_r) + 2 * w.dnu * along_u * along_v) * r


@LinearForm
def pull(v, w):
    r = w.x[0]
    return w.nu * (w.b_z * (2 * v + r * grad(v)[0]) - w.b_r * r * grad(v)[1]) * r


@LinearForm
def drive(v, w):
    return w.j * v * w.x[0] ** 2


def solve(device, currents, r_lines, z_lines, closed):
    mesh = MeshQuad.init_tensor(r_lines * 1e-3, z_lines * 1e-3)
    basis = Basis(mesh, ElementQuad2(), intorder=6)
    centre = mesh.p[:, mesh.t].mean(axis=1) * 1e3
    points = np.ones(basis.X.shape[-1])
    c = device.coil
    j_q = inside(c, *centre)[:, None] / ((c[1] - c[0]) * (c[3] - c[2]) * 1e-6) * points
    steel, mover = np.zeros(mesh.nelements, bool), np.zeros(mesh.nelements, bool)
    for name, box, _ in device.iron:
        here = inside(box, *centre)
        steel |= here
        mover |= here if name == device.mover else False
    steel_q = steel[:, None] & (points > 0)
    load = drive.assemble(basis, j=j_q)
    far = device.reach * 1e-3 * (1 - 1e-9)
    edge = basis.get_dofs(lambda x: (x[0] > far) | (abs(x[1]) > far)).all() if closed else np.array([], int)
    free = np.setdiff1d(np.arange(basis.N), edge)
    r = basis.global_coordinates().value[0]

    def state(u, current):
        b_r, b_z = fields(r, basis.interpolate(u))
        nu, dnu, energy = law(b_r**2 + b_z**2, steel_q)
        left = current * load - pull.assemble(basis, nu=nu, b_r=b_r, b_z=b_z)
        value = float(np.sum(energy * r * basis.dx) - current * load @ u)
        return b_r, b_z, nu, dnu, left, value

    def factored(s):
        matrix = hessian.assemble(basis, b_r=s[0], b_z=s[1], nu=s[2], dnu=s[3])[free][:, free].tocsc()
        return splu(matrix, permc_spec="MMD_AT_PLUS_A", options=dict(SymmetricMode=True), diag_pivot_thresh=0.0)

    out, u = {}, np.zeros(basis.N)
    for current in currents:
        s = state(u, current)
        for step in range(40):
            factor = factored(s)
            change = np.zeros(basis.N)
            change[free] = factor.solve(s[4][free])
            share = 1.0
            while True:
                tried = state(u + share * change, current)
                if tried[5] <= s[5] + 1e-12 * abs(s[5]) or share < 1e-3:
                    break
                share /= 2
            u, s = u + share * change, tried
            residual = np.linalg.norm(s[4][free]) / (current * np.linalg.norm(load[free]))
            if residual < 1e-9:
                break
        assert residual < 1e-9, (current, residual)
        by_current = np.zeros(basis.N)
        by_current[free] = factored(s).solve(load[free])
        key = f"{current} A."
        out[key + "linkage"] = 2 * np.pi * float(load @ u)
        out[key + "incremental_inductance"] = 2 * np.pi * float(load @ by_current)
        b_r, b_z = s[0], s[1]
        box, band = next(b for n, b, _ in device.iron if n == device.mover), device.band
        x = basis.global_coordinates().value * 1e3
        g_r, g_z = weight(box, band, x[0], x[1])
        stress = ((b_z**2 - b_r**2) / 2 * g_z + b_r * b_z * g_r) / MU0
        out[key + "force_mover"] = float(-2 * np.pi * np.sum((~mover)[:, None] * stress * 1e3 * r * basis.dx))
        probe = np.array(device.fields["in_gap"])[:, None] * 1e-3
        cell = mesh.element_finder()(*probe)
        local = mesh.mapping().invF(probe[:, :, None], tind=cell)
        value = 0.0
        for i in range(basis.Nbfun):
            phi = basis.elem.gbasis(mesh.mapping(), local, i, tind=cell)[0]
            value += float(u[basis.element_dofs[i, cell]][0] * phi.value[0, 0])
        # The point lies on the axis, where B_z = 2 u.
        out[key + "in_gap.b_z"] = 2 * value
    return out


def lines_of(device, fine):
    """As the device's own grid, but coarser away from the edges: full steel has no steep corners."""
    boxes = [device.coil] + [b for _, b, _ in device.iron]
    m = next(b for n, b, _ in device.iron if n == device.mover)
    band = device.band
    rs = sorted({0.0, m[1] + band[0]} | {x for b in boxes for x in b[:2]})
    zs = sorted({m[2] - band[1], m[3] + band[2]} | {x for b in boxes for x in b[2:]})
    r, z = graded(rs, fine, 1.7, 1.2), graded(zs, fine, 1.7, 1.2)
    out = lambda start, end: far_lines(start, end, 2.0, 1.35)
    far = device.reach
    return np.concatenate([r, out(r[-1], far)]), np.concatenate([out(z[0], -far)[::-1], z, out(z[-1], far)])


def reference(device, currents, fine):
    r0, z0 = lines_of(device, fine)
    r1, z1 = bisected(r0), bisected(z0)
    runs = {}
    for closed in (True, False):
        runs[closed] = (solve(device, currents, r0, z0, closed), solve(device, currents, r1, z1, closed))
        print(fine, closed, len(r1) * len(z1), runs[closed], flush=True)
    out = {}
    for key in runs[True][0]:
        low, high = runs[True][1][key], runs[False][1][key]
        grid = max(abs(runs[k][1][key] - runs[k][0][key]) for k in runs)
        out[key] = {"value": (low + high) / 2, "error": grid + abs(high - low) / 2, "grid_change": grid,
                    "boundary_half_distance": abs(high - low) / 2}
    return out


if __name__ == "__main__":
    FINE, CURRENTS = 0.04, [200.0, 600.0, 1500.0]
    result = {
        "made_by": {"library": "scikit-fem", "version": skfem.__version__, "elements": "ElementQuad2 (biquadratic)",
                    "scipy": scipy.__version__, "numpy": np.__version__, "python": platform.python_version()},
        "mu0": MU0, "unit_of_inputs": "mm",
        "conventions": "one turn; linkage in Wb, inductance in H, force in N (positive along +z), fields in T",
        "inputs": {"coil": POT.coil, "iron": [{"name": n, "box": b} for n, b, _ in POT.iron], "mover": POT.mover,
                   "polarization": JS, "half_field": HS, "currents": CURRENTS,
                   "fields": {"in_gap": POT.fields["in_gap"]}, "finest_step": FINE / 2},
        "values": reference(POT, CURRENTS, FINE),
    }
    path = pathlib.Path(__file__).with_name("saturable_reference.json")
    path.write_text(json.dumps(result, indent=1) + "\n")
