import { z } from 'zod';
import { MAX_SWEEP_BYTES, sweepLoading } from '~/schemas/bench-sweeps';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { readSweepIntoRun } from '~/server/services/bench/read-sweep-into-run';

/** Room for the form's other fields around the file. */
const formBytes = 64 * 1024;

export const POST = door({
  rule: staff('tester'),
  scope: 'readings:write',
  summary: 'Read a spectrum file into an open run',
  params: z.object({ id: z.coerce.number().int() }),
  input: sweepLoading,
  maxBytes: MAX_SWEEP_BYTES + formBytes,
  output: z.object({
    sweepId: z.number().int(),
    band: z.string(),
    readings: z.number().int(),
    notes: z.array(z.string()),
  }),
  said: ({ readings }) => `The sweep is read: ${readings} readings.`,
  run: async ({ params, input, ctx }) => {
    const { file, ...rest } = input;
    const bytes = new Uint8Array(await file.arrayBuffer());
    return readSweepIntoRun({ ...rest, runId: params.id, bytes, name: file.name }, ctx);
  },
});
