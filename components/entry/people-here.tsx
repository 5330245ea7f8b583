import type { PersonHere } from '@/editor/collaboration';

/** Who else has this page open, each with the colour of their caret. */
export function PeopleHere({ people }: { people: readonly PersonHere[] }) {
  if (people.length === 0) return null;
  return (
    <ul aria-label="Also here" className="label flex list-none flex-wrap gap-x-4 gap-y-1 text-muted">
      {people.map((person) => (
        <li key={person.id} className="inline-flex items-center gap-1.5">
          <span aria-hidden className="h-3 w-0.5" style={{ background: person.colour }} />
          {person.name}
        </li>
      ))}
    </ul>
  );
}
