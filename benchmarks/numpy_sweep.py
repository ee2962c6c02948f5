# SPDX-License-Identifier: MIT
"""A bias sweep of an abrupt silicon diode in NumPy and SciPy: what a good script costs.

    numpy_sweep.py MESH.h5 -o OUT.h5 [--profile] [--compare RESULT.h5]

MESH.h5 is a result file of the program; depths, doping and parameters are read from it, so that both solve the same
discrete equations: one material, Boltzmann statistics, constant mobilities, Shockley-Read-Hall recombination, ohmic
contacts, uniform doping between steps (a step stands in the file as two depths one unit in the last place apart).
Equilibrium, then 100 biases from -0.2 to -20 V and 100 from 0.007 to 0.7 V, each reached from its neighbour by the
tangent and Newton's method in all three unknowns. Written: current, potential, densities, quasi-Fermi levels.

Nothing loops over nodes. The unknowns of a node stand in the order phi_n, phi_p, psi [kT/q]: the matrix then has 3
diagonals below the main one and 5 above, the least work for LAPACK's gbsv (5 and 3 with psi first). gbsv is called
as scipy.linalg.solve_banded calls it, without that function's copy and checks, and its factors are kept for the
tangent. Both carriers share a call wherever they can, since at some hundred nodes calling a NumPy function costs as
much as what it does.

The time printed runs from opening MESH.h5 to the closed OUT.h5, without the imports. On 497 nodes it was 0.13 to
0.14 s, 3.1 Newton iterations a bias and 0.22 ms an iteration: 51 % in the assembly (some 120 NumPy calls on arrays of
500 or 1000 numbers), 27 % in LAPACK, 8 % in taking the step, 7 % in writing, 3 % in reading (measured on an AMD EPYC
of family 26 with NumPy 1.24, whose exponentials use its vector units, SciPy 1.10 and the reference LAPACK 3.11;
OpenBLAS 0.3.21 took twice as long for these narrow bands).

Left out, since this diode never needs it: the straight step for floating regions, series resistance, surface
recombination, exponents beyond the range of a double.
"""
import argparse
import json
import sys
from time import perf_counter

import h5py
import numpy as np
from scipy.linalg import solve_banded
from scipy.linalg.lapack import dgbsv, dgbtrs

# [SI2019], [SI2019], [CODATA2018]: keys as in core/references.md
q, k_B, eps_0 = 1.602176634e-19, 1.380649e-23, 8.8541878128e-12

# The program's own choices: solvers/newton.* and solvers/sweep.cpp give the reasons.
CAP = 10.0  # [kT/q] a longer change of psi grows with its logarithm alone
LEAST_CHANGE, DEEPEST_FALL = -1 + 1e-7, -16.0  # a density falls by exp(16) at most in one step
TOLERANCE, MOST_ITERATIONS, MOST_AT_EQUILIBRIUM = 1e-10, 40, 100
LEAST_STEP = 1e-4  # [kT/q] a bias step is not halved below this

LOWER, UPPER = 3, 5  # diagonals of the matrix
MAIN = LOWER + UPPER  # place of the main one in gbsv's storage, which leaves LOWER rows for its pivoting


def biases():
    """The two branches of the sweep [V], each from zero outward."""
    return [round(-0.2 * k, 3) for k in range(1, 101)], [round(0.007 * k, 3) for k in range(1, 101)]


class Timer:
    """Seconds spent in each part."""

    def __init__(self):
        self.seconds = {}

    def add(self, part, start):
        self.seconds[part] = self.seconds.get(part, 0.0) + perf_counter() - start


