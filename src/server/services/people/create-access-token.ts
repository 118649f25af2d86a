import type { NewAccessToken } from '~/schemas/access-tokens';
import { accessTokens } from '~/server/db/schema';
import { actingPerson, write } from '~/server/write';
import type { Ctx } from '~/server/write';

const dayMs = 24 * 3600_000;

/**
 * Makes an access token for the acting person. The token itself never comes here: it is shown once by whoever asks,
 * and only its hash is kept, also in the answer that an Idempotency-Key repeats.
 *
 * @param input.tokenHash of the token, as `auth/tokens` makes it
 */
export async function createAccessToken(
  input: NewAccessToken & { tokenHash: string },
  ctx: Ctx,
): Promise<{ tokenId: number; tokenHash: string }> {
  const { name, scopes, days, tokenHash } = input;
  return write(ctx, async (w) => {
    const userId = actingPerson(w);
    const expiresAt = days === null ? null : new Date(w.now.getTime() + days * dayMs);
    const [{ insertId: tokenId }] = await w.tx
      .insert(accessTokens)
      .values({ tokenHash, userId, name, scopes, createdAt: w.now, expiresAt });
    await w.record({
      action: 'token.create',
      subjects: [{ type: 'user', id: userId }],
      details: { tokenId, scopes, days },
    });
    return { tokenId, tokenHash };
  });
}
