# SPDX-License-Identifier: MIT
"""How far the point where the majority density is half the doping lies inside the point at which the field of the depleted part, drawn on as a
straight line, would reach zero; uniform side without minority carriers, in Debye lengths.
u = (psi_far - psi)/Vt obeys (L_D u')^2 = 2 (u - 1 + exp(-u)); the line is (L_D u')^2 = 2 (u - 1); n/N = exp(-u)."""
from mpmath import exp, log, mp, mpf, nstr, quad, sqrt

mp.dps = 30
U = mpf(60)  # exp(-60): the line and the curve agree to all digits kept
curve = quad(lambda u: 1 / sqrt(2 * (u - 1 + exp(-u))), [log(2), 1, 1.5, 2, 4, 8, 16, 32, U])
print("half-depletion point inside the zero of the line [Debye lengths]:", nstr(sqrt(2 * (U - 1)) - curve, 15))
