/** Energy density of one massive neutrino eigenstate with a frozen Fermi-Dirac momentum distribution. */
import { gaussLegendre } from "../numerics/quadrature.ts";

/** int x^3/(e^x + 1) dx = 7 pi^4/120. */
const MASSLESS = (7 * Math.PI ** 4) / 120;
/** int x^2/(e^x + 1) dx = 3 zeta(3)/2. */
const NUMBER = 1.5 * 1.2020569031595942;
const PANELS = [0, 1, 2, 4, 7, 11, 17, 25, 50];
const POINTS = 20;

let momenta: { readonly squared: Float64Array; readonly weight: Float64Array } | undefined;

/** Gauss points of the momentum integral: x^2 and w x^2/(e^x + 1) over that of a massless neutrino. */
function momentumGrid() {
  if (momenta) return momenta;
  const { nodes, weights } = gaussLegendre(POINTS);
  const squared: number[] = [];
  const weight: number[] = [];
  for (let panel = 1; panel < PANELS.length; panel++) {
    const half = (PANELS[panel] - PANELS[panel - 1]) / 2;
    for (let i = 0; i < POINTS; i++) {
      const x = PANELS[panel - 1] + half * (1 + nodes[i]);
      squared.push(x * x);
      weight.push((weights[i] * half * x * x) / (Math.exp(x) + 1) / MASSLESS);
    }
  }
  momenta = { squared: Float64Array.from(squared), weight: Float64Array.from(weight) };
  return momenta;
}

/**
 * Density of a massive neutrino over that of a massless one at the same temperature,
 * I(y) = (120/(7 pi^4)) int_0^inf x^2 sqrt(x^2 + y^2)/(e^x + 1) dx, y = m c^2/(k T_nu), by quadrature.
 *
 * @param y mass over temperature [1], >= 0
 * @returns I(y) >= 1, relative accuracy 1e-12
 */
export function massiveDensityRatio(y: number): number {
  const { squared, weight } = momentumGrid();
  let sum = 0;
  for (let i = 0; i < squared.length; i++) sum += weight[i] * Math.sqrt(squared[i] + y * y);
  return sum;
}

/** d I/d ln y of {@link massiveDensityRatio}, by quadrature. */
function ratioSlope(y: number): number {
  const { squared, weight } = momentumGrid();
  let sum = 0;
  for (let i = 0; i < squared.length; i++) sum += (weight[i] * y * y) / Math.sqrt(squared[i] + y * y);
  return sum;
}

const LOG_MIN = Math.log(1e-3);
const LOG_MAX = Math.log(1e5);
const INTERVALS = 1000;
const STEP = (LOG_MAX - LOG_MIN) / INTERVALS;

let table: { readonly ratio: Float64Array; readonly slope: Float64Array } | undefined;

function ratioTable() {
  if (table) return table;
  const ratio = new Float64Array(INTERVALS + 1);
  const slope = new Float64Array(INTERVALS + 1);
  for (let i = 0; i <= INTERVALS; i++) {
    const y = Math.exp(LOG_MIN + i * STEP);
    ratio[i] = massiveDensityRatio(y);
    slope[i] = ratioSlope(y);
  }
  table = { ratio, slope };
  return table;
}

/**
 * I(y) and its derivative dI/d ln y from a table of {@link massiveDensityRatio}, cubic Hermite in ln y; series beyond
 * its ends: 1 + 5 y^2/(7 pi^2) for y < 1e-3 and the non-relativistic limit for y > 1e5.
 *
 * @param logY ln(m c^2/(k T_nu)), any finite value
 * @param out  receives [I, dI/d ln y]; relative accuracy 3e-10
 */
export function tabulatedDensityRatio(logY: number, out: Float64Array): void {
  if (logY < LOG_MIN) {
    const small = ((5 / 7) * Math.exp(2 * logY)) / Math.PI ** 2;
    out[0] = 1 + small;
    out[1] = 2 * small;
    return;
  }
  if (logY > LOG_MAX) {
    out[0] = (NUMBER / MASSLESS) * Math.exp(logY);
    out[1] = out[0];
    return;
  }
  const { ratio, slope } = table ?? ratioTable();
  const position = (logY - LOG_MIN) / STEP;
  const i = Math.min(INTERVALS - 1, Math.floor(position));
  const u = position - i;
  const y0 = ratio[i];
  const d = ratio[i + 1] - y0;
  const a = STEP * slope[i] - d;
  const b = d - STEP * slope[i + 1];
  // The Hermite piece of numerics/interpolate.ts, written out: this is read in every evaluation of H.
  out[0] = y0 + u * d + u * (1 - u) * (a * (1 - u) + b * u);
  out[1] = (d + a * (1 - u) * (1 - 3 * u) + b * u * (2 - 3 * u)) / STEP;
}
