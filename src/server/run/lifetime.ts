/** What a command has started and has to end again. */
export interface Lifetime {
  /** Aborted when the command is asked to end. */
  signal: AbortSignal;
  /** Takes what has to be undone at the end; the last comes first. */
  onStop: (task: () => Promise<void>) => void;
  /** Undoes everything, within bounds, and ends this process. */
  end: (exitCode: number) => Promise<never>;
}

/**
 * Ends this process in order when it is asked to by SIGINT, SIGTERM or SIGHUP; at once when asked twice.
 *
 * @param limitMs how long undoing may take altogether
 * @param onAsked says that it ends
 */
export function lifetime(limitMs: number, onAsked: () => void): Lifetime {
  const controller = new AbortController();
  const tasks: (() => Promise<void>)[] = [];
  let ending: Promise<never> | undefined;

  async function undo(exitCode: number): Promise<never> {
    controller.abort();
    const limit = setTimeout(() => process.exit(1), limitMs);
    let code = exitCode;
    for (let task = tasks.pop(); task; task = tasks.pop()) {
      await task().catch((error: unknown) => {
        process.stderr.write(`${String(error)}\n`);
        code = 1;
      });
    }
    clearTimeout(limit);
    process.exit(code);
  }

  const end = (exitCode: number): Promise<never> => (ending ??= undo(exitCode));
  let askedAt: number | undefined;
  for (const name of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) {
    process.on(name, () => {
      // One Ctrl-C arrives twice under npm: from the terminal, and passed on.
      if (askedAt !== undefined && Date.now() - askedAt > 1000) process.exit(1);
      if (askedAt !== undefined) return;
      askedAt = Date.now();
      onAsked();
      void end(0);
    });
  }
  return { signal: controller.signal, onStop: (task) => tasks.push(task), end };
}
