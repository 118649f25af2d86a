import { eq } from 'drizzle-orm';
import { formatNumber } from '~/domain/bench/format';
import { instruments, paths } from '~/server/db/schema';
import { defineCheckReference } from '~/server/services/bench/define-check-reference';
import { recordDailyCheck } from '~/server/services/bench/record-daily-check';
import type { WriteContext } from '~/server/write';
import type { Calendar } from './calendar';
import type { Cast } from './people';
import type { Scene } from './play';
import type { Random } from './random';

interface KeptReference {
  number: string;
  name: string;
  quantityKey: string;
  freqMHz: number | null;
  nominal: string;
  tolerance: string;
  instrument: string;
  path: string | null;
  /** What the meter shows on a good day, and how far it wanders. */
  shows: { middle: number; spread: number; decimals: number; unit: string };
}

const kept: readonly KeptReference[] = [
  {
    ...{ number: 'R-1', name: 'Kept rig, key down on 20 m', quantityKey: 'rf_power', freqMHz: 14.06 },
    ...{ nominal: '4.6 W', tolerance: '0.3 dB', instrument: 'PM-2', path: 'T-1' },
    shows: { middle: -3.45, spread: 0.12, decimals: 2, unit: 'dBm' },
  },
  {
    ...{
      number: 'R-2',
      name: '15 Ω load on the 13.8 V supply',
      quantityKey: 'current_key_down',
      freqMHz: null,
    },
    ...{ nominal: '920 mA', tolerance: '1 %', instrument: 'MM-4', path: null },
    shows: { middle: 920, spread: 4, decimals: 0, unit: 'mA' },
  },
];

const fortnight = 14;

/** The works' references, and a fortnight in which they were measured each morning and found good. */
export function checkScenes(calendar: Calendar, cast: Cast, random: Random): Scene[] {
  return kept.flatMap((reference) => {
    const made = { id: 0 };
    const days = Array.from({ length: fortnight }, (_, index) => index - fortnight);
    return [
      {
        at: calendar.at(-fortnight - 1, 16),
        actor: cast.owner,
        play: async (w: WriteContext) => {
          made.id = await define(w, reference);
        },
      },
      ...days.map((day) => {
        const { middle, spread, decimals, unit } = reference.shows;
        const shown = middle + (random.whole(-100, 100) / 100) * spread;
        return {
          at: calendar.at(day, 8.1),
          actor: cast.tester,
          play: (w: WriteContext) =>
            recordDailyCheck(
              {
                checkReferenceId: made.id,
                text: `${formatNumber(shown, decimals)} ${unit}`,
                confirmed: false,
              },
              w,
            ),
        };
      }),
    ];
  });
}

async function define(w: WriteContext, { instrument, path, shows: _, ...reference }: KeptReference) {
  const [meter] = await w.tx
    .select({ id: instruments.id })
    .from(instruments)
    .where(eq(instruments.number, instrument));
  const [through] =
    path === null ? [] : await w.tx.select({ id: paths.id }).from(paths).where(eq(paths.number, path));
  const { checkReferenceId } = await defineCheckReference(
    { ...reference, instrumentId: meter?.id ?? 0, pathId: through?.id ?? null },
    w,
  );
  return checkReferenceId;
}
