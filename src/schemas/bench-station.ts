import { z } from 'zod';
import { BAND_KEYS } from '~/domain/bench/bands';
import { chosenRuleSchema, quantitySchema } from './bench-definitions';
import { instrumentSpecSchema, outputStageSchema, pathSpecSchema } from './bench-specs';
import { keptSweepSchema } from './bench-sweeps';

const id = z.number().int();
const band = z.enum(BAND_KEYS as [(typeof BAND_KEYS)[number], ...typeof BAND_KEYS]).nullable();
const moment = z.union([z.date().transform((date) => date.toISOString()), z.string()]);
const verdict = z.enum(['pass', 'too_close', 'fail', 'not_run']);

const point = z.object({
  id,
  position: z.number().int(),
  quantity: quantitySchema,
  band,
  freqHz: z.number().nullable(),
  lower: z.number().nullable(),
  upper: z.number().nullable(),
  limitRule: z.enum(['fixed', 'spurious']),
  decision: z.enum(['guarded', 'simple']),
  required: z.boolean(),
  condition: z.string().nullable(),
  supplyV: z.number().nullable(),
  method: z.string(),
});

const reading = z.object({
  id,
  testPointId: id,
  readingNo: z.number().int(),
  quantityKey: z.string(),
  band,
  freqHz: z.number().nullable(),
  enteredText: z.string(),
  enteredUnit: z.string(),
  value: z.number(),
  voided: z.boolean(),
  voidReason: z.string().nullable(),
  atMost: z.boolean(),
  attenuationHeld: z.boolean(),
  source: z.enum(['typed', 'sweep', 'wire', 'history']),
  instrumentRevisionId: id.nullable(),
  pathRevisionId: id.nullable(),
  instrumentNumber: z.string().nullable(),
  pathNumber: z.string().nullable(),
  instrument: instrumentSpecSchema.nullable(),
  path: pathSpecSchema.nullable(),
  at: moment,
  version: z.number().int(),
});

/** The verdict that a closed run keeps, in the names of the computation. */
const keptPoint = z.object({
  testPointId: id,
  verdict,
  value: z.number().nullable(),
  U: z.number().nullable(),
  k: z.number().nullable(),
  n: z.number().int(),
  lower: z.number().nullable(),
  upper: z.number().nullable(),
  ruleKey: z.string().nullable(),
  ruleText: z.string(),
  pConform: z.number().nullable(),
  concession: z.string().nullable(),
});

const sweep = keptSweepSchema.extend({ id, band: z.string(), fileName: z.string(), at: moment });

/** A run as the station shows it: everything that its verdicts rest on, and who has it. */
export const stationSchema = z.object({
  run: z.object({
    id,
    runNo: z.number().int(),
    state: z.enum(['open', 'closed']),
    result: z.enum(['passed', 'passed_by_concession', 'undecided', 'failed']).nullable(),
    stoppedEarly: z.boolean(),
    testerUserId: id,
    testerName: z.string(),
    supplyV: z.number().nullable(),
    ambientC: z.number().nullable(),
    firmwareVersion: z.string().nullable(),
    alignment: z.record(z.string()),
    openedText: z.string(),
    closedText: z.string().nullable(),
    version: z.number().int(),
    isNewest: z.boolean(),
  }),
  unit: z.object({
    serial: z.string(),
    line: z.string(),
    quiet: z.string(),
    ratedPowerW: z.number(),
  }),
  plan: z.object({ letter: z.string(), supplyV: z.number(), loadOhm: z.number() }),
  limits: z.object({ title: z.string(), source: z.string(), note: z.string(), destination: z.string() }),
  earlier: z.array(
    z.object({
      runNo: z.number().int(),
      result: z.string().nullable(),
      text: z.string(),
      failed: z.array(z.string()),
      rework: z.string().nullable(),
    }),
  ),
  certificateNumber: z.string().nullable(),
  sheet: z.object({
    points: z.array(point),
    readings: z.array(reading),
    concessions: z.array(z.object({ testPointId: id, reason: z.string() })),
    rule: chosenRuleSchema,
    context: z.object({
      destinationCountry: z.string().nullable(),
      region: z.union([z.literal(1), z.literal(2), z.literal(3)]).nullable(),
      supplyV: z.number().nullable(),
      ambientC: z.number().nullable(),
      outputStage: outputStageSchema.nullable(),
      testedOn: z.string(),
    }),
  }),
  kept: z.array(keptPoint),
  sweeps: z.array(sweep),
});

export type Station = z.output<typeof stationSchema>;
export type StationReading = Station['sheet']['readings'][number];
export type StationSweep = Station['sweeps'][number];

/** The verdict on a point as scripts get it. */
export const judgementSchema = z.object({
  testPointId: id,
  label: z.string(),
  verdict,
  value: z.number().nullable(),
  U: z.number().nullable(),
  k: z.number().nullable(),
  n: z.number().int(),
  lower: z.number().nullable(),
  upper: z.number().nullable(),
  ruleText: z.string().nullable(),
  marginText: z.string(),
  stopped: z.string().nullable(),
});
