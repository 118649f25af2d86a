import { asc, eq } from 'drizzle-orm';
import type { OptionGroup } from '~/domain/planning/configuration';
import type { Reader } from '~/server/db/client';
import { optionGroups, options } from '~/server/db/schema';

/** An option as the shop shows it. */
export interface ShopOption {
  key: string;
  label: string;
  note: string;
  priceMinor: number;
  isDefault: boolean;
  needs: string[];
  excludes: string[];
}

export interface ShopOptionGroup extends OptionGroup {
  options: ShopOption[];
}

/** What a buyer chooses for a model, in the order of the panel. */
export async function listOptionGroups(reader: Reader, modelId: number): Promise<ShopOptionGroup[]> {
  const rows = await reader
    .select({
      groupKey: optionGroups.key,
      groupLabel: optionGroups.label,
      min: optionGroups.minChosen,
      max: optionGroups.maxChosen,
      key: options.key,
      label: options.label,
      note: options.note,
      priceMinor: options.priceMinor,
      isDefault: options.isDefault,
      needs: options.needs,
      excludes: options.excludes,
    })
    .from(optionGroups)
    .innerJoin(options, eq(options.optionGroupId, optionGroups.id))
    .where(eq(optionGroups.modelId, modelId))
    .orderBy(asc(optionGroups.position), asc(optionGroups.id), asc(options.position), asc(options.id));
  const groups = new Map<string, ShopOptionGroup>();
  for (const { groupKey, groupLabel, min, max, ...option } of rows) {
    const group = groups.get(groupKey) ?? { key: groupKey, label: groupLabel, min, max, options: [] };
    groups.set(groupKey, { ...group, options: [...group.options, option] });
  }
  return [...groups.values()];
}
