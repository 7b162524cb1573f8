/** Finite-temperature QED: pressure of order e^2 (with the logarithmic term) and e^3, energy density, derivatives. */
import { FINE_STRUCTURE } from "../constants/codata.ts";
import { gaussLegendre } from "../numerics/quadrature.ts";

/** Pressure and what follows from it by rho = -P + dP/dlnT; natural units. */
export interface Thermodynamics {
  /** Pressure [MeV4]. */
  readonly P: number;
  /** Energy density [MeV4]. */
  readonly rho: number;
  /** d rho/d ln T at fixed electron mass [MeV4]. */
  readonly dRhoDLnT: number;
}

/** e^2 = 4 pi alpha. */
const E2 = 4 * Math.PI * FINE_STRUCTURE.value;
/** Above this m_e/T every term is below e^-100 of the photons and is returned as zero. */
const VANISHING_X = 100;
const NOTHING: Thermodynamics = { P: 0, rho: 0, dRhoDLnT: 0 };
/** Kinetic energy, in T, beyond which the Fermi-Dirac function vanishes (e^-50). */
const KINETIC_RANGE = 50;

/** Gauss points of integrals over the energy E = m + T v^2, a substitution that removes the square-root end point. */
export const ENERGY_POINTS = (() => {
  const { nodes, weights } = gaussLegendre(120);
  const half = Math.sqrt(KINETIC_RANGE) / 2;
  const v = nodes.map((y) => half * (1 + y));
  return {
    v,
    /** Kinetic energy over T. */
    kinetic: v.map((w) => w * w),
    boltzmann: v.map((w) => Math.exp(-w * w)),
    /** Weight of dE/T = 2 v dv. */
    weight: weights.map((w, i) => 2 * half * w * v[i]),
  };
})();

/** N = 2/(e^u + 1) at u = E/T with e = e^-u, and its first two derivatives with respect to ln T, written to `out`. */
function occupation(u: number, e: number, out: Float64Array): void {
  const f = e / (1 + e);
  const w = f / (1 + e); // f (1 - f)
  out[0] = 2 * f;
  out[1] = 2 * u * w;
  out[2] = 2 * u * w * (u * (1 - 2 * f) - 1);
}

/** [F, dF/dlnT, d2F/dlnT2] of an integral of N over the energy. */
type Derivatives = [number, number, number];

/** I1 = int p^2/E N dp and J = int (p^2 + E^2)/E N dp, in units of T^2, with their ln T derivatives at fixed mass. */
function momentumIntegrals(x: number): { I1: Derivatives; J: Derivatives } {
  const { v, kinetic, boltzmann, weight } = ENERGY_POINTS;
  const threshold = Math.exp(-x);
  const I1: Derivatives = [0, 0, 0];
  const J: Derivatives = [0, 0, 0];
  const N = new Float64Array(3);
  for (let i = 0; i < v.length; i++) {
    const u = x + kinetic[i];
    const p = v[i] * Math.sqrt(2 * x + kinetic[i]);
    occupation(u, threshold * boltzmann[i], N);
    const ofI1 = weight[i] * p; // p^2/E dp = p dE
    const ofJ = (weight[i] * (p * p + u * u)) / p;
    for (let k = 0; k < 3; k++) {
      I1[k] += ofI1 * N[k];
      J[k] += ofJ * N[k];
    }
  }
  return { I1, J };
}

/** zeta(3)/(4 pi^2) = -zeta'(-2) and zeta'(-4)/12 = zeta(5)/(16 pi^4): end corrections of a logarithmic singularity. */
const SECOND_END = 1.2020569031595942 / (4 * Math.PI ** 2);
const FOURTH_END = 1.0369277551433699 / (16 * Math.PI ** 4);

/**
 * L = m^2 int int (p p'/(E E')) ln|(p + p')/(p - p')| N N' dp dp' in units of T^4, with its ln T derivatives. With
 * p = m sinh(theta), h = p N: L = -(m^2/2) int int over the plane of h h' ln|tanh((theta - theta')/2)|, by the
 * trapezoidal rule with the end corrections of a logarithmic singularity on the diagonal and its neighbours.
 * @see Navot 1962, J. Math. Phys. 41, 155 (trapezoidal rule at a logarithmic singularity)
 */
