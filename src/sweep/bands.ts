/** Error bands of a scan or grid: responses to the sources that carry the variance, at nodes along each line. */
import { notAKnotSpline } from "../numerics/interpolate.ts";
import type { Plan } from "./plan.ts";
import type { PointAnswer, PointQuestion } from "./point.ts";

/** Asks about point `i` of the plan. */
export interface BandQuestion extends Pick<PointQuestion, "sources" | "differences"> {
  readonly point: number;
}
/** Answers about points, in the order of the questions; `what` names the stage for the progress line. */
export type AskResponses = (questions: readonly BandQuestion[], what: string) => Promise<readonly PointAnswer[]>;

/** Number of sources up to which none is left out. */
const FEW_SOURCES = 16;
/** Largest share of a variance, at the points where it is measured, that the sources left out may carry. */
const NEGLECTED_VARIANCE = 0.006;
/** Nodes a line starts with. */
const FIRST_NODES = 7;
/**
 * Difference between a band and the same band interpolated from nodes twice as far apart, relative. Cubic
 * interpolation errs 16 times less at half the spacing, so the band that is kept errs below 0.3 %.
 */
const HALVING_DIFFERENCE = 0.04;
/** Sources asked for at once: so many runs before other threads get their share. */
const CHUNK = 8;

/** One line of points along the longest axis: numbers of the points, by rising coordinate. */
interface Line {
  readonly points: readonly number[];
  readonly u: readonly number[];
}

/**
 * Relative standard deviations sigma/x of every abundance at points `first` to `end` - 1.
 * The lines and nodes depend on the plan alone, so a part has the bands of the whole.
 *
 * sigma_x^2/x^2 = sum over sources of (d ln x/dp_s)^2. Sources of which all left out together carry at most 0.6 % of
 * each variance, measured at the ends and the middle of the plan, are left out; the responses are smooth along an axis
 * and are interpolated by cubic splines between nodes that are added until halving their distance changes nothing.
 * Within 1 % of the full errors.
 * @param sources number of sources at every point
 * @param width   number of abundances
 */
export async function relativeErrors(
  plan: Plan,
  first: number,
  end: number,
  sources: number,
  width: number,
  ask: AskResponses,
): Promise<Map<number, Float64Array>> {
  const carrying = await selectSources(plan, sources, ask);
  const lines = linesThrough(plan, first, end);
  const found = new Map<number, Float64Array>();
  const known = lines.map(() => new Map<number, readonly (readonly number[])[]>());
  let open = lines.map((line) => evenly(line.points.length, FIRST_NODES));
  for (let round = 0; open.some((nodes) => nodes.length > 0); round++) {
    const wanted = open.flatMap((nodes, l) => nodes.map((node) => ({ l, node, point: lines[l].points[node] })));
    const answers = await responsesAt(
      wanted.map(({ point }) => point),
      carrying,
      ask,
    );
    const fresh = lines.map(() => new Map<number, readonly (readonly number[])[]>());
    for (const [i, { l, node }] of wanted.entries()) fresh[l].set(node, answers[i]);
    open = lines.map((line, l) => {
      const next = round === 0 ? gapsOf([...fresh[l].keys()]) : refine(line, known[l], fresh[l], width);
      for (const [node, responses] of fresh[l]) known[l].set(node, responses);
      return next;
    });
  }
  lines.forEach((line, l) => {
    const sigma = interpolated(line, known[l], width);
    line.points.forEach((point, i) => {
      if (point >= first && point < end) found.set(point, sigma(i));
    });
  });
  return found;
}

/** Numbers of the sources that together carry all but a negligible share of every variance. */
async function selectSources(plan: Plan, sources: number, ask: AskResponses): Promise<number[]> {
  const all = Array.from({ length: sources }, (_, s) => s);
  if (sources <= FEW_SOURCES) return all;
  const last = plan.count - 1;
  const corners = plan.axes.length < 2 ? [] : [plan.axes[plan.axes.length - 1].values.length - 1];
  const points = [...new Set([0, Math.floor(last / 2), last, ...corners, ...corners.map((c) => last - c)])];
  const responses = await responsesAt(points, all, ask, "forward");
  const shares = responses.flatMap((atPoint) =>
    atPoint[0].map((_, x) => {
      const squares = atPoint.map((row) => row[x] ** 2);
      const sum = squares.reduce((total, square) => total + square, 0);
      return squares.map((square) => (sum > 0 ? square / sum : 0));
    }),
  );
  const largest = (s: number) => Math.max(...shares.map((row) => row[s]));
  const dropped = shares.map(() => 0);
  const kept = new Set(all);
  for (const s of [...all].sort((a, b) => largest(a) - largest(b))) {
    if (shares.some((row, i) => dropped[i] + row[s] > NEGLECTED_VARIANCE)) break;
    shares.forEach((row, i) => {
      dropped[i] += row[s];
    });
    kept.delete(s);
  }
  return [...kept];
}

/** responses[point][source][abundance], asked for in small pieces. */
async function responsesAt(
  points: readonly number[],
  sources: readonly number[],
  ask: AskResponses,
  differences: "central" | "forward" = "central",
): Promise<number[][][]> {
  const pieces = points.flatMap((point) =>
    Array.from({ length: Math.ceil(sources.length / CHUNK) }, (_, c) => ({
      point,
      sources: sources.slice(c * CHUNK, (c + 1) * CHUNK),
      differences,
    })),
  );
  const answers = await ask(pieces, differences === "forward" ? "sources of error" : "error bands");
  const perPoint = Math.ceil(sources.length / CHUNK);
  return points.map((_, i) =>
    answers.slice(i * perPoint, (i + 1) * perPoint).flatMap((answer) => answer.responses as number[][]),
  );
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

type Known = ReadonlyMap<number, readonly (readonly number[])[]>;

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

function combine(responses: readonly (readonly number[])[], width: number): Float64Array {
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
