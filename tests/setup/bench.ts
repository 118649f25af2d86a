import { mkdirSync, readdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import type { Application } from '../../src/server/run/application';
import { lifetime } from '../../src/server/run/lifetime';
import { root } from '../../src/server/run/root';
import { PlainError, sayFailure, step } from '../../src/server/run/step.mjs';
import { figures, judgeFigure, tableOf, type Figure, type Outcome } from './figures';

// Measures the figures of tests/bench: all, or those that are named.

const sources = join(root, 'tests/bench');
const folder = join(root, '.bench');
const life = lifetime(60_000, () => step('Stopping'));

async function chooseFigures(names: readonly string[]): Promise<readonly Figure[]> {
  const files = readdirSync(sources).filter((file) => file.endsWith('.bench.ts'));
  for (const file of files.sort()) await import(join(sources, file));
  const all = figures();
  const unknown = names.find((wanted) => !all.some(({ name }) => name === wanted));
  if (unknown !== undefined) {
    throw new PlainError(
      `No figure is called “${unknown}”; there are ${all.map(({ name }) => name).join(', ')}.`,
    );
  }
  return all.filter(({ name }) => names.length === 0 || names.includes(name));
}

let demo: Promise<Application> | undefined;
const tools = {
  // Loaded when it is asked for: most figures need no application.
  demo: () => (demo ??= import('./demo-works').then(({ startDemoWorks }) => startDemoWorks(life))),
  onStop: life.onStop,
};

async function measure(chosen: readonly Figure[]): Promise<{ outcomes: Outcome[]; broken: number }> {
  const outcomes: Outcome[] = [];
  let broken = 0;
  for (const each of chosen) {
    step(`Measuring ${each.name}`);
    try {
      outcomes.push(judgeFigure(each, await each.run(tools)));
    } catch (error) {
      if (life.signal.aborted) throw error;
      broken += 1;
      process.stderr.write(
        `“${each.name}” could not be measured. ${error instanceof Error ? (error.stack ?? '') : String(error)}\n`,
      );
    }
  }
  return { outcomes, broken };
}

let exitCode = 1;
try {
  const { outcomes, broken } = await measure(await chooseFigures(process.argv.slice(2)));
  mkdirSync(folder, { recursive: true });
  writeFileSync(join(folder, 'latest.json'), `${JSON.stringify(outcomes, null, 2)}\n`);
  process.stdout.write(`${tableOf(outcomes)}\n`);
  if (broken === 0 && outcomes.every(({ met }) => met)) exitCode = 0;
} catch (error) {
  if (!life.signal.aborted) sayFailure(error);
}
await life.end(exitCode);
