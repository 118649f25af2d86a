import { setLetter, type Letter, type LetterSender } from './layout';

interface SignInLink {
  sender: LetterSender;
  url: string;
  validMinutes: number;
}

/** The link by which a person signs in without a password. Says nothing about what they ordered. */
export function signInLinkLetter({ sender, url, validMinutes }: SignInLink): Letter {
  return setLetter({
    sender,
    subject: `Sign in to ${sender.name}`,
    heading: 'Your sign-in link',
    blocks: [
      { kind: 'paragraph', text: `This link signs you in. It works once, for ${validMinutes} minutes.` },
      { kind: 'button', words: 'Sign in', url },
      {
        kind: 'paragraph',
        text: 'If you did not ask for it, leave it unused and nothing happens. We never ask for this link by mail or telephone.',
      },
    ],
  });
}
