import { and, asc, desc, eq, sql } from 'drizzle-orm';
import type { InstrumentSpec } from '~/domain/bench/types';
import { instrumentSpecSchema } from '~/schemas/bench-specs';
import type { Reader } from '~/server/db/client';
import { files, instrumentRevisions, instruments } from '~/server/db/schema';

export interface ListedInstrument {
  id: number;
  number: string;
  name: string;
  revision: number;
  /** Of the newest revision; null while it is in use. */
  retiredAt: Date | null;
  spec: InstrumentSpec;
}

/** Every instrument by its newest revision, those in use first. */
export async function listEveryInstrument(reader: Reader): Promise<ListedInstrument[]> {
  const rows = await reader
    .select({
      id: instruments.id,
      number: instruments.number,
      name: instruments.name,
      revision: instrumentRevisions.revision,
      retiredAt: instrumentRevisions.retiredAt,
      spec: instrumentRevisions.spec,
    })
    .from(instruments)
    .innerJoin(instrumentRevisions, eq(instrumentRevisions.instrumentId, instruments.id))
    .where(
      eq(
        instrumentRevisions.revision,
        sql`(select max(newest.revision) from instrument_revisions newest where newest.instrument_id = ${instruments.id})`,
      ),
    )
    .orderBy(sql`${instrumentRevisions.retiredAt} is not null`, asc(instruments.number));
  return rows.map(({ spec, ...row }) => ({ ...row, spec: instrumentSpecSchema.parse(spec) }));
}

/** An instrument with its revisions, newest first; null where there is none of the number. */
export async function getInstrument(reader: Reader, number: string) {
  const [instrument] = await reader
    .select()
    .from(instruments)
    .where(eq(instruments.number, number.toUpperCase()));
  if (instrument === undefined) return null;
  const rows = await reader
    .select({
      revision: instrumentRevisions.revision,
      createdAt: instrumentRevisions.createdAt,
      retiredAt: instrumentRevisions.retiredAt,
      spec: instrumentRevisions.spec,
      fileName: files.name,
    })
    .from(instrumentRevisions)
    .leftJoin(files, eq(files.id, instrumentRevisions.calibrationFileId))
    .where(eq(instrumentRevisions.instrumentId, instrument.id))
    .orderBy(desc(instrumentRevisions.revision));
  const revisions = rows.map(({ spec, ...row }) => ({ ...row, spec: instrumentSpecSchema.parse(spec) }));
  const [newest] = revisions;
  return newest === undefined ? null : { ...instrument, newest, revisions };
}

/** The file of a revision's calibration certificate; null where there is none. */
export async function findCertificateFile(
  reader: Reader,
  instrumentId: number,
  revision: number,
): Promise<number | null> {
  const [row] = await reader
    .select({ fileId: instrumentRevisions.calibrationFileId })
    .from(instrumentRevisions)
    .where(
      and(eq(instrumentRevisions.instrumentId, instrumentId), eq(instrumentRevisions.revision, revision)),
    );
  return row?.fileId ?? null;
}
