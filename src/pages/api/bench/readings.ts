import { recordedReadings, wireReadings } from '~/schemas/bench-wire';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { recordWireReadings } from '~/server/services/bench/record-wire-readings';

export const POST = door({
  rule: staff('tester'),
  scope: 'readings:write',
  summary:
    'Send a reading, or a list of them, from a bench script into your open runs; all are recorded, or none',
  input: wireReadings,
  output: recordedReadings,
  run: ({ input, ctx }) => recordWireReadings(input, ctx),
});
