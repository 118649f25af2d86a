import type { Receipt } from '~/schemas/stores-lots';
import type { NewPart } from '~/schemas/stores-parts';
import type { Db } from '~/server/db/client';
import { createPart } from '~/server/services/stores/create-part';
import { receiveLot } from '~/server/services/stores/receive-lot';
import type { CallContext } from '~/server/write';
import { at } from './catalog';
import { seedPerson } from './people';

export function buildPart(changes: Partial<NewPart> = {}): NewPart {
  return {
    number: 'R-0805-4K7',
    description: 'Resistor, 1 %',
    value: '4k7',
    footprint: '0805',
    unit: 'piece',
    trace: 'batch',
    ...changes,
  };
}

export function buildReceipt(changes: Partial<Receipt> = {}): Receipt {
  return { part: 'R-0805-4K7', quantity: 100, state: 'usable', ...changes };
}

/** Receives a part that is entered first, and gives the lot's number. */
export async function seedLot(
  ctx: CallContext,
  part: Partial<NewPart> = {},
  receipt: Partial<Receipt> = {},
): Promise<string> {
  const { number } = await createPart(buildPart(part), ctx);
  return (await receiveLot(buildReceipt({ part: number, ...receipt }), ctx)).number;
}

/** A builder, and the context in which they do things. */
export async function seedBuilder(
  db: Db,
  { name = 'Ruth Osei', email = 'ruth@thistledown.example', now = at } = {},
): Promise<CallContext> {
  const userId = await seedPerson(db, { name, email, roles: ['builder'] });
  return { db, now, actor: { kind: 'user', userId } };
}
