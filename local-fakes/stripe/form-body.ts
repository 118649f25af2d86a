/** A form's value after its bracketed names are taken apart; arrays come as `[0]`, `[1]`, … or `[]`. */
export type FormValue = string | FormValue[] | { [key: string]: FormValue };

type Branch = Map<string, string | Branch>;

function insert(root: Branch, path: string[], value: string): void {
  let at = root;
  path.forEach((key, depth) => {
    const name = key === '' ? String(at.size) : key;
    if (depth === path.length - 1) {
      at.set(name, value);
      return;
    }
    const next = at.get(name);
    if (next instanceof Map) {
      at = next;
      return;
    }
    const made: Branch = new Map();
    at.set(name, made);
    at = made;
  });
}

function settle(value: string | Branch): FormValue {
  if (typeof value === 'string') return value;
  const entries = [...value].map(([key, inner]): [string, FormValue] => [key, settle(inner)]);
  const isArray = entries.length > 0 && entries.every(([key], index) => key === String(index));
  return isArray ? entries.map(([, inner]) => inner) : Object.fromEntries(entries);
}

/** Reads `a[b][0]=c`, the form in which the provider's API takes parameters in bodies and queries. */
export function parseForm(text: string): Record<string, FormValue> {
  const root: Branch = new Map();
  for (const [name, value] of new URLSearchParams(text)) {
    const head = /^[^[\]]+/.exec(name)?.[0];
    if (head === undefined) continue;
    const rest = [...name.slice(head.length).matchAll(/\[([^[\]]*)\]/g)].map((match) => match[1] ?? '');
    insert(root, [head, ...rest], value);
  }
  return Object.fromEntries([...root].map(([key, value]) => [key, settle(value)]));
}
