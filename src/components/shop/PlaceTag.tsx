import { Button } from '~/components/ui/Button';
import { Tag } from '~/components/ui/Tag';
import { formatMoney } from '~/domain/money/format-money';
import { formatDay } from '~/lib/dates';
import type { ShopBatch } from '~/server/queries/catalog/read-rig';

interface Props {
  batch: ShopBatch | null;
  /** Of the configuration chosen. */
  priceMinor: number;
  /** Why it cannot be built as chosen. */
  problem: string | undefined;
}

/** The tag of the place that a buyer is about to take. */
export function PlaceTag({ batch, priceMinor, problem }: Props) {
  if (batch === null) {
    return (
      <Tag
        size="l"
        level={2}
        heading="No batch is open now"
        quiet={['The next one will be announced here.']}
      />
    );
  }
  const { number, places, placesLeft, estimatedOn, depositMinor, currency } = batch;
  const left = placesLeft === 0 ? 'no place left' : `${placesLeft} of ${places} places left`;
  return (
    <>
      <input type="hidden" name="batch" value={number} />
      <Tag
        size="l"
        level={2}
        above={`Batch ${number}, ${left}`}
        heading={
          placesLeft === 0
            ? 'All places are taken or held'
            : estimatedOn === null
              ? 'The date is not fixed yet'
              : `Ready about ${formatDay(estimatedOn)}`
        }
        quiet={[
          placesLeft === 0
            ? 'A place that is only held may come free within half an hour.'
            : estimatedOn === null
              ? 'We write as soon as it is.'
              : 'Our own estimate. We write when it changes.',
        ]}
        aside={
          <div className="flex flex-wrap items-center gap-x-8 gap-y-3 sm:justify-end">
            <div className="sm:text-right">
              <p className="font-mono text-[1.75rem] leading-tight font-bold" aria-live="polite">
                {formatMoney({ minor: priceMinor, currency })}
              </p>
              <p className="quiet max-w-[27rem]">
                {depositMinor !== null &&
                  depositMinor < priceMinor &&
                  `${formatMoney({ minor: depositMinor, currency })} now, the rest when it passes its test. `}
                Carriage is in the price; tax and duty to your door are shown next.
              </p>
            </div>
            {placesLeft > 0 && (
              <Button large disabledReason={problem}>
                Take a place
              </Button>
            )}
          </div>
        }
      />
    </>
  );
}
