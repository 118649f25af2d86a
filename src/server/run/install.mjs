import { spawn } from 'node:child_process';
import { accessSync, constants, mkdirSync, openSync, readFileSync } from 'node:fs';
import { delimiter, join } from 'node:path';
import { withLock } from './machine-lock.mjs';
import { PlainError, step } from './step.mjs';

/** Debian package → the programs it is needed for. */
const debianPackages = {
  'mariadb-server-core': ['mariadbd', 'mariadb-install-db'],
  'mariadb-client': ['mariadb', 'mariadb-dump'],
  chromium: ['chromium'],
  'poppler-utils': ['pdftotext', 'pdftoppm', 'pdfdetach'],
  qpdf: ['qpdf'],
  openssl: ['openssl'],
};

/** @typedef {keyof typeof debianPackages} DebianPackage */

/** The system folders are searched even where PATH leaves them out, as it does for people without root. */
const programFolders = [...(process.env['PATH'] ?? '').split(delimiter), '/usr/sbin', '/sbin', '/usr/bin'];

/** @param {string} program */
function isInstalled(program) {
  return programFolders.some((folder) => {
    try {
      accessSync(join(folder, program), constants.X_OK);
      return true;
    } catch {
      return false;
    }
  });
}

/**
 * Whether node_modules holds what the lock asks for, by npm's own record of what it put there.
 *
 * @param {string} root
 */
export function packagesMatchLock(root) {
  /** @type {Record<string, { version?: string, integrity?: string, optional?: boolean, devOptional?: boolean }>} */
  let wanted;
  /** @type {typeof wanted} */
  let present;
  try {
    wanted = JSON.parse(readFileSync(join(root, 'package-lock.json'), 'utf8')).packages;
    present = JSON.parse(readFileSync(join(root, 'node_modules', '.package-lock.json'), 'utf8')).packages;
  } catch {
    return false;
  }
  return Object.entries(wanted).every(([path, entry]) => {
    if (path === '') return true;
    const found = present[path];
    if (found === undefined) return entry.optional === true;
    return found.version === entry.version && found.integrity === entry.integrity;
  });
}

/**
 * Runs a program with its output in a log file.
 *
 * @param {string} command
 * @param {string[]} args
 * @param {{ root: string, logFile: string, env?: Record<string, string> }} options
 */
async function runLogged(command, args, { root, logFile, env }) {
  mkdirSync(join(root, '.build'), { recursive: true });
  const output = openSync(logFile, 'a');
  const child = spawn(command, args, {
    cwd: root,
    stdio: ['ignore', output, output],
    env: { ...process.env, ...env },
  });
  const code = await new Promise((resolve, reject) => {
    child.once('error', reject);
    child.once('exit', resolve);
  });
  if (code === 0) return;
  const tail = readFileSync(logFile, 'utf8').trimEnd().split('\n').slice(-15).join('\n');
  throw new PlainError(
    `“${command} ${args.join(' ')}” failed; mend what its last lines say and start again (all of it is in ${logFile}):\n${tail}`,
  );
}

/**
 * Installs the npm packages of the lock unless they are there.
 *
 * @param {string} root
 */
export async function ensureNpmPackages(root) {
  if (packagesMatchLock(root)) return;
  const install = async () => {
    if (packagesMatchLock(root)) return;
    step('Installing the npm packages of the lock (about half a minute)');
    await runLogged('npm', ['ci', '--include=dev', '--ignore-scripts', '--no-audit', '--no-fund'], {
      root,
      logFile: join(root, '.build', 'npm-install.log'),
    });
  };
  await withLock(`npm ${root}`, install, () => step('Waiting for another start that installs npm packages'));
}

/**
 * Installs those Debian packages whose programs are missing.
 *
 * @param {string} root
 * @param {DebianPackage[]} names
 */
export async function ensureDebianPackages(root, names) {
  const missing = () => names.filter((name) => !debianPackages[name].every(isInstalled));
  if (missing().length === 0) return;
  const byHand = `apt-get install --no-install-recommends ${missing().join(' ')}`;
  if (!isInstalled('apt-get')) {
    const programs = missing().flatMap((name) => debianPackages[name]);
    throw new PlainError(
      `Missing: ${programs.join(', ')}; this system has no apt-get, so install them its own way and start again.`,
    );
  }
  if (process.getuid?.() !== 0) {
    throw new PlainError(
      `Missing: ${missing().join(', ')}; run “sudo apt-get update && sudo ${byHand}” once, then start again.`,
    );
  }
  const install = async () => {
    if (missing().length === 0) return;
    step(`Installing from Debian: ${missing().join(', ')}`);
    const options = {
      root,
      logFile: join(root, '.build', 'debian-install.log'),
      env: { DEBIAN_FRONTEND: 'noninteractive' },
    };
    const wait = ['-o', 'DPkg::Lock::Timeout=300'];
    await runLogged('apt-get', [...wait, 'update'], options);
    await runLogged('apt-get', [...wait, 'install', '-y', '--no-install-recommends', ...missing()], options);
  };
  await withLock('debian packages', install, () => step('Waiting for another start that installs packages'));
}