function logIntegral(x: number): Derivatives {
  const step = 0.2 / Math.sqrt(1 + x / 4);
  const n = Math.ceil(Math.acosh(1 + KINETIC_RANGE / x) / step);
  const kernel = new Float64Array(2 * n + 1);
  kernel[0] = Math.log(step / (4 * Math.PI));
  for (let k = 1; k <= 2 * n; k++) kernel[k] = Math.log(Math.tanh((k * step) / 2));
  kernel[0] += 2.5 * SECOND_END + 6 * FOURTH_END;
  kernel[1] -= (4 / 3) * SECOND_END + 4 * FOURTH_END;
  kernel[2] += SECOND_END / 12 + FOURTH_END;
  const h = [new Float64Array(n + 1), new Float64Array(n + 1), new Float64Array(n + 1)];
  const N = new Float64Array(3);
  for (let i = 1; i <= n; i++) {
    const u = x * Math.cosh(i * step);
    occupation(u, Math.exp(-u), N);
    for (let k = 0; k < 3; k++) h[k][i] = x * Math.sinh(i * step) * N[k];
  }
  let s00 = 0;
  let s01 = 0;
  let s02 = 0;
  let s11 = 0;
  for (let i = 1; i <= n; i++) {
    let a = 0;
    let b = 0;
    for (let j = 1; j <= n; j++) {
      const K = kernel[Math.abs(i - j)] - kernel[i + j]; // h is odd in theta
      a += h[0][j] * K;
      b += h[1][j] * K;
    }
    s00 += h[0][i] * a;
    s01 += h[1][i] * a;
    s02 += h[2][i] * a;
    s11 += h[1][i] * b;
  }
  const area = -((x * step) ** 2);
  return [area * s00, 2 * area * s01, 2 * area * (s02 + s11)];
}

/** From P/T^4 as a sum of terms already differentiated: P, dP/dlnT, d2P/dlnT2 -> thermodynamics. */
function fromPressure(T: number, [P, P1, P2]: Derivatives): Thermodynamics {
  const T4 = T ** 4;
  return { P: P * T4, rho: (P1 - P) * T4, dRhoDLnT: (P2 - P1) * T4 };
}

/**
 * QED pressure of order e^2 of the e+- photon plasma,
 * P2 = -e^2 T^2 I1/(12 pi^2) - e^2 I1^2/(8 pi^4) + e^2 m^2/(16 pi^4) int int (p p'/(E E')) ln|(p+p')/(p-p')| N N' dp dp',
 * with N = 2/(e^(E/T) + 1), I1 = int p^2/E N dp. Massless limit -5 e^2 T^4/288.
 */
function secondOrder(x: number, [I, I1, I2]: Derivatives): Derivatives {
  const [L, L1, L2] = logIntegral(x);
  const a = -E2 / (12 * Math.PI ** 2);
  const b = -E2 / (8 * Math.PI ** 4);
  const c = E2 / (16 * Math.PI ** 4);
  return [
    a * I + b * I * I + c * L,
    a * (2 * I + I1) + 2 * b * I * I1 + c * L1,
    a * (4 * I + 4 * I1 + I2) + 2 * b * (I1 * I1 + I * I2) + c * L2,
  ];
}

/**
 * QED pressure of order e^3 (screening), P3 = e^3 T/(12 pi^4) [int (p^2 + E^2)/E N dp]^(3/2).
 * Massless limit e^3 T^4/(12 pi 3^1.5).
 */
function thirdOrder([J, J1, J2]: Derivatives): Derivatives {
  const P = (E2 ** 1.5 / (12 * Math.PI ** 4)) * J ** 1.5;
  const growth = 1 + (1.5 * J1) / J;
  return [P, P * growth, P * (growth * growth + 1.5 * (J2 / J - (J1 / J) ** 2))];
}

/**
 * Finite-temperature QED terms of the e+- photon plasma of order e^2 (logarithmic term included) and e^3, each with its
 * pressure P, rho = -P + T dP/dT and d rho/d ln T, all by quadrature; relative accuracy 1e-8.
 * @param TMeV k_B T [MeV], > 0
 * @param mass electron mass [MeV]
 * @see Heckler 1994, Phys. Rev. D 49, 611; Fornengo, Kim & Song 1997, Phys. Rev. D 56, 5123; Bennett et al. 2020,
 *   JCAP 03, 003 (arXiv:1911.04504)
 */
export function qedTerms(TMeV: number, mass: number): { second: Thermodynamics; third: Thermodynamics } {
  const x = mass / TMeV;
  if (x > VANISHING_X) return { second: NOTHING, third: NOTHING };
  const { I1, J } = momentumIntegrals(x);
  return { second: fromPressure(TMeV, secondOrder(x, I1)), third: fromPressure(TMeV, thirdOrder(J)) };
}
