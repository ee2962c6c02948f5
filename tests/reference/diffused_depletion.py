# SPDX-License-Identifier: MIT
"""Depletion approximation of diffused junctions by quadrature: p profile N0 f(x) into uniform n doping NB, junction at xj.
Edges x1 < xj < x2 with equal and opposite charge and V = (q/eps) int (x - xj) (NB - N0 f) dx. Lengths in um, set A."""
from math import exp, log

from scipy.integrate import quad
from scipy.optimize import brentq
from scipy.special import erfc

eps, q = 11.7 * 8.8541878128e-14, 1.602176634e-19
cm = 1e-4


def edges(f, NB, xj, V):
    """(xj - x1, x2 - xj [um], |E| [V/cm]) at the total potential V."""
    net = lambda x: 1 - f(x) / f(xj)
    integral = lambda g, a, b: quad(g, a, b, epsabs=1e-14, epsrel=1e-13, limit=400)[0]
    charge = lambda a, b: integral(net, a, b)

    def right(x1):
        wanted = -charge(x1, xj)
        return brentq(lambda x: charge(xj, x) - wanted, xj, xj + 1000, xtol=1e-13, rtol=1e-14)

    def residual(x1):
        return q / eps * NB * integral(lambda x: (x - xj) * net(x), x1, right(x1)) * cm**2 - V

    reaches = brentq(lambda x1: -charge(x1, xj) - 200, 0, xj) if -charge(0, xj) > 200 else 0
    x1 = brentq(residual, reaches, xj * (1 - 1e-3), xtol=1e-13, rtol=1e-14)
    return xj - x1, right(x1) - xj, q / eps * NB * charge(xj, right(x1)) * cm


if __name__ == "__main__":
    gauss = lambda N0, NB, xj: (lambda x, L2=xj**2 / log(N0 / NB): exp(-x * x / L2))
    expo = lambda N0, NB, xj: (lambda x, L=xj / log(N0 / NB): exp(-x / L))

    def erf_c(N0, NB, xj):
        L = brentq(lambda L: log(erfc(xj / L)) - log(NB / N0), 0.1, 2, xtol=1e-14)
        return lambda x: erfc(x / L)

    cases = (("gaussian", gauss, 1e18, 1e15, 2, (0.7, 5, 20, 100)), ("gaussian", gauss, 1e19, 1e16, 1, (20,)),
             ("erfc", erf_c, 1e20, 1e15, 2, (0.7, 100)), ("exponential", expo, 1e18, 1e15, 2, (0.7, 100)))
    print("shape N0 NB xj V | xj - x1 [um] | x2 - xj [um] | |E| [V/cm]")
    for name, make, N0, NB, xj, potentials in cases:
        for V in potentials:
            print(name, f"{N0:g} {NB:g} {xj} {V}", *(f"{v:.9g}" for v in edges(make(N0, NB, xj), NB, xj, V)), flush=True)
