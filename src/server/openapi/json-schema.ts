import type { z } from 'zod';
import { zodToJsonSchema } from 'zod-to-json-schema';

/** A schema object of OpenAPI 3.1, which is JSON Schema 2020-12. */
export type JsonSchema = Record<string, unknown>;

/**
 * A Zod schema as OpenAPI 3.1 has it: what may come in (before defaults and coercions), or what goes out.
 * Fields that are not named are left out on both ways, so they are not forbidden here.
 */
export function jsonSchemaOf(schema: z.ZodTypeAny, direction: 'input' | 'output'): JsonSchema {
  // Which inner types a schema has does not matter here.
  const converted: unknown = zodToJsonSchema(schema as z.ZodType<unknown>, {
    target: 'jsonSchema7',
    $refStrategy: 'none',
    pipeStrategy: direction,
    dateStrategy: 'format:date-time',
    removeAdditionalStrategy: 'strict',
    allowedAdditionalProperties: undefined,
  });
  return isObject(converted) ? withPrefixItems(converted) : {};
}

/** Draft 7 lists a tuple's places under `items`; 2020-12 does under `prefixItems`. */
function withPrefixItems(schema: JsonSchema): JsonSchema {
  const entries = Object.entries(schema).flatMap(([name, value]): [string, unknown][] => {
    if (name === '$schema') return [];
    if (name === 'items' && Array.isArray(value)) return [['prefixItems', convert(value)]];
    if (name === 'additionalItems') return [['items', convert(value)]];
    return [[name, convert(value)]];
  });
  return Object.fromEntries(entries);
}

function convert(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(convert);
  return isObject(value) ? withPrefixItems(value) : value;
}

function isObject(value: unknown): value is JsonSchema {
  return typeof value === 'object' && value !== null && !Array.isArray(value);
}

/** The properties of an object schema, each with whether it has to be there. */
export function propertiesOf(
  schema: JsonSchema,
): { name: string; schema: JsonSchema; isRequired: boolean }[] {
  const { properties, required } = schema;
  if (!isObject(properties)) return [];
  const names = new Set(Array.isArray(required) ? required : []);
  return Object.entries(properties).map(([name, property]) => ({
    name,
    schema: isObject(property) ? property : {},
    isRequired: names.has(name),
  }));
}
