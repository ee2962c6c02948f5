# SPDX-License-Identifier: MIT
"""Two long uniform regions in contact: potential and field at the plane between them, from the first integral of
Poisson's equation with both carriers and flat quasi-Fermi levels (bias V: nie = ni exp(V/2Vt)).

Boltzmann: eps E^2/2 = q [Vt (n + p) - D psi] up to a constant, the same constant at infinity.
Fermi-Dirac: Vt (n + p) becomes Vt (Nc F_3/2 + Nv F_3/2), normalised integrals.
Derivation: d(eps E^2/2)/dpsi = -rho, integrated from the far neutral point. Prints what the C++ tests hold."""
from mpmath import asinh, cosh, exp, findroot, fabs, log, mpf, polylog, sqrt
from set_a import Vt, eps, eps0, ni, q


def plane(D1, D2, V=0):
    """(nie, psi1, psi2, psi0, E(psi, side)) of regions D1 | D2 [cm-3] at bias V."""
    D1, D2 = mpf(D1), mpf(D2)
    nie = ni * exp(mpf(V) / (2 * Vt))
    psi1, psi2 = Vt * asinh(D1 / (2 * nie)), Vt * asinh(D2 / (2 * nie))
    S1, S2 = sqrt(D1**2 + 4 * nie**2), sqrt(D2**2 + 4 * nie**2)
    psi0 = (D2 * psi2 - D1 * psi1 + Vt * (S1 - S2)) / (D2 - D1)

    def field(psi, side):
        S, D, far = (S1, D1, psi1) if side == 1 else (S2, D2, psi2)
        return sqrt(fabs(2 * q / eps * (Vt * (2 * nie * cosh(psi / Vt) - S) - D * (psi - far))))

    return nie, psi1, psi2, psi0, field


def fermi(order, eta):
    """Normalised Fermi-Dirac integral of a half-integer order, from the polylogarithm."""
    return -polylog(mpf(order) + 1, -exp(eta)).real


def plane_fermi_dirac(D1, D2, Nc, Nv, Eg):
    """(contact potential, psi0 - psi1, |E0|) of two uniform regions, Fermi-Dirac, full ionization."""
    D1, D2 = mpf(D1), mpf(D2)
    # psi is counted so that eta_c = psi/Vt - Eg/2Vt and eta_v = -psi/Vt - Eg/2Vt.
    eta = lambda psi: (psi / Vt - Eg / (2 * Vt), -psi / Vt - Eg / (2 * Vt))
    n = lambda psi: Nc * fermi("0.5", eta(psi)[0])
    p = lambda psi: Nv * fermi("0.5", eta(psi)[1])
    pressure = lambda psi: Vt * (Nc * fermi("1.5", eta(psi)[0]) + Nv * fermi("1.5", eta(psi)[1]))

    def neutral(D):
        guess = Eg / 2 + Vt * log(D / Nc) if D > 0 else -Eg / 2 - Vt * log(-D / Nv)
        return findroot(lambda psi: log((n(psi) if D > 0 else p(psi)) / (fabs(D) + (p(psi) if D > 0 else n(psi)))),
                        (guess, guess + Vt / 10))

    psi1, psi2 = neutral(D1), neutral(D2)
    P1, P2 = pressure(psi1), pressure(psi2)
    psi0 = (D2 * psi2 - D1 * psi1 + P1 - P2) / (D2 - D1)
    E0 = sqrt(2 * q / eps * (pressure(psi0) - P2 - D2 * (psi0 - psi2)))
    return psi2 - psi1, psi0 - psi1, E0


if __name__ == "__main__":
    from mpmath import nstr

    show = lambda value: nstr(value, 15)
    rows = [("-1e15", "1e15", 0), ("-1e16", "1e16", 0), ("-1e17", "1e17", 0), ("-1e18", "1e18", 0),
            ("-1e17", "1e16", 0), ("-1e18", "1e16", 0), ("-1e19", "1e16", 0), ("-1e19", "1e15", 0),
            ("-1e19", "1e14", 0), ("-1e16", "1e15", 0),
            ("-1e17", "1e17", -1), ("-1e17", "1e17", -5), ("-1e17", "1e17", -20), ("-1e17", "1e17", "0.3"),
            ("-1e19", "1e15", -5), ("-1e19", "1e15", -50),
            ("1e18", "1e15", 0), ("1e19", "1e14", 0), ("1e17", "1e16", 0), ("2e16", "1e16", 0), ("-1e19", "-1e15", 0)]
    print("set A, Boltzmann: D1 D2 V | barrier [V] | psi0 - psi1 [V] | |E0| [V/cm]")
    for D1, D2, V in rows:
        nie, psi1, psi2, psi0, field = plane(D1, D2, V)
        print(f"{D1:>6} {D2:>6} {V!s:>4}  {show(psi2 - psi1)}  {show(psi0 - psi1)}  {show(field(psi0, 2))}")
    print("Nc 2.86e19, Nv 3.10e19, Eg 1.12 eV, Fermi-Dirac: D1 D2 | barrier [V] | psi0 - psi1 [V] | |E0| [V/cm]")
    for D1, D2 in (("-1e17", "1e17"), ("-1e19", "1e19"), ("-1e20", "1e20"), ("-1e20", "1e16"), ("1e20", "1e16")):
        barrier, step, E0 = plane_fermi_dirac(D1, D2, mpf("2.86e19"), mpf("3.10e19"), mpf("1.12"))
        print(f"{D1:>6} {D2:>6}  {show(barrier)}  {show(step)}  {show(E0)}")
