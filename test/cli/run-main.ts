/** Runs the command line in this process and catches what it prints. */
import { vi } from "vitest";
import { main } from "../../src/cli/program.ts";

export interface Printed {
  readonly status: number;
  readonly out: string;
  readonly err: string;
}

export async function runMain(...args: string[]): Promise<Printed> {
  const caught = { out: "", err: "" };
  const catching = (name: "out" | "err") =>
    ((text: string | Uint8Array, ...rest: unknown[]) => {
      caught[name] += text;
      const done = rest.at(-1);
      if (typeof done === "function") done();
      return true;
    }) as typeof process.stdout.write;
  const spies = [
    vi.spyOn(process.stdout, "write").mockImplementation(catching("out")),
    vi.spyOn(process.stderr, "write").mockImplementation(catching("err")),
  ];
  try {
    return { status: await main(args), ...caught };
  } finally {
    for (const spy of spies) spy.mockRestore();
  }
}