class Diode:
    """Coefficients of nodes and cells: SI units, potentials in kT/q. Pairs of carriers have electrons first."""

    def __init__(self, path):
        with h5py.File(path) as file:
            depth, net = file["depth"][:] * 1e-6, file["net_doping"][:] * 1e6
            used, ledger = json.loads(file["structure"][()]), json.loads(file["ledger"][()])
            temperature = json.loads(file["summary"][()])["temperature"]["value"]
        self.refuse_what_is_not_solved_here(used)
        value = {line["parameter"]: line["value"] for line in ledger}
        self.Vt = k_B * temperature / q
        self.ni = value["intrinsic_density at this temperature"] * 1e6
        # 1 / (tau_p (n + n1) + tau_n (p + p1)): the factors of n and p, and the constant.
        self.lifetimes = np.array([[value["hole_lifetime"]], [value["electron_lifetime"]]])
        trap = value["trap_level"] / self.Vt
        self.lifetime_constant = self.ni * float(self.lifetimes[:, 0] @ np.exp([trap, -trap]))

        # Two depths at a step are one node: the doping above it belongs to the cell above, the other to the one below.
        new = np.append(True, np.diff(depth) > 4 * np.spacing(depth[1:]))
        last = np.append(new[1:], True)
        self.position = depth[last]
        self.nodes = self.position.size
        top, bottom = net[last][:-1], net[new][1:]  # doping at both ends of each cell
        h = np.diff(self.position)
        self.dielectric = value["relative_permittivity"] * eps_0 * self.Vt / (q * h)
        mobility = np.array([[value["electron_mobility"]], [value["hole_mobility"]]]) * 1e-4
        self.speed = mobility * self.Vt / h
        self.box = 0.5 * (np.append(h, 0) + np.append(0, h))
        self.dose = 0.5 * (np.append(h * top, 0) + np.append(0, h * bottom))
        self.minus_stiffness = -np.append(self.dielectric, 0) - np.append(0, self.dielectric)
        self.neutral = np.arcsinh(0.5 * np.append(top, bottom[-1]) / self.ni)

    @staticmethod
    def refuse_what_is_not_solved_here(used):
        models = used.get("models", {})
        if not (
            models.get("statistics") == "boltzmann"
            and models.get("mobility") == "constant"
            and models.get("recombination") == ["srh"]
            and len({layer["material"] for layer in used["layers"]}) == 1
            and all(entry["kind"] in ("uniform", "step") for entry in used["doping"])
            and all(set(contact) <= {"kind"} for contact in used.get("contacts", {}).values())
        ):
            sys.exit("numpy_sweep.py: this structure has models, doping or contacts that are not solved here")


