"""Integrates the three-level recombination equations with SciPy, from published formulas and CODATA values alone.

Variables are the neutral fractions 1 - x_p and x_HeI and the ratio T_m/T_r against ln(1 + z); the program under test
uses logits, its own integrator and its own constants. He III follows Saha. Reads a JSON list of cosmologies, answers
with x_e, T_m/T_r at the redshifts asked for, and z_star, z_drag.
"""
import json
import sys

import numpy as np
from scipy import constants as si
from scipy.integrate import quad, solve_ivp
from scipy.optimize import brentq

k, h, c, G, u = si.k, si.h, si.c, si.G, si.atomic_mass
m_e, hbar = si.m_e, si.hbar
sigma_T = si.physical_constants["Thomson cross section"][0]
Mpc = 3.0856775814913673e22
H100 = 1e5 / Mpc
a_rad = np.pi**2 * k**4 / (15 * hbar**3 * c**3)
M_H, M_HE = 1.00782503190 * u, 4.00260325413 * u


class Model:
    def __init__(self, p):
        self.p = p
        T0, neff = p["tCmb"], p["nEff"]
        self.T0 = T0
        rho1 = 3 * H100**2 / (8 * np.pi * G)
        self.wg = a_rad * T0**4 / c**2 / rho1
        self.wn = self.wg * 7 / 8 * (4 / 11) ** (4 / 3) * neff
        Tnu = (4 / 11) ** (1 / 3) * (neff / 3) ** 0.25 * T0 if neff > 0 else 1.0
        self.y0 = p["sumMnu"] * si.e / (k * Tnu) if neff > 0 else 0.0
        x, w = np.polynomial.laguerre.laggauss(60)
        self.x, self.w = x, w * np.exp(x) * x**2 / (np.exp(x) + 1)
        self.norm = 7 * np.pi**4 / 120
        # The massive density on a grid of ln a, by spline: only for speed.
        grid = np.linspace(-20, 0, 4001)
        from scipy.interpolate import CubicSpline

        self.massive = CubicSpline(grid, [self.nu(np.exp(g)) for g in grid])
        self.wm = p["omegaB"] + p["omegaC"]
        self.wl = (p["h0"] / 100) ** 2 - self.wg - self.wn * (2 / 3 + self.nu(1.0) / 3) - self.wm
        Y = p["ypMass"]
        self.nH0 = (1 - Y) * p["omegaB"] * rho1 / M_H
        self.f = Y / (M_HE / M_H * (1 - Y))

    def nu(self, a):
        if self.y0 == 0:
            return 1.0
        return float(np.sum(self.w * np.sqrt(self.x**2 + (self.y0 * a) ** 2)) / self.norm)

    def H(self, z):
        a = 1 / (1 + z)
        third = self.massive(np.log(a)) / 3
        return H100 * np.sqrt((self.wg + self.wn * (2 / 3 + third)) / a**4 + self.wm / a**3 + self.wl)

    def saha(self, z):
        """x_e, neutral H, neutral He per H in equilibrium, by bisection of charge balance."""
        T, n = self.T0 * (1 + z), self.nH0 * (1 + z) ** 3
        th = (2 * np.pi * m_e * k * T / h**2) ** 1.5
        S = lambda g, wavenumber: g * th * np.exp(-h * c * wavenumber / (k * T)) / n
        s0, s1, s2 = S(1, RH), S(4, RHE1), S(1, RHE2)
        def charge(x):
            d = 1 + s1 / x + s1 * s2 / x**2
            return s0 / (x + s0) + self.f * (s1 / x + 2 * s1 * s2 / x**2) / d - x
        xe = brentq(charge, 1e-3, 1 + 2 * self.f + 1e-9, xtol=1e-15, rtol=1e-14)
        return xe, xe / (xe + s0), self.f / (1 + s1 / xe + s1 * s2 / xe**2)


RH, RLYA = 1.09678771743e7, 8.225916453e6
RHE1, RHE2 = 1.9831066637e7, 4.3890887884e7
R21S, R21P, R23S, R23P = 1.66277434e7, 1.7113489697e7, 1.598559734e7, 1.690868429e7
A_S, A_T = 1.798287e9, 177.58


def stobbe(wavenumber):
    r = wavenumber / RH
    e = np.sqrt(r - 1)
    return 6.30432e-22 * r**-4 * np.exp(4 - 4 * np.arctan(e) / e) / (1 - np.exp(-2 * np.pi / e))


def helium_alpha(T, logq, p):
    s1, s2 = np.sqrt(T / 10**5.114), np.sqrt(T / 3)
    return 10**logq / (s2 * (1 + s2) ** (1 - p) * (1 + s1) ** (1 + p))


