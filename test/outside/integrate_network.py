"""Integrates an exported light-element network with SciPy, independently of the project's code.

Reads one JSON object on standard input: nuclides (id, Z, A, spin, mass_MeV), reactions (reactants, products, kind and
numbers of the forward rate), the thermal history (s = -ln T9, ln dt/ds, ln n_b/N_A), the weak rates, n/n_b of free
neutrons at the start, and the method (Radau or BDF). Computes reverse rates, right-hand side and Jacobian itself.
Writes {id: Y} at the end.
"""
import json
import math
import sys

import numpy as np
from scipy.constants import physical_constants
from scipy.integrate import solve_ivp
from scipy.interpolate import CubicSpline

# Constants from SciPy's own table, not from the project.
K_MEV = physical_constants["Boltzmann constant in eV/K"][0] * 1e-6
HBARC = physical_constants["reduced Planck constant times c in MeV fm"][0] * 1e-13
NA = physical_constants["Avogadro constant"][0]

data = json.load(sys.stdin)
ids = [x["id"] for x in data["nuclides"]]
index = {name: i for i, name in enumerate(ids)}
n = len(ids)
mass = np.array([x["mass_MeV"] for x in data["nuclides"]])
g = np.array([2 * x["spin"] + 1 for x in data["nuclides"]])
A = np.array([x["A"] for x in data["nuclides"]])
Z = np.array([x["Z"] for x in data["nuclides"]])

grid = np.array(data["history"]["s"])
ln_clock = CubicSpline(grid, data["history"]["lnDtds"])
ln_rho = CubicSpline(grid, data["history"]["lnRhoN"])
ln_np = CubicSpline(data["weak"]["s"], data["weak"]["lnNToP"])
ln_pn = CubicSpline(data["weak"]["s"], data["weak"]["lnPToN"])


def states(i, kT):
    """ln of the density of states g (m kT / 2 pi hbar^2)^(3/2) [cm^-3]."""
    return math.log(g[i]) + 1.5 * math.log(mass[i] * kT / (2 * math.pi * HBARC**2))


def factorials(particles):
    return math.prod(math.factorial(particles.count(i)) for i in set(particles))


class Reaction:
    def __init__(self, record):
        self.reactants = [index[x] for x in record["reactants"]]
        self.products = [index[x] for x in record["products"]]
        self.kind = record["kind"]
        if self.kind == "table":
            T9 = np.array(record["T9"])
            self.range = (T9[0], T9[-1])
            self.spline = CubicSpline(np.log(T9), np.log(record["rate"]), bc_type="not-a-knot")
        elif self.kind == "reaclib":
            self.terms = record["terms"]
        else:
            self.decay = record["rate"]
        self.reversible = self.kind != "decay" and len(self.products) <= 3
        self.q = sum(mass[i] for i in self.reactants) - sum(mass[i] for i in self.products)

    def forward(self, T9):
        if self.kind == "decay":
            return self.decay
        if self.kind == "table":
            if T9 < self.range[0]:
                return 0.0
            return math.exp(float(self.spline(math.log(min(T9, self.range[1])))))
        x = min(T9, 10.0)
        c = x ** (1 / 3)
        return sum(
            math.exp(a[0] + a[1] / x + a[2] / c + a[3] * c + a[4] * x + a[5] * x ** (5 / 3) + a[6] * math.log(x))
            for a in self.terms
        )

    def coefficients(self, T9, rho, clock):
        kT = K_MEV * T9 * 1e9
        lam = self.forward(T9)
        nr, np_ = len(self.reactants), len(self.products)
        forward = lam * rho ** (nr - 1) / factorials(self.reactants) * clock
        if not self.reversible or forward == 0:
            return forward, 0.0
        # In equilibrium forward and reverse flow are equal: the ratio of the densities of states over e^(-Q/kT).
        ln = sum(states(i, kT) - math.log(NA) for i in self.reactants)
        ln -= sum(states(i, kT) - math.log(NA) for i in self.products)
        reverse = math.exp(math.log(forward) - (nr - 1) * math.log(rho) + ln - self.q / kT + (np_ - 1) * math.log(rho))
        return forward, reverse


reactions = [Reaction(r) for r in data["reactions"]]
NP, PP = index["n"], index["p"]


def coefficients(s):
    T9 = math.exp(-s)
    rho = math.exp(float(ln_rho(s)))
    clock = math.exp(float(ln_clock(s)))
    table = [r.coefficients(T9, rho, clock) for r in reactions]
    weak = (math.exp(float(ln_np(s))) * clock / data["tauN"], math.exp(float(ln_pn(s))) * clock / data["tauN"])
    return table, weak


cache = {}


def at(s):
    if s not in cache:
        if len(cache) > 64:
            cache.clear()
        cache[s] = coefficients(s)
    return cache[s]


def rhs(s, Y):
    table, weak = at(s)
    out = np.zeros(n)
    flow = weak[0] * Y[NP] - weak[1] * Y[PP]
    out[NP] -= flow
    out[PP] += flow
    for r, (f, b) in zip(reactions, table):
        flow = f * math.prod(Y[i] for i in r.reactants)
        if b:
            flow -= b * math.prod(Y[i] for i in r.products)
        for i in r.reactants:
            out[i] -= flow
        for i in r.products:
            out[i] += flow
    return out


def jacobian(s, Y):
    table, weak = at(s)
    out = np.zeros((n, n))
    for column, value in ((NP, weak[0]), (PP, -weak[1])):
        out[NP, column] -= value
        out[PP, column] += value
    for r, (f, b) in zip(reactions, table):
        for coefficient, side in ((f, r.reactants), (-b, r.products)):
            if coefficient == 0:
                continue
            for k, j in enumerate(side):
                rest = side[:k] + side[k + 1 :]
                partial = coefficient * math.prod(Y[i] for i in rest)
                for i in r.reactants:
                    out[i, j] -= partial
                for i in r.products:
                    out[i, j] += partial
    return out


s0, s1 = data["start"], data["end"]
T9 = math.exp(-s0)
kT = K_MEV * T9 * 1e9
rho = math.exp(float(ln_rho(s0)))
Y = np.zeros(n)
Y[NP] = data["freeNeutrons"]
Y[PP] = 1 - data["freeNeutrons"]
bound = 0.0
for i in range(n):
    if A[i] == 1:
        continue
    N = A[i] - Z[i]
    ln = states(i, kT) - math.log(NA) + (A[i] - 1) * math.log(rho)
    ln += Z[i] * (math.log(Y[PP]) - states(PP, kT) + math.log(NA)) + N * (math.log(Y[NP]) - states(NP, kT) + math.log(NA))
    ln += (Z[i] * mass[PP] + N * mass[NP] - mass[i]) / kT
    Y[i] = math.exp(ln) if ln > -700 else 0.0
    bound += A[i] * Y[i]
Y[NP] *= 1 - bound
Y[PP] *= 1 - bound

solution = solve_ivp(rhs, (s0, s1), Y, method=data["method"], jac=jacobian, rtol=data["rtol"], atol=data["atol"], first_step=1e-6)
if not solution.success:
    sys.exit(f"{data['method']}: {solution.message}")
json.dump({"Y": dict(zip(ids, solution.y[:, -1])), "steps": len(solution.t) - 1}, sys.stdout)
