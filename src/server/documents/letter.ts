import { env } from '~/server/env';
import type { Reader } from '~/server/db/client';
import type { Letter, LetterSender } from '~/server/mail/layout';
import { readWorksData } from '~/server/queries/office/read-works-data';

/** A letter ready to be sent. */
export interface AddressedLetter extends Letter {
  to: string;
  attachments?: { filename: string; contentType: string; content: Uint8Array }[];
}

/** Writes the letter that an outbox row asks for; null where nobody is left to write to. */
export type LetterWriter = (
  reader: Reader,
  payload: Record<string, unknown>,
) => Promise<AddressedLetter | null>;

/** The works as it stands at the foot of its letters. */
export async function readSender(reader: Reader): Promise<LetterSender> {
  const data = await readWorksData(reader);
  return { name: data?.name ?? 'Rigwright', addressLines: data?.addressLines ?? [] };
}

/** An address of ours as it stands in a letter. */
export function fullUrl(path: string): string {
  return new URL(path, env().baseUrl).href;
}
