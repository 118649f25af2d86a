import { expect, test } from 'vitest';
import { boundaryFaults } from './boundaries';

const forbidden: [name: string, path: string, text: string][] = [
  ['domain asks the database', 'domain/bench/decision.ts', "import { db } from '~/server/db/client';"],
  ['a type is still an import', 'domain/bench/x.ts', "import type { Db } from '~/server/db/client';"],
  [
    'a page asks the database',
    'pages/works/index.astro',
    "---\nimport { db } from '~/server/db/client';\n---\n<p />",
  ],
  ['a script in a page', 'pages/index.astro', "<p /><script>import { x } from '~/server/env';</script>"],
  ['a service makes a document', 'server/services/a.ts', "import { x } from '~/server/pdf/sheet';"],
  ['an island runs a query', 'components/a/B.tsx', "import { list } from '~/server/queries/a/list';"],
  ['import() counts', 'lib/a.ts', "const x = await import('~/domain/a/b');"],
  ['import type counts', 'lib/a.ts', "type X = import('~/domain/a/b').X;"],
  ['re-export counts', 'lib/a.ts', "export { x } from '~/domain/a/b'; const y = 1;"],
  ['relative to another folder', 'domain/a/b.ts', "import { x } from '../c/d';"],
  ['a barrel', 'domain/a/index.ts', "export * from './b';"],
  ['a package in schemas', 'schemas/a.ts', "import mysql from 'mysql2';"],
  ['no layer', 'strange/a.ts', "import { x } from '~/lib/a';"],
];

test.each(forbidden)('%s is refused', (_name, path, text) => {
  expect(boundaryFaults(path, text)).toHaveLength(1);
});

const allowed: [name: string, path: string, text: string][] = [
  ['domain uses lib', 'domain/a/b.ts', "import { x } from '~/lib/dates'; import { y } from './c';"],
  [
    'an island takes types of queries',
    'components/a/B.tsx',
    "import type { Row } from '~/server/queries/a/list';",
  ],
  ['a page queries', 'pages/index.astro', "---\nimport { x } from '~/server/queries/a/list';\n---\n<p />"],
  ['the schema passes on', 'server/db/schema/index.ts', "export * from './people';"],
];

test.each(allowed)('%s is allowed', (_name, path, text) => {
  expect(boundaryFaults(path, text)).toEqual([]);
});
