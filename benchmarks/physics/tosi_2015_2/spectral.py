"""Steady convection of Tosi et al. (2015), cases 1 to 4 and 5b where it is steady, by a method that shares nothing with the program.

Chebyshev collocation in x and z of
    4 (eta psi_xz)_xz + (d_zz - d_xx) eta (psi_zz - psi_xx) = Ra T_x,      u = psi_z, w = -psi_x,
    u T_x + w T_z = T_xx + T_zz,
    eta_lin = exp(-ln(1e5) T + ln(dz) (1 - z)),  eta_plast = eta* + sigma_Y/sqrt(e_ij e_ij),  eta = 2/(1/eta_lin + 1/eta_plast),
    e_ij e_ij = 2 psi_xz^2 + (psi_zz - psi_xx)^2/2,
free slip on all sides (psi = 0 and psi_zz - psi_xx = 0), T = 1 at z = 0, T = 0 at z = 1, T_x = 0 at the sides; Newton on psi and T
together with dense matrices. It starts from a snapshot of a run (needs VTK to read it), so it confirms a state, it does not find it:

    /usr/bin/python3 spectral.py RUN_FOLDER CASE NX NZ      CASE: 1 2 3 4, or the sigma_Y of case 5b, as in 5b:3.5
"""

import os
import sys

import numpy as np

RA, B, FLOOR = 100.0, np.log(1e5), 1e-3
CASES = {"1": (1.0, None), "2": (1.0, 1.0), "3": (10.0, None), "4": (10.0, 1.0)}  # dz, sigma_Y


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


def viscosity(t, square_rate, depth, dz, sigma):
    """eta, its derivatives by T and by e:e."""
    linear = np.exp(-B * t + np.log(dz) * depth)
    if sigma is None:
        return linear, -B * linear, np.zeros_like(linear)
    s = square_rate + 1e-20
    plastic = FLOOR + sigma / np.sqrt(s)
    eta = 2 / (1 / linear + 1 / plastic)
    return eta, -B * eta**2 / (2 * linear), -(eta**2) / (2 * plastic**2) * sigma / (2 * s**1.5)


