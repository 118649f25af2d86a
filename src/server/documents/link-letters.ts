import { z } from 'zod';
import { formatTimeOf } from '~/lib/dates';
import { paths } from '~/lib/paths';
import { linkToken } from '~/server/auth/tokens';
import { env } from '~/server/env';
import { invitationLetter } from '~/server/mail/invitation';
import { signInLinkLetter } from '~/server/mail/sign-in-link';
import { getWorks } from '~/server/queries/office/get-works';
import { readLinkLetter } from '~/server/queries/people/read-link-letter';
import { fullUrl, readSender } from './letter';
import type { LetterWriter } from './letter';

const payloadSchema = z.object({ signInLinkId: z.number().int() });

const urlOf = (id: number) => fullUrl(paths.signInLink(linkToken(env().secret, 'sign_in', id)));

/** The letter with a one-time sign-in link. */
export const writeSignInLink: LetterWriter = async (reader, payload) => {
  const link = await readLinkLetter(reader, payloadSchema.parse(payload).signInLinkId);
  if (link === null) return null;
  const validMinutes = Math.round((link.expiresAt.getTime() - link.createdAt.getTime()) / 60_000);
  const sender = await readSender(reader);
  return { ...signInLinkLetter({ sender, url: urlOf(link.id), validMinutes }), to: link.email };
};

/** The letter that invites a person into the works. */
export const writeInvitation: LetterWriter = async (reader, payload) => {
  const link = await readLinkLetter(reader, payloadSchema.parse(payload).signInLinkId);
  if (link === null) return null;
  const [sender, { timeZone }] = await Promise.all([readSender(reader), getWorks(reader)]);
  const letter = invitationLetter({
    sender,
    invitedBy: link.invitedBy ?? sender.name,
    roles: link.roles,
    url: urlOf(link.id),
    validUntil: formatTimeOf(link.expiresAt, timeZone),
  });
  return { ...letter, to: link.email };
};
