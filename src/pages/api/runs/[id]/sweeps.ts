import { z } from 'zod';
import { MAX_SWEEP_BYTES, sweepLoading } from '~/schemas/bench-runs';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { readSweepIntoRun } from '~/server/services/bench/read-sweep-into-run';

/** Room for the form's other fields around the file. */
const formBytes = 64 * 1024;

export const POST = door({
  rule: staff('tester'),
  summary: 'Read a spectrum file into an open run',
  params: z.object({ id: z.coerce.number().int() }),
  input: sweepLoading,
  maxBytes: MAX_SWEEP_BYTES + formBytes,
  output: z.object({ sweepId: z.number().int(), readings: z.number().int(), notes: z.array(z.string()) }),
  said: ({ readings }) => `The sweep is read: ${readings} readings.`,
  run: async ({ params, input, ctx }) => {
    const { file, levelUnit, freqUnit, levelColumn, rbwKhz, detector, ...rest } = input;
    return readSweepIntoRun(
      {
        ...rest,
        runId: params.id,
        bytes: new Uint8Array(await file.arrayBuffer()),
        name: file.name,
        hints: {
          ...(levelUnit === undefined ? {} : { levelUnit }),
          ...(freqUnit === undefined ? {} : { freqUnit }),
          ...(levelColumn === undefined ? {} : { levelColumn }),
          ...(rbwKhz === undefined ? {} : { rbwHz: rbwKhz * 1e3 }),
          ...(detector === undefined ? {} : { detector }),
        },
      },
      ctx,
    );
  },
});
