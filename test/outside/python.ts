/** Runs a Python script of this folder with a JSON object on standard input; Debian's interpreter first. */
import { spawnSync } from "node:child_process";
import { fileURLToPath } from "node:url";

const CANDIDATES = ["/usr/bin/python3", "python3"];

/** The first interpreter that imports the modules, or undefined. */
export function pythonWith(modules: readonly string[]): string | undefined {
  return CANDIDATES.find((python) => spawnSync(python, ["-c", `import ${modules.join(", ")}`]).status === 0);
}

/**
 * Result of a script, as JSON.
 * @throws {Error} if Python or a module is missing (the tests need python3-scipy and python3-astropy of Debian) or the
 *   script fails
 */
export function runPython<T>(script: string, modules: readonly string[], input: unknown): T {
  const python = pythonWith(modules);
  if (!python)
    throw new Error(
      `no python3 with ${modules.join(", ")}: install Debian's ${modules.map((m) => `python3-${m}`).join(" ")}`,
    );
  const path = fileURLToPath(new URL(script, import.meta.url));
  const done = spawnSync(python, [path], {
    input: JSON.stringify(input),
    encoding: "utf8",
    maxBuffer: 1 << 28,
    env: { ...process.env, OMP_NUM_THREADS: "1", OPENBLAS_NUM_THREADS: "1" },
  });
  if (done.status !== 0) throw new Error(`${script}: ${done.stderr.trim().slice(-500)}`);
  return JSON.parse(done.stdout) as T;
}
