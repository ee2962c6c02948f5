# SPDX-License-Identifier: MIT
"""Depletion approximation of diffused junctions by quadrature: p profile N0 f(x) into uniform n doping NB, junction at xj.
Edges x1 < xj < x2 with equal and opposite charge and V = (q/eps) int (x - xj) (NB - N0 f) dx. Lengths in um, set A."""
from mpmath import erfc, exp, findroot, log, mpf, nstr, quad, sqrt
from set_a import eps, q


def edges(f, NB, xj, V):
    """(xj - x1, x2 - xj [um], |E| [V/cm]) at the total potential V."""
    net = lambda x: NB * (1 - f(x) / f(xj))
    cm = mpf("1e-4")
    charge = lambda a, b: quad(net, [a, (a + b) / 2, b]) * cm

    def right(x1):
        wanted = -charge(x1, xj)
        return findroot(lambda x: charge(xj, x) - wanted, xj + (xj - x1) * 2 + mpf("0.1"))

    def residual(x1):
        x2 = right(x1)
        return q / eps * quad(lambda x: (x - xj) * net(x), [x1, xj, (xj + x2) / 2, x2]) * cm**2 / V - 1

    low, high = mpf(0), xj * (1 - mpf("1e-3"))
    for _ in range(110):
        middle = (low + high) / 2
        if residual(middle) > 0:
            low = middle
        else:
            high = middle
    return xj - low, right(low) - xj, q / eps * charge(xj, right(low))


if __name__ == "__main__":
    from mpmath import mp

    mp.dps = 20
    gauss = lambda N0, NB, xj: (lambda x, L2=xj**2 / log(N0 / NB): exp(-x * x / L2))
    expo = lambda N0, NB, xj: (lambda x, L=xj / log(N0 / NB): exp(-x / L))
    def erf_c(N0, NB, xj):
        L = findroot(lambda L: log(erfc(xj / L)) - log(NB / N0), mpf("0.64"))
        return lambda x: erfc(x / L)
    cases = (("gaussian", gauss, "1e18", "1e15", 2, ("0.7", 5, 20, 100)), ("gaussian", gauss, "1e19", "1e16", 1, (20,)),
             ("erfc", erf_c, "1e20", "1e15", 2, ("0.7", 100)), ("exponential", expo, "1e18", "1e15", 2, ("0.7", 100)))
    for name, make, N0, NB, xj, potentials in cases:
        N0, NB, xj = mpf(N0), mpf(NB), mpf(xj)
        for V in potentials:
            print(name, nstr(N0, 3), nstr(NB, 3), nstr(xj, 3), V, *(nstr(v, 9) for v in edges(make(N0, NB, xj), NB, xj, mpf(V))), flush=True)
