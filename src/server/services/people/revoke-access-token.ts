import { and, eq } from 'drizzle-orm';
import { accessTokens } from '~/server/db/schema';
import { DomainError } from '~/server/errors';
import { actingPerson, write } from '~/server/write';
import type { Ctx } from '~/server/write';

/**
 * Revokes a token of the acting person; what bears it is refused from then on.
 *
 * @throws DomainError `not_found`, of others' tokens too; `conflict` where it is revoked already
 */
export async function revokeAccessToken(
  input: { tokenId: number },
  ctx: Ctx,
): Promise<{ tokenId: number; name: string }> {
  return write(ctx, async (w) => {
    const userId = actingPerson(w);
    const [token] = await w.tx
      .select()
      .from(accessTokens)
      .where(and(eq(accessTokens.id, input.tokenId), eq(accessTokens.userId, userId)))
      .for('update');
    if (token === undefined) throw new DomainError('not_found', 'You have no such token.');
    if (token.revokedAt !== null) throw new DomainError('conflict', 'This token is revoked already.');
    await w.tx.update(accessTokens).set({ revokedAt: w.now }).where(eq(accessTokens.id, token.id));
    await w.record({
      action: 'token.revoke',
      subjects: [{ type: 'user', id: userId }],
      details: { tokenId: token.id },
    });
    return { tokenId: token.id, name: token.name };
  });
}
