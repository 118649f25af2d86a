import { randomBytes } from 'node:crypto';
import { desc, eq } from 'drizzle-orm';
import type { PointJudgement } from '~/domain/bench/judge-point';
import { COMPUTATION_VERSION, judgeRun } from '~/domain/bench/judge-run';
import { AT_THE_WORKS } from '~/domain/certificates/amend';
import { CODE_RANDOM_BYTES, codeFromRandom } from '~/domain/certificates/code';
import type { BuyerPart, CertificateStatement } from '~/domain/certificates/statement';
import { writeRunParts } from '~/domain/certificates/write-statement';
import type { JudgedPoint } from '~/domain/certificates/write-statement';
import { runIsReleased } from '~/domain/production/run-status';
import { dayOf } from '~/lib/dates';
import { paths } from '~/lib/paths';
import { formatCertificateNumber } from '~/lib/serials';
import { certificateBuyers, certificates, runPoints, testRuns, userProfiles } from '~/server/db/schema';
import { env } from '~/server/env';
import { DomainError } from '~/server/errors';
import { digestBuyer } from '~/server/keys/ed25519';
import { listUsedInstruments, readRunSheet } from '~/server/queries/bench/read-run-sheet';
import {
  listSweepSpans,
  listUsedPaths,
  readCertificateFacts,
} from '~/server/queries/certificates/read-certificate-facts';
import { readWorksData } from '~/server/queries/office/read-works-data';
import type { Ctx, WriteContext } from '~/server/write';
import { actingPerson, nextNumber, write } from '~/server/write';
import { signStatement } from './sign-statement';

/** What is to be certified. */
interface Input {
  runId: number;
}

type Facts = Awaited<ReturnType<typeof readCertificateFacts>>;

/**
 * Issues the certificate of a closed, passed run: writes its statement, signs it and asks for its PDF, which
 * follows within seconds. A run has one certificate for one buyer and destination.
 *
 * @throws DomainError `conflict` where the run is not closed and passed, is not the unit's newest, or has its
 * certificate already
 */
export async function issueCertificate(
  { runId }: Input,
  ctx: Ctx,
): Promise<{ certificateId: number; number: string; code: string }> {
  return write(ctx, async (w) => {
    const issuedBy = actingPerson(w);
    await lockReleasedRun(w, runId);
    const facts = await readCertificateFacts(w.tx, runId);
    await refuseSecond(w, runId, facts);
    const statement = await writeStatement(w, facts, issuedBy);
    const { number, code } = statement;
    const [{ insertId: certificateId }] = await w.tx.insert(certificates).values({
      number,
      unitId: facts.unit.id,
      testRunId: runId,
      contactId: facts.contactId,
      destinationCountry: facts.run.destinationCountry,
      code,
      ...(await signStatement(w, statement)),
      issuedAt: w.now,
      issuedBy,
    });
    if (statement.buyer !== null) {
      await w.tx.insert(certificateBuyers).values({ certificateId, ...statement.buyer });
    }
    await w.record({
      action: 'certificate.issue',
      subjects: [
        { type: 'certificate', id: certificateId },
        { type: 'unit', id: facts.unit.id },
        { type: 'run', id: runId },
      ],
      details: { number },
    });
    await w.post({
      kind: 'certificate_pdf',
      key: `certificate-pdf:${certificateId}`,
      payload: { certificateId },
    });
    return { certificateId, number, code };
  });
}

async function lockReleasedRun(w: WriteContext, runId: number): Promise<void> {
  const [run] = await w.tx.select().from(testRuns).where(eq(testRuns.id, runId)).for('update');
  if (run === undefined) throw new DomainError('not_found', 'There is no such run.');
  if (!runIsReleased(run)) {
    throw new DomainError('conflict', 'Only a run that is closed and passed gets a certificate.');
  }
  // The statement is computed from the readings anew; by other rules it might not say what the run came to.
  if (run.computationVersion !== COMPUTATION_VERSION) {
    throw new DomainError(
      'conflict',
      'The run was judged by another version of this program: open a new run.',
    );
  }
  const [newest] = await w.tx
    .select({ id: testRuns.id })
    .from(testRuns)
    .where(eq(testRuns.unitId, run.unitId))
    .orderBy(desc(testRuns.runNo))
    .limit(1);
  if (newest?.id !== runId) {
    throw new DomainError('conflict', 'The unit has been tested again since: certify its newest run.');
  }
}

async function refuseSecond(w: WriteContext, runId: number, facts: Facts): Promise<void> {
  const [earlier] = await w.tx
    .select({ number: certificates.number, contactId: certificates.contactId })
    .from(certificates)
    .where(eq(certificates.testRunId, runId))
    .orderBy(desc(certificates.id))
    .limit(1);
  if (earlier !== undefined && earlier.contactId === facts.contactId) {
    throw new DomainError('conflict', `This run has its certificate: ${earlier.number}.`);
  }
  if (facts.orderCountry !== null && facts.orderCountry !== facts.run.destinationCountry) {
    throw new DomainError(
      'conflict',
      'The unit goes to another country than the run was judged for: open a new run, which judges it for there.',
    );
  }
}

