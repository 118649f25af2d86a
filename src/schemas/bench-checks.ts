import { z } from 'zod';
import { equipmentName, equipmentNumber, figure, orNone } from './bench-equipment';

const line = (max: number) => z.string().trim().max(max, `At most ${max} characters.`);
const equipmentId = z.coerce.number({ message: 'Choose one.' }).int().positive('Choose one.');

/** A reference of the daily check, as its form sends it. */
export const newCheckReference = z.object({
  number: equipmentNumber,
  name: equipmentName,
  quantityKey: z
    .string({ required_error: 'Choose what is measured.' })
    .min(1, 'Choose what is measured.')
    .max(40),
  freqMHz: orNone(figure('The frequency is a number of MHz, above 0.', { min: 0.001, max: 100_000 })),
  /** At the unit, with its unit. */
  nominal: line(60).min(1, 'State what it has to read, with its unit: 5 W.'),
  /** Half-width of the band, with its unit. */
  tolerance: line(40).min(1, 'State how far it may be off, with its unit: 0.2 dB.'),
  instrumentId: equipmentId,
  pathId: orNone(equipmentId),
});

export type NewCheckReference = z.output<typeof newCheckReference>;

export const dailyCheckEntry = z.object({
  checkReferenceId: equipmentId,
  text: line(60).min(1, 'Type what the instrument shows.'),
  /** The person says that a value that was asked about is meant. */
  confirmed: z.preprocess((value) => value === 'on' || value === 'true' || value === true, z.boolean()),
});

export type DailyCheckEntry = z.output<typeof dailyCheckEntry>;

export const checkExplanation = z.object({
  explanation: line(500).min(1, 'Say in a sentence why it was off, and what was done.'),
});

export const flagEnding = z.object({
  note: line(500).min(1, 'Say in a sentence why the run may stand, or what was done about it.'),
});
