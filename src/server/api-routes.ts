import type { Door, DoorDescription } from './door';

/** Every file under `pages/api`, loaded when it is first asked for. */
const files = import.meta.glob<Record<string, unknown>>('/src/pages/api/**/*.ts');

function isDoor(handler: unknown): handler is Door {
  return typeof handler === 'function' && 'description' in handler;
}

function patternOf(file: string): string {
  return file
    .replace(/^\/src\/pages/, '')
    .replace(/\.ts$/, '')
    .replace(/\/index$/, '');
}

const loaders = new Map(Object.entries(files).map(([file, load]) => [patternOf(file), load]));
/** The router writes its patterns in small letters, the names of parameters too. */
const byRoutePattern = new Map([...loaders].map(([pattern, load]) => [pattern.toLowerCase(), load]));

/** The door at a route pattern and method; undefined where there is none, or none with a rule. */
export async function doorAt(pattern: string, method: string): Promise<Door | undefined> {
  const module = await byRoutePattern.get(pattern.toLowerCase())?.();
  const handler = module?.[method === 'HEAD' ? 'GET' : method];
  return isDoor(handler) ? handler : undefined;
}

/** All doors of the API, and the exports that look like methods but are no doors. */
export async function listDoors(): Promise<{
  doors: { pattern: string; method: string; description: DoorDescription }[];
  withoutRule: string[];
}> {
  const doors: { pattern: string; method: string; description: DoorDescription }[] = [];
  const withoutRule: string[] = [];
  for (const [pattern, load] of [...loaders].sort(([a], [b]) => a.localeCompare(b))) {
    for (const [method, handler] of Object.entries(await load())) {
      if (isDoor(handler)) doors.push({ pattern, method, description: handler.description });
      else if (method !== 'prerender') withoutRule.push(`${method} ${pattern}`);
    }
  }
  return { doors, withoutRule };
}
