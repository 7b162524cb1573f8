/** Flux coefficients of a network on a uniform grid in s = -ln T9, so that no exponential stands in the hot loop. */
import { notAKnotSlopes } from "../numerics/interpolate.ts";

/** A function of s given as ln of a value with its slope. */
export interface LnFunction {
  readonly ln: number;
  readonly slope: number;
}

/** One flux: ln of its coefficient at eta10 = 1 as a function of s, and the power of eta it grows with. */
export interface FluxDefinition {
  readonly etaPower: number;
  /** ln coefficient and d ln/ds at s; ln = -Infinity for a flux that is absent. */
  at(i: number, s: number): LnFunction;
}

/**
 * Table of flux coefficients c_f(s) per unit eta10^power: values and slopes at the nodes, cubic Hermite between.
 * Relative error of a coefficient with logarithmic slope g: (g h)^4/384.
 */
export class FluxTable {
  readonly start: number;
  readonly step: number;
  readonly intervals: number;
  readonly fluxes: number;
  /** Row i holds `fluxes` values, then `fluxes` slopes times the step. */
  readonly rows: Float64Array;
  readonly etaPowers: Int8Array;

  constructor(start: number, end: number, intervals: number, definitions: readonly FluxDefinition[]) {
    this.start = start;
    this.step = (end - start) / intervals;
    this.intervals = intervals;
    this.fluxes = definitions.length;
    this.rows = new Float64Array((intervals + 1) * 2 * this.fluxes);
    this.etaPowers = Int8Array.from(definitions, (d) => d.etaPower);
    for (let f = 0; f < this.fluxes; f++) this.fill(f, definitions[f]);
  }

  /** s of node i. */
  node(i: number): number {
    return this.start + i * this.step;
  }

  /** (Re)writes the column of flux f. */
  fill(f: number, definition: FluxDefinition): void {
    const stride = 2 * this.fluxes;
    for (let i = 0; i <= this.intervals; i++) {
      const { ln, slope } = definition.at(i, this.node(i));
      const value = ln > -700 ? Math.exp(ln) : 0;
      this.rows[i * stride + f] = value;
      this.rows[i * stride + this.fluxes + f] = value === 0 ? 0 : value * slope * this.step;
    }
  }

  /** Multiplies the column of flux f by factor_i at node i, whose d ln/ds is slope_i. */
  multiplyColumn(f: number, factor: Float64Array, slope: Float64Array): void {
    const stride = 2 * this.fluxes;
    for (let i = 0; i <= this.intervals; i++) {
      const at = i * stride + f;
      const value = this.rows[at];
      this.rows[at] = value * factor[i];
      this.rows[at + this.fluxes] = factor[i] * (this.rows[at + this.fluxes] + value * slope[i] * this.step);
    }
  }

  /** The same table with its own copy of the rows. */
  copy(): FluxTable {
    const twin = Object.create(FluxTable.prototype) as FluxTable;
    Object.assign(twin, this, { rows: this.rows.slice() });
    return twin;
  }

  /** Coefficients at s, without the powers of eta. */
  values(s: number, out: Float64Array): void {
    const { rows, fluxes, intervals } = this;
    const position = (s - this.start) / this.step;
    let i = Math.floor(position);
    if (i < 0) i = 0;
    else if (i >= intervals) i = intervals - 1;
    const u = position - i;
    const v = 1 - u;
    const h00 = v * v * (1 + 2 * u);
    const h10 = v * v * u;
    const h01 = u * u * (3 - 2 * u);
    const h11 = -u * u * v;
    let a = i * 2 * fluxes;
    for (let f = 0; f < fluxes; f++, a++)
      out[f] = h00 * rows[a] + h10 * rows[a + fluxes] + h01 * rows[a + 2 * fluxes] + h11 * rows[a + 3 * fluxes];
  }

  /** d/ds of {@link values}. */
  slopes(s: number, out: Float64Array): void {
    const { rows, fluxes, intervals } = this;
    const position = (s - this.start) / this.step;
    let i = Math.floor(position);
    if (i < 0) i = 0;
    else if (i >= intervals) i = intervals - 1;
    const u = position - i;
    const k = 1 / this.step;
    const h00 = 6 * u * (u - 1) * k;
    const h10 = (1 - 4 * u + 3 * u * u) * k;
    const h11 = (3 * u * u - 2 * u) * k;
    let a = i * 2 * fluxes;
    for (let f = 0; f < fluxes; f++, a++)
      out[f] = h00 * (rows[a] - rows[a + 2 * fluxes]) + h10 * rows[a + fluxes] + h11 * rows[a + 3 * fluxes];
  }
}

/** Values and slopes of a tabulated function resampled on the nodes of a flux table. */
export function resample(
  s: Float64Array,
  y: Float64Array,
  start: number,
  step: number,
  count: number,
): { value: Float64Array; slope: Float64Array } {
  const slopes = notAKnotSlopes(s, y);
  const value = new Float64Array(count);
  const slope = new Float64Array(count);
  const h = s[1] - s[0];
  for (let i = 0; i < count; i++) {
    const position = (start + i * step - s[0]) / h;
    let k = Math.floor(position);
    if (k < 0) k = 0;
    else if (k > s.length - 2) k = s.length - 2;
    const u = position - k;
    const d = y[k + 1] - y[k];
    const a = h * slopes[k] - d;
    const b = d - h * slopes[k + 1];
    value[i] = y[k] + u * d + u * (1 - u) * (a * (1 - u) + b * u);
    slope[i] = (d + a * (1 - u) * (1 - 3 * u) + b * u * (2 - 3 * u)) / h;
  }
  return { value, slope };
}