class Equations:
    """Residual, matrix and terminal current of a state x (rows phi_n, phi_p, psi; a column a node)."""

    def __init__(self, diode):
        self.diode = diode
        nodes = diode.nodes
        self.density = np.empty((2, nodes))
        self.balance, self.diagonal = np.empty((3, nodes)), np.ones((3, nodes))
        # gbsv's storage, a column of the matrix in a row here: entry (row r of node i, column c of node j) at
        # [j, c, MAIN + 3 (i - j) + r - c]. Entries of both carriers lie side by side.
        self.columns = np.empty((nodes, 3, MAIN + LOWER + 1))
        self.band = self.columns.reshape(3 * nodes, -1).T
        own, upper, lower = self.columns[1:-1], self.columns[2:], self.columns[:-2]
        self.phi_by_phi = [part[:, :2, MAIN + shift].T for part, shift in ((upper, -3), (lower, 3))]
        self.phi_by_psi = [
            part[:, 2, MAIN + shift - 2 : MAIN + shift].T for part, shift in ((upper, -3), (own, 0), (lower, 3))
        ]
        self.psi_by_psi = [part[:, 2, MAIN + shift] for part, shift in ((upper, -3), (lower, 3))]
        self.electrons_by_phi_p, self.holes_by_phi_n = own[:, 1, MAIN - 1], own[:, 0, MAIN + 1]
        self.psi_by_phi_n, self.psi_by_phi_p = own[:, 0, MAIN + 2], own[:, 1, MAIN + 1]
        self.main = self.columns[:, :, MAIN]

    def evaluate(self, x, voltage):
        """Densities, fluxes and rates at x; False when a number is not finite."""
        diode, density = self.diode, self.density
        self.x, self.voltage = x, voltage
        psi = x[2]
        n, p = density
        np.subtract(psi, x[0], out=n)
        np.subtract(x[1], psi, out=p)
        np.exp(density, out=density)
        density *= diode.ni

        # Flux J/q through a cell [ScharfetterGummel1969]: with u, a the changes of psi and phi,
        #     a >= 0:  speed B(-u) c expm1(-a);      a < 0:  -speed B(u) c expm1(a),
        # c the density at the left (holes: right) end where a >= 0, at the other end where not; B(-|u|) = B(|u|) + |u|.
        self.u = u = psi[1:] - psi[:-1]
        a = x[:2, 1:] - x[:2, :-1]
        rising = a >= 0
        self.larger = larger = rising == (u >= 0)  # B(-|u|) is wanted
        self.y = y = np.maximum(np.abs(u), 1e-30)
        self.B = B = y / np.expm1(y)
        self.scale = scale = np.empty_like(a)
        scale[0] = np.where(rising[0], n[:-1], n[1:])
        scale[1] = np.where(rising[1], p[1:], p[:-1])
        scale *= diode.speed
        np.abs(a, out=a)
        np.negative(a, out=a)
        self.e = e = np.expm1(a)
        self.size = size = np.where(larger, B + y, B)
        size *= scale
        size_e = size * e
        self.flux = np.where(rising, size_e, -size_e)

        # Recombination in a box: n p (1 - exp(-d)) in two branches, d = phi_p - phi_n. [ShockleyRead1952], [Hall1952]
        d = x[1] - x[0]
        self.product = product = n * p
        self.weighted = weighted = density * diode.lifetimes
        self.per_time = 1 / (weighted[0] + weighted[1] + diode.lifetime_constant)
        self.boxed = diode.box * self.per_time
        self.rate = np.expm1(-np.abs(d)) * np.where(d < 0, diode.ni**2, -product)
        self.rate *= self.boxed
        return bool(np.isfinite(self.flux.sum() + self.rate.sum()))

    def linearize(self):
        """Residual and matrix of the last evaluation; returns the largest residual as a correction in kT/q."""
        diode, balance, diagonal = self.diode, self.balance, self.diagonal
        flux, e, y, B = self.flux, self.e, self.y, self.B
        inner = slice(1, -1)

        # B'(-|u|) = -1 - B'(|u|). Below 1e-3 the series of B' takes over from its closed form, which cancels there;
        # both are good to 1e-12.
        slope = np.where(y < 1e-3, y * (1 / 6 - y * y / 180) - 0.5, B * (1 - B - y) / y)
        by_u = np.where(self.larger, 1 + slope, -slope)
        by_u *= self.scale
        by_u *= e
        e += 1
        by_a = self.size
        by_a *= e  # with its sign turned
        # c moves with psi - phi (holes: phi - psi) of its own end: derivatives by psi and phi at both ends.
        left, right = np.minimum(flux, 0), np.maximum(flux, 0)
        left[1], right[1] = -right[1], -left[1]
        psi_left, psi_right = left - by_u, right + by_u
        phi_left = np.subtract(by_a, left, out=left)
        minus_phi_right = np.add(by_a, right, out=right)

        weighted, rate = self.weighted, self.rate
        generation = self.boxed * self.product
        weighted *= rate * self.per_time
        rate_by_phi_n, rate_by_phi_p = weighted[0] - generation, generation - weighted[1]
        rate_by_psi = weighted[1] - weighted[0]

        charge = diode.box * self.density
        displacement = diode.dielectric * self.u
        np.subtract(flux[:, 1:], flux[:, :-1], out=balance[:2, inner])
        balance[0] -= rate
        balance[1] += rate
        np.subtract(charge[1], charge[0], out=balance[2])
        balance[2] += diode.dose
        balance[2, inner] += displacement[1:] - displacement[:-1]
        np.add(phi_left[:, 1:], minus_phi_right[:, :-1], out=diagonal[:2, inner])
        diagonal[0] -= rate_by_phi_n
        diagonal[1] += rate_by_phi_p
        np.subtract(diode.minus_stiffness, charge[0], out=diagonal[2])
        diagonal[2] -= charge[1]
        diagonal[:, 0] = diagonal[:, -1] = 1
        balance[:, 0] = self.x[:, 0] - (self.voltage, self.voltage, self.voltage + diode.neutral[0])
        balance[:, -1] = self.x[:, -1] - (0, 0, diode.neutral[-1])
        inverse = 1 / diagonal
        self.residual = balance * inverse

        self.columns.fill(0)
        self.main.fill(1)
        scale = inverse[:, inner]
        minus = -scale
        carriers, minus_carriers, potential = scale[:2], minus[:2], scale[2]
        upper, lower = self.phi_by_phi
        np.multiply(minus_phi_right[:, 1:], minus_carriers, out=upper)
        np.multiply(phi_left[:, :-1], minus_carriers, out=lower)
        upper, own, lower = self.phi_by_psi
        np.multiply(psi_right[:, 1:], carriers, out=upper)
        np.multiply(psi_left[:, :-1], minus_carriers, out=lower)
        between = psi_left[:, 1:] - psi_right[:, :-1]
        between[0] -= rate_by_psi[inner]
        between[1] += rate_by_psi[inner]
        np.multiply(between, carriers, out=own)
        upper, lower = self.psi_by_psi
        np.multiply(diode.dielectric[1:], potential, out=upper)
        np.multiply(diode.dielectric[:-1], potential, out=lower)
        np.multiply(rate_by_phi_p[inner], minus[0], out=self.electrons_by_phi_p)
        np.multiply(rate_by_phi_n[inner], scale[1], out=self.holes_by_phi_n)
        np.multiply(charge[0, inner], potential, out=self.psi_by_phi_n)
        np.multiply(charge[1, inner], potential, out=self.psi_by_phi_p)
        return float(np.abs(self.residual).max())

    def newton_step(self):
        """Solves with the last matrix: the linear step, rows as x. Keeps the factors."""
        right_hand_side = -self.residual.T.ravel()
        self.factors, self.pivots, step, trouble = dgbsv(
            LOWER, UPPER, self.band, right_hand_side, overwrite_ab=True, overwrite_b=True
        )
        if trouble:
            raise ArithmeticError("the linear system is singular")
        return step.reshape(-1, 3).T

    def tangent(self):
        """Derivative of x by the voltage of the top contact, from the last factors."""
        right_hand_side = np.zeros(3 * self.diode.nodes)
        right_hand_side[:3] = 1
        step, _ = dgbtrs(self.factors, LOWER, UPPER, right_hand_side, self.pivots, overwrite_b=True)
        return step.reshape(-1, 3).T

    def current_density(self):
        """J [A m^-2] into the top contact: each carrier's flux where it is scarcest, and recombination between."""
        diode, density = self.diode, self.density
        weight = diode.speed * (density[:, :-1] + density[:, 1:])
        a, b = int(weight[0].argmin()), int(weight[1].argmin())
        between = float(self.rate[min(a, b) + 1 : max(a, b) + 1].sum())
        return q * (self.flux[0, a] + self.flux[1, b] + (between if a <= b else -between))