def helium_iii(m, z, xp, ionised):
    """x_e and He II per H where He III is in equilibrium with He II."""
    T, n = m.T0 * (1 + z), m.nH0 * (1 + z) ** 3
    s = (2 * np.pi * m_e * k * T / h**2) ** 1.5 * np.exp(-h * c * RHE2 / (k * T)) / n
    b = s - xp - ionised
    q = s * (xp + 2 * ionised)
    xe = 2 * q / (b + np.sqrt(b * b + 4 * q)) if b > 0 else (-b + np.sqrt(b * b + 4 * q)) / 2
    return xe, ionised * xe / (xe + s)


def rates(m, lnz, y):
    z = np.exp(lnz) - 1
    n1, xhe1, ratio = y
    xp, ion = 1 - n1, max(m.f - xhe1, 0.0)
    Tr = m.T0 * (1 + z)
    T = Tr * ratio
    n, H = m.nH0 * (1 + z) ** 3, m.H(z)
    xe, xhe2 = helium_iii(m, z, xp, ion)
    B = lambda wavenumber: np.exp(-h * c * wavenumber / (k * T))
    th = (2 * np.pi * m_e * k * T / h**2) ** 1.5
    t = T / 1e4
    alpha = m.p["alphaFactor"] * 4.309e-19 * t**-0.6166 / (1 + 0.6703 * t**0.53)
    beta = alpha * th * B(RH - RLYA)
    K = 1 / (RLYA**3 * 8 * np.pi * H)
    L = 8.2245809
    C = (1 + K * L * n * n1) / (1 + K * (L + beta) * n * n1)
    dxp = -C * (alpha * n * xe * xp - beta * n1 * B(RLYA))
    dhe2 = 0.0
    if xhe2 > 1e-13 * m.f:
        net = 0.0
        for q, p, A, level, line, g, g_line, two, a, b in (
            (-16.744, 0.711, A_S, R21S, R21P, 1.0, 3.0, 51.3, 0.36, 0.86),
            (-16.306, 0.761, A_T, R23S, R23P, 3.0, 1.0, 0.0, 0.66, 0.90),
        ):
            al = helium_alpha(T, q, p)
            be = 4 / g * al * th * B(RHE1 - level)
            tau = 3 * A * n * xhe1 / (line**3 * 8 * np.pi * H)
            PS = -np.expm1(-tau) / tau if tau > 1e-10 else 1.0
            width = line * np.sqrt(2 * k * T / M_HE)
            gamma = 3 * A * n * xhe1 / (line**2 * 8 * np.pi**1.5 * stobbe(line) * width * n * n1)
            R = g_line * A * (PS + 1 / (1 + a * gamma**b)) * B(line - level)
            Cx = (R + two) / (R + two + be)
            net += Cx * (al * n * xe * xhe2 - g * be * xhe1 * B(level))
        dhe2 = -net
    compton = 8 * sigma_T * a_rad * Tr**4 / (3 * m_e * c) * xe / (1 + m.f + xe)
    dT = -2 * H * T + compton * (Tr - T)
    # d/d ln(1+z) = -1/H d/dt; T_m/T_r changes by the cooling of T_r too.
    return [dxp / H, dhe2 / H, -(dT / (H * Tr)) - ratio]


def integrate(p):
    m = Model(p)
    start = 3500.0
    xe, n1, xhe1 = m.saha(start)
    gamma = 8 * sigma_T * a_rad * (m.T0 * (1 + start)) ** 4 / (3 * m_e * c) * xe / (1 + m.f + xe) / m.H(start)
    y0 = [n1, xhe1, 1 - 1 / (1 + gamma)]
    points = np.log1p(np.array(p["z"]))[::-1]
    s = solve_ivp(
        lambda x, y: rates(m, x, y), (np.log1p(start), 0), y0, method="Radau",
        rtol=1e-9, atol=[1e-15, 1e-15, 1e-12], dense_output=True, first_step=1e-6,
    )
    if not s.success:
        raise RuntimeError(s.message)

    def xe_at(x):
        z = np.expm1(x)
        if z > start:
            return m.saha(z)[0]
        n1, xhe1, _ = s.sol(x)
        return helium_iii(m, z, 1 - n1, max(m.f - xhe1, 0.0))[0]

    # Depths by Simpson's rule on an even grid of ln(1 + z).
    grid = np.linspace(0, np.log1p(1600), 8001)
    x_e = np.array([xe_at(g) for g in grid])
    thomson = c * sigma_T * m.nH0 * np.exp(3 * grid) * x_e / np.array([m.H(np.expm1(g)) for g in grid])
    R0 = 3 * p["omegaB"] / (4 * m.wg)

    def unit(integrand):
        from scipy.interpolate import CubicSpline

        depth = CubicSpline(grid, integrand).antiderivative()
        return float(np.expm1(brentq(lambda x: depth(x) - depth(0) - 1, np.log1p(500), grid[-1])))

    return {
        "xe": [float(xe_at(x)) for x in points[::-1]],
        "ratio": [float(s.sol(x)[2]) for x in points[::-1]],
        "zStar": unit(thomson),
        "zDrag": unit(thomson * np.exp(grid) / R0),
    }


json.dump([integrate(p) for p in json.load(sys.stdin)], sys.stdout)
