import { z } from 'zod';
import { paths } from '~/lib/paths';
import { firstEquipment } from '~/schemas/bench-alone';
import { door } from '~/server/door';
import { staff } from '~/server/rules';
import { enterFirstEquipment } from '~/server/services/bench/enter-first-equipment';

export const POST = door({
  rule: staff('tester'),
  summary: 'Enter an instrument by its published accuracy, and the attenuation before it',
  input: firstEquipment,
  output: z.object({ instrumentNumber: z.string(), pathNumber: z.string().nullable() }),
  said: ({ instrumentNumber, pathNumber }) =>
    pathNumber === null
      ? `${instrumentNumber} can be chosen at the bench now.`
      : `${instrumentNumber} and the path ${pathNumber} can be chosen at the bench now.`,
  next: () => paths.works(),
  run: ({ input, ctx }) => enterFirstEquipment(input, ctx),
});