def log_change(relative_change):
    return np.where(
        relative_change < LEAST_CHANGE, DEEPEST_FALL, np.log1p(np.maximum(relative_change, LEAST_CHANGE))
    )


def has_converged(steps):
    """The step that would come next is below the tolerance."""
    if len(steps) < 2:
        return bool(steps) and steps[-1] <= TOLERANCE
    return steps[-1] <= 1e-4 and steps[-1] * min(1.0, steps[-1] / steps[-2]) <= TOLERANCE


def has_stalled(steps, residual):
    """The step has stopped shrinking at its rounding floor, the residual with it."""
    if len(steps) >= 2 and steps[-1] <= 1e-6 and steps[-1] > 0.3 * steps[-2] and residual <= 1e-6:
        return True
    recent = steps[-4:]
    return len(steps) >= 6 and residual <= 1e-11 and max(recent) <= 1e-4 and min(recent) > 0.1 * max(recent)


class Walk:
    """A solved state that is walked from bias to bias."""

    def __init__(self, diode, timer):
        self.diode, self.timer = diode, timer
        self.equations = Equations(diode)
        self.iterations = 0

    def solve(self, x, voltage):
        """Newton's method from x, in place; the densities take the step. False when it does not converge."""
        equations, timer, steps = self.equations, self.timer, []
        while True:
            start = perf_counter()
            finite = equations.evaluate(x, voltage)
            done = finite and has_converged(steps)
            if finite and not done:
                residual = equations.linearize()
                finite, done = np.isfinite(residual), has_stalled(steps, residual)
            timer.add("assembly", start)
            if done or not finite or len(steps) == MOST_ITERATIONS:
                return bool(done)
            start = perf_counter()
            d = equations.newton_step()
            timer.add("banded solve", start)
            self.iterations += 1

            start = perf_counter()
            psi = d[2]
            r = np.empty((2, self.diode.nodes))  # relative changes of the densities
            np.subtract(psi, d[0], out=r[0])
            np.subtract(d[1], psi, out=r[1])
            longest = float(np.abs(psi).max())
            steps.append(max(longest, float(np.abs(r).max())))
            moved = psi.copy()
            if longest > CAP:
                size = np.maximum(np.abs(psi), CAP)
                moved = np.where(size > CAP, np.copysign(CAP * (1 + np.log(size / CAP)), psi), psi)
            change = log_change(r)
            change = np.array([moved - change[0], moved + change[1], moved])
            change[:, 0], change[:, -1] = d[:, 0], d[:, -1]  # contacts take their values at once
            x += change
            timer.add("step", start)

    def solve_equilibrium(self):
        """Poisson's equation alone from neutrality; the step is shortened until its convex energy stops falling."""
        diode = self.diode
        psi, steps = diode.neutral.copy(), []

        def balance(psi):
            displacement = diode.dielectric * np.diff(psi)
            out = diode.dose - 2 * diode.ni * diode.box * np.sinh(psi)
            out[1:-1] += np.diff(displacement)
            out[0] = out[-1] = 0
            return out

        while len(steps) < MOST_AT_EQUILIBRIUM:
            rest = balance(psi)
            diagonal = -diode.minus_stiffness + 2 * diode.ni * diode.box * np.cosh(psi)
            diagonal[0] = diagonal[-1] = 1
            if has_converged(steps) or has_stalled(steps, float(np.abs(rest / diagonal).max())):
                return np.array([np.zeros_like(psi), np.zeros_like(psi), psi])
            band = np.zeros((3, diode.nodes))
            band[0, 2:], band[1], band[2, :-2] = -diode.dielectric[1:], diagonal, -diode.dielectric[:-1]
            change = solve_banded((1, 1), band, rest)
            self.iterations += 1
            steps.append(float(np.abs(change).max()))
            share, at_start = 1.0, -(rest @ change)
            for _ in range(60 if at_start < 0 else 0):
                slope = -(balance(psi + share * change) @ change)
                if slope <= 0.5 * abs(at_start):
                    break
                share *= 0.25 if slope > 1e3 * abs(at_start) else 0.5
            psi = psi + share * change
        raise ArithmeticError("no equilibrium")

    def stand_at(self, x, voltage):
        """Takes a solved state and factorises there for the next tangent."""
        self.x, self.voltage = x.copy(), voltage
        self.equations.evaluate(self.x, voltage)
        self.equations.linearize()
        self.equations.newton_step()

    def walk_to(self, target):
        """Reaches a voltage [kT/q] by the tangent and Newton's method, in halved steps where the whole one fails."""
        longest = abs(target - self.voltage)
        while self.voltage != target:
            remaining = target - self.voltage
            change = remaining if abs(remaining) <= longest else np.copysign(longest, remaining)
            voltage = target if change == remaining else self.voltage + change
            start = perf_counter()
            d = change * self.equations.tangent()
            self.timer.add("banded solve", start)
            start = perf_counter()
            trial = self.x + d[2]
            trial[0] -= log_change(d[2] - d[0])
            trial[1] += log_change(d[1] - d[2])
            trial[2] = self.x[2] + d[2]
            self.timer.add("step", start)
            if self.solve(trial, voltage):
                self.x, self.voltage = trial, voltage
                continue
            longest = 0.5 * abs(change)
            if longest < LEAST_STEP:
                raise ArithmeticError(f"no convergence at {voltage * self.diode.Vt:.6g} V")
            self.stand_at(self.x, self.voltage)


