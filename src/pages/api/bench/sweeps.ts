import { MAX_SWEEP_BYTES } from '~/schemas/bench-sweeps';
import { recordedSweep, wireSweep } from '~/schemas/bench-wire';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { sendSweep } from '~/server/services/bench/send-sweep';

/** Room for the form's other fields around the file. */
const formBytes = 64 * 1024;

export const POST = door({
  rule: staff('tester'),
  scope: 'readings:write',
  summary: 'Send a spectrum file from a bench script into your open run of a unit',
  input: wireSweep,
  maxBytes: MAX_SWEEP_BYTES + formBytes,
  output: recordedSweep,
  run: async ({ input, ctx }) => {
    const { file, ...rest } = input;
    const bytes = new Uint8Array(await file.arrayBuffer());
    return sendSweep({ ...rest, bytes, name: file.name }, ctx);
  },
});
