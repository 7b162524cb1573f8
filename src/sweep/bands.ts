/** Error bands of a scan or grid: responses to every source at nodes along each line, interpolated between. */
import { notAKnotSpline } from "../numerics/interpolate.ts";
import type { Plan } from "./plan.ts";

/** Asks for the responses at points of the plan; responses[source][abundance] of each, in the order of the points. */
export type AskResponses = (points: readonly number[]) => Promise<readonly Responses[]>;
type Responses = readonly (readonly number[])[];

/** Nodes a line starts with. */
const FIRST_NODES = 7;
/**
 * Difference between a band and the same band interpolated from nodes twice as far apart, relative. Cubic
 * interpolation errs 16 times less at half the spacing, so the band that is kept errs below 0.4 %.
 */
const HALVING_DIFFERENCE = 0.045;

/** One line of points along the longest axis: numbers of the points, by rising coordinate. */
interface Line {
  readonly points: readonly number[];
  readonly u: readonly number[];
}

/**
 * Relative standard deviations sigma/x of every abundance at points `first` to `end` - 1.
 * The lines and nodes depend on the plan alone, so a part has the bands of the whole.
 *
 * sigma_x^2/x^2 = sum over sources of (d ln x/dp_s)^2. The responses d ln x/dp_s are smooth along an axis; they are
 * computed at nodes and interpolated by cubic splines, nodes being added until halving their distance changes nothing.
 * Within 1 % of the errors of single runs.
 * @param width number of abundances
 */
export async function relativeErrors(
  plan: Plan,
  first: number,
  end: number,
  width: number,
  ask: AskResponses,
): Promise<Map<number, Float64Array>> {
  const lines = linesThrough(plan, first, end);
  const found = new Map<number, Float64Array>();
  const known = lines.map(() => new Map<number, Responses>());
  // A short line is not interpolated: of it a part needs its own points only.
  const isShort = (line: Line) => line.points.length < 2 * FIRST_NODES;
  const inside = (point: number) => point >= first && point < end;
  let open = lines.map((line) => {
    const all = line.points.map((_, i) => i);
    return isShort(line) ? all.filter((i) => inside(line.points[i])) : evenly(line.points.length, FIRST_NODES);
  });
  for (let round = 0; open.some((nodes) => nodes.length > 0); round++) {
    const wanted = open.flatMap((nodes, l) => nodes.map((node) => ({ l, node, point: lines[l].points[node] })));
    const answers = await ask(wanted.map(({ point }) => point));
    const fresh = lines.map(() => new Map<number, Responses>());
    for (const [i, { l, node }] of wanted.entries()) fresh[l].set(node, answers[i]);
    open = lines.map((line, l) => {
      const next = isShort(line)
        ? []
        : round === 0
          ? gapsOf([...fresh[l].keys()])
          : refine(line, known[l], fresh[l], width);
      for (const [node, responses] of fresh[l]) known[l].set(node, responses);
      return next;
    });
  }
  lines.forEach((line, l) => {
    const sigma = interpolated(line, known[l], width);
    line.points.forEach((point, i) => {
      if (inside(point)) found.set(point, sigma(i));
    });
  });
  return found;
}

function linesThrough(plan: Plan, first: number, end: number): Line[] {
  const lengths = plan.axes.map((axis) => axis.values.length);
  const along = lengths.indexOf(Math.max(...lengths));
  const stride = lengths.slice(along + 1).reduce((product, length) => product * length, 1);
  const { values, log } = plan.axes[along];
  const u = coordinate(values, log);
  const order = values.map((_, i) => i).sort((a, b) => u[a] - u[b]);
  const starts = new Set<number>();
  for (let i = first; i < end; i++) starts.add(i - (Math.floor(i / stride) % lengths[along]) * stride);
  return [...starts].map((start) => ({
    points: order.map((i) => start + i * stride),
    u: order.map((i) => u[i]),
  }));
}

/** The coordinate in which abundances are smooth: the logarithm where the values span a factor. */
export function coordinate(values: readonly number[], log: boolean): number[] {
  const low = values.reduce((a, b) => Math.min(a, b));
  const high = values.reduce((a, b) => Math.max(a, b));
  return log || (low > 0 && high / low > 3) ? values.map(Math.log) : [...values];
}

/** Numbers spread evenly over 0 .. length - 1, both ends included. */
function evenly(length: number, count: number): number[] {
  if (length <= count) return Array.from({ length }, (_, i) => i);
  return Array.from({ length: count }, (_, i) => Math.round((i * (length - 1)) / (count - 1)));
}

/** The middle of every gap between nodes. */
function gapsOf(nodes: readonly number[]): number[] {
  const sorted = [...nodes].sort((a, b) => a - b);
  return sorted.slice(1).flatMap((node, i) => (node - sorted[i] > 1 ? [Math.floor((node + sorted[i]) / 2)] : []));
}

type Known = ReadonlyMap<number, Responses>;

/** Middles of the gaps beside the fresh nodes whose band was not foreseen from the known ones. */
function refine(line: Line, known: Known, fresh: Known, width: number): number[] {
  const foreseen = interpolated(line, known, width);
  const nodes = [...known.keys(), ...fresh.keys()].sort((a, b) => a - b);
  const next = new Set<number>();
  for (const [node, responses] of fresh) {
    const expected = foreseen(node);
    const actual = combine(responses, width);
    const off = actual.some((sigma, x) => Math.abs(expected[x] - sigma) > HALVING_DIFFERENCE * sigma);
    if (!off) continue;
    const at = nodes.indexOf(node);
    for (const middle of gapsOf(nodes.slice(at - 1, at + 2))) next.add(middle);
  }
  return [...next].sort((a, b) => a - b);
}

function combine(responses: Responses, width: number): Float64Array {
  const sum = new Float64Array(width);
  for (const row of responses) for (let x = 0; x < width; x++) sum[x] += row[x] ** 2;
  return sum.map(Math.sqrt);
}

/** sigma/x at every point of a line: responses splined through the nodes, squared and summed. */
function interpolated(line: Line, known: Known, width: number): (i: number) => Float64Array {
  const nodes = [...known.keys()].sort((a, b) => a - b);
  if (nodes.length < 2) return () => combine(known.get(nodes[0]) ?? [], width);
  const u = nodes.map((node) => line.u[node]);
  const sources = known.get(nodes[0])?.length ?? 0;
  const splines = Array.from({ length: sources }, (_, s) =>
    Array.from({ length: width }, (_, x) =>
      notAKnotSpline(
        u,
        nodes.map((node) => known.get(node)![s][x]),
      ),
    ),
  );
  return (i) => {
    const here = known.get(i);
    return combine(here ?? splines.map((row) => row.map((spline) => spline.value(line.u[i]))), width);
  };
}
