/** The electromagnetic plasma: photons and e+- by exact Fermi-Dirac integrals, QED terms, and a table of their sum. */
import { ELECTRON_MASS } from "../constants/codata.ts";
import { requirePositive } from "../numerics/check.ts";
import { hermite, notAKnotSlopes } from "../numerics/interpolate.ts";
import { ENERGY_POINTS, qedTerms, type Thermodynamics } from "./qed.ts";

export type { Thermodynamics } from "./qed.ts";

/** Which finite-temperature QED terms are in; e^3 belongs on top of e^2. */
export interface QedTerms {
  readonly qedE2: boolean;
  readonly qedE3: boolean;
}

/**
 * Photons: rho = (pi^2/15) T^4, P = rho/3.
 * @param TMeV k_B T [MeV], > 0
 */
export function photons(TMeV: number): Thermodynamics {
  const rho = (Math.PI ** 2 / 15) * TMeV ** 4;
  return { P: rho / 3, rho, dRhoDLnT: 4 * rho };
}

/**
 * Electrons and positrons without chemical potential, g = 4: rho = (2/pi^2) int p^2 E f dp, P = (2/(3 pi^2)) int p^4/E f dp,
 * f = 1/(e^(E/T) + 1). E = m + T v^2 removes the square-root end point; relative accuracy 1e-12.
 * @param TMeV k_B T [MeV], > 0
 * @throws {RangeError} if TMeV is not positive and finite
 * @see Weinberg 1972, Gravitation and Cosmology, sec. 15.6
 */
export function electronPositron(TMeV: number): Thermodynamics {
  requirePositive("TMeV", TMeV, "MeV");
  const x = ELECTRON_MASS.value / TMeV;
  const { v, kinetic, boltzmann, weight } = ENERGY_POINTS;
  const threshold = Math.exp(-x);
  let P = 0;
  let rho = 0;
  let dRho = 0;
  for (let i = 0; i < v.length; i++) {
    const u = x + kinetic[i];
    const p = v[i] * Math.sqrt(2 * x + kinetic[i]);
    const blocking = 1 + threshold * boltzmann[i];
    const measure = (weight[i] * p * boltzmann[i]) / blocking; // p f dE, f without e^-x
    P += (measure * p * p) / 3;
    rho += measure * u * u;
    dRho += (measure * u * u * u) / blocking; // d f/d ln T = u f (1 - f)
  }
  const factor = (2 / Math.PI ** 2) * threshold * TMeV ** 4;
  return { P: factor * P, rho: factor * rho, dRhoDLnT: factor * dRho };
}

/**
 * The whole plasma, photons + e+- + QED terms, by direct quadrature (0.1 ms).
 * @param TMeV k_B T [MeV], > 0
 * @throws {RangeError} if TMeV is not positive and finite
 */
export function plasma(TMeV: number, terms: QedTerms): Thermodynamics {
  const parts = [photons(TMeV), electronPositron(TMeV)];
  if (terms.qedE2 || terms.qedE3) {
    const { second, third } = qedTerms(TMeV, ELECTRON_MASS.value);
    if (terms.qedE2) parts.push(second);
    if (terms.qedE3) parts.push(third);
  }
  const sum = (key: keyof Thermodynamics) => parts.reduce((s, part) => s + part[key], 0);
  return { P: sum("P"), rho: sum("rho"), dRhoDLnT: sum("dRhoDLnT") };
}

/** Entropy density s = (rho + P)/T [MeV3]. */
export function entropyDensity(TMeV: number, state: Thermodynamics): number {
  return (state.rho + state.P) / TMeV;
}

/** Effective number of relativistic degrees of freedom, g_* = (30/pi^2) rho/T^4. @param rho energy density [MeV4] */
export function energyDegreesOfFreedom(rho: number, TMeV: number): number {
  return ((30 / Math.PI ** 2) * rho) / TMeV ** 4;
}

/** Effective number of entropy degrees of freedom, g_*s = (45/2 pi^2) s/T^3. @param s entropy density [MeV3] */
export function entropyDegreesOfFreedom(s: number, TMeV: number): number {
  return ((45 / (2 * Math.PI ** 2)) * s) / TMeV ** 3;
}

/** Range and spacing of the tables over ln T: 1.1 GeV (no muons in it) down to m_e/T = 60, where only photons are left. */
export const PLASMA_GRID = {
  lnTMin: Math.log(ELECTRON_MASS.value / 60),
  lnTMax: Math.log(1100),
  points: 1601,
} as const;

const GRID_STEP = (PLASMA_GRID.lnTMax - PLASMA_GRID.lnTMin) / (PLASMA_GRID.points - 1);

/** Several functions of ln T on the uniform grid of PLASMA_GRID, interpolated together by cubic splines. */
export interface GridTable {
  /** Writes the columns at ln(T/MeV) into `out`; below the grid the first row holds. */
  evaluate(lnT: number, out: Float64Array): void;
}

/**
 * Tabulates `columns` functions of T over PLASMA_GRID for interpolation by not-a-knot splines.
 * @param row writes the values at TMeV into `out`
 */
export function tabulateOverTemperature(columns: number, row: (TMeV: number, out: Float64Array) => void): GridTable {
  const { lnTMin, points } = PLASMA_GRID;
  const grid = Float64Array.from({ length: points }, (_, i) => lnTMin + i * GRID_STEP);
  const data = new Float64Array(points * columns * 2); // value, slope of each column, row after row
  const out = new Float64Array(columns);
  for (let i = 0; i < points; i++) {
    row(Math.exp(grid[i]), out);
    for (let c = 0; c < columns; c++) data[2 * (i * columns + c)] = out[c];
  }
  for (let c = 0; c < columns; c++) {
    const slopes = notAKnotSlopes(
      grid,
      grid.map((_, i) => data[2 * (i * columns + c)]),
    );
    for (let i = 0; i < points; i++) data[2 * (i * columns + c) + 1] = slopes[i];
  }
  return {
    evaluate(lnT, result) {
      const place = (lnT - lnTMin) / GRID_STEP;
      const i = place > 0 ? Math.min(Math.floor(place), points - 2) : 0;
      const u = place > 0 ? place - i : 0;
      for (let c = 0; c < columns; c++) {
        const k = 2 * (i * columns + c);
        const m = k + 2 * columns;
        result[c] = hermite(u, GRID_STEP, data[k], data[k + 1], data[m], data[m + 1]);
      }
    },
  };
}

/** Columns of a plasma table: rho/T^4, (rho + P)/T^4 and (d rho/d ln T)/T^4, T in MeV. */
export const PLASMA_COLUMNS = 3;

const tables = new Map<string, GridTable>();

/**
 * rho/T^4, (rho + P)/T^4 and (d rho/d ln T)/T^4 of the plasma over ln T, made once a process for each choice of QED terms.
 * Relative accuracy 1e-8 against {@link plasma}.
 * @param terms QED terms included
 */
export function plasmaTable(terms: QedTerms): GridTable {
  const key = `${terms.qedE2} ${terms.qedE3}`;
  let table = tables.get(key);
  if (!table) {
    table = tabulateOverTemperature(PLASMA_COLUMNS, (TMeV, out) => {
      const { P, rho, dRhoDLnT } = plasma(TMeV, terms);
      const T4 = TMeV ** 4;
      out[0] = rho / T4;
      out[1] = (rho + P) / T4;
      out[2] = dRhoDLnT / T4;
    });
    tables.set(key, table);
  }
  return table;
}
