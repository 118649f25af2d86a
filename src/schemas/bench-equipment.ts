import { z } from 'zod';
import type { MeasureText } from '~/domain/bench/measured';
import type { InstrumentCalibration, InstrumentSpec } from '~/domain/bench/types';
import { isDay } from '~/lib/dates';
import { formList } from './form-list';

export const equipmentNumber = z
  .string({ required_error: 'Give it a number.' })
  .trim()
  .toUpperCase()
  .regex(/^[A-Z0-9][A-Z0-9.-]{0,19}$/, 'A number has up to 20 letters, digits, points and hyphens.');

export const equipmentName = z
  .string({ required_error: 'Say what it is.' })
  .trim()
  .min(1, 'Say what it is.')
  .max(120, 'At most 120 characters.');

/** The revision that the person saw, so that a newer one is not overwritten unseen. */
export const seenRevision = z.coerce.number().int().nonnegative().optional();

/** What a form leaves empty, as null. */
export function orNone<T extends z.ZodTypeAny>(schema: T) {
  return z
    .union([z.string(), z.number()])
    .nullish()
    .transform((value) =>
      value === undefined || (typeof value === 'string' && value.trim() === '') ? null : value,
    )
    .pipe(schema.nullable());
}

/** A number of a unit that the label names; a decimal comma and the typographic minus are taken. */
export function figure(sentence: string, { min, max }: { min: number; max: number }) {
  return z
    .union([z.string(), z.number()], { message: sentence })
    .transform((value) =>
      typeof value === 'number'
        ? value
        : value.trim() === ''
          ? NaN
          : Number(value.trim().replace('\u2212', '-').replace(',', '.')),
    )
    .pipe(z.number({ message: sentence }).min(min, sentence).max(max, sentence));
}

const day = z.string().refine(isDay, 'Write the day as 2027-03-09.');
const line = (max: number) => z.string().trim().max(max, `At most ${max} characters.`);
const dB = (what: string) => orNone(figure(`${what} is a number of dB, 0 or more.`, { min: 0, max: 100 }));

export const standingWave = orNone(
  figure('A standing wave ratio is 1 or more, as 1.2.', { min: 1, max: 100 }),
);
export const coverageFactor = figure('A coverage factor k is a number such as 2.', { min: 0.5, max: 10 });

/** A file that may be left out; a browser sends an empty one then. */
export const optionalFile = z
  .union([z.literal('').transform(() => undefined), z.instanceof(File, { message: 'Choose a file.' })])
  .optional()
  .transform((file) => (file === undefined || file.size === 0 ? undefined : file));

const measureField = /^(accuracy|resolution)\.([a-z][a-z0-9_]{0,39})$/;

/** `accuracy.rf_power` and `resolution.rf_power`, for each quantity that the instrument measures. */
function measuresOf(fields: Record<string, unknown>, context: z.RefinementCtx): Record<string, MeasureText> {
  const measures: Record<string, MeasureText> = {};
  for (const [field, value] of Object.entries(fields)) {
    const [, kind, key] = measureField.exec(field) ?? [];
    if (key === undefined) continue;
    const text = z.string().max(120).safeParse(value);
    if (!text.success) {
      context.addIssue({ code: 'custom', path: [field], message: 'Write it as 1 % + 2 mA.' });
      continue;
    }
    const measure = (measures[key] ??= { accuracy: '', resolution: '' });
    if (kind === 'accuracy') measure.accuracy = text.data;
    else measure.resolution = text.data;
  }
  return measures;
}

const instrumentFields = z
  .object({
    name: equipmentName,
    seen: seenRevision,
    grade: z.enum(['accredited', 'checked', 'unchecked'], { message: 'Choose the grade.' }),
    checkedAgainst: orNone(line(100)),
    checkedOn: orNone(day),
    linearityDb: dB('The linearity'),
    flatnessDb: dB('The flatness'),
    vswr: standingWave,
    /** Below the carrier, with or without its minus. */
    ownDistortion: orNone(
      figure('Its own distortion is a number of dB below the carrier, as 70.', { min: -200, max: 200 }),
    ),
    dropV: orNone(figure('The drop of a diode is 0 to 5 V.', { min: 0, max: 5 })),
    tapRatio: orNone(figure('The tap ratio is 1 or more: 2 for half of the load.', { min: 1, max: 100 })),
    calibrationU: orNone(figure('The expanded uncertainty is a number, 0 or more.', { min: 0, max: 1e9 })),
    calibrationUnit: z.enum(['dB', 'percent', 'ppm', 'Hz', 'unit']).default('dB'),
    calibrationK: orNone(coverageFactor),
    calibratedOn: orNone(day),
    dueOn: orNone(day),
    laboratory: orNone(line(120)),
    certificateNumber: orNone(line(60)),
    certificateFile: optionalFile,
  })
  .passthrough();

type InstrumentFields = z.output<typeof instrumentFields>;

