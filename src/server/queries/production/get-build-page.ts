import type { Reader } from '~/server/db/client';
import { findUnit } from './find-unit';
import { readSteps } from './read-steps';

/** A unit with the steps of its build sheet that its options call for; null where there is none. */
export async function getBuildPage(reader: Reader, serial: string) {
  const unit = await findUnit(reader, serial);
  return unit === null ? null : { unit, steps: await readSteps(reader, unit) };
}
