import { execFileSync, spawnSync } from 'node:child_process';
import {
  cpSync,
  existsSync,
  mkdirSync,
  mkdtempSync,
  readFileSync,
  rmSync,
  symlinkSync,
  writeFileSync,
} from 'node:fs';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { root } from '../../src/server/run/root';
import { samplesFolder } from './samples';

// Tries the checks themselves: plants a fault in a copy and sees whether the check that should find it turns red.

const boundaries = ['--import', 'tsx', 'tests/setup/check-boundaries.ts'];
const verdictTests = [
  'node_modules/vitest/vitest.mjs',
  'run',
  '--project=unit',
  'src/domain/bench/decision',
  'tests/reference/bench-decision',
];
const doorTests = ['node_modules/vitest/vitest.mjs', 'run', '--project=unit', 'tests/doors'];
const decision = 'src/domain/bench/decision.ts';

interface Planted {
  name: string;
  check: readonly string[];
  file: string;
  /** The text of a new file, or what to put in the place of what. */
  text: string | { from: string; to: string };
}

const planted: readonly Planted[] = [
  {
    name: 'the domain imports the database (.ts)',
    check: boundaries,
    file: 'src/domain/bench/planted.ts',
    text: "import { db } from '~/server/db/client';\nexport const planted = db;\n",
  },
  {
    name: 'a page imports the database (.astro)',
    check: boundaries,
    file: 'src/pages/works/planted.astro',
    text: "---\nimport { db } from '~/server/db/client';\n---\n<p>{String(db)}</p>\n",
  },
  {
    name: "a page's script imports the settings (.astro)",
    check: boundaries,
    file: 'src/pages/works/planted.astro',
    text: "<p>x</p>\n<script>\n  import { env } from '~/server/env';\n  env();\n</script>\n",
  },
  ...[
    ['fails above', '!atMost(value, upper + w)', '!atMost(upper + w, value)'],
    ['fails below', '!atMost(lower - w, value)', '!atMost(value, lower - w)'],
    ['passes under the upper limit', 'atMost(value, upper - w)', 'atMost(upper - w, value)'],
    ['passes over the lower limit', 'atMost(lower + w, value)', 'atMost(value, lower + w)'],
    ['equality passes', 'a <= b + SAME', 'a < b - SAME'],
  ].map(([name = '', from = '', to = '']) => ({
    name: `a verdict turned round: ${name}`,
    check: verdictTests,
    file: decision,
    text: { from, to },
  })),
  {
    name: 'a page without a rule',
    check: doorTests,
    file: 'src/pages/works/planted.astro',
    text: '<p>open to everybody?</p>\n',
  },
  {
    name: 'a route of the API without a rule',
    check: doorTests,
    file: 'src/pages/api/planted.ts',
    text: "export const GET = () => new Response('open to everybody?');\n",
  },
];

function copyTree(): string {
  const copy = mkdtempSync(join(tmpdir(), 'rigwright-checks-'));
  const listed = execFileSync('git', ['ls-files', '-z', '--cached', '--others', '--exclude-standard'], {
    cwd: root,
  });
  for (const file of listed.toString().split('\0')) {
    if (file === '' || !existsSync(join(root, file))) continue;
    mkdirSync(join(copy, dirname(file)), { recursive: true });
    cpSync(join(root, file), join(copy, file));
  }
  symlinkSync(join(root, 'node_modules'), join(copy, 'node_modules'));
  return copy;
}

function isGreen(copy: string, check: readonly string[]): boolean {
  const { status, error } = spawnSync(process.execPath, [...check], {
    timeout: 120_000,
    cwd: copy,
    stdio: 'ignore',
    env: { ...process.env, RIGWRIGHT_SAMPLES: samplesFolder() ?? '' },
  });
  // A check that never ends is no check.
  if (error) throw error;
  return status === 0;
}

function plant(copy: string, { file, text }: Planted): () => void {
  const path = join(copy, file);
  const before = existsSync(path) ? readFileSync(path, 'utf8') : undefined;
  if (typeof text === 'string') {
    mkdirSync(dirname(path), { recursive: true });
    writeFileSync(path, text);
  } else {
    if (before?.split(text.from).length !== 2) throw new Error(`${file} has not exactly one “${text.from}”`);
    writeFileSync(path, before.replace(text.from, text.to));
  }
  return () => (before === undefined ? rmSync(path) : writeFileSync(path, before));
}

const copy = copyTree();
const unwell: string[] = [];
function say(isWell: boolean, outcome: string, name: string): void {
  if (!isWell) unwell.push(name);
  process.stdout.write(`${isWell ? 'ok ' : 'NO '} ${outcome.padEnd(6)} ${name}\n`);
}
try {
  for (const check of new Set(planted.map((one) => one.check))) {
    const green = isGreen(copy, check);
    say(green, green ? 'green' : 'red', `nothing planted: ${check.slice(2).join(' ')}`);
  }
  for (const fault of planted) {
    const remove = plant(copy, fault);
    const green = isGreen(copy, fault.check);
    remove();
    say(!green, green ? 'green' : 'red', fault.name);
  }
} finally {
  rmSync(copy, { recursive: true, force: true });
}
process.exitCode = unwell.length === 0 ? 0 : 1;
