import { z } from 'zod';
import type { CertificateStatement, PublicStatement } from '~/domain/certificates/statement';

const finite = z.number().finite();
const day = z.string().regex(/^\d{4}-\d{2}-\d{2}$/u);

const pointSchema = z
  .object({
    label: z.string().min(1),
    quantityKey: z.string().min(1),
    band: z.string().min(1).nullable(),
    freqHz: finite.positive().nullable(),
    value: finite,
    unit: z.string(),
    text: z.string().min(1),
    atMeterText: z.string(),
    uncertainty: z
      .object({
        value: finite.nonnegative(),
        unit: z.string(),
        k: finite.positive(),
        low: finite,
        high: finite,
        text: z.string().min(1),
      })
      .strict()
      .nullable(),
    n: z.number().int().positive(),
    lower: finite.nullable(),
    upper: finite.nullable(),
    limitText: z.string(),
    ruleText: z.string(),
    decision: z.enum(['guarded', 'simple']),
    verdict: z.enum(['pass', 'too_close', 'fail', 'not_run']),
    concession: z.string().min(1).nullable(),
    origin: z.enum(['computed', 'history']).optional(),
    condition: z.string().min(1).optional(),
  })
  .strict();

const instrumentSchema = z
  .object({
    name: z.string().min(1),
    grade: z.enum(['accredited', 'checked', 'unchecked']),
    gradeNote: z.string(),
    calibrationDueOn: day.nullable(),
  })
  .strict();

/** What is signed and public; an unknown member is refused, since it would not be covered by what the paper says. */
export const publicStatementSchema = z
  .object({
    format: z.literal('certificate-statement/1'),
    works: z.object({ name: z.string().min(1), addressLines: z.array(z.string()) }).strict(),
    number: z.string().min(1),
    letter: z.string().regex(/^[A-Z]{0,2}$/u),
    replaces: z
      .object({
        number: z.string().min(1),
        reason: z.string().min(1),
        changes: z.array(z.string().min(1)).optional(),
      })
      .strict()
      .nullable(),
    unit: z
      .object({
        serial: z.string().min(1),
        model: z.string().min(1),
        options: z.string(),
        bomRevision: z.string(),
        firmware: z.string(),
        alignment: z.array(z.string()),
      })
      .strict(),
    batchNumber: z.string().nullable(),
    buyerDigest: z
      .string()
      .regex(/^[0-9a-f]{64}$/u)
      .nullable(),
    run: z.object({ number: z.number().int().positive(), note: z.string() }).strict(),
    testedAt: z.string().datetime(),
    issuedOn: day,
    testedBy: z.string().min(1),
    place: z.string().min(1).optional(),
    issuedBy: z.string().min(1),
    conditions: z.object({ supply: z.string(), load: z.string(), ambient: z.string() }).strict(),
    testPlan: z.object({ name: z.string().min(1), revision: z.string().min(1) }).strict(),
    result: z.enum(['passed', 'passed by concession']),
    points: z.array(pointSchema).min(1),
    instruments: z.array(instrumentSchema),
    path: z.string(),
    decisionRule: z.string().min(1),
    conformity: z.array(z.string()).min(1),
    notAssessed: z.array(z.string()),
    deviations: z.array(z.string()),
    cautions: z.array(z.string()),
    code: z.string().regex(/^[0-9A-HJKMNP-TV-Z]{12}$/u),
    checkUrl: z.string().url(),
    computationVersion: z.string().min(1),
  })
  .strict() satisfies z.ZodType<PublicStatement>;

/** The whole statement, the buyer's part included. */
export const certificateStatementSchema = publicStatementSchema
  .extend({
    buyer: z
      .object({
        callSign: z.string().nullable(),
        orderNumber: z.string().nullable(),
        salt: z.string().regex(/^[0-9a-f]{32,}$/u),
      })
      .strict()
      .nullable(),
  })
  .strict() satisfies z.ZodType<CertificateStatement>;
