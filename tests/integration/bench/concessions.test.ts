import { execFile } from 'node:child_process';
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { promisify } from 'node:util';
import { eq, like } from 'drizzle-orm';
import { afterAll, beforeEach, describe, expect, it } from 'vitest';
import type { StaffRole } from '~/domain/people/roles';
import { POST as grantDoor } from '~/pages/api/runs/[id]/concessions/index';
import { POST as withdrawDoor } from '~/pages/api/runs/[id]/concessions/[point]/withdrawal';
import type { SignedIn } from '~/server/auth/sessions';
import { ledgerEntries, ledgerSubjects, runConcessions, runPoints, units } from '~/server/db/schema';
import { makeCertificatePdf, stopCertificateThread } from '~/server/documents/certificate-pdf';
import { readStation } from '~/server/queries/bench/read-station';
import { readSignedCertificate } from '~/server/queries/certificates/read-signed-certificate';
import { closeRun } from '~/server/services/bench/close-run';
import { voidReading } from '~/server/services/bench/void-reading';
import { addSigningKey } from '~/server/services/certificates/add-signing-key';
import { issueCertificate } from '~/server/services/certificates/issue-certificate';
import { buildPlan, callAs, seedBench } from '../../factories/bench';
import type { SeededBench } from '../../factories/bench';
import { fillRun } from '../../factories/certificates';
import { callDoor, problemIn, sendJson } from '../../setup/call-door';
import { testDatabase } from '../../setup/database';

const run = promisify(execFile);
const database = testDatabase();
const reason = 'Shown to the buyer, who takes it: the keyer draws more.';
/** Over the works' own limit of 900 mA. */
const thirsty = { current_key_down: '950 mA' };
/** Far over the limit on emissions. */
const dirty = { harmonic_2: '20' };

let bench: SeededBench;
let owner: SignedIn;
let tester: SignedIn;

beforeEach(async () => {
  // Judged with its uncertainty, so that it can also be too close to call.
  const plan = buildPlan([{ band: '20m', freqHz: 14_060_000 }]).map((point) =>
    point.quantityKey === 'current_key_down' ? { ...point, decision: 'guarded' as const } : point,
  );
  bench = await seedBench(database.db, plan);
  const who = (id: number, name: string, role: StaffRole): SignedIn => ({
    ...{ id, name, callSign: null, roles: [role] },
    email: `${role}@thistledown.example`,
  });
  owner = who(bench.owner, 'Mara Quill', 'owner');
  tester = who(bench.tester, 'Ines Aldous', 'tester');
});

afterAll(stopCertificateThread);

async function grant(
  runId: number,
  key = 'current_key_down',
  { person = owner, why = reason }: { person?: SignedIn; why?: string } = {},
): Promise<Response> {
  const body = { testPointId: bench.pointId(key), reason: why };
  const params = { id: String(runId) };
  return (await callDoor(grantDoor, { person, params, ...sendJson(body) })).response;
}

async function withdraw(runId: number, person = owner): Promise<Response> {
  const params = { id: String(runId), point: String(bench.pointId('current_key_down')) };
  return (await callDoor(withdrawDoor, { person, params, ...sendJson({}) })).response;
}

async function readingOf(runId: number, key: string): Promise<number> {
  const station = await readStation(database.db, runId);
  const reading = station?.sheet.readings.find(({ quantityKey }) => quantityKey === key);
  if (reading === undefined) throw new Error(`Run ${runId} has no reading of ${key}.`);
  return reading.id;
}

async function expectRefusal(response: Response, status: number, sentence: string): Promise<void> {
  expect(await problemIn(response)).toMatchObject({ status, detail: sentence });
  expect(await database.db.select().from(runConcessions)).toEqual([]);
}

