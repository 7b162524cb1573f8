/** Prints to the two streams: results to standard output, everything else to standard error. */

import { refusal } from "./write-file.ts";

/** Writes text to a stream and waits until it is taken; a reader that went away (`| head`) ends it quietly. */
function write(stream: NodeJS.WriteStream, text: string): Promise<void> {
  return new Promise((resolve, reject) => {
    const onError = (error: NodeJS.ErrnoException) =>
      error.code === "EPIPE" ? resolve() : reject(refusal("the output", error));
    stream.once("error", onError);
    stream.write(text, (error) => {
      if (error) onError(error);
      else {
        stream.off("error", onError);
        resolve();
      }
    });
  });
}

/** Results, to standard output. */
export function printResult(text: string): Promise<void> {
  return write(process.stdout, text);
}

/** One line about the run, to standard error. */
export function printNotice(text: string): Promise<void> {
  return write(process.stderr, text.endsWith("\n") ? text : `${text}\n`);
}
