import Link from 'next/link';
import { getCurrentActor } from '@/app/_server/actor';
import { orNotFound } from '@/app/_server/or-not-found';
import { InvitePerson } from '@/components/people/invite-person';
import { accountInWords, roleInWords } from '@/components/people/words';
import { Place, PlaceHeading } from '@/components/shell/place';
import { formatMoment } from '@/components/ui/format-date';
import { db } from '@/db/client';
import { getLab } from '@/db/queries/lab/get-lab';
import { listOwnedNotebooks } from '@/db/queries/person/get-person';
import { listPeople } from '@/db/queries/person/list-people';
import { inviteAction } from '../actions';

export const metadata = { title: 'People' };

export default async function PeoplePage() {
  const actor = await getCurrentActor();
  const people = await orNotFound(listPeople(db(), actor));
  const notebooks = await listOwnedNotebooks(db(), actor);
  const { timeZone } = await getLab(db());
  return (
    <Place>
      <PlaceHeading title="People" note="Everybody who has, or had, an account here.">
        {actor.admin || notebooks.length > 0 ? (
          <InvitePerson invite={inviteAction} asAdmin={actor.admin} notebooks={notebooks} />
        ) : null}
      </PlaceHeading>
      <ul className="mt-8 divide-y border-y" aria-label="People">
        {people.map((person) => (
          <li key={person.id} className="grid gap-x-6 gap-y-0.5 py-3 tab:grid-cols-[1fr_12rem_13rem]">
            <div>
              <Link
                href={`/people/${person.id}`}
                className="inline-flex min-h-6 items-center font-semibold underline-offset-4 hover:underline max-desk:min-h-11"
              >
                {person.name}
              </Link>
              <p className="label break-all text-muted">
                {person.login}, {person.email}
              </p>
            </div>
            <p className="small">{roleInWords(person)}</p>
            <p className="label text-muted">
              Account {accountInWords(person)}
              {person.lastSeenAt ? (
                <span className="block">Last seen {formatMoment(person.lastSeenAt, timeZone)}</span>
              ) : null}
            </p>
          </li>
        ))}
      </ul>
    </Place>
  );
}
