import { spawnSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { SCRIPT_CHECK, SHELL_CHECK } from '~/domain/certificates/how-to-check';
import { generateKeyPair, publicKeyOf, publicKeyPem } from '~/server/keys/ed25519';
import { buildPoint } from './build-statement';
import { renderStatement, testKey } from './render-statement';

vi.setConfig({ testTimeout: 60_000 });

let folder: string;

/** Runs the published lines as they stand, in a folder that holds what they name. */
function check(lines: readonly string[], program: string, args: string[]) {
  return spawnSync(program, args, { cwd: folder, input: lines.join('\n'), encoding: 'utf8' });
}

const shell = () => check(SHELL_CHECK, 'sh', ['-e']);
const script = () => check(SCRIPT_CHECK, process.execPath, ['--input-type=module', '-']);

function put(pdf: Uint8Array, key = publicKeyOf(testKey)): void {
  writeFileSync(join(folder, 'certificate.pdf'), pdf);
  writeFileSync(join(folder, 'key.pem'), publicKeyPem(key));
}

beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'check-'));
});

afterAll(() => {
  rmSync(folder, { recursive: true });
});

describe('the published way to check a certificate', () => {
  it.each([
    ['plain', {}],
    [
      'with quotation marks, backslashes, lines and other scripts in its texts',
      {
        deviations: ['"statement":{"a":1}} was said, and "value":"AAAA"; C:\\new\\x', 'a\nb\u2028c 🎛 Ω "'],
        points: [buildPoint({ value: 1e-7, lower: 1e21, upper: -0.000001234 })],
      },
    ],
    ['amended', { letter: 'A', replaces: { number: 'TC-2027-00412', reason: 'A slip.' } }],
  ])('accepts what the works issued, by openssl and by a few lines of a language: %s', async (_, over) => {
    put(await renderStatement(over));
    const byShell = shell();
    expect(byShell.stderr).toBe('');
    expect(byShell.stdout).toContain('Signature Verified Successfully');
    expect(byShell.status).toBe(0);
    expect(script().stdout).toBe('true\n');
  });

  it('refuses another key', async () => {
    put(await renderStatement(), generateKeyPair().publicKey);
    const byShell = shell();
    expect(byShell.stdout).toContain('Signature Verification Failure');
    expect(byShell.status).not.toBe(0);
    expect(script().stdout).toBe('false\n');
  });

  it('refuses a changed reading', async () => {
    put(await renderStatement());
    expect(shell().status).toBe(0);
    const file = join(folder, 'certificate.json');
    writeFileSync(file, readFileSync(file, 'utf8').replace('"−54.7 dBc"', '"−64.7 dBc"'));
    expect(check(SHELL_CHECK.slice(1), 'sh', ['-e']).stdout).toContain('Signature Verification Failure');
    expect(script().stdout).toBe('false\n');
  });

  it('stands in the README, word for word', () => {
    const readme = readFileSync('README.md', 'utf8');
    expect(readme).toContain(['```sh', ...SHELL_CHECK, '```'].join('\n'));
  });
});
