import Link from 'next/link';
import { notFound } from 'next/navigation';
import { z } from 'zod';
import { getCurrentActor } from '@/app/_server/actor';
import { orNotFound } from '@/app/_server/or-not-found';
import { LoginList } from '@/components/people/login-list';
import { AccountForm, HandOverForm, RoleForm, SendLink } from '@/components/people/manage-forms';
import { accountInWords, roleInWords } from '@/components/people/words';
import { Place, PlaceHeading } from '@/components/shell/place';
import { formatMoment } from '@/components/ui/format-date';
import { db } from '@/db/client';
import { getLab } from '@/db/queries/lab/get-lab';
import { getPerson } from '@/db/queries/person/get-person';
import { listPeople } from '@/db/queries/person/list-people';
import {
  changeRoleAction,
  deactivateAction,
  endPersonsLoginAction,
  handOverAction,
  reactivateAction,
  sendLinkAction,
} from '../actions';
import { showLogins } from '../show-logins';

export const metadata = { title: 'Person' };

export default async function PersonPage({ params }: { params: Promise<{ id: string }> }) {
  const actor = await getCurrentActor();
  const { id } = await params;
  if (!z.uuid().safeParse(id).success) notFound();
  const person = await orNotFound(getPerson(db(), actor, id));
  const { timeZone } = await getLab(db());
  const own = person.id === actor.personId;
  const heirs = (await listPeople(db(), actor))
    .filter((one) => one.active && one.role !== 'guest' && one.id !== person.id)
    .map(({ id: personId, name }) => ({ id: personId, name }));
  return (
    <Place>
      <PlaceHeading
        title={person.name}
        note={`${roleInWords(person)}, login name ${person.login}, ${person.email}. Account ${accountInWords(person)}, made ${formatMoment(person.createdAt, timeZone)}.`}
      >
        {person.maySendLink && person.active ? (
          <SendLink personId={person.id} invited={person.invited} send={sendLinkAction} />
        ) : null}
      </PlaceHeading>
      <div className="mt-8 max-w-xl space-y-12">
        <section aria-labelledby="notebooks">
          <h2 id="notebooks" className="mb-4 text-heading">
            Notebooks
          </h2>
          {person.notebooks.length === 0 ? (
            <p className="small text-muted">Belongs to no notebook.</p>
          ) : (
            <ul className="divide-y border-y">
              {person.notebooks.map((notebook) => (
                <li key={notebook.id} className="small flex justify-between gap-6 py-2">
                  <span>
                    {notebook.code}, {notebook.title}
                  </span>
                  <span className="text-muted">{notebook.role}</span>
                </li>
              ))}
            </ul>
          )}
          {person.mayManage && person.notebooksOwned > 0 ? (
            <HandOverForm personId={person.id} heirs={heirs} handOver={handOverAction} />
          ) : null}
        </section>
        {person.mayManage ? (
          <>
            <section aria-labelledby="role">
              <h2 id="role" className="mb-4 text-heading">
                Role
              </h2>
              <RoleForm
                personId={person.id}
                role={person.role}
                admin={person.admin}
                change={changeRoleAction}
              />
            </section>
            <section aria-labelledby="logins">
              <h2 id="logins" className="mb-4 text-heading">
                Signed in
              </h2>
              <LoginList logins={showLogins(person.logins, timeZone)} end={endPersonsLoginAction} />
            </section>
            {own ? (
              <p className="small text-muted">
                This is your own account. Its name, address and password are on{' '}
                <Link href="/profile" className="underline underline-offset-4">
                  your profile
                </Link>
                .
              </p>
            ) : (
              <AccountForm
                personId={person.id}
                active={person.active}
                close={deactivateAction}
                open={reactivateAction}
              />
            )}
          </>
        ) : null}
      </div>
    </Place>
  );
}
