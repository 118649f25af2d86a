import { z } from 'zod';
import { BAND_KEYS } from '~/domain/bench/bands';
import { parseEntry } from '~/domain/bench/entry';
import { templateQuantities } from '~/domain/bench/plan-template';
import { shippedQuantity } from '~/domain/bench/quantities';
import type { BandKey } from '~/domain/bench/types';
import { readTypedSerial } from '~/domain/production/typed-serial';
import { isCountryCode } from '~/lib/countries';
import { invariant } from '~/lib/invariant';
import { formList } from './form-list';

/** A value as a person writes it, with its unit, in the quantity's unit inside. */
function valueOf(quantityKey: string, unit: string | undefined) {
  const quantity = shippedQuantity(quantityKey);
  invariant(quantity !== undefined, `${quantityKey} ships`);
  return z.string({ required_error: 'Give a value.' }).transform((text, context): number => {
    const read = parseEntry(text, quantity, {
      confirmed: true,
      ...(unit === undefined ? {} : { columnUnit: unit }),
    });
    if (read.ok) return read.value;
    context.addIssue({ code: 'custom', message: read.reason });
    return z.NEVER;
  });
}

function orNone<T extends z.ZodTypeAny>(schema: T) {
  return z
    .union([z.string(), z.number()])
    .nullish()
    .transform((value) =>
      value === undefined || (typeof value === 'string' && value.trim() === '') ? null : value,
    )
    .pipe(schema.nullable());
}

/** A plain number of a unit that the label names; a decimal comma is taken. */
function figure(sentence: string, { min, max }: { min: number; max: number }) {
  return z
    .union([z.string(), z.number()], { message: sentence })
    .transform((value) =>
      typeof value === 'number' ? value : value.trim() === '' ? NaN : Number(value.trim().replace(',', '.')),
    )
    .pipe(z.number({ message: sentence }).min(min, sentence).max(max, sentence));
}

const bands = z.preprocess(
  formList,
  z
    .array(z.enum(BAND_KEYS as [BandKey, ...BandKey[]]))
    .min(1, 'Choose the bands that the rig works on.')
    .transform((chosen) => BAND_KEYS.filter((band) => chosen.includes(band))),
);

const ticked = z.preprocess((value) => value === 'on' || value === 'true' || value === true, z.boolean());

/** A model in its smallest form, from which a first test plan is drawn. */
export const newModel = z.object({
  name: z.string({ required_error: 'Name the model.' }).trim().min(1, 'Name the model.').max(80),
  ratedPower: valueOf('rf_power', 'W'),
  supplyV: figure('The supply in V, such as 13.8.', { min: 0.5, max: 100 }),
  bands,
  bandsVary: ticked,
  measure: z.preprocess(formList, z.array(z.enum(templateQuantities))),
  keyDown: orNone(valueOf('current_key_down', undefined)),
  rest: orNone(valueOf('current_rest', undefined)),
  frequencyError: orNone(valueOf('frequency_error', 'Hz')),
});

export type NewModel = z.output<typeof newModel>;

/** A unit that the books do not have yet, by the serial number that stands on it. */
export const newUnit = z.object({
  model: z.string({ required_error: 'Choose the model.' }).min(1, 'Choose the model.').max(60),
  serial: z
    .string({ required_error: 'Type the serial number.' })
    .max(60)
    .transform((text, context): string => {
      const read = readTypedSerial(text);
      if (read.ok) return read.serial;
      context.addIssue({ code: 'custom', message: read.reason });
      return z.NEVER;
    }),
  option: z.preprocess(formList, z.array(z.string().max(60)).max(100)),
  destination: orNone(
    z.string().trim().toUpperCase().refine(isCountryCode, 'Choose the country from the list.'),
  ),
});

export type NewUnit = z.output<typeof newUnit>;

const halfWidth = (sentence: string) => figure(sentence, { min: 0, max: 100 });

/** One instrument and what lies before it, in the shortest form: published accuracy alone. */
export const firstEquipment = z.object({
  name: z.string({ required_error: 'Say what it is.' }).trim().min(1, 'Say what it is.').max(120),
  levelDb: halfWidth('How far a level may be off, in dB: 0.5.'),
  attenuationDb: figure('What is lost before the instrument, in dB: 40; 0 where nothing is.', {
    min: 0,
    max: 120,
  }),
  ratingW: orNone(figure('The power that the load stands, in W.', { min: 0.001, max: 100_000 })),
  ratioDb: orNone(halfWidth('How far a ratio of two levels may be off, in dB: 1.5.')),
  ownDistortionDb: orNone(
    figure('How far its own products lie below the carrier, in dB: 70.', { min: 1, max: 200 }),
  ),
  currentPercent: orNone(halfWidth('How far a current may be off, in percent: 1.')),
  frequencyPpm: orNone(figure('How far a frequency may be off, in ppm: 1.', { min: 0, max: 10_000 })),
});

export type FirstEquipment = z.output<typeof firstEquipment>;
