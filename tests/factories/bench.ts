import type { InstrumentCalibration, InstrumentSpec, PathSpec } from '~/domain/bench/types';
import type { Db } from '~/server/db/client';
import { models, testPlanRevisions, testPoints, units, works } from '~/server/db/schema';
import { createInstrument } from '~/server/services/bench/create-instrument';
import { createPath } from '~/server/services/bench/create-path';
import type { CallContext } from '~/server/write';
import { seedPerson } from './people';

type NewPoint = Omit<typeof testPoints.$inferInsert, 'testPlanRevisionId' | 'position'>;

/** A call on behalf of a person. */
export function callAs(db: Db, userId: number, now = new Date('2027-03-09T13:00:00Z')): CallContext {
  return { db, actor: { kind: 'user', userId }, now };
}

/** A calibration to 0.2 dB that holds. */
export function buildCalibration(change: Partial<InstrumentCalibration> = {}): InstrumentCalibration {
  return {
    expanded: 0.2,
    unit: 'dB',
    k: 2,
    calibratedOn: '2026-12-31',
    dueOn: '2027-12-31',
    laboratory: null,
    certificateNumber: null,
    ...change,
  };
}

/** A power meter, analyser and counter in one, good to half a dB. */
export function buildInstrumentSpec(change: Partial<InstrumentSpec> = {}): InstrumentSpec {
  return {
    grade: 'accredited',
    checkedAgainst: null,
    quantities: {
      rf_power: {
        accuracy: [{ halfWidth: 0.3, unit: 'dB' }],
        resolution: { halfWidth: 0.01, unit: 'dB' },
      },
      harmonic: { accuracy: [], resolution: { halfWidth: 0.1, unit: 'dB' } },
      current_rest: { accuracy: [{ halfWidth: 1, unit: 'percent' }], resolution: null },
      current_key_down: { accuracy: [{ halfWidth: 1, unit: 'percent' }], resolution: null },
      frequency_error: {
        accuracy: [{ halfWidth: 0.1, unit: 'ppm' }],
        resolution: { halfWidth: 1, unit: 'Hz' },
      },
    },
    linearityDb: 0.5,
    flatnessDb: 0.4,
    vswr: 1.2,
    ownDistortionDbc: -80,
    detector: null,
    calibration: buildCalibration(),
    ...change,
  };
}

/** A 40 dB tap of a dummy load, from 1 to 300 MHz. */
export function buildPathSpec(): PathSpec {
  return {
    direction: 'to_instrument',
    parts: [
      {
        partNumber: null,
        name: '50 Ω dummy load, 40 dB tap',
        loss: [
          [1e6, 40.2],
          [300e6, 40.2],
        ],
        uncertaintyDb: 0.2,
        k: 2,
        flatnessDb: 0.2,
        ratingW: 50,
        vswr: 1.1,
      },
    ],
  };
}

/** Points of a plan over some bands: power, two harmonics, key-down current, frequency error. */
export function buildPlan(bands: { band: string; freqHz: number }[]): NewPoint[] {
  return bands.flatMap(({ band, freqHz }) => {
    const on = { band, freqHz, lowerLimit: null, upperLimit: null, required: true, condition: null };
    const fixed = { ...on, limitRule: 'fixed' as const, decision: 'simple' as const };
    const spurious = { ...on, limitRule: 'spurious' as const, decision: 'guarded' as const };
    return [
      { ...fixed, quantityKey: 'rf_power', lowerLimit: 2 },
      { ...spurious, quantityKey: 'harmonic_2' },
      { ...spurious, quantityKey: 'harmonic_3' },
      { ...fixed, quantityKey: 'current_key_down', upperLimit: 0.9 },
      { ...fixed, quantityKey: 'frequency_error', lowerLimit: -100, upperLimit: 100 },
    ];
  });
}

/**
 * A works with a tester and an owner, a model with a test plan, one unit of it at its final test, an
 * instrument and a path.
 */
export async function seedBench(db: Db, plan: NewPoint[] = buildPlan([{ band: '20m', freqHz: 14_060_000 }])) {
  await db.insert(works).values({
    name: 'Thistledown Radio Works',
    addressLines: ['1 Mill Lane', 'Thistledown'],
    country: 'IE',
    email: 'works@thistledown.example',
    timeZone: 'Europe/Dublin',
    currency: 'EUR',
  });
  const owner = await seedPerson(db, { name: 'Mara Quill', roles: ['owner'] });
  const tester = await seedPerson(db, { name: 'Ines Aldous', roles: ['tester'] });
  const [{ insertId: modelId }] = await db.insert(models).values({
    slug: 'holm-3',
    serialPrefix: 'H3',
    name: 'Holm 3',
    tagline: 'Three bands',
    description: 'Three bands out of four.',
    panel: {},
    ratedPowerW: 5,
    netWeightG: 400,
    customsDescription: 'Radio transceiver',
    hsCode: '851762',
    state: 'for_sale',
    createdAt: new Date(),
  });
  const [{ insertId: testPlanRevisionId }] = await db.insert(testPlanRevisions).values({
    modelId,
    letter: 'C',
    state: 'draft',
    supplyV: 13.8,
    loadOhm: 50,
    createdAt: new Date(),
  });
  await db
    .insert(testPoints)
    .values(plan.map((point, index) => ({ ...point, testPlanRevisionId, position: index + 1 })));
  const points = await db.select().from(testPoints);
  const unitOf = (serial: string) => ({
    serial,
    modelId,
    options: [],
    stage: 'final_test' as const,
    testPlanRevisionId,
    alignment: {},
    pageCode: `PAGE${serial.replace('-', '')}`,
    createdAt: new Date(),
  });
  await db.insert(units).values(unitOf('H3-0147'));
  const ctx = callAs(db, tester);
  const { instrumentRevisionId } = await createInstrument(
    { number: 'SA-1', name: 'Spectrum analyser', spec: buildInstrumentSpec() },
    ctx,
  );
  const { pathRevisionId } = await createPath(
    { number: 'P-1', name: 'Dummy load, 40 dB tap', spec: buildPathSpec() },
    ctx,
  );
  const pointId = (quantityKey: string, band = '20m'): number => {
    const point = points.find((each) => each.quantityKey === quantityKey && each.band === band);
    if (point === undefined) throw new Error(`The plan has no ${quantityKey} on ${band}.`);
    return point.id;
  };
  return { owner, tester, ctx, serial: 'H3-0147', instrumentRevisionId, pathRevisionId, pointId, modelId };
}

export type SeededBench = Awaited<ReturnType<typeof seedBench>>;
