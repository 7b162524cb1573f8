/** Lines of a stream of bytes, one at a time, of bounded length; what is no text is told, not guessed. */
import type { Readable } from "node:stream";

/** A line as it came. */
export type InputLine =
  | { readonly number: number; readonly text: string }
  | { readonly number: number; readonly problem: "too-long" | "not-text" };

/** Longest line that is taken [bytes]. */
export const LONGEST_LINE = 1_000_000;

/**
 * Lines without their ends; empty ones are left out but counted. A line over {@link LONGEST_LINE} is skipped without
 * being held in memory. Reading goes on only as lines are taken.
 */
export async function* inputLines(input: Readable, signal?: AbortSignal): AsyncGenerator<InputLine> {
  const decoder = new TextDecoder("utf-8", { fatal: true, ignoreBOM: false });
  let parts: Buffer[] = [];
  let length = 0;
  let number = 0;
  const finish = (): InputLine | undefined => {
    number++;
    const bytes = length > LONGEST_LINE ? undefined : Buffer.concat(parts);
    parts = [];
    length = 0;
    if (bytes === undefined) return { number, problem: "too-long" };
    try {
      const text = decoder.decode(bytes).trim();
      return text === "" ? undefined : { number, text };
    } catch {
      return { number, problem: "not-text" };
    }
  };
  for await (const chunk of input as AsyncIterable<Buffer>) {
    if (signal?.aborted) return;
    let from = 0;
    for (let end = chunk.indexOf(10); end >= 0; end = chunk.indexOf(10, from)) {
      length += end - from;
      if (length <= LONGEST_LINE) parts.push(chunk.subarray(from, end));
      from = end + 1;
      const line = finish();
      if (line !== undefined) yield line;
      if (signal?.aborted) return;
    }
    length += chunk.length - from;
    if (length <= LONGEST_LINE) parts.push(chunk.subarray(from));
    else parts = [];
  }
  if (length > 0) {
    const line = finish();
    if (line !== undefined) yield line;
  }
}
