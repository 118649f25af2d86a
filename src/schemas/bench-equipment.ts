import { z } from 'zod';
import { instrumentSpecSchema, pathSpecSchema } from './bench-specs';

const number = z
  .string()
  .trim()
  .toUpperCase()
  .regex(/^[A-Z0-9][A-Z0-9.-]{0,19}$/, 'A number has up to 20 letters, digits, points and hyphens.');

const name = z.string().trim().min(1, 'Say what it is.').max(120, 'At most 120 characters.');

/** A form sends its JSON as text, a script as it is. */
const jsonText = z.unknown().transform((value, context): unknown => {
  if (typeof value !== 'string') return value;
  try {
    return JSON.parse(value);
  } catch {
    context.addIssue({ code: 'custom', message: 'This is not JSON.' });
    return z.NEVER;
  }
});

const instrumentSpec = jsonText.pipe(instrumentSpecSchema);
const pathSpec = jsonText.pipe(pathSpecSchema);

export const newInstrument = z.object({ number, name, spec: instrumentSpec });
export const newPath = z.object({ number, name, spec: pathSpec });
export const instrumentRevision = z.object({ name, spec: instrumentSpec });
export const pathRevision = z.object({ name, spec: pathSpec });

export type NewInstrument = z.infer<typeof newInstrument>;
export type NewPath = z.infer<typeof newPath>;
export type InstrumentRevision = z.infer<typeof instrumentRevision>;
export type PathRevision = z.infer<typeof pathRevision>;
