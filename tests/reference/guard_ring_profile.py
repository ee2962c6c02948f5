# SPDX-License-Identifier: MIT
"""The guard-ring demo from its recipe alone, by SciPy's quadrature: junction, dose, peak and gradient, sheet resistance.
Ranges: published rows of boron at 60 keV, 0.1903 and 0.0556 um [Gibbons1975, from memory]; silicon per oxide, ranges
0.1073/0.1193 at 30 and 0.3244/0.3621 at 100 keV, straight in ln E (computed); diffusivities D0 1.0, 4.70, 4.58 cm2/s and 3.5, 3.68, 3.88 eV for B, P,
Sb [Plummer2000, from memory]; ramps straight from 600 degC, trapezoids of 1 s; Masetti's mobilities [Masetti1983, from
memory]. Both ends reflect. Prints JSON in um, cm-2, cm-3, cm-4, ohm."""
import json
from math import cos, erf, exp, log, pi, sqrt

import numpy as np
from scipy.integrate import quad
from scipy.optimize import brentq, minimize_scalar

q, k = 1.602176634e-19, 1.380649e-23
L = 18e-4


def D(D0, Ea, celsius):
    return D0 * exp(-Ea * q / (k * (celsius + 273.15)))


def budget(D0, Ea, boron):
    ramp = np.linspace(600, 1100, 901)
    values = [D(D0, Ea, c) for c in ramp]
    area = sum(0.5 * (a + b) for a, b in zip(values, values[1:]))
    total = D(D0, Ea, 1100) * 3600 + 2 * area
    return total + (D(D0, Ea, 1000) * 1800 if boron else 0)


def images(f):
    """Sum over reflections at 0 and L of a profile spread in an infinite body."""
    return lambda x: sum(f(s * x + 2 * m * L) for m in range(-2, 3) for s in (1, -1))


def slab(N, a, b, S):
    r = 2 * sqrt(S)
    return lambda x: N / 2 * (erf((b - x) / r) - erf((a - x) / r))


SB, SP, SSb = budget(1.0, 3.5, True), budget(4.70, 3.68, False), budget(4.58, 3.88, False)
P = images(slab(3e15, 0, 8e-4, SP))
Sb = images(slab(2e18, 8e-4, L, SSb))
tilt = cos(7 * pi / 180)
Rp, s = 0.1903e-4 * tilt, 0.0556e-4 * tilt
oxide = 0.1073 / 0.1193 + (0.3244 / 0.3621 - 0.1073 / 0.1193) * log(60 / 30) / log(100 / 30)
centre = Rp - oxide * 20e-7


def boron(x):
    # The Gaussian cut at the surface, convolved with the kernel of variance 2 S: a Gaussian times an error function.
    v = s * s + 2 * SB
    half = 0.5 * (1 + erf((centre * 2 * SB + x * s * s) / (s * sqrt(2 * SB) * sqrt(2) * sqrt(v))))
    return 4e14 / sqrt(2 * pi * v) * exp(-((x - centre) ** 2) / (2 * v)) * half


B = images(boron)
net = lambda x: P(x) + Sb(x) - B(x)


def masetti(total, holes):
    if holes:
        return (44.9 * exp(-9.23e16 / total) + 470.5 / (1 + (total / 2.23e17) ** 0.719)
                - 29.0 / (1 + (6.10e20 / total) ** 2.00))
    return (68.5 + (1414 - 68.5) / (1 + (total / 9.20e16) ** 0.711) - 56.1 / (1 + (3.41e20 / total) ** 1.98))


xj = brentq(net, 0.5e-4, 4e-4, xtol=1e-20, rtol=1e-15)
h = 1e-7
gradient = (8 * (net(xj + h) - net(xj - h)) - (net(xj + 2 * h) - net(xj - 2 * h))) / (12 * h)


def over(f, a, b):
    cuts = np.linspace(a, b, 60)
    return sum(quad(f, u, v, epsabs=0, epsrel=1e-12)[0] for u, v in zip(cuts, cuts[1:]))


def conductivity(x):
    total = P(x) + Sb(x) + B(x)
    return q * abs(net(x)) * masetti(total, net(x) < 0)


regions = []
for a, b in ((0, xj), (xj, L)):
    x = np.linspace(a, b, 20001)
    best = x[np.argmax([abs(net(v)) for v in x])]
    step = (b - a) / 20000
    found = minimize_scalar(lambda v: -abs(net(v)), bounds=(max(a, best - step), min(b, best + step)), method="bounded",
                            options={"xatol": 1e-14})
    regions.append({"from": a * 1e4, "to": b * 1e4, "dose": abs(over(net, a, b)),
                    "peak": max(-found.fun, abs(net(best))), "value": 1 / over(conductivity, a, b)})
print(json.dumps({"depth": xj * 1e4, "gradient": gradient, "regions": regions, "boron_dose": over(B, 0, L)}))
