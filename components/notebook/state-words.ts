export type EntryState = 'draft' | 'closing' | 'signed' | 'countersigned' | 'void';

/** How a state is called on the page. */
export const stateWords: Readonly<Record<EntryState, string>> = {
  draft: 'draft',
  closing: 'being signed',
  signed: 'signed',
  countersigned: 'countersigned',
  void: 'void',
};
