import { Checkbox } from '~/components/ui/Checkbox';
import { formatMoney } from '~/domain/money/format-money';
import type { ShopOptionGroup } from '~/server/queries/catalog/list-option-groups';
import { chooseWords } from './choose-words';

interface Props {
  group: ShopOptionGroup;
  chosen: ReadonlySet<string>;
  currency: string;
  problems: readonly string[];
  onChange: (key: string, isChosen: boolean) => void;
}

/** The choices of one group, as a call-out of the panel. */
export function OptionGroupFields({ group, chosen, currency, problems, onChange }: Props) {
  const isOneOf = group.min === 1 && group.max === 1;
  const count = group.options.filter(({ key }) => chosen.has(key)).length;
  const isFull = !isOneOf && group.min === group.max && count >= group.max;
  const words = chooseWords(group);
  return (
    <fieldset className="min-w-0">
      <legend className="font-head font-bold">
        {group.label}
        {words !== null && `, ${words}`}
      </legend>
      {group.options.map((option) => {
        const isChosen = chosen.has(option.key);
        return (
          <Checkbox
            key={option.key}
            name="option"
            value={option.key}
            label={option.label}
            hint={option.note === '' ? undefined : option.note}
            checked={isChosen}
            onChange={(event) => onChange(option.key, event.currentTarget.checked)}
            end={end(option.priceMinor, currency, isFull && !isChosen)}
          />
        );
      })}
      {problems.map((problem) => (
        <p key={problem} className="field-error mt-1">
          {problem}
        </p>
      ))}
    </fieldset>
  );
}

function end(priceMinor: number, currency: string, isInstead: boolean) {
  if (isInstead) return <span className="quiet font-sans">instead of one above</span>;
  if (priceMinor === 0) return undefined;
  const amount = formatMoney({ minor: Math.abs(priceMinor), currency });
  return `${priceMinor < 0 ? '\u2212' : '+'} ${amount}`;
}
