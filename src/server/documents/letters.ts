import type { LetterWriter } from './letter';
import { writeInvitation, writeSignInLink } from './link-letters';

/** Every letter that an outbox row can ask for, by its name there. */
export const letters: Readonly<Record<string, LetterWriter>> = {
  invitation: writeInvitation,
  sign_in_link: writeSignInLink,
};
