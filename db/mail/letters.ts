/**
 * The texts of all mail, plain text. They hold only what the reader needs, no names of notebooks or entries, and nothing
 * that a stranger who gets them by mistake could use without the link.
 */
export interface LetterFacts {
  readonly group: string;
  readonly name: string;
  readonly login: string;
  /** Where Motebook is, e.g. https://notebook.example.org */
  readonly origin: string;
  /** The address with its secret, where the letter has one. */
  readonly link: string;
  readonly inviter: string;
  readonly newAddress: string;
}

export interface Letter {
  readonly subject: string;
  readonly text: string;
}

export const LINK_LIFE = {
  invitation: { seconds: 7 * 24 * 3600, words: 'seven days' },
  reset: { seconds: 30 * 60, words: 'thirty minutes' },
} as const;

const letters = {
  invitation: (facts) => ({
    subject: `Your account for the notebook of the ${facts.group}`,
    paragraphs: [
      `${facts.inviter} invites you to Motebook, the laboratory notebook of the ${facts.group}.`,
      `Your login name is ${facts.login}. To choose a password, open this address within ${LINK_LIFE.invitation.words}:`,
      facts.link,
      'It works once. If it has expired, ask for another one. If you did not expect this, you need do nothing.',
    ],
  }),
  reset: (facts) => ({
    subject: 'A new password for Motebook',
    paragraphs: [
      `Somebody, probably you, asked for a new password for ${facts.login}. To choose one, open this address within ${LINK_LIFE.reset.words}:`,
      facts.link,
      'It works once, and only the newest such link works. If it was not you, you need do nothing: your password stays as it is.',
    ],
  }),
  'password-changed': (facts) => ({
    subject: 'Your password for Motebook was changed',
    paragraphs: [
      `The password of ${facts.login} was changed, and all other logins were ended.`,
      `If it was not you, ask for a new password at once, at ${facts.origin}/forgotten, and tell an administrator.`,
    ],
  }),
  'address-changed': (facts) => ({
    subject: 'Your address in Motebook was changed',
    paragraphs: [
      `The e-mail address of ${facts.login} is now ${facts.newAddress}. This goes to the old address and to the new one.`,
      'If it was not you, tell an administrator at once.',
    ],
  }),
} as const satisfies Record<string, (facts: LetterFacts) => { subject: string; paragraphs: string[] }>;

export type LetterKind = keyof typeof letters;

export const isLetterKind = (kind: string): kind is LetterKind => Object.hasOwn(letters, kind);

/** One letter. Line breaks in names cannot start a header: the subject is one line (S31). */
export function writeLetter(kind: LetterKind, facts: LetterFacts): Letter {
  const { subject, paragraphs } = letters[kind](facts);
  return {
    subject: subject.replace(/[\p{Cc}\p{Zl}\p{Zp}]+/gu, ' '),
    text: `Good day ${facts.name},\n\n${paragraphs.join('\n\n')}\n\nMotebook, ${facts.origin}\n`,
  };
}
