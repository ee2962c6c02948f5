# SPDX-License-Identifier: MIT
"""Current of Shockley-Read-Hall recombination and generation in the layer of an abrupt junction of two uniform sides,
flat quasi-Fermi levels, trap at the intrinsic level, one lifetime: J = q int (U - U_far) dpsi/|E(psi)|, with E from the
first integral (poisson_boltzmann_plane.py). The far value is subtracted on each side: what is left there is carried by
diffusion and counted separately."""
from mpmath import cosh, mpf, nstr, quad
from poisson_boltzmann_plane import plane
from set_a import ni, q, Vt


def layer_current(D1, D2, V, tau):
    nie, psi1, psi2, psi0, field = plane(D1, D2, V)
    # Divided by nie: U = (nie^2 - ni^2) / (tau (2 nie cosh(psi/Vt) + 2 ni)), no cancellation at 40 digits.
    rate = lambda psi: (nie**2 - ni**2) / (tau * (2 * nie * cosh(psi / Vt) + 2 * ni))
    grid = lambda a, b, n=60: [a + (b - a) * mpf(i) / n for i in range(n + 1)]
    left = quad(lambda s: (rate(s) - rate(psi1)) / field(s, 1), grid(psi1, psi0))
    right = quad(lambda s: (rate(s) - rate(psi2)) / field(s, 2), grid(psi0, psi2))
    return q * (left + right)


if __name__ == "__main__":
    print("set A, tau 1e-7 s: D1 D2 V | layer current [A/cm2]")
    for D1, D2, biases in (("-1e17", "1e17", ("0.2", "0.3", "0.4", "0.5", "-0.5", "-1", "-5", "-10")),
                           ("-1e18", "1e16", ("0.3", "0.4", "0.5", "-5"))):
        for V in biases:
            print(f"{D1:>6} {D2:>6} {V:>5}  {nstr(layer_current(D1, D2, V, mpf('1e-7')), 12)}")
