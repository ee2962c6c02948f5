# SPDX-License-Identifier: MIT
"""Linearly graded junction, net doping a x, set A: field at x = 0 with both carriers and flat quasi-Fermi levels.
u'' = f(x, u) = (q/(eps Vt)) (2 nie sinh u - a x), u = psi/Vt, nie = ni exp(V/2Vt), u(0) = 0, u(X) = asinh(a X/2 nie),
X = 4 W. Numerov's formula (fourth order) with Newton's method, the bias reached in steps; u'(0) by the central formula of
sixth order for an odd function; two meshes, extrapolated (error ratio 16). The last column is the change of the
extrapolated value when both meshes are halved, relative."""
import numpy as np
from scipy.linalg import solve_banded

q, k, eps0, ni, T = 1.602176634e-19, 1.380649e-23, 8.8541878128e-14, 1e10, 300.0
eps, Vt = 11.7 * eps0, k * T / q


def solve(a, V, X, N):
    """|E(0)| on N equal steps."""
    x = np.linspace(0, X, N + 1)
    h = X / N
    factor = q / (eps * Vt)
    u = np.arcsinh(a * x / (2 * ni))
    for bias in np.linspace(0, V, 1 + int(np.ceil(abs(V) / 0.05))) if V else [0.0]:
        nie = ni * np.exp(bias / (2 * Vt))
        u *= np.arcsinh(a * X / (2 * nie)) / u[-1]
        for step in range(200):
            f = factor * (2 * nie * np.sinh(u) - a * x)
            df = factor * 2 * nie * np.cosh(u)
            r = u[2:] - 2 * u[1:-1] + u[:-2] - h * h / 12 * (f[2:] + 10 * f[1:-1] + f[:-2])
            band = np.zeros((3, N - 1))
            band[0, 1:] = (1 - h * h / 12 * df[2:])[:-1]
            band[1] = -2 - h * h * 10 / 12 * df[1:-1]
            band[2, :-1] = (1 - h * h / 12 * df[:-2])[1:]
            du = solve_banded((1, 1), band, -r)
            size = np.max(np.abs(du))
            u[1:-1] += du * min(1.0, 2.0 / size if size > 0 else 1.0)
            if size < 1e-11:
                break
        else:
            raise RuntimeError(f"no convergence, {size}")
    return (45 * u[1] - 9 * u[2] + u[3]) / (30 * h) * Vt


def field_at_junction(a, V):
    """|E(0)| [V/cm] for a gradient a [cm-4] at a bias V [V], with its relative uncertainty."""
    W = 1e-4
    for _ in range(200):
        W = (12 * eps * (2 * Vt * np.log(a * W / (2 * ni)) - V) / (q * a)) ** (1 / 3)
    values = [solve(a, V, 4 * W, N) for N in (2000, 4000, 8000)]
    coarse = values[1] + (values[1] - values[0]) / 15
    fine = values[2] + (values[2] - values[1]) / 15
    return fine, abs(fine - coarse) / fine


if __name__ == "__main__":
    print("a [cm-4]  V | |E(0)| [V/cm] | change")
    for a in (1e18, 1e19, 1e20, 1e21, 1e22, 1e23):
        for V in (0.0, -5.0):
            value, change = field_at_junction(a, V)
            print(f"{a:.0e} {V:5.1f}  {value:.10g}  {change:.1e}", flush=True)
