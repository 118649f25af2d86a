import { z } from 'zod';

const condition = z
  .string()
  .trim()
  .max(500, 'At most 500 characters.')
  .transform((text) => (text === '' ? null : text))
  .nullable()
  .default(null);

/** A file that a form sends; refused where none was chosen. */
export const upload = z
  .instanceof(File, { message: 'Choose a file.' })
  .refine((file) => file.size > 0, 'Choose a file; this one is empty.');

/** A bill of materials as an upload: of a model, so that its page can show what was understood. */
export const bomUpload = z.object({ model: z.string().min(1).max(60), file: upload });

/** Accepts what was understood of an upload as a draft. */
export const bomAcceptance = z.object({
  fileId: z.coerce.number().int().positive(),
  note: z.string().trim().max(500, 'At most 500 characters.').default(''),
  /** The part number of each line in the order of the reading; an empty one leaves its line out. */
  parts: z
    .array(z.string().trim().toUpperCase().max(40, 'A part number has at most 40 characters.'))
    .optional(),
  /** That the questions about the file were read. */
  questionsRead: z.union([z.boolean(), z.literal('yes').transform(() => true)]).default(false),
});

export type BomAcceptance = z.infer<typeof bomAcceptance>;

/** A change to a line of a draft. */
export const bomLineChange = z.object({
  quantity: z.coerce
    .number({ message: 'Enter a whole number.' })
    .int('Enter a whole number.')
    .min(1, 'At least 1.')
    .max(1_000_000_000, 'That is more than a rig can hold.'),
  condition,
});

export type BomLineChange = z.infer<typeof bomLineChange>;

export const revisionKinds = ['bom', 'build_sheet', 'test_plan'] as const;
export type RevisionKind = (typeof revisionKinds)[number];

export const release = z.object({
  kind: z.enum(revisionKinds, { message: 'Choose what is to be released.' }),
  letter: z.string().regex(/^[A-Z]{1,2}$/, 'A revision has one or two capital letters.'),
});

/** `?file=`: the upload whose reading is shown. */
export const shownUpload = z.object({ file: z.coerce.number().int().positive().optional().catch(undefined) });
