import type { OptionGroup } from './configuration';

/** Groups with a key in a condition, and those tied to them by `needs` or `excludes`: the others change nothing. */
export function groupsThatMatter(groups: readonly OptionGroup[], used: ReadonlySet<string>): OptionGroup[] {
  const linksOf = (group: OptionGroup) => group.options.flatMap((o) => [...o.needs, ...o.excludes]);
  const keys = new Set(used);
  const taken = new Set<OptionGroup>();
  for (let grew = true; grew;) {
    grew = false;
    for (const group of groups) {
      const touches =
        group.options.some((o) => keys.has(o.key)) || linksOf(group).some((key) => keys.has(key));
      if (taken.has(group) || !touches) continue;
      taken.add(group);
      grew = true;
      for (const key of [...group.options.map((o) => o.key), ...linksOf(group)]) keys.add(key);
    }
  }
  return groups.filter((group) => taken.has(group));
}

/** Every choice of options by the numbers of each group; what excludes what is not looked at. */
export function* choicesOf(groups: readonly OptionGroup[]): Generator<Set<string>> {
  const [first, ...rest] = groups;
  if (!first) {
    yield new Set();
    return;
  }
  const keys = first.options.map((option) => option.key);
  for (const own of subsetsOf(keys, first.min, first.max)) {
    for (const others of choicesOf(rest)) yield new Set([...own, ...others]);
  }
}

function* subsetsOf(keys: readonly string[], min: number, max: number): Generator<string[]> {
  const [first, ...rest] = keys;
  if (max < 0 || keys.length < min) return;
  if (first === undefined) {
    yield [];
    return;
  }
  for (const subset of subsetsOf(rest, min - 1, max - 1)) yield [first, ...subset];
  yield* subsetsOf(rest, min, max);
}
