import { readFileSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import { root } from '../../src/server/run/root';
import { boundaryFaults } from './boundaries';

const source = join(root, 'src');
const files = readdirSync(source, { recursive: true })
  .map(String)
  .filter((path) => /\.(ts|tsx|astro)$/.test(path) && !/\.test\.tsx?$/.test(path))
  .sort();
const faults = files.flatMap((path) => boundaryFaults(path, readFileSync(join(source, path), 'utf8')));
for (const fault of faults) process.stderr.write(`${fault}\n`);
process.stdout.write(`${files.length} files, ${faults.length} imports across a boundary\n`);
process.exitCode = faults.length === 0 && files.length > 0 ? 0 : 1;
