import { fileURLToPath } from 'node:url';

/** The folder of the package: where package.json lies. */
export const root = fileURLToPath(new URL('../../..', import.meta.url)).replace(/\/$/, '');
