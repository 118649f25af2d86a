import { z } from 'zod';
import { orderStates } from '~/domain/orders/status';
import { beforeSchema } from './paging';

export const counterStates = ['all', 'balance_due', ...orderStates] as const;

/** The list's filter as it stands in the address; nonsense there shows all. */
export const counterFilter = beforeSchema.extend({
  state: z.enum(counterStates).catch('all'),
  q: z.string().trim().max(80).catch(''),
});

export type CounterFilter = z.output<typeof counterFilter>;

export const balanceAsked = z.object({ orderId: z.number().int(), balanceMinor: z.number().int() });
