import { z } from 'zod';
import { lookAtSweep } from '~/domain/bench/sweep/look-at-sweep';
import { MAX_SWEEP_BYTES, sweepLoading, sweepLookSchema } from '~/schemas/bench-sweeps';
import { door } from '~/server/door';
import { DomainError } from '~/server/errors';
import { readRunForSweep } from '~/server/queries/bench/read-run-for-sweep';
import { staff } from '~/server/rules';

/** Room for the form's other fields around the file. */
const formBytes = 64 * 1024;

export const POST = door({
  rule: staff('tester'),
  scope: 'readings:write',
  summary: 'Say what a spectrum file would come to in a run; nothing is kept',
  params: z.object({ id: z.coerce.number().int() }),
  input: sweepLoading,
  maxBytes: MAX_SWEEP_BYTES + formBytes,
  output: sweepLookSchema,
  run: async ({ params, input, ctx }) => {
    const run = await readRunForSweep(ctx.db, params.id, input.pathRevisionId);
    if (run === null) throw new DomainError('not_found', 'There is no such run.');
    const look = lookAtSweep(new Uint8Array(await input.file.arrayBuffer()), input.hints, input.band, run);
    if (!look.ok) throw new DomainError('refused', look.reason, { file: look.reason });
    return look;
  },
});
