import { useEffect, useState } from 'react';
import { z } from 'zod';
import { bestInstrument } from '~/domain/bench/best-instrument';
import type { Quantity } from '~/domain/bench/quantities';
import type { StationReading } from '~/schemas/bench-station';
import type { Equipment } from './run-sheet';

/** What a column is read with. */
export interface Chosen {
  instrumentRevisionId: number | null;
  pathRevisionId: number | null;
}

const rememberedSchema = z.record(
  z.object({ instrumentRevisionId: z.number().nullable(), pathRevisionId: z.number().nullable() }),
);
const storageName = 'rigwright-bench-equipment';

function remembered(): Record<string, Chosen> {
  try {
    return rememberedSchema.parse(JSON.parse(localStorage.getItem(storageName) ?? '{}'));
  } catch {
    return {};
  }
}

/** Instrument and path by quantity: as last chosen on this bench, as last read in this run, or the best that fits. */
export function useEquipment(
  equipment: Equipment,
  readings: readonly StationReading[],
  testedOn: string,
): { chosenFor: (quantity: Quantity) => Chosen; choose: (quantityKey: string, chosen: Chosen) => void } {
  const [byQuantity, setByQuantity] = useState<Record<string, Chosen>>({});
  useEffect(() => setByQuantity(remembered()), []);

  const isInUse = ({ instrumentRevisionId, pathRevisionId }: Chosen): boolean =>
    (instrumentRevisionId === null ||
      equipment.instruments.some((each) => each.revisionId === instrumentRevisionId)) &&
    (pathRevisionId === null || equipment.paths.some((each) => each.revisionId === pathRevisionId));

  const chosenFor = (quantity: Quantity): Chosen => {
    const { key: quantityKey } = quantity;
    const kept = byQuantity[quantityKey];
    if (kept !== undefined && isInUse(kept)) return kept;
    const read = readings.findLast((reading) => reading.quantityKey === quantityKey);
    if (read !== undefined && isInUse(read)) {
      return { instrumentRevisionId: read.instrumentRevisionId, pathRevisionId: read.pathRevisionId };
    }
    return {
      instrumentRevisionId: bestInstrument(equipment.instruments, quantity, testedOn)?.revisionId ?? null,
      pathRevisionId: pathFor(equipment, quantity),
    };
  };

  return {
    chosenFor,
    choose: (quantityKey, chosen) => {
      const next = { ...byQuantity, [quantityKey]: chosen };
      setByQuantity(next);
      localStorage.setItem(storageName, JSON.stringify(next));
    },
  };
}

/** The first path that leads the right way for the quantity; none where a path does nothing to it. */
function pathFor({ paths }: Equipment, { path }: Quantity): number | null {
  if (path === 'none') return null;
  const wanted = path === 'adds' ? 'to_instrument' : 'from_generator';
  return paths.find(({ spec }) => spec.direction === wanted)?.revisionId ?? null;
}
