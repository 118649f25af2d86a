import { spawn } from 'node:child_process';
import { join } from 'node:path';
import { root } from '../../src/server/run/root';

const binary = (path: string): string => join(root, 'node_modules', path);

/** Every check with the words that name it; `npm run check -- lint` runs one. */
const checks: readonly { name: string; args: string[] }[] = [
  { name: 'boundaries', args: ['--import', 'tsx', join(root, 'tests/setup/check-boundaries.ts')] },
  { name: 'format', args: [binary('prettier/bin/prettier.cjs'), '--check', '--log-level=warn', '.'] },
  { name: 'unused', args: [binary('knip/bin/knip.js'), '--no-progress'] },
  {
    name: 'types',
    args: [
      '--max-old-space-size=4096',
      binary('astro/astro.js'),
      'check',
      '--minimumFailingSeverity',
      'warning',
    ],
  },
  {
    name: 'lint',
    args: ['--max-old-space-size=4096', binary('eslint/bin/eslint.js'), '--max-warnings=0', '.'],
  },
];

function run(args: string[]): Promise<number | null> {
  return new Promise((resolve, reject) => {
    const child = spawn(process.execPath, args, { cwd: root, stdio: ['ignore', 'inherit', 'inherit'] });
    child.once('error', reject);
    child.once('exit', resolve);
  });
}

const named = process.argv.slice(2);
const chosen = checks.filter(({ name }) => named.length === 0 || named.includes(name));
const outcomes: string[] = [];
for (const { name, args } of chosen) {
  process.stdout.write(`· ${name}\n`);
  const isGreen = (await run(args)) === 0;
  if (!isGreen) process.exitCode = 1;
  outcomes.push(`${name} ${isGreen ? 'passed' : 'FAILED'}`);
}
if (chosen.length === 0) process.exitCode = 1;
process.stdout.write(`${outcomes.join(', ') || 'no check of that name'}\n`);
