/** What became of calls that were made at once: what the done gave, and why the refused were refused. */
export async function outcomes<T>(tries: Promise<T>[]): Promise<{ done: T[]; refused: unknown[] }> {
  const settled = await Promise.allSettled(tries);
  const refused = settled.flatMap((one) => (one.status === 'rejected' ? [one.reason as unknown] : []));
  return { done: settled.flatMap((one) => (one.status === 'fulfilled' ? [one.value] : [])), refused };
}