function calibrationOf(fields: InstrumentFields, context: z.RefinementCtx): InstrumentCalibration | null {
  const { calibrationU, calibrationUnit, calibrationK, calibratedOn, dueOn } = fields;
  const { laboratory, certificateNumber, certificateFile } = fields;
  const given = [calibrationU, calibratedOn, dueOn, laboratory, certificateNumber];
  const isStated = given.some((value) => value !== null) || certificateFile !== undefined;
  if (!isStated && fields.grade !== 'accredited') return null;
  const refuse = (field: string, message: string) =>
    context.addIssue({ code: 'custom', path: [field], message });
  if (calibrationU === null) refuse('calibrationU', 'State the expanded uncertainty of the calibration.');
  if (dueOn === null) refuse('dueOn', 'State the day on which the next calibration is due.');
  if (calibratedOn !== null && dueOn !== null && dueOn < calibratedOn) {
    refuse('dueOn', 'It is due before it was calibrated: look at both days.');
  }
  if (calibrationU === null || dueOn === null) return null;
  return {
    ...{ expanded: calibrationU, unit: calibrationUnit, k: calibrationK ?? 2 },
    ...{ calibratedOn, dueOn, laboratory, certificateNumber },
  };
}

/** Which instrument it was compared with, and when, as the certificate prints it. */
function checkedAgainstOf(fields: InstrumentFields, context: z.RefinementCtx): string | null {
  if (fields.grade !== 'checked') return null;
  if (fields.checkedAgainst === null) {
    context.addIssue({ code: 'custom', path: ['checkedAgainst'], message: 'Say with what it was compared.' });
  }
  if (fields.checkedOn === null) {
    context.addIssue({ code: 'custom', path: ['checkedOn'], message: 'Say on which day it was compared.' });
  }
  return `${fields.checkedAgainst ?? ''}, ${fields.checkedOn ?? ''}`;
}

function toInstrument(fields: InstrumentFields, context: z.RefinementCtx) {
  const { dropV, tapRatio, ownDistortion } = fields;
  if (dropV === null && tapRatio !== null) {
    context.addIssue({ code: 'custom', path: ['dropV'], message: 'State the drop of the diode too.' });
  }
  const spec: InstrumentSpec = {
    grade: fields.grade,
    checkedAgainst: checkedAgainstOf(fields, context),
    quantities: {},
    linearityDb: fields.linearityDb,
    flatnessDb: fields.flatnessDb,
    vswr: fields.vswr,
    ownDistortionDbc: ownDistortion === null || ownDistortion === 0 ? null : -Math.abs(ownDistortion),
    detector: dropV === null ? null : { dropV, tapRatio: tapRatio ?? 1 },
    calibration: calibrationOf(fields, context),
  };
  return {
    ...{ name: fields.name, seen: fields.seen, spec },
    /** What was typed of each quantity; read with the works' own quantities at hand. */
    measures: measuresOf(fields, context),
    certificateFile: fields.certificateFile,
  };
}

/** An instrument as its form sends it: numbers as text, `accuracy.rf_power` as a data sheet writes it. */
export const instrumentRevision = instrumentFields.transform(toInstrument);

/** As {@link instrumentRevision}, with the number that it is given. */
export const newInstrument = instrumentFields
  .extend({ number: equipmentNumber })
  .transform((fields, context) => ({ ...toInstrument(fields, context), number: fields.number }));

const directions = ['to_instrument', 'from_generator'] as const;

const pathFields = z.object({
  name: equipmentName,
  direction: z.enum(directions, { message: 'Choose which way the signal goes.' }).default('to_instrument'),
  /** Numbers of parts in order, from the unit (or the generator) on; empty ones are left out. */
  parts: z
    .preprocess(formList, z.array(z.string().trim().toUpperCase().max(20)).max(20))
    .transform((numbers, context) => {
      const chosen = numbers.filter((number) => number !== '');
      const again = numbers.findIndex((number, index) => number !== '' && numbers.indexOf(number) < index);
      if (again >= 0) {
        const message = `${numbers[again] ?? ''} stands in the path twice.`;
        context.addIssue({ code: 'custom', path: [again], message });
      }
      if (chosen.length === 0) {
        context.addIssue({ code: 'custom', path: [0], message: 'Choose at least one part.' });
      }
      return chosen;
    }),
});

export const newPath = pathFields.extend({ number: equipmentNumber });
export const pathRevision = pathFields.extend({ seen: seenRevision });

const freqUnit = z
  .enum(['', 'Hz', 'kHz', 'MHz', 'GHz'])
  .transform((unit) => (unit === '' ? undefined : unit))
  .optional();

const partFields = z.object({
  name: equipmentName,
  /** Rows as typed; a file takes their place. */
  lossTable: z.string().max(100_000, 'Put so long a table into a file.').default(''),
  lossFile: optionalFile,
  freqUnit,
  uncertaintyDb: figure('State the expanded uncertainty of the loss in dB, as 0.1.', { min: 0, max: 20 }),
  k: orNone(coverageFactor).transform((k) => k ?? 2),
  flatnessDb: dB('The flatness'),
  ratingW: orNone(figure('The power it stands is a number of W, above 0.', { min: 0.001, max: 100_000 })),
  vswr: standingWave,
});

export const newPathPart = partFields.extend({ number: equipmentNumber });
export const pathPartRevision = partFields.extend({ seen: seenRevision });

/** Largest file of a loss table, bytes. */
export const MAX_LOSS_BYTES = 1024 * 1024;
/** Largest file of a calibration certificate, bytes. */
export const MAX_CALIBRATION_BYTES = 8 * 1024 * 1024;
