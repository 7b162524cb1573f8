/** The request `grid`: abundances on two or more axes, whole or in parts, with checksum and interpolation error. */
import type { RateLibrary } from "../nuclear/library.ts";
import type { AbundanceName } from "../nucleosynthesis/abundances.ts";
import { InputError } from "../numerics/check.ts";
import type { Table } from "../numerics/table.ts";
import { delimitedLines } from "../output/cell.ts";
import { fixedCosmology } from "../output/scan-output.ts";
import type { GridResults, InterpolationCheck } from "../output/sweep-result.ts";
import { gridCoordinates, interpolateGrid, randomPoints } from "../sweep/grid-interpolation.ts";
import { keysAt, parsePart } from "../sweep/plan.ts";
import type { Envelope, Progress } from "./envelope.ts";
import { makeEnvelope } from "./envelope.ts";
import { ratesDigest, sha256 } from "./rates-digest.ts";
import { type PreparedSweep, prepareSweep, runSweep, type SweepKeys, type SweepOptions } from "./sweep.ts";
import type { PointTask } from "./tasks.ts";

/** Axes of a grid. */
const AXES = { fewest: 2, most: 6 } as const;
/** Random points at which the interpolation is checked. */
export const CHECK_POINTS = 60;

/** A request for a grid. */
export interface GridKeys extends SweepKeys {
  /** `K/N`: only the K-th of N parts. */
  readonly part?: string;
  /** Measure the interpolation error. */
  readonly check?: boolean;
}

/** The lines of a table that a checksum covers: header line and rows of its CSV. */
export function checkedText(table: Table): string {
  return `${delimitedLines(table, ",").join("\n")}\n`;
}

/**
 * Answers `grid`: a table of the axes, the abundances, and their errors as NAME_sigma, the first axis slowest.
 * @throws {InputError | CalculationError}
 */
export async function computeGrid(
  { part: partText, check: wantsCheck, ...keys }: GridKeys,
  library: RateLibrary,
  options: SweepOptions = {},
): Promise<Envelope<GridResults>> {
  const part = partText === undefined ? undefined : parsePart(partText);
  if (part !== undefined && wantsCheck)
    throw new InputError("conflict", "check: needs the whole grid; join the parts, or leave part out");
  const sweep = await prepareSweep("grid", keys, AXES, library, options, part);
  const { plan, first, end, parameters } = sweep;
  const { table, counts, warnings } = await runSweep(sweep, options.progress);
  const results: GridResults = {
    axes: plan.axes.map(({ key, unit, values, log }) => ({ key, unit, count: values.length, log })),
    over: typeof keys.over === "string" ? [keys.over] : (keys.over as readonly string[]),
    ratesDigest: await ratesDigest(library, sweep.base),
    checksum: await sha256(checkedText(table)),
    ...(part === undefined ? {} : { part: { ...part, from: first + 1, to: end, points: plan.count } }),
    ...(wantsCheck ? { check: await checkInterpolation(sweep, table, options.progress) } : {}),
    table,
  };
  const solver = { ...counts, tolerance: parameters.tolerance };
  return makeEnvelope("grid", fixedCosmology(parameters, plan.axes), results, sweep.provenance, solver, warnings);
}

/** Abundances that are interpolated as they are; the others, which span decades, in their logarithm. */
const LINEAR: readonly AbundanceName[] = ["Yp", "YpMass"];

/**
 * Largest error of the interpolated grid at random points, against runs of those points: tensor-product cubic splines
 * of Y_p and of the logarithms of the other abundances.
 */
async function checkInterpolation(
  sweep: PreparedSweep,
  table: Table,
  progress?: Progress,
): Promise<InterpolationCheck> {
  const { plan, names, base, parameters, engine } = sweep;
  const points = randomPoints(plan.axes, CHECK_POINTS, parameters.seed);
  const tasks = points.map(
    ({ values }): PointTask => ({
      kind: "point",
      base,
      question: { overrides: keysAt(plan.axes, values, base), values: true, where: `check at ${values.join(", ")}` },
    }),
  );
  let done = 0;
  const answers = await engine.answerAll(
    tasks,
    (_, i) => `${i}`,
    () => progress?.(++done / tasks.length, "check points", tasks.length),
  );
  const u = gridCoordinates(plan.axes);
  const largest: Record<string, { absolute: number; relative: number }> = {};
  names.forEach((name, x) => {
    const column = table.columns.indexOf(name);
    const grid = table.rows.map((row) => row[column] as number);
    if (grid.some((value) => !(value > 0))) return;
    const inLog = !LINEAR.includes(name);
    const nodes = inLog ? grid.map(Math.log) : grid;
    const worst = { absolute: 0, relative: 0 };
    points.forEach(({ at }, i) => {
      const found = interpolateGrid(u, nodes, at);
      const exact = (answers[i].values as readonly number[])[x];
      const off = Math.abs((inLog ? Math.exp(found) : found) - exact);
      worst.absolute = Math.max(worst.absolute, off);
      worst.relative = Math.max(worst.relative, off / exact);
    });
    largest[name] = worst;
  });
  return { points: points.length, seed: parameters.seed, largest };
}
