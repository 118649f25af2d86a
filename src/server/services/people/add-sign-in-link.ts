import { eq } from 'drizzle-orm';
import { linkToken, newToken, tokenHash } from '~/server/auth/tokens';
import { signInLinks } from '~/server/db/schema';
import { env } from '~/server/env';
import type { WriteContext } from '~/server/write';

const lifeMs = { sign_in: 30 * 60_000, invitation: 7 * 24 * 3600_000 } as const;

/**
 * Adds a one-time link for a person and asks for the mail that carries it. Part of a service call, which
 * makes the ledger entry.
 */
export async function addSignInLink(
  w: WriteContext,
  userId: number,
  purpose: keyof typeof lifeMs,
): Promise<number> {
  const [{ insertId }] = await w.tx.insert(signInLinks).values({
    tokenHash: tokenHash(newToken()),
    purpose,
    userId,
    createdAt: w.now,
    expiresAt: new Date(w.now.getTime() + lifeMs[purpose]),
  });
  await w.tx
    .update(signInLinks)
    .set({ tokenHash: tokenHash(linkToken(env().secret, 'sign_in', insertId)) })
    .where(eq(signInLinks.id, insertId));
  await w.post({
    kind: 'mail',
    key: `sign-in-link:${insertId}`,
    payload: { letter: purpose === 'sign_in' ? 'sign_in_link' : 'invitation', signInLinkId: insertId },
  });
  return insertId;
}
