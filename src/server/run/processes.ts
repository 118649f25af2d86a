import { spawn, type ChildProcess } from 'node:child_process';
import { closeSync, openSync, statSync, renameSync } from 'node:fs';
import { join } from 'node:path';
import { root } from './root';

/** A process of ours that is started again when it falls over. */
export interface Supervised {
  /** Settles when the process has said that it is ready; rejects with its exit code when it ends first. */
  ready: Promise<void>;
  /** Asks the process to end, waits for at most so long, then kills it. */
  stop(graceMs: number): Promise<void>;
}

/** Ended before it was ready. */
export class EndedEarly extends Error {
  constructor(
    readonly processName: string,
    readonly exitCode: number | null,
  ) {
    super(`The ${processName} process ended with ${exitCode ?? 'a signal'} before it was ready.`);
    this.name = 'EndedEarly';
  }
}

/** The exit code of a web process that finds its port in use. */
export const portInUseExitCode = 98;

interface Options {
  /** Names its log and its script: `src/server/run/<name>.ts`. */
  name: 'web' | 'worker';
  env: NodeJS.ProcessEnv;
  /** Where its log lines go: a file, or undefined for this process's own output. */
  logFolder: string | undefined;
  onRestart: (exitCode: number | null) => void;
  /** Once aborted, a process that ends stays ended: a service manager may ask all of them at once. */
  signal?: AbortSignal;
}

const largestLogBytes = 20 * 1024 * 1024;

function openLog(folder: string, name: string): number {
  const file = join(folder, `${name}.log`);
  const bytes = statSync(file, { throwIfNoEntry: false })?.size ?? 0;
  if (bytes > largestLogBytes) renameSync(file, `${file}.1`);
  return openSync(file, 'a', 0o600);
}

function launch({ name, env, logFolder }: Options): ChildProcess {
  const log = logFolder === undefined ? undefined : openLog(logFolder, name);
  const output = log ?? 'inherit';
  const child = spawn(process.execPath, ['--import', 'tsx', join(root, 'src/server/run', `${name}.ts`)], {
    cwd: root,
    env: { ...env, RIGWRIGHT_PROCESS: name },
    stdio: ['ignore', output, output, 'ipc'],
  });
  if (log !== undefined) closeSync(log);
  return child;
}

/** Starts a process and keeps it running until it is stopped. */
export function supervise(options: Options): Supervised {
  let child: ChildProcess | undefined;
  let isStopping = false;
  let wasReady = false;
  let backoffMs = 500;
  let restart: NodeJS.Timeout | undefined;
  let gone: Promise<void> = Promise.resolve();

  const ready = new Promise<void>((resolve, reject) => {
    const run = (): void => {
      const started = launch(options);
      child = started;
      const startedAt = Date.now();
      started.on('message', () => {
        wasReady = true;
        resolve();
      });
      gone = new Promise((done) => {
        started.once('exit', (code) => {
          done();
          if (isStopping || options.signal?.aborted === true) return;
          if (!wasReady) {
            reject(new EndedEarly(options.name, code));
            return;
          }
          options.onRestart(code);
          backoffMs = Date.now() - startedAt > 60_000 ? 500 : Math.min(backoffMs * 2, 30_000);
          restart = setTimeout(run, backoffMs);
        });
      });
    };
    run();
  });

  return {
    ready,
    async stop(graceMs) {
      isStopping = true;
      clearTimeout(restart);
      const running = child;
      if (!running || running.exitCode !== null || running.signalCode !== null) return;
      running.kill('SIGTERM');
      const kill = setTimeout(() => running.kill('SIGKILL'), graceMs);
      await gone;
      clearTimeout(kill);
    },
  };
}
