/** Lines of equal height of a function on a rectangular grid. */

/** A line through points (x, y); closed if the last point is the first. */
export type ContourLine = readonly (readonly [x: number, y: number])[];

/** Corner numbers of the four edges of a cell: bottom, right, top, left; corner 0 is lower left, then against the clock. */
const EDGES = [
  [0, 1],
  [1, 2],
  [3, 2],
  [0, 3],
] as const;

/** Pairs of edges joined by a line, for each pattern of corners above the level (bit c: corner c). */
const CASES: readonly (readonly (readonly [number, number])[])[] = [
  [],
  [[3, 0]],
  [[0, 1]],
  [[3, 1]],
  [[1, 2]],
  [
    [3, 0],
    [1, 2],
  ],
  [[0, 2]],
  [[3, 2]],
  [[2, 3]],
  [[2, 0]],
  [
    [0, 1],
    [2, 3],
  ],
  [[2, 1]],
  [[1, 3]],
  [[1, 0]],
  [[0, 3]],
  [],
];

/**
 * Lines on which a function has the value `level`, by marching squares with straight interpolation along the edges.
 * Lines that run into the rim of the grid end there.
 * @param x rising, nx points
 * @param y rising, ny points
 * @param values row-major with y running fastest: values[i ny + j] at (x_i, y_j)
 * @see Lorensen & Cline 1987, Computer Graphics 21, 163 (the same in three dimensions)
 */
export function contourLines(
  x: ArrayLike<number>,
  y: ArrayLike<number>,
  values: ArrayLike<number>,
  level: number,
): ContourLine[] {
  const [nx, ny] = [x.length, y.length];
  if (values.length !== nx * ny) throw new RangeError(`contour: ${values.length} values on a grid of ${nx} by ${ny}`);
  // Each crossing of a grid edge is a point, named by its edge; segments join two of them.
  const points = new Map<string, readonly [number, number]>();
  const neighbours = new Map<string, string[]>();
  for (let i = 0; i + 1 < nx; i++)
    for (let j = 0; j + 1 < ny; j++) {
      const corners = [
        [i, j],
        [i + 1, j],
        [i + 1, j + 1],
        [i, j + 1],
      ] as const;
      const heights = corners.map(([a, b]) => values[a * ny + b]);
      const pattern = heights.reduce((bits, height, c) => (height > level ? bits | (1 << c) : bits), 0);
      const crossing = (edge: number) => {
        const [a, b] = EDGES[edge].map((c) => corners[c]);
        const name = `${a} ${b}`;
        if (!points.has(name)) {
          const [ha, hb] = EDGES[edge].map((c) => heights[c]);
          const u = (level - ha) / (hb - ha);
          points.set(name, [x[a[0]] + u * (x[b[0]] - x[a[0]]), y[a[1]] + u * (y[b[1]] - y[a[1]])]);
        }
        return name;
      };
      for (const [from, to] of CASES[pattern]) {
        const [p, q] = [crossing(from), crossing(to)];
        neighbours.set(p, [...(neighbours.get(p) ?? []), q]);
        neighbours.set(q, [...(neighbours.get(q) ?? []), p]);
      }
    }
  return joinSegments(points, neighbours);
}

/** Walks along the segments: open lines first, from their ends, then the closed ones. */
function joinSegments(
  points: ReadonlyMap<string, readonly [number, number]>,
  neighbours: Map<string, string[]>,
): ContourLine[] {
  const lines: ContourLine[] = [];
  const walk = (start: string) => {
    const line = [start];
    for (let here = start; ; ) {
      const next = neighbours.get(here)?.shift();
      if (next === undefined) break;
      const back = neighbours.get(next) as string[];
      back.splice(back.indexOf(here), 1);
      line.push(next);
      here = next;
    }
    if (line.length > 1) lines.push(line.map((name) => points.get(name) as readonly [number, number]));
  };
  const names = [...neighbours.keys()];
  for (const name of names) if (neighbours.get(name)?.length === 1) walk(name);
  for (const name of names) if ((neighbours.get(name)?.length ?? 0) > 0) walk(name);
  return lines;
}
