/** The command as it is installed: built once for a state of src/, for tests that need processes of their own. */
import { type ChildProcess, spawn } from "node:child_process";
import { createHash } from "node:crypto";
import { existsSync, mkdirSync, mkdtempSync, readdirSync, renameSync, rmSync, statSync } from "node:fs";
import { tmpdir } from "node:os";
import { join, resolve } from "node:path";
import { build } from "tsdown";

const root = resolve(import.meta.dirname, "../..");
const cache = join(root, "node_modules/.cache");
/** Builds of earlier states of src/ are removed after this time [ms]. */
const KEPT_MS = 3_600_000;

function fingerprint(): string {
  const hash = createHash("sha256");
  const visit = (folder: string): void => {
    for (const entry of readdirSync(folder, { withFileTypes: true })) {
      const path = join(folder, entry.name);
      if (entry.isDirectory()) visit(path);
      else {
        const { size, mtimeMs } = statSync(path);
        hash.update(`${path} ${size} ${mtimeMs}\n`);
      }
    }
  };
  visit(join(root, "src"));
  return hash.digest("hex").slice(0, 16);
}

/** Path of the command's main file, built if it is not there yet. */
export async function builtCommand(): Promise<string> {
  const folder = join(cache, `emberline-test-${fingerprint()}`);
  if (!existsSync(folder)) {
    mkdirSync(cache, { recursive: true });
    for (const name of readdirSync(cache).filter((each) => each.startsWith("emberline-test-"))) {
      const path = join(cache, name);
      if (Date.now() - statSync(path).mtimeMs > KEPT_MS) rmSync(path, { recursive: true, force: true });
    }
    const own = `${folder}.${process.pid}`;
    await build({ cwd: root, outDir: own, dts: false, logLevel: "silent" });
    try {
      renameSync(own, folder);
    } catch {
      // Another test file was faster; both builds are of the same source.
      rmSync(own, { recursive: true, force: true });
    }
  }
  return join(folder, "cli/main.mjs");
}

/** What became of a run of the command. */
export interface Finished {
  readonly status: number | null;
  readonly signal: NodeJS.Signals | null;
  readonly out: string;
  readonly err: string;
}

export interface Running {
  readonly child: ChildProcess;
  readonly finished: Promise<Finished>;
}

/** Starts a program; its output is collected. */
export function start(program: string, args: readonly string[], cwd: string, input?: string): Running {
  const child = spawn(program, args, { cwd, stdio: ["pipe", "pipe", "pipe"] });
  let out = "";
  let err = "";
  child.stdout.on("data", (chunk) => {
    out += chunk;
  });
  child.stderr.on("data", (chunk) => {
    err += chunk;
  });
  child.stdin.on("error", () => {});
  child.stdin.end(input ?? "");
  const finished = new Promise<Finished>((done, fail) => {
    child.on("error", fail);
    child.on("close", (status, signal) => done({ status, signal, out, err }));
  });
  return { child, finished };
}

/** Runs the built command in a folder. */
export async function emberline(cwd: string, args: readonly string[], input?: string): Promise<Finished> {
  return start(process.execPath, [await builtCommand(), ...args], cwd, input).finished;
}

/** A folder of its own for a test. */
export function workFolder(): string {
  return mkdtempSync(join(tmpdir(), "emberline-"));
}
