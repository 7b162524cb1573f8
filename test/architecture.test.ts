// The import table: which folder of src/ may import which, and who may touch Node.
import { readdirSync, readFileSync, statSync } from "node:fs";
import { dirname, join, relative, resolve, sep } from "node:path";
import { expect, test } from "vitest";

const source = resolve(import.meta.dirname, "../src");

/** Folder -> folders it may import besides itself. The order is that of the physics. */
const lowest = ["constants", "numerics"];
const MAY_IMPORT: Readonly<Record<string, readonly string[]>> = {
  constants: [],
  numerics: [],
  nuclear: lowest,
  parameters: [...lowest, "nuclear"],
  background: [...lowest, "parameters"],
  weak: [...lowest, "parameters", "background"],
  network: [...lowest, "nuclear"],
  nucleosynthesis: [...lowest, "nuclear", "parameters", "background", "weak", "network"],
  recombination: [...lowest, "parameters", "background"],
  lineofsight: [...lowest, "parameters", "background", "recombination"],
  uncertainty: ["parameters", "numerics", "nuclear"],
  model: [
    ...lowest,
    ...["nuclear", "parameters", "background", "weak", "network", "nucleosynthesis"],
    ...["recombination", "lineofsight", "uncertainty"],
  ],
  inference: [...lowest, "nuclear", "parameters", "nucleosynthesis", "model", "uncertainty"],
};
const physics = Object.keys(MAY_IMPORT);
const TABLE: typeof MAY_IMPORT = {
  ...MAY_IMPORT,
  sweep: physics,
  output: physics,
  charts: physics,
  report: [...physics, "output"],
  requests: [...physics, "sweep", "output", "charts", "report"],
  node: [...physics, "sweep", "output", "charts", "report", "requests"],
  scripts: [...physics, "sweep", "output", "charts", "report", "requests", "node"],
  cli: [...physics, "sweep", "output", "charts", "report", "requests", "node"],
  web: [...physics, "sweep", "output", "charts", "report", "requests"],
};
/** Files at the top of src/: the version, which anyone may print, and the public names, which node/ repeats. */
const MAY_IMPORT_TOP: Readonly<Record<string, (folder: string) => boolean>> = {
  "version.ts": () => true,
  "index.ts": (folder) => folder === "node",
};
/** Packages that bring their own Node or native needs, and the general-purpose ones that run in a browser too. */
const NODE_FOLDERS = ["node", "cli", "scripts"];
const BROWSER_PACKAGES: Readonly<Record<string, readonly string[]>> = {
  odex: ["numerics"],
  mathjs: ["numerics"],
  "chart.js": ["charts", "web"],
  "chartjs-plugin-annotation": ["charts", "web"],
};

function files(folder: string): string[] {
  return readdirSync(folder).flatMap((name) => {
    const path = join(folder, name);
    return statSync(path).isDirectory() ? files(path) : /\.ts$/.test(name) && !name.endsWith(".d.ts") ? [path] : [];
  });
}

function imports(path: string): string[] {
  const text = readFileSync(path, "utf8").replace(/\/\*[\s\S]*?\*\//g, "");
  const pattern =
    /(?:^|\n)\s*(?:import|export)\b[^"';]*?from\s*"([^"]+)"|(?:^|\n)\s*import\s*"([^"]+)"|\bimport\(\s*"([^"]+)"/g;
  return [...text.matchAll(pattern)].map((m) => m[1] ?? m[2] ?? m[3]);
}

/** What is wrong with one import; undefined if nothing. */
function problem(file: string, target: string): string | undefined {
  const [folder] = relative(source, file).split(sep);
  const isTop = folder.endsWith(".ts");
  if (!target.startsWith(".")) {
    if (isTop) return "a table of contents imports no package";
    if (NODE_FOLDERS.includes(folder)) return undefined;
    return BROWSER_PACKAGES[target.split("/")[0]]?.includes(folder) ? undefined : `${folder} may not import ${target}`;
  }
  const [other] = relative(source, resolve(dirname(file), target)).split(sep);
  if (other === "..") return "leaves src/";
  if (!target.endsWith(".ts")) return "imports within src end in .ts";
  if (other.endsWith(".ts")) return MAY_IMPORT_TOP[other]?.(folder) ? undefined : `${folder} may not import ${other}`;
  if (isTop) return NODE_FOLDERS.includes(other) ? "the browser library imports nothing that needs Node" : undefined;
  return other === folder || TABLE[folder]?.includes(other) ? undefined : `${folder} may not import ${other}`;
}

test("every import in src/ follows the table", () => {
  const all = files(source);
  expect(all.length).toBeGreaterThan(10);
  const wrong = all.flatMap((file) =>
    imports(file).flatMap((target) => {
      const what = problem(file, target);
      return what === undefined ? [] : [`${relative(source, file)}: "${target}": ${what}`];
    }),
  );
  expect(wrong).toEqual([]);
});

test("every folder of src/ stands in the table", () => {
  const folders = readdirSync(source).filter((name) => statSync(join(source, name)).isDirectory());
  expect(folders.filter((name) => !(name in TABLE))).toEqual([]);
});

test("the table has no circle", () => {
  const order = Object.keys(TABLE);
  const late = order.flatMap((folder, i) => TABLE[folder].filter((other) => order.indexOf(other) > i));
  expect(late).toEqual([]);
});

test("the check itself refuses what it must", () => {
  const at = (path: string) => join(source, path);
  expect(problem(at("weak/born.ts"), "../network/compile.ts")).toBeDefined();
  expect(problem(at("output/csv.ts"), "../charts/style.ts")).toBeDefined();
  expect(problem(at("background/plasma.ts"), "node:fs")).toBeDefined();
  expect(problem(at("model/prepare.ts"), "mathjs")).toBeDefined();
  expect(problem(at("cli/main.ts"), "../scripts/make-rates.ts")).toBeDefined();
  expect(problem(at("index.ts"), "./node/index.ts")).toBeDefined();
  expect(problem(at("weak/born.ts"), "../constants/units")).toBeDefined();
  expect(problem(at("weak/born.ts"), "../constants/units.ts")).toBeUndefined();
});
