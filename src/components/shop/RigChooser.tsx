import { useEffect, useRef, useState } from 'react';
import { Button } from '~/components/ui/Button';
import type { PanelSpec } from '~/domain/catalog/panel';
import { checkConfiguration, priceOf } from '~/domain/planning/configuration';
import type { ShopOptionGroup } from '~/server/queries/catalog/list-option-groups';
import type { ShopBatch } from '~/server/queries/catalog/read-rig';
import { OptionGroupFields } from './OptionGroupFields';
import { PanelDrawing } from './PanelDrawing';
import { PlaceTag } from './PlaceTag';

interface Props {
  panel: PanelSpec;
  groups: ShopOptionGroup[];
  /** Keys of the options chosen at first. */
  initial: string[];
  batch: ShopBatch | null;
  currency: string;
  /** Where the place is taken, and where the panel is drawn anew without JavaScript. */
  checkoutPath: string;
  ownPath: string;
}

/** The panel with its choices as call-outs, and the tag of the place they lead to. A plain GET form beneath. */
export function RigChooser({ panel, groups, initial, batch, currency, checkoutPath, ownPath }: Props) {
  const [chosen, setChosen] = useState<ReadonlySet<string>>(() => new Set(initial));
  const form = useRef<HTMLFormElement>(null);
  // The boxes work before this script has come: what was ticked meanwhile counts.
  useEffect(() => {
    if (form.current === null) return;
    const ticked = new FormData(form.current).getAll('option').map(String);
    setChosen((before) =>
      ticked.length === before.size && ticked.every((key) => before.has(key)) ? before : new Set(ticked),
    );
  }, []);
  const answer = checkConfiguration(groups, chosen);
  const problems = answer.ok ? [] : answer.problems;
  const choose = (key: string, isChosen: boolean) =>
    setChosen((before) => withChoice(before, groups, key, isChosen));
  const fields = (group: ShopOptionGroup) => (
    <OptionGroupFields
      group={group}
      chosen={chosen}
      currency={currency}
      problems={problems.filter(({ groupKey }) => groupKey === group.key).map(({ reason }) => reason)}
      onChange={choose}
    />
  );
  const onPanel = new Set(panel.callOuts.map(({ key }) => key));
  const beside = groups.filter(({ key }) => !onPanel.has(key));
  return (
    <form ref={form} method="get" action={checkoutPath} className="grid gap-8">
      <PanelDrawing
        spec={panel}
        chosen={chosen}
        callOuts={Object.fromEntries(
          groups.filter(({ key }) => onPanel.has(key)).map((group) => [group.key, fields(group)]),
        )}
      />
      {beside.length > 0 && (
        <div className="grid gap-6 sm:grid-cols-2 lg:grid-cols-4">
          {beside.map((group) => (
            <div key={group.key}>{fields(group)}</div>
          ))}
        </div>
      )}
      <noscript>
        <p className="flex flex-wrap items-center gap-3">
          <Button kind="outlined" formAction={ownPath}>
            Draw my choice
          </Button>
          <span className="quiet">Shows the panel and the price for what is ticked.</span>
        </p>
      </noscript>
      <PlaceTag
        batch={batch}
        priceMinor={batch === null ? 0 : priceOf(batch.priceMinor, groups, chosen)}
        problem={problems[0]?.reason}
      />
    </form>
  );
}

/** Where exactly one of a group is built, choosing another lets the first go. */
function withChoice(
  before: ReadonlySet<string>,
  groups: readonly ShopOptionGroup[],
  key: string,
  isChosen: boolean,
): ReadonlySet<string> {
  const after = new Set(before);
  if (!isChosen) {
    after.delete(key);
    return after;
  }
  const group = groups.find(({ options }) => options.some((option) => option.key === key));
  if (group?.max === 1) for (const option of group.options) after.delete(option.key);
  after.add(key);
  return after;
}
