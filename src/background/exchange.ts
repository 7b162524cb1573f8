/** Energy exchange of neutrinos with e+-: the collision integrals of annihilation and scattering, and their table. */
import { requireRange } from "../numerics/check.ts";
import { hermite, notAKnotSlopes } from "../numerics/interpolate.ts";
import { gaussLegendre } from "../numerics/quadrature.ts";
import { EXCHANGE_TABLE } from "./exchange.generated.ts";

/** The four dimensionless integrals at one m_e/T; A: annihilation nu nubar -> e- e+, S: scattering nu e -> nu e. */
export interface ExchangeIntegrals {
  readonly A1: number;
  readonly A2: number;
  readonly S1: number;
  readonly S2: number;
}

/** Gauss points: total energy or momentum, its angle variable, and the energies on either side. */
export interface ExchangePoints {
  readonly outer: number;
  readonly angle: number;
  readonly inner: number;
}

/** Converged to 2e-11 over the whole range of m_e/T, 0 to 60 (tested against doubled points). */
export const EXCHANGE_POINTS: ExchangePoints = { outer: 40, angle: 40, inner: 32 };

/** Largest m_e/T of the direct integrals: A falls as exp(-2 m_e/T), 1e-52 there. */
export const EXCHANGE_MAX_X = 60;

/** Energy above the threshold, in T, beyond which the Boltzmann factor makes every integrand vanish. */
const ENERGY_RANGE = 60;

/** Points t_i and weights of int_0^L dt by t = L z^2, which resolves the threshold and the exponential fall. */
function squaredRule(n: number, length: number): { nodes: Float64Array; weights: Float64Array } {
  const { nodes, weights } = gaussLegendre(n);
  const z = nodes.map((y) => (1 + y) / 2);
  return { nodes: z.map((v) => length * v * v), weights: weights.map((w, i) => length * w * z[i]) };
}

/**
 * Annihilation nu(1) nubar(2) -> e-(3) e+(4), all at one T, Fermi-Dirac with Pauli blocking:
 * A1 = (256 pi^5/T^10) int dPi (p1.p4)^2 (E1 + E2)^2 f1 f2 (1 - f3)(1 - f4), A2 with m_e^2 (p1.p2) for (p1.p4)^2.
 * Returned without their factors: A1 e^(2 m_e/T) and A2 e^(2 m_e/T)/(m_e/T)^2; energies and m are in units of T.
 * With P = p1 + p2 = (q0, q) the phase space is dq0 dq dE1 dE3 dphi/(2 pi) / (256 pi^5) and the azimuth is analytic;
 * q0 = 2m + r, q = Q sin(alpha) with Q^2 = q0^2 - 4 m^2, E1 = (q0 + q y)/2, E3 = (q0 + q beta w)/2.
 * @see Dolgov, Hansen & Semikoz 1997, Nucl. Phys. B 503, 426 (matrix elements)
 */
function annihilation(m: number, points: ExchangePoints): { A1: number; A2: number } {
  const energy = squaredRule(points.outer, ENERGY_RANGE);
  const angle = gaussLegendre(points.angle);
  const side = gaussLegendre(points.inner);
  const n = points.inner;
  const neutrinos = new Float64Array(n);
  const electrons = new Float64Array(n);
  let A1 = 0;
  let A2 = 0;
  for (let i = 0; i < points.outer; i++) {
    const r = energy.nodes[i];
    const q0 = 2 * m + r;
    const Q = Math.sqrt(r * (r + 4 * m));
    for (let j = 0; j < points.angle; j++) {
      const alpha = (Math.PI / 4) * (1 + angle.nodes[j]);
      const q = Q * Math.sin(alpha);
      const dq = (Math.PI / 4) * angle.weights[j] * Q * Math.cos(alpha);
      const s = 4 * m * m + (Q * Math.cos(alpha)) ** 2;
      const beta = (Q * Math.cos(alpha)) / Math.sqrt(s);
      // f1 f2 = exp(-q0)/[(1 + e^-E1)(1 + e^-E2)]: the exponential stands in the outer weight
      for (let k = 0; k < n; k++) {
        const dE1 = (q / 2) * side.nodes[k];
        neutrinos[k] = side.weights[k] / ((1 + Math.exp(-q0 / 2 - dE1)) * (1 + Math.exp(-q0 / 2 + dE1)));
        const dE3 = dE1 * beta;
        electrons[k] = side.weights[k] / ((1 + Math.exp(-q0 / 2 - dE3)) * (1 + Math.exp(-q0 / 2 + dE3)));
      }
      let sum1 = 0;
      let sumNu = 0;
      let sumE = 0;
      for (let k = 0; k < n; k++) {
        const E1 = (q0 + q * side.nodes[k]) / 2;
        const p1z = (q0 * side.nodes[k] + q) / 2;
        const p1t2 = E1 * E1 - p1z * p1z;
        let row = 0;
        for (let l = 0; l < n; l++) {
          const E3 = (q0 + q * beta * side.nodes[l]) / 2;
          const p3z = (q0 * beta * side.nodes[l] + q) / 2;
          const a = s / 2 - E1 * E3 + p1z * p3z; // p1.p4 = a + b cos(phi)
          row += electrons[l] * (a * a + (p1t2 * (E3 * E3 - m * m - p3z * p3z)) / 2);
        }
        sum1 += neutrinos[k] * row;
        sumNu += neutrinos[k];
        sumE += electrons[k];
      }
      const weight = energy.weights[i] * Math.exp(-r) * dq * ((q * q * beta) / 4) * q0 * q0;
      A1 += weight * sum1;
      A2 += weight * (s / 2) * sumNu * sumE;
    }
  }
  return { A1, A2 };
}

