/** SIGINT and SIGTERM end a run in order: what is finished is kept, and the exit status is 130. */

/** A run that was ended by a signal. */
export class Interrupted extends Error {
  readonly exitCode = 130;
  constructor(message: string) {
    super(message);
    this.name = "Interrupted";
  }
}

const SIGNALS = ["SIGINT", "SIGTERM"] as const;

/**
 * Listens for the signals that end a run. A second one ends it at once.
 * @returns a signal that is aborted with {@link Interrupted}, and a function that stops listening
 */
export function listenForInterrupt(): { readonly signal: AbortSignal; readonly dispose: () => void } {
  const controller = new AbortController();
  const onSignal = () => {
    if (controller.signal.aborted) process.exit(130);
    controller.abort(new Interrupted("interrupted"));
  };
  for (const name of SIGNALS) process.on(name, onSignal);
  return {
    signal: controller.signal,
    dispose: () => {
      for (const name of SIGNALS) process.off(name, onSignal);
    },
  };
}
