import { z } from 'zod';

const text = (most: number) => z.string().trim().max(most, `At most ${most} characters.`).default('');

/** Lines of a text field, empty ones left out. */
const lines = (most: number) =>
  text(most).transform((value) =>
    value
      .split(/\r?\n/u)
      .map((line) => line.trim())
      .filter((line) => line !== ''),
  );

/** The facts around the readings as they should have stood, and why they did not. */
export const certificateAmendmentSchema = z.object({
  reason: z
    .string({ required_error: 'Say why the certificate is wrong; the new one prints it.' })
    .trim()
    .min(3, 'Say why the certificate is wrong; the new one prints it.')
    .max(500, 'At most 500 characters.'),
  place: z
    .string({ required_error: 'Say where the unit was tested.' })
    .trim()
    .min(1, 'Say where the unit was tested.')
    .max(120, 'At most 120 characters.'),
  options: text(300),
  bomRevision: text(10),
  firmware: text(40),
  alignment: lines(1000),
  ambient: text(40),
  deviations: lines(1000),
  callSign: text(20).transform((value) => (value === '' ? null : value.toUpperCase())),
  /** Ticked: name and address of the works as they stand in the office now. */
  worksAsNow: z.preprocess((value) => value === 'on' || value === true || value === 'true', z.boolean()),
});