/** A rule or quantity of the works may have been revised since the run closed; then the words would say something else. */
async function refuseOtherVerdicts(
  w: WriteContext,
  runId: number,
  judgements: ReadonlyMap<number, PointJudgement>,
): Promise<void> {
  const kept = await w.tx
    .select({
      testPointId: runPoints.testPointId,
      verdict: runPoints.verdict,
      lower: runPoints.lowerLimit,
      upper: runPoints.upperLimit,
    })
    .from(runPoints)
    .where(eq(runPoints.testRunId, runId));
  const isOther = kept.some(({ testPointId, verdict, lower, upper }) => {
    const now = judgements.get(testPointId);
    return now?.verdict !== verdict || now.lower !== lower || now.upper !== upper;
  });
  if (isOther) {
    throw new DomainError(
      'conflict',
      'Limits or quantities have been revised since the run was closed, and it would be judged otherwise now: open a new run.',
    );
  }
}

async function writeStatement(
  w: WriteContext,
  facts: Facts,
  issuedBy: number,
): Promise<CertificateStatement> {
  const { run, unit } = facts;
  const [worksData, sheet, issuer] = await Promise.all([
    readWorksData(w.tx),
    readRunSheet(w.tx, run.id),
    w.tx.select({ name: userProfiles.name }).from(userProfiles).where(eq(userProfiles.userId, issuedBy)),
  ]);
  if (worksData === null || run.closedAt === null) throw new Error('A closed run belongs to a works.');
  const { judgements } = judgeRun(sheet);
  const conceded = new Map(sheet.concessions.map(({ testPointId, reason }) => [testPointId, reason]));
  await refuseOtherVerdicts(w, run.id, judgements);
  const points = sheet.points.flatMap((point): JudgedPoint[] => {
    const judgement = judgements.get(point.id);
    return judgement === undefined || judgement.value === null
      ? []
      : [{ point, judgement, concession: conceded.get(point.id) ?? null }];
  });
  const present = (ids: (number | null)[]) => [...new Set(ids.flatMap((id) => (id === null ? [] : [id])))];
  const counted = sheet.readings.filter(({ voided }) => !voided);
  const [usedInstruments, usedPaths, spans] = await Promise.all([
    listUsedInstruments(w.tx, present(counted.map(({ instrumentRevisionId }) => instrumentRevisionId))),
    listUsedPaths(w.tx, present(counted.map(({ pathRevisionId }) => pathRevisionId))),
    listSweepSpans(w.tx, run.id),
  ]);
  const buyer: BuyerPart | null =
    facts.orderNumber === null
      ? null
      : {
          callSign: facts.callSign,
          orderNumber: String(facts.orderNumber),
          salt: randomBytes(16).toString('hex'),
        };
  const issuedOn = dayOf(w.now, worksData.timeZone);
  const number = formatCertificateNumber(Number(issuedOn.slice(0, 4)), await nextNumber(w.tx, 'certificate'));
  const code = codeFromRandom(randomBytes(CODE_RANDOM_BYTES));
  return {
    format: 'certificate-statement/1',
    works: { name: worksData.name, addressLines: worksData.addressLines },
    number,
    letter: '',
    replaces: null,
    unit: {
      serial: unit.serial,
      model: facts.modelName,
      options: facts.optionLabels.join(', '),
      bomRevision: facts.bomLetter ?? '',
      firmware: run.firmwareVersion ?? '',
      alignment: Object.entries(run.alignment).map(([name, value]) => `${name} ${value}`),
    },
    batchNumber: facts.batchNumber === null ? null : String(facts.batchNumber),
    buyer,
    buyerDigest: buyer === null ? null : digestBuyer(buyer),
    run: { number: run.runNo, note: facts.earlierRuns.join('; ') },
    testedAt: run.closedAt.toISOString(),
    issuedOn,
    testedBy: facts.testerName,
    place: AT_THE_WORKS,
    issuedBy: issuer[0]?.name ?? '',
    conditions: {
      supply: run.supplyV === null ? 'not stated' : `${run.supplyV.toFixed(2)} V`,
      load: `${facts.planLoadOhm} Ω`,
      ambient: run.ambientC === null ? 'not stated' : `${run.ambientC} °C`,
    },
    testPlan: { name: facts.modelName, revision: facts.planLetter },
    result: run.result === 'passed_by_concession' ? 'passed by concession' : 'passed',
    deviations: run.deviations === '' ? [] : [run.deviations],
    code,
    checkUrl: new URL(paths.certificateByCode(code), env().baseUrl).href,
    computationVersion: COMPUTATION_VERSION,
    ...writeRunParts({
      points,
      unread: sheet.points.filter(({ id }) => (judgements.get(id)?.value ?? null) === null),
      historyPointIds: new Set(
        counted.flatMap(({ source, testPointId }) => (source === 'history' ? [testPointId] : [])),
      ),
      spans,
      rule: sheet.rule,
      destinationCountry: run.destinationCountry,
      instruments: usedInstruments,
      paths: usedPaths,
    }),
  };
}
