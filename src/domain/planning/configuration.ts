/** What a buyer may choose for a model. Keys are unique within the model (`band.20m`). */
export interface Option {
  key: string;
  label: string;
  /** Added to the model's price, in minor units of its currency. */
  priceMinor: number;
  /** Every one of these must be chosen with it. */
  needs: string[];
  /** None of these may be chosen with it. */
  excludes: string[];
}

export interface OptionGroup {
  key: string;
  label: string;
  min: number;
  max: number;
  options: Option[];
}

export interface ConfigurationProblem {
  /** Null where the fault is in no group of the model. */
  groupKey: string | null;
  reason: string;
}

const WORDS = ['none', 'one', 'two', 'three', 'four', 'five', 'six', 'seven', 'eight', 'nine'] as const;

function inWords(n: number): string {
  return WORDS[n] ?? String(n);
}

/** Whether a choice of option keys is one that can be built; otherwise a sentence for each thing wrong. */
export function checkConfiguration(
  groups: readonly OptionGroup[],
  chosen: ReadonlySet<string>,
): { ok: true } | { ok: false; problems: ConfigurationProblem[] } {
  const labels = new Map(groups.flatMap((group) => group.options.map((o) => [o.key, o.label] as const)));
  const labelOf = (key: string) => labels.get(key) ?? key;
  const problems: ConfigurationProblem[] = [];

  for (const key of chosen) {
    if (!labels.has(key)) problems.push({ groupKey: null, reason: `This model has no option “${key}”.` });
  }
  for (const group of groups) {
    const taken = group.options.filter((option) => chosen.has(option.key));
    const say = (reason: string) => problems.push({ groupKey: group.key, reason });
    const count = countReason(group, taken.length);
    if (count) say(count);
    for (const option of taken) {
      for (const need of option.needs) {
        if (!chosen.has(need)) say(`${option.label} needs ${labelOf(need)}.`);
      }
      for (const other of option.excludes) {
        if (chosen.has(other)) say(`${option.label} cannot be had together with ${labelOf(other)}.`);
      }
    }
  }
  return problems.length === 0 ? { ok: true } : { ok: false, problems };
}

function countReason(group: OptionGroup, count: number): string | null {
  if (count >= group.min && count <= group.max) return null;
  const rule =
    group.min === group.max
      ? `choose exactly ${inWords(group.min)}`
      : count < group.min
        ? `choose at least ${inWords(group.min)}`
        : `choose at most ${inWords(group.max)}`;
  return `${group.label}: ${rule}, not ${inWords(count)}.`;
}

/** The price of a configuration in minor units: the model's own and that of every chosen option. */
export function priceOf(
  baseMinor: number,
  groups: readonly OptionGroup[],
  chosen: ReadonlySet<string>,
): number {
  return groups
    .flatMap((group) => group.options)
    .filter((option) => chosen.has(option.key))
    .reduce((sum, option) => sum + option.priceMinor, baseMinor);
}
