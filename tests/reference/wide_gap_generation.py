# SPDX-License-Identifier: MIT
"""Generation current of a wide-gap p-n diode, where the intrinsic density is about 1e-8 cm-3 and the product of the
carriers in the space charge at -800 V is far below the smallest double: gap 3.26 eV, Nc 1.7e19, Nv 2.5e19 cm-3, relative
permittivity 9.7, p 1e18 | n 5e15 cm-3, both lifetimes 1e-7 s, trap at the intrinsic level, Boltzmann, 300 K.
J = q int (U - U_far) dpsi/|E(psi)|, E from the first integral with nie = ni exp(V/2Vt). 40 digits and mpmath's unlimited
exponents; the quadrature is split where the rate switches on and off, at psi = +-V/2 (a few Vt wide)."""
from mpmath import asinh, cosh, exp, fabs, mpf, nstr, quad, sqrt
from set_a import Vt, eps0, q

Nc, Nv, Eg, tau = mpf("1.7e19"), mpf("2.5e19"), mpf("3.26"), mpf("1e-7")
eps = mpf("9.7") * eps0
ni = sqrt(Nc * Nv) * exp(-Eg / (2 * Vt))
D1, D2 = mpf("-1e18"), mpf("5e15")


def generation_current(V):
    nie = ni * exp(mpf(V) / (2 * Vt))
    psi1, psi2 = Vt * asinh(D1 / (2 * nie)), Vt * asinh(D2 / (2 * nie))
    S1, S2 = sqrt(D1**2 + 4 * nie**2), sqrt(D2**2 + 4 * nie**2)
    psi0 = (D2 * psi2 - D1 * psi1 + Vt * (S1 - S2)) / (D2 - D1)

    def field(psi, side):
        S, D, far = (S1, D1, psi1) if side == 1 else (S2, D2, psi2)
        return sqrt(fabs(2 * q / eps * (Vt * (2 * nie * cosh(psi / Vt) - S) - D * (psi - far))))

    rate = lambda psi: (nie**2 - ni**2) / (tau * (2 * nie * cosh(psi / Vt) + 2 * ni))

    def points(low, high):
        edges = {low, high}
        for centre in (mpf(V) / 2, -mpf(V) / 2):
            for step in (-60, -40, -25, -15, -10, -6, -3, 0, 3, 6, 10, 15, 25, 40, 60):
                place = centre + step * Vt
                if low < place < high:
                    edges.add(place)
        edges |= {low + (high - low) * mpf(i) / 16 for i in range(17)}
        # Near a far end the field goes to zero linearly and the rate falls off exponentially: finer steps there.
        for end, inwards in ((low, 1), (high, -1)):
            edges |= {end + inwards * Vt * s for s in (mpf("0.01"), mpf("0.1"), 1, 3, 10) if low < end + inwards * Vt * s < high}
        return sorted(edges)

    left = quad(lambda s: (rate(s) - rate(psi1)) / field(s, 1), points(psi1, psi0))
    right = quad(lambda s: (rate(s) - rate(psi2)) / field(s, 2), points(psi0, psi2))
    return q * (left + right), field(psi0, 2), psi2 - psi1


if __name__ == "__main__":
    print("ni [cm-3]", nstr(ni, 15))
    print("V | layer current [A/cm2] | |E0| [V/cm] | psi2 - psi1 [V]")
    for V in (-1, -10, -100, -400, -800):
        current, E0, barrier = generation_current(V)
        print(f"{V:>5}  {nstr(current, 12)}  {nstr(E0, 12)}  {nstr(barrier, 15)}")