def write(path, diode, volts, currents, states, densities):
    """The result file: units and signs as in the program's."""
    phi_n, phi_p, psi = np.moveaxis(states, 1, 0)
    fields = {
        "electrostatic_potential": ("V", (psi - psi[:, -1:]) * diode.Vt),
        "electron_density": ("cm-3", densities[:, 0] * 1e-6),
        "hole_density": ("cm-3", densities[:, 1] * 1e-6),
        "electron_quasi_fermi_level": ("eV", -diode.Vt * phi_n),
        "hole_quasi_fermi_level": ("eV", -diode.Vt * phi_p),
    }
    with h5py.File(path, "w") as file:
        for name, unit, values in (("depth", "um", diode.position * 1e6), ("bias", "V", volts)):
            file[name] = values
            file[name].make_scale(name)
            file[name].attrs["units"] = unit
        file["current_density"] = currents * 1e-4
        file["current_density"].attrs["units"] = "A cm-2"
        file["current_density"].dims[0].attach_scale(file["bias"])
        for name, (unit, values) in fields.items():
            variable = file.create_dataset(name, data=values)
            variable.attrs["units"] = unit
            for axis, scale in enumerate(("bias", "depth")):
                variable.dims[axis].attach_scale(file[scale])


def sweep(mesh, output):
    """The whole job; returns seconds, Newton iterations, nodes and the timer."""
    timer = Timer()
    begin = perf_counter()
    diode = Diode(mesh)
    timer.add("reading", begin)
    branches = biases()
    volts = np.array(branches[0] + branches[1])
    currents = np.empty(volts.size)
    states, densities = np.empty((volts.size, 3, diode.nodes)), np.empty((volts.size, 2, diode.nodes))
    walk = Walk(diode, timer)
    start = perf_counter()
    equilibrium = walk.solve_equilibrium()
    timer.add("equilibrium", start)
    point = 0
    for branch in branches:
        walk.stand_at(equilibrium, 0.0)
        for bias in branch:
            walk.walk_to(bias / diode.Vt)
            currents[point] = walk.equations.current_density()
            states[point], densities[point] = walk.x, walk.equations.density
            point += 1
    start = perf_counter()
    write(output, diode, volts, currents, states, densities)
    timer.add("writing", start)
    return perf_counter() - begin, walk.iterations, diode.nodes, timer