/**
 * Scattering nu(1) e(2) -> nu(3) e(4), all at one T:
 * S1 = (256 pi^5/T^10) int dPi [(p1.p2)^2 + (p1.p4)^2] (E3 - E1)^2 f1 f2 (1 - f3)(1 - f4), S2 with m_e^2 (p1.p3).
 * Returned without their factors: S1 e^(m_e/T) and S2 e^(m_e/T)/(m_e/T)^2; energies and m are in units of T.
 * With p1 - p3 = (omega, q), omega = q sin(alpha), the lower ends are E1 = (q + omega)/2 and
 * E2 = -omega/2 + sqrt(q^2/4 + m^2/cos^2(alpha)); omega < 0 mirrors omega > 0 by detailed balance.
 * @see Dolgov, Hansen & Semikoz 1997, Nucl. Phys. B 503, 426 (matrix elements)
 */
function scattering(m: number, points: ExchangePoints): { S1: number; S2: number } {
  const momentum = squaredRule(points.outer, 2 * ENERGY_RANGE);
  const angle = gaussLegendre(points.angle);
  const side = squaredRule(points.inner, ENERGY_RANGE);
  const alphaMax = Math.acos(m / (m + ENERGY_RANGE));
  const n = points.inner;
  const neutrinos = new Float64Array(n);
  const electrons = new Float64Array(n);
  let S1 = 0;
  let S2 = 0;
  for (let i = 0; i < points.outer; i++) {
    const q = momentum.nodes[i];
    for (let j = 0; j < points.angle; j++) {
      const alpha = (alphaMax / 2) * (1 + angle.nodes[j]);
      const cos = Math.cos(alpha);
      const omega = q * Math.sin(alpha);
      const t = -q * q * cos * cos;
      const E1min = (q + omega) / 2;
      const mean = Math.sqrt((q * q) / 4 + (m / cos) ** 2);
      const E2min = mean - omega / 2;
      // f1 f2 = exp(-E1 - E2)/[(1 + e^-E1)(1 + e^-E2)], E1min + E2min = q/2 + mean, exp(-m) outside
      for (let k = 0; k < n; k++) {
        const e = side.nodes[k];
        const w = side.weights[k] * Math.exp(-e);
        neutrinos[k] = w / ((1 + Math.exp(-E1min - e)) * (1 + Math.exp(omega - E1min - e)));
        electrons[k] = w / ((1 + Math.exp(-E2min - e)) * (1 + Math.exp(-omega - E2min - e)));
      }
      let sum1 = 0;
      let sumNu = 0;
      let sumE = 0;
      for (let k = 0; k < n; k++) {
        const E1 = E1min + side.nodes[k];
        const p1z = (2 * E1 * omega - t) / (2 * q);
        const p1t2 = E1 * E1 - p1z * p1z;
        let row = 0;
        for (let l = 0; l < n; l++) {
          const E2 = E2min + side.nodes[l];
          const p2z = (2 * E2 * omega + t) / (2 * q);
          const a = E1 * E2 - p1z * p2z; // p1.p2 = a - b cos(phi), p1.p4 = p1.p2 + t/2
          row += electrons[l] * (a * a + (a + t / 2) ** 2 + p1t2 * (E2 * E2 - m * m - p2z * p2z));
        }
        sum1 += neutrinos[k] * row;
        sumNu += neutrinos[k];
        sumE += electrons[k];
      }
      const dOmega = (alphaMax / 2) * angle.weights[j] * q * cos * momentum.weights[i];
      const weight = 2 * dOmega * omega * omega * Math.exp(m - q / 2 - mean);
      S1 += weight * sum1;
      S2 += weight * (-t / 2) * sumNu * sumE;
    }
  }
  return { S1, S2 };
}

