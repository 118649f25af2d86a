import { spawn } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync } from 'node:fs';
import { mkdir, open, readFile, readdir, rename, rm, stat, utimes, writeFile } from 'node:fs/promises';
import { join, relative } from 'node:path';
import { isRunning } from './is-running';
import { withLock } from './machine-lock.mjs';
import { root } from './root';
import { PlainError, step } from './step.mjs';

const buildsFolder = join(root, '.build');
const sources = ['src', 'public', 'astro.config.mjs', 'tsconfig.json', 'package-lock.json'];
const kept = 2;

async function listFiles(path: string): Promise<string[]> {
  const found = await stat(path).catch(() => undefined);
  if (!found) return [];
  if (!found.isDirectory()) return [path];
  const entries = await readdir(path);
  const nested = await Promise.all(entries.map((entry) => listFiles(join(path, entry))));
  return nested.flat();
}

/** A name for the state of the sources: the SHA-256 over names and bytes of all that goes into a build. */
async function hashSources(): Promise<string> {
  const files = (await Promise.all(sources.map((source) => listFiles(join(root, source))))).flat();
  const hash = createHash('sha256');
  for (const file of files.filter((name) => !name.endsWith('.test.ts')).sort()) {
    const bytes = await readFile(file);
    hash.update(`${relative(root, file)}\0${bytes.length}\0`).update(bytes);
  }
  return hash.digest('hex').slice(0, 16);
}

async function runAstro(outFolder: string, signal: AbortSignal): Promise<void> {
  await mkdir(buildsFolder, { recursive: true });
  const logFile = join(buildsFolder, 'build.log');
  const log = await open(logFile, 'w');
  const child = spawn(process.execPath, [join(root, 'node_modules/astro/astro.js'), 'build'], {
    cwd: root,
    signal,
    stdio: ['ignore', log.fd, log.fd],
    env: {
      ...process.env,
      NODE_ENV: 'production',
      ASTRO_TELEMETRY_DISABLED: '1',
      RIGWRIGHT_OUT: relative(root, outFolder),
    },
  });
  const code = await new Promise<number | null>((resolve, reject) => {
    child.once('error', reject);
    child.once('exit', resolve);
  });
  await log.close();
  if (code === 0) return;
  await rm(outFolder, { recursive: true, force: true });
  const tail = (await readFile(logFile, 'utf8')).trimEnd().split('\n').slice(-15).join('\n');
  throw new PlainError(`The application does not build; mend what this says and start again:\n${tail}`);
}

/** Removes all builds but the newest and those that a running process has marked as in use. */
async function removeOldBuilds(): Promise<void> {
  const names = (await readdir(buildsFolder)).filter((name) => /^[0-9a-f]{16}$/.test(name));
  const dated = await Promise.all(
    names.map(async (name) => ({ name, time: (await stat(join(buildsFolder, name))).mtimeMs })),
  );
  dated.sort((a, b) => b.time - a.time);
  for (const { name } of dated.slice(kept)) {
    const users = await readdir(join(buildsFolder, `${name}.users`)).catch(() => []);
    if (users.some((pid) => isRunning(Number(pid)))) continue;
    await rm(join(buildsFolder, name), { recursive: true, force: true });
    await rm(join(buildsFolder, `${name}.users`), { recursive: true, force: true });
  }
}

/**
 * The folder of the build that belongs to the present sources; builds it unless it is there. A build in
 * use by a running process stays until that process has ended, whatever is built meanwhile.
 *
 * @param signal ends a build under way
 * @throws PlainError when the sources do not build.
 */
export async function ensureBuild(signal: AbortSignal): Promise<string> {
  return withLock(
    `build ${root}`,
    async () => {
      const name = await hashSources();
      const folder = join(buildsFolder, name);
      if (!existsSync(folder)) {
        step('Building the application, because its sources changed (about half a minute)');
        const unfinished = join(buildsFolder, `unfinished-${process.pid}`);
        await rm(unfinished, { recursive: true, force: true });
        await runAstro(unfinished, signal);
        await rename(unfinished, folder);
      }
      const now = new Date();
      await utimes(folder, now, now);
      await mkdir(`${folder}.users`, { recursive: true });
      await writeFile(join(`${folder}.users`, String(process.pid)), '');
      await removeOldBuilds();
      return folder;
    },
    () => step('Waiting for another build'),
  );
}
