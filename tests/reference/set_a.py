# SPDX-License-Identifier: MIT
"""Constants of "set A", the round material of the verification tests: T = 300 K, relative permittivity 11.7,
intrinsic density 1e10 cm-3, Boltzmann statistics. Lengths in cm. Constants: SI 2019 and CODATA 2018."""
from mpmath import mp, mpf

mp.dps = 40
q = mpf("1.602176634e-19")
k = mpf("1.380649e-23")
eps0 = mpf("8.8541878128e-14")
eps = mpf("11.7") * eps0
ni = mpf("1e10")
T = mpf(300)
Vt = k * T / q
