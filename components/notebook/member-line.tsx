type Role = 'owner' | 'editor' | 'reader' | 'witness';

const words: readonly (readonly [Role, string])[] = [
  ['owner', 'Owned by'],
  ['editor', 'written by'],
  ['reader', 'read by'],
  ['witness', 'witnessed by'],
];

/** Who belongs to a notebook, in one sentence. */
export function MemberLine({ members }: { members: readonly { name: string; role: Role }[] }) {
  const parts = words.flatMap(([role, verb]) => {
    const names = members.filter((member) => member.role === role).map(({ name }) => name);
    return names.length > 0 ? [`${verb} ${inWords(names)}`] : [];
  });
  return <p className="label mt-3 max-w-measure text-muted">{parts.join('; ')}.</p>;
}

/** "A", "A and B", "A, B and C". */
export function inWords(names: readonly string[]): string {
  const last = names.at(-1) ?? '';
  return names.length < 2 ? last : `${names.slice(0, -1).join(', ')} and ${last}`;
}
