import { existsSync } from 'node:fs';
import { fileURLToPath } from 'node:url';

/** The folder with files from elsewhere: RIGWRIGHT_SAMPLES, or the usual place beside the clone. */
export function samplesFolder(): string | undefined {
  const named = process.env['RIGWRIGHT_SAMPLES'];
  if (named) return named;
  const usual = fileURLToPath(new URL('../../../shared/samples', import.meta.url));
  return existsSync(usual) ? usual : undefined;
}