describe('a concession', () => {
  it('closes the run as passed by concession, and the unit goes on', async () => {
    const runId = await fillRun(bench, thirsty);
    expect((await grant(runId)).status).toBe(200);
    expect((await readStation(database.db, runId))?.sheet.concessions).toEqual([
      { testPointId: bench.pointId('current_key_down'), reason },
    ]);
    expect(await closeRun({ runId }, bench.ctx)).toMatchObject({ result: 'passed_by_concession' });
    const kept = (await readStation(database.db, runId))?.kept ?? [];
    expect(kept.filter(({ concession }) => concession !== null)).toMatchObject([
      { testPointId: bench.pointId('current_key_down'), verdict: 'fail', concession: reason },
    ]);
    const [unit] = await database.db.select().from(units).where(eq(units.serial, bench.serial));
    expect(unit?.stage).not.toBe('final_test');
  });

  it('stands with its reason on the certificate, signed and printed', async () => {
    await addSigningKey(callAs(database.db, bench.owner));
    const runId = await fillRun(bench, thirsty);
    await grant(runId);
    await closeRun({ runId }, bench.ctx);
    const { certificateId, code } = await issueCertificate({ runId }, bench.ctx);
    const statement = (await readSignedCertificate(database.db, { code }))?.statement;
    expect(statement?.result).toBe('passed by concession');
    expect(statement?.points.filter(({ concession }) => concession !== null)).toMatchObject([
      { quantityKey: 'current_key_down', verdict: 'fail', concession: reason },
    ]);
    expect(statement?.conformity.join(' ')).toContain(
      'Not met, and let go by concession of the owner: Current, key down, 20 m.',
    );

    const folder = await mkdtemp(join(tmpdir(), 'certificate-'));
    try {
      const file = join(folder, 'certificate.pdf');
      await writeFile(file, (await makeCertificatePdf(database.db, certificateId)) ?? '');
      const { stdout } = await run('pdftotext', [file, '-']);
      expect(stdout.replace(/\s+/gu, ' ')).toContain(
        `By concession of the owner: Current, key down, 20 m, 950 mA where ≤ 900 mA is asked. ${reason}`,
      );
    } finally {
      await rm(folder, { recursive: true });
    }
  });

  it('lets a point go that is too close to call', async () => {
    const runId = await fillRun(bench, { current_key_down: '899 mA' });
    await grant(runId);
    expect(await closeRun({ runId }, bench.ctx)).toMatchObject({ result: 'passed_by_concession' });
    const kept = (await readStation(database.db, runId))?.kept ?? [];
    expect(kept.filter(({ concession }) => concession !== null)).toMatchObject([
      { verdict: 'too_close', concession: reason },
    ]);
  });

  it('is in the ledger of changes of the run and of its unit, as is taking it back', async () => {
    const runId = await fillRun(bench, thirsty);
    await grant(runId);
    await withdraw(runId);
    const entries = await database.db
      .select({
        action: ledgerEntries.action,
        details: ledgerEntries.details,
        of: ledgerSubjects.subjectType,
      })
      .from(ledgerEntries)
      .innerJoin(ledgerSubjects, eq(ledgerSubjects.ledgerEntryId, ledgerEntries.id))
      .where(like(ledgerEntries.action, 'concession.%'))
      .orderBy(ledgerEntries.id, ledgerSubjects.subjectType);
    const details = { runNo: 1, point: '20 m, current, key down', reason };
    expect(entries).toEqual([
      { action: 'concession.grant', details, of: 'run' },
      { action: 'concession.grant', details, of: 'unit' },
      { action: 'concession.withdraw', details, of: 'run' },
      { action: 'concession.withdraw', details, of: 'unit' },
    ]);
  });

  it('is no longer heeded once it is withdrawn: the run fails', async () => {
    const runId = await fillRun(bench, thirsty);
    await grant(runId);
    expect((await withdraw(runId)).status).toBe(200);
    expect((await withdraw(runId)).status).toBe(404);
    expect(await closeRun({ runId }, bench.ctx)).toMatchObject({ result: 'failed' });
    const kept = await database.db.select().from(runPoints).where(eq(runPoints.testRunId, runId));
    expect(kept.map(({ concession }) => concession).filter((each) => each !== null)).toEqual([]);
    expect(await database.db.select().from(runConcessions)).toMatchObject([
      { reason, byUserId: bench.owner, withdrawnBy: bench.owner },
    ]);
  });

  it('can be granted again with another reason after it was withdrawn, and not twice before', async () => {
    const runId = await fillRun(bench, thirsty);
    await grant(runId);
    expect(await problemIn(await grant(runId))).toMatchObject({
      status: 409,
      detail: '20 m, current, key down is let go already. Withdraw that first to give another reason.',
    });
    await withdraw(runId);
    expect((await grant(runId, 'current_key_down', { why: 'It is a demonstrator.' })).status).toBe(200);
    expect((await readStation(database.db, runId))?.sheet.concessions).toMatchObject([
      { reason: 'It is a demonstrator.' },
    ]);
  });
});

