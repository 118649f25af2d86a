import { z } from 'zod';
import { formList } from './form-list';

/** Things whose changes a page can follow. */
const liveTypes = [
  'batch',
  'certificate',
  'lot',
  'model',
  'order',
  'part',
  'run',
  'shipment',
  'unit',
] as const;

/** What to follow: one thing (`unit:12`), or every one of a kind (`unit`). */
export interface LiveSubject {
  type: (typeof liveTypes)[number];
  id: number | null;
}

const subjectForm = new RegExp(`^(${liveTypes.join('|')})(:[1-9][0-9]{0,14})?$`);

const subject = z
  .string()
  .regex(subjectForm, 'Name a kind of thing, or one of it by its id: unit, unit:12.')
  .transform((text): LiveSubject => {
    const [name, id] = text.split(':');
    const type = z.enum(liveTypes).parse(name);
    return { type, id: id === undefined ? null : Number(id) };
  });

export const liveSchema = z.object({
  subject: z.preprocess(
    formList,
    z.array(subject).min(1, 'Name what to follow.').max(20, 'At most 20 things can be followed at once.'),
  ),
});
