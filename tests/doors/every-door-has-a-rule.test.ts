import { readdirSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { describe, expect, test } from 'vitest';
import { listDoors } from '~/server/api-routes';
import { pageRules } from '~/server/doors';

const pagesFolder = fileURLToPath(new URL('../../src/pages', import.meta.url));
const files = readdirSync(pagesFolder, { recursive: true }).map((path) => `/${String(path)}`);

/** Route patterns of the pages there are, as the framework names them. */
const pages = files
  .filter((path) => path.endsWith('.astro'))
  .map((path) => path.replace(/\.astro$/, '').replace(/\/index$/, '') || '/')
  .sort();

describe('who may enter', () => {
  test('every page names who may enter', () => {
    expect(pages.filter((pattern) => !(pattern in pageRules))).toEqual([]);
  });

  test('every rule belongs to a page', () => {
    expect(Object.keys(pageRules).filter((pattern) => !pages.includes(pattern))).toEqual([]);
  });

  test('every route of the API is a door with a rule', async () => {
    const { doors, withoutRule } = await listDoors();
    expect(withoutRule).toEqual([]);
    const routes = files.filter((path) => /^\/api\/.*\.ts$/.test(path));
    const served = new Set(doors.map(({ pattern }) => pattern));
    expect(served.size).toBe(routes.length);
  });
});