def main():
    folder, case, nx, nz = sys.argv[1], sys.argv[2], int(sys.argv[3]), int(sys.argv[4])
    contrast, sigma = (10.0, float(case[3:])) if case.startswith("5b:") else CASES[case]
    x, dx1, wx = chebyshev(nx, 1.0)
    z, dz1, wz = chebyshev(nz, 1.0)
    shape = (nx + 1, nz + 1)
    ix, iz = np.eye(nx + 1), np.eye(nz + 1)
    dx, dz = np.kron(dx1, iz), np.kron(ix, dz1)
    inside_x = np.zeros(shape, bool)
    inside_x[1:-1] = True
    inside_z = np.zeros(shape, bool)
    inside_z[:, 1:-1] = True
    flow = np.flatnonzero(inside_x & inside_z)  # where psi is unknown
    heat = np.flatnonzero(inside_z)  # where T is
    side = ~inside_x.ravel()[heat]
    depth = np.tile(1 - z, nx + 1)
    dxz = np.kron(dx1, dz1)
    out, into = 2 * dxz[flow], 2 * dxz[:, flow]
    del dxz
    dxx_dzz = np.kron(ix, dz1 @ dz1) - np.kron(dx1 @ dx1, iz)
    square = dxx_dzz[np.ix_(flow, flow)]
    laplace = (np.kron(dx1 @ dx1, iz) + np.kron(ix, dz1 @ dz1))[heat]
    del dxx_dzz

    # The start: the snapshot, bilinear.
    cx, cz, cells = snapshot_temperature(folder)
    cz = np.concatenate([[0], cz, [1]])
    cells = np.column_stack([np.ones(len(cx)), cells, np.zeros(len(cx))])
    columns = np.array([np.interp(z, cz, row) for row in cells])
    t = np.array([np.interp(x, cx, columns[:, k]) for k in range(nz + 1)]).T.ravel()

    def rates(psi):
        """2 psi_xz everywhere, psi_zz - psi_xx everywhere (0 on the walls), e:e."""
        a, b = into @ psi, np.zeros(t.size)
        b[flow] = square @ psi
        return a, b, (a * a + b * b) / 2

    psi = np.zeros(len(flow))
    for _ in range(1 if sigma is None else 40):  # the flow of the snapshot, by fixed points
        eta = viscosity(t, rates(psi)[2] if psi.any() else np.full(t.size, 1e3), depth, contrast, sigma)[0]
        psi = np.linalg.solve((out * eta) @ into + (square * eta[flow]) @ square, RA * dx[flow] @ t)
    for iteration in range(40):
        a, b, s = rates(psi)
        eta, by_t, by_s = viscosity(t, s, depth, contrast, sigma)
        full = np.zeros(t.size)
        full[flow] = psi
        u, w, tx, tz = dz @ full, -dx @ full, dx @ t, dz @ t
        force = out @ (eta * a) + square @ (eta * b)[flow] - RA * tx[flow]
        rate = (u * tx + w * tz)[heat] - laplace @ t
        rate[side] = tx[heat][side]
        # Tangent: d(eta a) = eta da + a (by_s (a da + b db) + by_t dT), and so for b.
        to_a = (out * (eta + by_s * a * a)) @ into + (out[:, flow] * (by_s * a * b)[flow]) @ square
        to_b = (square * (eta + by_s * b * b)[flow]) @ square + (square * (by_s * a * b)[flow]) @ into[flow]
        k_t = (out * (a * by_t))[:, heat] - RA * dx[np.ix_(flow, heat)]
        place = np.full(t.size, -1)
        place[heat] = np.arange(len(heat))
        k_t[:, place[flow]] += square * (b * by_t)[flow]
        h_psi = tx[heat, None] * dz[np.ix_(heat, flow)] - tz[heat, None] * dx[np.ix_(heat, flow)]
        h_t = u[heat, None] * dx[np.ix_(heat, heat)] + w[heat, None] * dz[np.ix_(heat, heat)] - laplace[:, heat]
        h_psi[side] = 0
        h_t[side] = dx[np.ix_(heat, heat)][side]
        step = np.linalg.solve(np.block([[to_a + to_b, k_t], [h_psi, h_t]]), -np.concatenate([force, rate]))
        size = np.abs(step[len(flow) :]).max()
        share = min(1.0, 0.1 / size)
        psi += share * step[: len(flow)]
        t[heat] += share * step[len(flow) :]
        print(f"  Newton {iteration}: change of T {size:.1e}", flush=True)
        if size < 1e-9:
            break
    a, b, s = rates(psi)
    eta = viscosity(t, s, depth, contrast, sigma)[0]
    full = np.zeros(t.size)
    full[flow] = psi
    u, w = (dz @ full).reshape(shape), (-dx @ full).reshape(shape)
    flux = -(dz @ t).reshape(shape)
    mean = lambda f: wx @ f.reshape(shape) @ wz  # noqa: E731
    top = u[:, -1]
    series = np.polynomial.chebyshev.Chebyshev.fit(x, top, nx)
    print(f"case {case}, {nx} x {nz}")
    print(f"temperature_mean {mean(t):.6f}")
    print(f"nusselt {wx @ flux[:, -1]:.6f} (top) {wx @ flux[:, 0]:.6f} (bottom)")
    print(f"velocity_rms {np.sqrt(mean(u * u + w * w)):.5f}")
    print(f"top: rms {np.sqrt(wx @ (top * top)):.5f} largest {np.abs(series(np.linspace(0, 1, 4001))).max():.5f}")
    print(f"work {mean(t.reshape(shape) * w):.6f} dissipation/Ra {mean(2 * eta * s) / RA:.6f}")
    print(f"viscosity {eta.min():.5e} {eta.max():.5f}")
    print(f"q1 {flux[0, -1]:.6f} q2 {flux[-1, -1]:.6f} q3 {flux[-1, 0]:.6f} q4 {flux[0, 0]:.6f}")


main()
