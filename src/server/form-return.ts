import { and, eq, gt, lt } from 'drizzle-orm';
import { newToken, tokenHash } from '~/server/auth/tokens';
import type { Db } from '~/server/db/client';
import { formReturns } from '~/server/db/schema';
import type { Problem } from '~/server/errors';

/** What a refused plain HTML form held, and what is wrong with it. */
export interface FormReturn {
  values: Record<string, string | string[]>;
  message: string;
  fields: Record<string, string>;
}

export const formReturnCookie = '__Host-form';

const keptMs = 30 * 60_000;

/** Keeps a refused form for its page and gives the token for the cookie; passwords and files are left out. */
export async function keepForm(
  database: Db,
  path: string,
  form: FormData,
  problem: Problem,
  now: Date,
): Promise<string> {
  const values: Record<string, string | string[]> = {};
  for (const name of new Set(form.keys())) {
    if (name.startsWith('_') || /password|token/i.test(name)) continue;
    const texts = form.getAll(name).filter((value) => typeof value === 'string');
    const [first] = texts;
    if (first !== undefined) values[name] = texts.length === 1 ? first : texts;
  }
  const token = newToken();
  await database.delete(formReturns).where(lt(formReturns.createdAt, new Date(now.getTime() - keptMs)));
  await database.insert(formReturns).values({
    tokenHash: tokenHash(token),
    path: path.slice(0, 500),
    values,
    message: problem.detail.slice(0, 1000),
    fields: problem.fields ?? {},
    createdAt: now,
  });
  return token;
}

/** The refused form that a page is to show again, if its cookie names one of this page. */
export async function findForm(
  database: Db,
  token: string,
  path: string,
  now: Date,
): Promise<FormReturn | null> {
  const [row] = await database
    .select({ values: formReturns.values, message: formReturns.message, fields: formReturns.fields })
    .from(formReturns)
    .where(
      and(
        eq(formReturns.tokenHash, tokenHash(token)),
        eq(formReturns.path, path.slice(0, 500)),
        gt(formReturns.createdAt, new Date(now.getTime() - keptMs)),
      ),
    );
  return row ?? null;
}
