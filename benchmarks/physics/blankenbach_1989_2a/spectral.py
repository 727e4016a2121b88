"""Steady convection in a box with viscosity exp(-b T + c (1 - z)), by a method that shares nothing with the program.

Chebyshev collocation in x and z of
    4 (eta psi_xz)_xz + (d_zz - d_xx) eta (psi_zz - psi_xx) = Ra T_x,      u = psi_z, w = -psi_x,
    u T_x + w T_z = T_xx + T_zz,
free slip on all sides (psi = 0 and psi_zz - psi_xx = 0), T = 1 at z = 0, T = 0 at z = 1, T_x = 0 at the sides; Newton on psi and T
together with dense matrices. It starts from a snapshot of a run (needs VTK to read it):

    /usr/bin/python3 spectral.py RUN_FOLDER CASE NX NZ      CASE: 1a 1b 1c 2a 2b
"""

import os
import sys

import numpy as np

CASES = {  # Ra, width, b, c
    "1a": (1e4, 1.0, 0.0, 0.0),
    "1b": (1e5, 1.0, 0.0, 0.0),
    "1c": (1e6, 1.0, 0.0, 0.0),
    "2a": (1e4, 1.0, np.log(1000.0), 0.0),
    "2b": (1e4, 2.5, np.log(16384.0), np.log(64.0)),
}


def chebyshev(n, length):
    """Points from 0 to length, the matrix of the derivative, the weights of the integral (Clenshaw-Curtis)."""
    k = np.arange(n + 1)
    x = -np.cos(np.pi * k / n)
    c = np.where((k == 0) | (k == n), 2.0, 1.0) * (-1.0) ** k
    gap = x[:, None] - x[None, :] + np.eye(n + 1)
    d = np.outer(c, 1 / c) / gap
    d -= np.diag(d.sum(axis=1))
    # Weights: those that integrate the Chebyshev polynomials to n exactly.
    polynomials = np.cos(np.outer(k, np.arccos(np.clip(x, -1, 1))))
    integrals = np.where(k % 2 == 0, 2.0 / (1.0 - k.astype(float) ** 2 + (k % 2)), 0.0)
    weights = np.linalg.solve(polynomials, integrals)
    return (x + 1) * length / 2, d * 2 / length, weights * length / 2


def snapshot_temperature(folder):
    """T at the middles of the cells, indexed [x, z], with these places."""
    from vtkmodules.util.numpy_support import vtk_to_numpy
    from vtkmodules.vtkIOXML import vtkXMLPStructuredGridReader

    name = sorted(f for f in os.listdir(os.path.join(folder, "fields")) if f.endswith(".pvts"))[-1]
    reader = vtkXMLPStructuredGridReader()
    reader.SetFileName(os.path.join(folder, "fields", name))
    reader.Update()
    grid = reader.GetOutput()
    points = vtk_to_numpy(grid.GetPoints().GetData()).astype(float)
    x, z = np.unique(points[:, 0]), np.unique(points[:, 1])
    t = vtk_to_numpy(grid.GetCellData().GetArray("temperature")).astype(float).reshape(len(x) - 1, len(z) - 1)
    return (x[1:] + x[:-1]) / 2, (z[1:] + z[:-1]) / 2, t


def main():
    folder, case, nx, nz = sys.argv[1], sys.argv[2], int(sys.argv[3]), int(sys.argv[4])
    ra, width, b, c = CASES[case]
    x, dx1, wx = chebyshev(nx, width)
    z, dz1, wz = chebyshev(nz, 1.0)
    shape = (nx + 1, nz + 1)
    ix, iz = np.eye(nx + 1), np.eye(nz + 1)
    dx, dz = np.kron(dx1, iz), np.kron(ix, dz1)
    dxz = np.kron(dx1, dz1)
    dxx, dzz = np.kron(dx1 @ dx1, iz), np.kron(ix, dz1 @ dz1)
    inside_x = np.zeros(shape, bool)
    inside_x[1:-1] = True
    inside_z = np.zeros(shape, bool)
    inside_z[:, 1:-1] = True
    flow = np.flatnonzero(inside_x & inside_z)  # where psi is unknown
    heat = np.flatnonzero(inside_z)  # where T is
    side = ~inside_x.ravel()[heat]
    depth = np.tile(1 - z, nx + 1)

    # The start: the snapshot, bilinear.
    cx, cz, cells = snapshot_temperature(folder)
    cz = np.concatenate([[0], cz, [1]])
    cells = np.column_stack([np.ones(len(cx)), cells, np.zeros(len(cx))])
    columns = np.array([np.interp(z, cz, row) for row in cells])
    t = np.array([np.interp(x, cx, columns[:, k]) for k in range(nz + 1)]).T.ravel()

    square = (dzz - dxx)[np.ix_(flow, flow)]
    out, into = dxz[flow], dxz[:, flow]
    laplace = (dxx + dzz)[heat]

    def momentum(eta):
        return 4 * (out * eta) @ into + (square * eta[flow]) @ square

    psi = np.linalg.solve(momentum(np.exp(-b * t + c * depth)), ra * dx[flow] @ t)
    for iteration in range(30):
        eta = np.exp(-b * t + c * depth)
        k = momentum(eta)
        full = np.zeros(t.size)
        full[flow] = psi
        u, w, tx, tz = dz @ full, -dx @ full, dx @ t, dz @ t
        force = k @ psi - ra * tx[flow]
        rate = (u * tx + w * tz)[heat] - laplace @ t
        rate[side] = tx[heat][side]
        k_t = (4 * out * (-b * eta * (into @ psi)))[:, heat] - ra * dx[np.ix_(flow, heat)]
        normal = square * (-b * eta[flow] * (square @ psi))
        place = np.full(t.size, -1)
        place[heat] = np.arange(len(heat))
        k_t[:, place[flow]] += normal
        h_psi = tx[heat, None] * dz[np.ix_(heat, flow)] - tz[heat, None] * dx[np.ix_(heat, flow)]
        h_t = u[heat, None] * dx[np.ix_(heat, heat)] + w[heat, None] * dz[np.ix_(heat, heat)] - laplace[:, heat]
        h_psi[side] = 0
        h_t[side] = dx[np.ix_(heat, heat)][side]
        step = np.linalg.solve(np.block([[k, k_t], [h_psi, h_t]]), -np.concatenate([force, rate]))
        size = np.abs(step[len(flow) :]).max()
        share = min(1.0, 0.1 / size)
        psi += share * step[: len(flow)]
        t[heat] += share * step[len(flow) :]
        print(f"  Newton {iteration}: change of T {size:.1e}", flush=True)
        if size < 1e-10:
            break
    full = np.zeros(t.size)
    full[flow] = psi
    u, w = (dz @ full).reshape(shape), (-dx @ full).reshape(shape)
    flux = -(dz @ t).reshape(shape)
    print(f"case {case}, {nx} x {nz}")
    print(f"nusselt {wx @ flux[:, -1] / width:.7f} (top) {wx @ flux[:, 0] / width:.7f} (bottom)")
    print(f"velocity_rms {np.sqrt(wx @ (u * u + w * w) @ wz / width):.6f}")
    print(f"q1 {flux[0, -1]:.6f} q2 {flux[-1, -1]:.6f} q3 {flux[-1, 0]:.6f} q4 {flux[0, 0]:.6f}")


main()
