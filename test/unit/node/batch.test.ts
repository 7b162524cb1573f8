// Lines in, lines out: order, back-pressure, bounded memory, and every end that a stream may come to.
import { PassThrough, Readable, Writable } from "node:stream";
import { describe, expect, test } from "vitest";
import { runBatch } from "../../../src/node/batch.ts";
import { type InputLine, inputLines, LONGEST_LINE } from "../../../src/node/input-lines.ts";
import type { TaskStream } from "../../../src/node/task-stream.ts";

async function lines(...chunks: (string | Buffer)[]): Promise<InputLine[]> {
  const found: InputLine[] = [];
  for await (const line of inputLines(Readable.from(chunks.map((chunk) => Buffer.from(chunk))))) found.push(line);
  return found;
}

describe("input lines", () => {
  test("come whole, numbered, without ends, however the bytes are cut", async () => {
    const wanted = [
      { number: 1, text: "a" },
      { number: 3, text: "dé" },
      { number: 4, text: "e" },
    ];
    const bytes = Buffer.from("\ufeffa\n \r\ndé\r\ne");
    for (let cut = 0; cut <= bytes.length; cut++)
      expect(await lines(bytes.subarray(0, cut), bytes.subarray(cut)), `cut at ${cut}`).toEqual(wanted);
    expect(await lines()).toEqual([]);
    expect(await lines("\n\n")).toEqual([]);
  });

  test("that are too long or no text are told, and the next ones come", async () => {
    const long = "x".repeat(LONGEST_LINE / 2 + 1);
    expect(await lines("a\n", long, long, long, "\nb\n", Buffer.from([0xff, 0xfe, 10]), "c")).toEqual([
      { number: 1, text: "a" },
      { number: 2, problem: "too-long" },
      { number: 3, text: "b" },
      { number: 4, problem: "not-text" },
      { number: 5, text: "c" },
    ]);
    expect(await lines("y".repeat(LONGEST_LINE))).toMatchObject([{ number: 1, text: expect.any(String) }]);
  });
});

/** Answers after a time that is shorter for later lines, so that order must be restored. */
function stream(delay: (line: number) => number): TaskStream & { most: number } {
  let underWay = 0;
  const made = {
    window: 8,
    most: 0,
    async submit({ line, text }: { line: number; text: string }) {
      made.most = Math.max(made.most, ++underWay);
      await new Promise((resolve) => setTimeout(resolve, delay(line)));
      underWay--;
      return { text: `${line}:${text}` };
    },
    close: async () => {},
  };
  return made;
}

function collector(): { output: Writable; text: () => string } {
  const chunks: string[] = [];
  const output = new Writable({
    write(chunk, _, done) {
      chunks.push(String(chunk));
      done();
    },
  });
  return { output, text: () => chunks.join("") };
}

const numbered = (count: number) => Array.from({ length: count }, (_, i) => `l${i + 1}`);
const input = (count: number) => Readable.from(numbered(count).map((line) => Buffer.from(`${line}\n`)));

test("answers come in the order of the lines, with no more under way than the window", async () => {
  const { output, text } = collector();
  const tasks = stream((line) => (20 - line) % 7);
  const outcome = await runBatch(input(40), output, tasks, new AbortController().signal);
  expect(outcome).toEqual({ answers: 40, closed: false });
  expect(text()).toBe(
    numbered(40)
      .map((line, i) => `${i + 1}:${line}\n`)
      .join(""),
  );
  expect(tasks.most).toBeLessThanOrEqual(8);
});

test("a line that cannot be read gets its error in its place", async () => {
  const { output, text } = collector();
  const bytes = Buffer.concat([Buffer.from("a\n"), Buffer.from([0xff, 10]), Buffer.from("b\n")]);
  await runBatch(
    Readable.from([bytes]),
    output,
    stream(() => 1),
    new AbortController().signal,
  );
  const found = text().trim().split("\n");
  expect(found[0]).toBe("1:a");
  expect(JSON.parse(found[1])).toEqual({ line: 2, error: { code: "not-text", message: expect.any(String) } });
  expect(found[2]).toBe("3:b");
});

test("reading stops while the output is not taken", async () => {
  let read = 0;
  const source = new Readable({
    highWaterMark: 1,
    read() {
      read++;
      this.push(read > 5000 ? null : `l${read}\n`);
    },
  });
  const slow = new PassThrough({ highWaterMark: 100 });
  const batch = runBatch(
    source,
    slow,
    stream(() => 0),
    new AbortController().signal,
  );
  await new Promise((resolve) => setTimeout(resolve, 300));
  expect(read).toBeLessThan(200);
  slow.resume();
  expect((await batch).answers).toBe(5000);
});

test("an answer is written as soon as it is there, while the next request is still awaited", async () => {
  const source = new PassThrough();
  const { output, text } = collector();
  const batch = runBatch(
    source,
    output,
    stream(() => 1),
    new AbortController().signal,
  );
  source.write("a\n");
  await new Promise((resolve) => setTimeout(resolve, 50));
  expect(text()).toBe("1:a\n");
  source.end("b\n");
  expect((await batch).answers).toBe(2);
});

test("a reader that goes away ends the batch quietly", async () => {
  const output = new Writable({
    write(chunk, _, done) {
      done(String(chunk).startsWith("3") ? Object.assign(new Error("gone"), { code: "EPIPE" }) : null);
    },
  });
  const outcome = await runBatch(
    input(1000),
    output,
    stream(() => 1),
    new AbortController().signal,
  );
  expect(outcome.closed).toBe(true);
  expect(outcome.answers).toBeLessThan(20);
});

test("an output that fails otherwise is an error", async () => {
  const output = new Writable({
    write(_chunk, _encoding, done) {
      done(Object.assign(new Error("no space"), { code: "ENOSPC" }));
    },
  });
  const batch = runBatch(
    input(100),
    output,
    stream(() => 1),
    new AbortController().signal,
  );
  await expect(batch).rejects.toThrow(/standard output: cannot be written: no space left on the device/);
});

test("a signal ends it after whole answers, even while a long one is under way", async () => {
  const { output, text } = collector();
  const controller = new AbortController();
  setTimeout(() => controller.abort(), 60);
  const begin = performance.now();
  const outcome = await runBatch(
    input(1000),
    output,
    stream((line) => (line === 20 ? 30000 : 1)),
    controller.signal,
  );
  expect(performance.now() - begin).toBeLessThan(5000);
  expect(text().split("\n").length - 1).toBe(outcome.answers);
  expect(outcome.answers).toBeLessThan(20);
});
