import { readFileSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import { z } from 'zod';
import { listDoors } from '~/server/api-routes';
import { describeApi } from '~/server/openapi/describe-api';
import { jsonSchemaOf } from '~/server/openapi/json-schema';
import { anyone, signedIn, staff } from '~/server/rules';
import { root } from '../../../src/server/run/root';

const apiFolder = join(root, 'src/pages/api');

/** The doors as their files name them, read without loading them: `GET /api/units/[serial]`. */
function doorsOfFiles(): string[] {
  return readdirSync(apiFolder, { recursive: true })
    .map(String)
    .filter((file) => file.endsWith('.ts'))
    .flatMap((file) => {
      const pattern = `/api/${file.replace(/\.ts$/, '').replace(/(^|\/)index$/, '')}`.replace(/\/$/, '');
      const text = readFileSync(join(apiFolder, file), 'utf8');
      return [...text.matchAll(/^export (?:const|async function|function) ([A-Z]+)\b/gm)].map(
        ([, method = '']) => `${method} ${pattern}`,
      );
    })
    .sort();
}

function isRecord(value: unknown): value is Record<string, unknown> {
  return typeof value === 'object' && value !== null;
}

function at(value: unknown, path: readonly string[]): unknown {
  return path.reduce((inner, name) => (isRecord(inner) ? inner[name] : undefined), value);
}

function allRefs(value: unknown): string[] {
  if (!isRecord(value)) return [];
  return Object.entries(value).flatMap(([name, inner]) =>
    name === '$ref' && typeof inner === 'string' ? [inner] : allRefs(inner),
  );
}

test('every route file is a door, and every door is described', async () => {
  const { doors, withoutRule } = await listDoors();
  expect(withoutRule).toEqual([]);
  expect(doors.map(({ method, pattern }) => `${method} ${pattern}`).sort()).toEqual(doorsOfFiles());
  const { paths } = describeApi(doors, 'http://localhost:4321');
  const described = Object.entries(paths).flatMap(([path, methods]) =>
    Object.keys(methods).map((method) => `${method.toUpperCase()} ${path.replaceAll(/\{(.+?)\}/g, '[$1]')}`),
  );
  expect(described.sort()).toEqual(doorsOfFiles());
});

test('the description is whole: references lead somewhere, ids are unlike, parameters are named', async () => {
  const { doors } = await listDoors();
  const description = describeApi(doors, 'http://localhost:4321');
  for (const ref of allRefs(description)) {
    expect(at(description, ref.replace('#/', '').split('/')), ref).toBeDefined();
  }
  const operations = Object.entries(description.paths).flatMap(([path, methods]) =>
    Object.values(methods).map((operation) => ({ path, operation })),
  );
  const ids = operations.map(({ operation }) => operation.operationId);
  expect(new Set(ids).size).toBe(ids.length);
  for (const { path, operation } of operations) {
    const declared = z
      .array(z.object({ name: z.string(), in: z.string() }))
      .parse(operation.parameters)
      .filter((parameter) => parameter.in === 'path')
      .map(({ name }) => name);
    const inPath = [...path.matchAll(/\{(.+?)\}/g)].map(([, name]) => name);
    expect(declared, path).toEqual(inPath);
    expect(operation.responses, path).toHaveProperty('200');
    expect(operation.summary, path).not.toBe('');
  }
  // Nothing in it gets lost on the way to JSON.
  expect(JSON.parse(JSON.stringify(description))).toEqual(description);
});

test('params that a door checks are those of its pattern', async () => {
  const { doors } = await listDoors();
  for (const { pattern, method, description } of doors) {
    const inPattern = [...pattern.matchAll(/\[(?:\.\.\.)?(.+?)\]/g)].map(([, name]) => name);
    const schema = description.params === undefined ? {} : jsonSchemaOf(description.params, 'input');
    const checked = isRecord(schema['properties']) ? Object.keys(schema['properties']) : [];
    expect(checked.sort(), `${method} ${pattern}`).toEqual(inPattern.sort());
  }
});

const plain = {
  summary: 'One',
  scope: undefined,
  params: undefined,
  query: undefined,
  input: undefined,
  output: z.object({ id: z.number().int() }),
  maxBytes: 65_536,
  raw: false,
};

test('who may pass stands in the text and in the requirements', () => {
  const door = (pattern: string, rule: typeof anyone) => ({
    pattern,
    method: 'GET',
    description: { ...plain, rule },
  });
  const { paths } = describeApi(
    [door('/api/a', anyone), door('/api/b', signedIn), door('/api/c', staff('tester'))],
    'http://localhost',
  );
  expect(paths['/api/a']?.['get']).toMatchObject({ description: 'Who may: anyone.', security: [] });
  expect(paths['/api/b']?.['get']?.security).toEqual([{ session: [] }]);
  expect(paths['/api/c']?.['get']).toMatchObject({
    description: 'Who may: owner, tester.',
    security: [{ session: ['owner'] }, { session: ['tester'] }],
  });
  const { paths: scoped } = describeApi(
    [
      {
        pattern: '/api/d',
        method: 'POST',
        description: { ...plain, rule: staff('tester'), scope: 'readings:write' },
      },
    ],
    'http://localhost',
  );
  expect(scoped['/api/d']?.['post']).toMatchObject({
    description: 'Who may: owner, tester. Opens to access tokens with the scope readings:write.',
    security: [{ session: ['owner'] }, { session: ['tester'] }, { token: ['readings:write'] }],
  });
  expect(paths['/api/a']?.['get']?.responses).not.toHaveProperty('401');
  expect(paths['/api/b']?.['get']?.responses).not.toHaveProperty('403');
  expect(paths['/api/c']?.['get']?.responses).toHaveProperty('403');
});

test('params, query, both kinds of body and the answer come from the door’s schemas', () => {
  const { paths } = describeApi(
    [
      {
        pattern: '/api/units/[serial]/steps',
        method: 'POST',
        description: {
          ...plain,
          rule: staff('builder'),
          params: z.object({ serial: z.string().max(20) }),
          query: z.object({ page: z.coerce.number().int().optional() }),
          input: z.object({
            stepId: z.coerce.number().int().positive(),
            entry: z.string().optional(),
            span: z.tuple([z.number(), z.number()]),
          }),
        },
      },
    ],
    'http://localhost',
  );
  const operation = paths['/api/units/{serial}/steps']?.['post'];
  expect(operation?.operationId).toBe('postUnitsSerialSteps');
  expect(operation?.parameters.slice(0, 2)).toEqual([
    { name: 'serial', in: 'path', required: true, schema: { type: 'string', maxLength: 20 } },
    { name: 'page', in: 'query', required: false, schema: { type: 'integer' } },
  ]);
  const schema = {
    type: 'object',
    properties: {
      stepId: { type: 'integer', exclusiveMinimum: 0 },
      entry: { type: 'string' },
      span: {
        type: 'array',
        minItems: 2,
        maxItems: 2,
        prefixItems: [{ type: 'number' }, { type: 'number' }],
      },
    },
    required: ['stepId', 'span'],
  };
  expect(operation?.requestBody).toMatchObject({
    content: { 'application/json': { schema }, 'application/x-www-form-urlencoded': { schema } },
  });
  expect(operation?.responses).toMatchObject({
    200: {
      content: {
        'application/json': {
          schema: { type: 'object', properties: { id: { type: 'integer' } }, required: ['id'] },
        },
      },
    },
    303: {},
  });
});
