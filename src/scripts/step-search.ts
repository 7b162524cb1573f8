/** Search for a step sequence: a smooth density of steps in s, tuned so that one sequence serves a range of eta. */

/** Deterministic uniform numbers for the search. */
function generator(seed: number): () => number {
  let state = seed;
  return () => {
    state = (Math.imul(state, 1103515245) + 12345) & 0x7fffffff;
    return ((state >>> 8) + 0.5) / 0x800000;
  };
}

/** Density of steps 1/h of a sequence, on a uniform grid. */
export function densityOf(nodes: ArrayLike<number>, grid: Float64Array): Float64Array {
  const density = new Float64Array(grid.length);
  let k = 0;
  for (let i = 0; i < grid.length; i++) {
    while (k < nodes.length - 2 && grid[i] > nodes[k + 1]) k++;
    density[i] = 1 / (nodes[k + 1] - nodes[k]);
  }
  return density;
}

/** Gaussian smoothing of the logarithm over a width in s. */
export function smoothed(density: Float64Array, grid: Float64Array, width: number): Float64Array {
  const sigma = width / (grid[1] - grid[0]);
  const reach = Math.ceil(4 * sigma);
  return density.map((_, i) => {
    let sum = 0;
    let weight = 0;
    for (let j = Math.max(0, i - reach); j <= Math.min(grid.length - 1, i + reach); j++) {
      const w = Math.exp(-0.5 * ((i - j) / sigma) ** 2);
      sum += w * Math.log(density[j]);
      weight += w;
    }
    return Math.exp(sum / weight);
  });
}

/** Nodes of `steps` steps with equal integrals of the density between them. */
export function placeNodes(density: Float64Array, grid: Float64Array, steps: number): number[] {
  const total = new Float64Array(grid.length);
  for (let i = 1; i < grid.length; i++) total[i] = total[i - 1] + (density[i] + density[i - 1]) / 2;
  const nodes = [grid[0]];
  let i = 0;
  for (let k = 1; k < steps; k++) {
    const target = (total[total.length - 1] * k) / steps;
    while (total[i + 1] < target) i++;
    nodes.push(grid[i] + ((target - total[i]) / (total[i + 1] - total[i])) * (grid[1] - grid[0]));
  }
  nodes.push(grid[grid.length - 1]);
  return nodes;
}

/**
 * Improves a density by random bumps of its logarithm, kept when the score falls ((1+1) evolution strategy).
 * @param score smaller is better, of a list of nodes
 * @returns the best nodes found
 */
export function searchNodes(
  base: Float64Array,
  grid: Float64Array,
  steps: number,
  score: (nodes: number[]) => number,
  options: { readonly knots: number; readonly trials: number; readonly seed: number },
): { nodes: number[]; score: number } {
  const random = generator(options.seed);
  const normal = () => Math.sqrt(-2 * Math.log(random())) * Math.cos(2 * Math.PI * random());
  const { knots } = options;
  const shaped = (k: Float64Array) =>
    base.map((d, i) => {
      const x = (i / (grid.length - 1)) * (knots - 1);
      const j = Math.min(knots - 2, Math.floor(x));
      const u = (x - j) ** 2 * (3 - 2 * (x - j));
      return d * Math.exp(k[j] * (1 - u) + k[j + 1] * u);
    });
  let best = new Float64Array(knots);
  let nodes = placeNodes(base, grid, steps);
  let lowest = score(nodes);
  let size = 0.3;
  for (let trial = 0; trial < options.trials; trial++) {
    const k = best.slice();
    const centre = Math.floor(random() * knots);
    const width = 0.5 + 3 * random();
    const height = size * normal();
    for (let j = 0; j < knots; j++) k[j] += height * Math.exp(-0.5 * ((j - centre) / width) ** 2);
    const candidate = placeNodes(shaped(k), grid, steps);
    const value = score(candidate);
    if (value < lowest) {
      lowest = value;
      best = k;
      nodes = candidate;
      size = Math.min(1, size * 1.4);
    } else size = Math.max(0.02, size * 0.97);
  }
  return { nodes, score: lowest };
}
