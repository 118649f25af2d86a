import { eq } from 'drizzle-orm';
import { contacts, userProfiles, users } from '~/server/db/schema';
import type { WriteContext } from '~/server/write';

/** The account of an order's buyer: by e-mail address the one there is, or a new one without a password. */
export async function findOrMakeBuyer(w: WriteContext, contactId: number): Promise<number> {
  const [contact] = await w.tx
    .select({ email: contacts.email, name: contacts.name, callSign: contacts.callSign })
    .from(contacts)
    .where(eq(contacts.id, contactId));
  if (contact === undefined) throw new Error(`Contact ${contactId} is gone.`);
  const found = await userOf(w, contact.email);
  if (found !== undefined) return found;
  const [{ insertId: userId }] = await w.tx.insert(users).values({ createdAt: w.now });
  const [made] = await w.tx
    .insert(userProfiles)
    .ignore()
    .values({
      userId,
      email: contact.email,
      name: Array.from(contact.name).slice(0, 120).join(''),
      callSign: contact.callSign,
    });
  if (made.affectedRows === 1) return userId;
  // Another order of the same buyer was quicker.
  await w.tx.delete(users).where(eq(users.id, userId));
  const other = await userOf(w, contact.email);
  if (other === undefined) throw new Error('A buyer’s account could be neither made nor found.');
  return other;
}

async function userOf(w: WriteContext, email: string): Promise<number | undefined> {
  const [row] = await w.tx
    .select({ userId: userProfiles.userId })
    .from(userProfiles)
    .where(eq(userProfiles.email, email));
  return row?.userId;
}
