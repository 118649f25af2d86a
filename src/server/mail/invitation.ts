import { setLetter, type Letter, type LetterSender } from './layout';

interface Invitation {
  sender: LetterSender;
  invitedBy: string;
  /** As people read them, for example `builder`. */
  roles: readonly string[];
  url: string;
  /** As people read it, with its zone. */
  validUntil: string;
}

/** Asks a person to join the works. */
export function invitationLetter({ sender, invitedBy, roles, url, validUntil }: Invitation): Letter {
  const as = roles.length === 0 ? '' : ` as ${new Intl.ListFormat('en').format(roles)}`;
  return setLetter({
    sender,
    subject: `Invitation to ${sender.name}`,
    heading: `Join ${sender.name}`,
    blocks: [
      { kind: 'paragraph', text: `${invitedBy} invites you to work with us${as}.` },
      { kind: 'button', words: 'Accept and set a password', url },
      {
        kind: 'paragraph',
        text: `The link works once, until ${validUntil}. If you do not know ${invitedBy}, leave it unused.`,
      },
    ],
  });
}