def largest_difference(ours, theirs):
    """Largest relative difference of two files' currents: beyond 0.01 V, and at all biases; the biases with it."""
    read = []
    for path in (ours, theirs):
        with h5py.File(path) as file:
            read.append((file["bias"][:], file["current_density"][:]))
    (volts, first), (other_volts, second) = read
    shared = [(k, int(np.abs(other_volts - v).argmin())) for k, v in enumerate(volts)]
    shared = [(k, m) for k, m in shared if abs(other_volts[m] - volts[k]) < 1e-9]
    if not shared:
        sys.exit("numpy_sweep.py: the two files have no bias in common")
    k, m = np.array(shared).T
    difference = np.abs(first[k] / second[m] - 1)
    out = {}
    for name, chosen in (("beyond 0.01 V", np.abs(volts[k]) > 0.01), ("at all biases", np.abs(volts[k]) > 0)):
        worst = int(np.where(chosen, difference, -1).argmax())
        out[name] = float(difference[worst]), float(volts[k][worst]), int(chosen.sum())
    return out


def main():
    parser = argparse.ArgumentParser(description=__doc__.splitlines()[0])
    parser.add_argument("mesh", help="result file of the program with the mesh, the doping and the parameters")
    parser.add_argument("-o", "--output", required=True, help="file to write")
    parser.add_argument("--profile", action="store_true", help="print the share of each part")
    parser.add_argument("--compare", metavar="FILE", help="print the largest difference from this file's currents")
    parser.add_argument("--json", action="store_true", help="print one line of JSON instead")
    options = parser.parse_args()
    try:
        with np.errstate(over="ignore", invalid="ignore"):  # what is not finite shortens the step
            seconds, iterations, nodes, timer = sweep(options.mesh, options.output)
        differences = largest_difference(options.output, options.compare) if options.compare else {}
    except (OSError, ArithmeticError) as trouble:
        sys.exit(f"numpy_sweep.py: {trouble}")
    if options.json:
        print(json.dumps({"seconds": seconds, "iterations": iterations, "nodes": nodes, "differences": differences}))
        return
    print(f"{seconds:.3f} s, {nodes} nodes, {iterations} Newton iterations in all, ", end="")
    print(f"{1e6 * seconds / iterations:.0f} us per Newton iteration")
    if options.profile:
        rest = seconds - sum(timer.seconds.values())
        for part, value in [*timer.seconds.items(), ("the rest", rest)]:
            print(f"  {part:<12} {100 * value / seconds:5.1f} %  {value:.4f} s")
    for name, (difference, volt, count) in differences.items():
        print(f"largest relative difference of currents {name} ({count} points): {difference:.1e} at {volt:g} V")


if __name__ == "__main__":
    main()
