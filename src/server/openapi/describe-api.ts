import type { z } from 'zod';
import { sessionCookieName } from '~/server/auth/sessions';
import type { DoorDescription } from '~/server/door';
import { errorCodes } from '~/server/errors';
import type { Rule } from '~/server/rules';
import { jsonSchemaOf, propertiesOf } from './json-schema';
import type { JsonSchema } from './json-schema';

interface DescribedDoor {
  /** As the router has it: `/api/units/[serial]`. */
  pattern: string;
  method: string;
  description: DoorDescription;
}

/** An OpenAPI 3.1 document. */
export interface ApiDescription {
  openapi: '3.1.0';
  info: { title: string; version: string; description: string };
  servers: { url: string }[];
  paths: Record<string, Record<string, Operation>>;
  components: Record<string, Record<string, unknown>>;
}

interface Operation {
  operationId: string;
  summary: string;
  description: string;
  tags: string[];
  parameters: unknown[];
  requestBody?: unknown;
  responses: Record<string, unknown>;
  security: Record<string, string[]>[];
}

const introduction = [
  'Every change goes through one of these doors; the pages’ own forms are sent to them too.',
  'Errors are problem details (RFC 9457); `fields` holds one sentence for each field that cannot be used.',
  'A changing request may bear an Idempotency-Key (a form: the field `_key`): sent again under the same key, it changes nothing twice and gets the same answer.',
  'A changing request with a session cookie needs an Origin header of this server.',
  'A door that names the scheme `token` opens to scripts too, by `Authorization: Bearer rw_…`: to a token that has the scope, of a person whose roles open it. Other doors refuse tokens with 403.',
].join('\n\n');

/** Describes all doors by the schemas that they check with. */
export function describeApi(doors: readonly DescribedDoor[], serverUrl: string): ApiDescription {
  const paths: ApiDescription['paths'] = {};
  for (const door of doors) {
    const path = (paths[pathOf(door.pattern)] ??= {});
    path[door.method.toLowerCase()] = operationOf(door);
  }
  return {
    openapi: '3.1.0',
    info: { title: 'Rigwright', version: '1', description: introduction },
    servers: [{ url: serverUrl }],
    paths,
    components: {
      schemas: { Problem: problemSchema },
      responses: { Problem: problemResponse },
      securitySchemes: {
        session: {
          type: 'apiKey',
          in: 'cookie',
          name: sessionCookieName,
          description: 'Set by signing in. The scopes named at a door are the roles, one of which opens it.',
        },
        token: {
          type: 'http',
          scheme: 'bearer',
          description:
            'An access token that a person of the works made for a script. The scope named at a door is the one that the token needs.',
        },
      },
    },
  };
}

/** `/api/units/[serial]` → `/api/units/{serial}` */
function pathOf(pattern: string): string {
  return pattern.replaceAll(/\[(?:\.\.\.)?([^\]]+)\]/g, '{$1}');
}

function operationOf({ pattern, method, description }: DescribedDoor): Operation {
  const { rule, summary, input, raw, maxBytes } = description;
  const changes = method !== 'GET';
  const takesBody = changes && (raw || input !== undefined);
  const notes = [`Who may: ${inWords(rule)}.`];
  if (description.scope !== undefined)
    notes.push(`Opens to access tokens with the scope ${description.scope}.`);
  if (takesBody) notes.push(`The body has at most ${maxBytes.toLocaleString('en')} bytes.`);
  return {
    operationId: operationId(method, pattern),
    summary,
    description: notes.join(' '),
    tags: [pattern.split('/')[2] ?? 'api'],
    parameters: [
      ...pathParameters(pattern, description.params),
      ...queryParameters(description.query),
      ...(changes && !raw ? [idempotencyKey] : []),
    ],
    ...(takesBody ? { requestBody: bodyOf(input, raw) } : {}),
    responses: responsesOf(description, changes),
    security: securityOf(description),
  };
}

