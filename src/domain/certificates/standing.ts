/** A certificate of a unit as far as its place among the others goes; ids rise with the time of issue. */
interface Issued {
  id: number;
  number: string;
  letter: string;
  testRunId: number;
  /** The one that it amends; null for a first issue. */
  replacesId: number | null;
}

/** By run, then by number, then by letter: an amendment of an older test is no newer than a later test. */
function compareIssued(a: Issued, b: Issued): number {
  if (a.testRunId !== b.testRunId) return a.testRunId - b.testRunId;
  if (a.number !== b.number) return a.number < b.number ? -1 : 1;
  return a.id - b.id;
}

/**
 * Where a certificate stands among all of its unit.
 *
 * @returns the amendment that took its place; the certificate that counts, where it is another one, and whether
 * that one is of a later test or for another buyer, and not just an amendment
 */
export function standingOf<T extends Issued>(
  id: number,
  issued: readonly T[],
): { successor: T | null; newest: T | null; isTestedAgain: boolean } {
  const own = issued.find((one) => one.id === id);
  const newest = [...issued].sort(compareIssued).at(-1);
  if (own === undefined || newest === undefined || newest.id === id) {
    return { successor: null, newest: null, isTestedAgain: false };
  }
  return {
    successor: issued.find(({ replacesId }) => replacesId === id) ?? null,
    newest,
    isTestedAgain: newest.number !== own.number,
  };
}
