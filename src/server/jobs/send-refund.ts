import { z } from 'zod';
import { sendRefund as askProvider } from '~/server/payments/send-refund';
import type { JobCall } from './job';

const payloadSchema = z.object({ refundId: z.number().int() });

/** Has the provider make a refund that a change asked for. */
export async function sendRefund({ db, now, payload }: JobCall): Promise<void> {
  const { refundId } = payloadSchema.parse(payload);
  await askProvider(refundId, { db, now, actor: { kind: 'system' } });
}
