import { eq } from 'drizzle-orm';
import type { Tx } from '~/server/db/client';
import { models } from '~/server/db/schema';
import { DomainError } from '~/server/errors';

/**
 * Locks a model by its slug, so that its revisions are lettered one after the other.
 *
 * @throws DomainError `not_found`
 */
export async function lockModel(tx: Tx, slug: string): Promise<{ id: number; name: string; slug: string }> {
  const [model] = await tx
    .select({ id: models.id, name: models.name, slug: models.slug })
    .from(models)
    .where(eq(models.slug, slug))
    .for('update');
  if (model === undefined) throw new DomainError('not_found', `There is no model ${slug}.`);
  return model;
}