function operationId(method: string, pattern: string): string {
  const words = pattern.split(/[^A-Za-z0-9]+/).filter((word) => word !== '' && word !== 'api');
  return method.toLowerCase() + words.map((word) => word.slice(0, 1).toUpperCase() + word.slice(1)).join('');
}

function pathParameters(pattern: string, schema: z.ZodTypeAny | undefined): unknown[] {
  const known = new Map(
    schema === undefined
      ? []
      : propertiesOf(jsonSchemaOf(schema, 'input')).map((property) => [property.name, property.schema]),
  );
  return [...pattern.matchAll(/\[(?:\.\.\.)?([^\]]+)\]/g)].map(([, name = '']) => ({
    name,
    in: 'path',
    required: true,
    schema: known.get(name) ?? { type: 'string' },
  }));
}

function queryParameters(schema: z.ZodTypeAny | undefined): unknown[] {
  if (schema === undefined) return [];
  return propertiesOf(jsonSchemaOf(schema, 'input')).map((property) => ({
    name: property.name,
    in: 'query',
    required: property.isRequired,
    schema: property.schema,
  }));
}

const idempotencyKey = {
  name: 'Idempotency-Key',
  in: 'header',
  required: false,
  schema: { type: 'string', minLength: 1, maxLength: 200, pattern: '^[\\x21-\\x7e]+$' },
};

function bodyOf(input: z.ZodTypeAny | undefined, raw: boolean): unknown {
  if (raw || input === undefined) return { required: true, content: { '*/*': {} } };
  const schema = jsonSchemaOf(input, 'input');
  return {
    required: !input.isOptional(),
    content: {
      'application/json': { schema },
      'application/x-www-form-urlencoded': { schema },
      'multipart/form-data': { schema },
    },
  };
}

function responsesOf({ rule, output }: DoorDescription, changes: boolean): Record<string, unknown> {
  const problem = { $ref: '#/components/responses/Problem' };
  return {
    200: { description: 'Done.', content: contentOf(output) },
    ...(changes && typeof output !== 'string'
      ? { 303: { description: 'Where a browser’s own form goes on.', headers: { Location: locationHeader } } }
      : {}),
    400: problem,
    ...(rule.kind === 'anyone' ? {} : { 401: problem }),
    ...(rule.kind === 'staff' ? { 403: problem } : {}),
    404: problem,
    default: problem,
  };
}

const locationHeader = { schema: { type: 'string' } };

function contentOf(output: DoorDescription['output']): Record<string, unknown> {
  if (output === 'file') return { '*/*': {} };
  if (output === 'stream') return { 'text/event-stream': {} };
  return { 'application/json': { schema: jsonSchemaOf(output, 'output') } };
}

/** Any one of the requirements is enough, so each role stands in one of its own. */
function securityOf({ rule, scope }: DoorDescription): Record<string, string[]>[] {
  if (rule.kind === 'anyone') return [];
  const token = scope === undefined ? [] : [{ token: [scope] }];
  if (rule.kind === 'signed_in') return [{ session: [] }, ...token];
  return [...rule.roles.map((role) => ({ session: [role] })), ...token];
}

function inWords(rule: Rule): string {
  if (rule.kind === 'anyone') return 'anyone';
  return rule.kind === 'signed_in' ? 'whoever is signed in' : rule.roles.join(', ');
}

const problemSchema: JsonSchema = {
  type: 'object',
  required: ['type', 'title', 'status', 'detail', 'instance'],
  properties: {
    type: {
      type: 'string',
      enum: Object.keys(errorCodes).map((code) => `urn:rigwright:problem:${code.replaceAll('_', '-')}`),
    },
    title: { type: 'string' },
    status: { type: 'integer', enum: [...new Set(Object.values(errorCodes).map(({ status }) => status))] },
    detail: { type: 'string', description: 'A sentence for the person who asked.' },
    instance: { type: 'string', description: 'Carries the request id, as the log and X-Request-Id do.' },
    fields: { type: 'object', additionalProperties: { type: 'string' } },
  },
};

const problemResponse = {
  description: 'It was not done, and why.',
  content: { 'application/problem+json': { schema: { $ref: '#/components/schemas/Problem' } } },
};