/** A1 e^2x, A2 e^2x/x^2, S1 e^x, S2 e^x/x^2: no exponential and no zero left. */
function reducedIntegrals(x: number, points: ExchangePoints): ExchangeIntegrals {
  return { ...annihilation(x, points), ...scattering(x, points) };
}

function unreduced(x: number, reduced: ExchangeIntegrals): ExchangeIntegrals {
  const e = Math.exp(-x);
  return {
    A1: reduced.A1 * e * e,
    A2: reduced.A2 * e * e * x * x,
    S1: reduced.S1 * e,
    S2: reduced.S2 * e * x * x,
  };
}

/**
 * The collision integrals at m_e/T = x by quadrature over the four dimensions that remain after the azimuth.
 * Massless limits: A1 = 2304 x 0.8841, S1 = 448 x 0.8287 (Maxwell-Boltzmann values times Fermi-Dirac factors), A2 = S2 = 0.
 * @param x       m_e/T, all four particles at the same T, 0 ... EXCHANGE_MAX_X
 * @param points  Gauss points; the default is converged to 1e-10
 * @returns dimensionless A1, A2, S1, S2
 * @throws {InputError} if x is outside its range
 * @see Dolgov, Hansen & Semikoz 1997, Nucl. Phys. B 503, 426; Escudero 2020, JCAP 05, 048 (massless factors)
 */
export function exchangeIntegrals(x: number, points: ExchangePoints = EXCHANGE_POINTS): ExchangeIntegrals {
  requireRange("m_e/T", x, "", 0, EXCHANGE_MAX_X);
  return unreduced(x, reducedIntegrals(x, points));
}

/** Nodes in m_e/T of the generated table, 25 (i/44)^2: their spacing follows the scale on which the integrals change. */
export const EXCHANGE_NODES: readonly number[] = Array.from({ length: 45 }, (_, i) => 25 * (i / 44) ** 2);

/**
 * Rows [m_e/T, ln A1 + 2x, ln(A2/x^2) + 2x, ln S1 + x, ln(S2/x^2) + x] with x = m_e/T: smooth and finite from x = 0 on.
 * @param nodes values of m_e/T
 */
export function exchangeRows(nodes: readonly number[] = EXCHANGE_NODES): number[][] {
  return nodes.map((x) => {
    const { A1, A2, S1, S2 } = reducedIntegrals(x, EXCHANGE_POINTS);
    return [x, Math.log(A1), Math.log(A2), Math.log(S1), Math.log(S2)];
  });
}

let tableSlopes: Float64Array[] | undefined;

/**
 * The collision integrals at m_e/T = x from the generated table: cubic splines of the logarithms, to 5e-6; above the
 * last node (25, annihilation down by e^-50) the smooth factors are held.
 * @param x m_e/T, >= 0
 * @throws {InputError} if x is negative or not finite
 */
export function interpolatedExchange(x: number): ExchangeIntegrals {
  requireRange("m_e/T", x, "", 0, Number.MAX_VALUE);
  const table = EXCHANGE_TABLE;
  tableSlopes ??= [1, 2, 3, 4].map((c) =>
    notAKnotSlopes(
      table.map((row) => row[0]),
      table.map((row) => row[c]),
    ),
  );
  const held = Math.min(x, table[table.length - 1][0]);
  let i = 0;
  while (i < table.length - 2 && table[i + 1][0] <= held) i++;
  const h = table[i + 1][0] - table[i][0];
  const u = (held - table[i][0]) / h;
  const smooth = (c: number) => {
    const slope = (tableSlopes as Float64Array[])[c - 1];
    return Math.exp(hermite(u, h, table[i][c], slope[i], table[i + 1][c], slope[i + 1]));
  };
  return unreduced(x, { A1: smooth(1), A2: smooth(2), S1: smooth(3), S2: smooth(4) });
}