describe('a concession is refused', () => {
  it('on a limit on emissions, to the owner too', async () => {
    const runId = await fillRun(bench, dirty);
    await expectRefusal(
      await grant(runId, 'harmonic_2'),
      409,
      '20 m, 2nd harmonic: this limit on emissions is the law’s, and nobody can let it go. Mend the unit, or measure better.',
    );
    expect(await closeRun({ runId }, bench.ctx)).toMatchObject({ result: 'failed' });
  });

  it('on a limit on emissions by the database, where it was written by hand', async () => {
    const runId = await fillRun(bench, dirty);
    const byHand = (testPointId: number, ruleKey: string | null) =>
      database.db
        .insert(runPoints)
        .values({
          ...{ testRunId: runId, testPointId, verdict: 'fail', readingCount: 1 },
          ...{ ruleKey, ruleText: 'By hand', concession: reason },
        })
        .then(
          () => 'written',
          (error: unknown) => (error instanceof Error ? String(error.cause) : ''),
        );
    expect(await byHand(bench.pointId('harmonic_2'), 'itu_category_a')).toContain(
      'run_points_concession_check',
    );
    await database.db.insert(runConcessions).values({
      ...{ testRunId: runId, testPointId: bench.pointId('harmonic_2'), reason },
      ...{ at: new Date(), byUserId: bench.owner },
    });
    const closing: unknown = await closeRun({ runId }, bench.ctx).catch((cause: unknown) => cause);
    expect(closing instanceof Error && String(closing.cause)).toContain('run_points_concession_check');
    expect((await readStation(database.db, runId))?.run.state).toBe('open');
  });

  it('to a tester, who may not take one back either', async () => {
    const runId = await fillRun(bench, thirsty);
    const response = await grant(runId, 'current_key_down', { person: tester });
    expect(response.status).toBe(403);
    expect(await database.db.select().from(runConcessions)).toEqual([]);
    await grant(runId);
    expect((await withdraw(runId, tester)).status).toBe(403);
  });

  it('on a closed run, by the service and by the database', async () => {
    const runId = await fillRun(bench, thirsty);
    await closeRun({ runId }, bench.ctx);
    const closed = 'Run 1 is closed, and closed is closed. Open a new run.';
    await expectRefusal(await grant(runId), 409, closed);
    await expectRefusal(await withdraw(runId), 409, closed);
    const error: unknown = await database.db
      .insert(runConcessions)
      .values({
        ...{ testRunId: runId, testPointId: bench.pointId('current_key_down'), reason },
        ...{ at: new Date(), byUserId: bench.owner },
      })
      .catch((cause: unknown) => cause);
    expect(error instanceof Error && String(error.cause)).toContain('a closed run takes no concession');
  });

  it('on a point that meets its limit, and on one that has no verdict', async () => {
    const runId = await fillRun(bench);
    await expectRefusal(
      await grant(runId, 'rf_power'),
      409,
      '20 m, power meets its limit: there is nothing to let go.',
    );
    await voidReading(
      { runId, readingId: await readingOf(runId, 'current_key_down'), reason: 'Lead off.' },
      bench.ctx,
    );
    await expectRefusal(
      await grant(runId),
      409,
      '20 m, current, key down has no verdict yet. Read it first, then decide.',
    );
  });

  it('without a reason, and with one that is too long', async () => {
    const runId = await fillRun(bench, thirsty);
    for (const why of ['  ', 'x'.repeat(501)]) {
      const problem = await problemIn(await grant(runId, 'current_key_down', { why }));
      expect(problem).toMatchObject({ status: 400, fields: { reason: expect.any(String) as string } });
    }
    expect(await database.db.select().from(runConcessions)).toEqual([]);
  });
});
