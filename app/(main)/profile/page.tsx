import { getCurrentActor } from '@/app/_server/actor';
import { LoginList } from '@/components/people/login-list';
import { ChangePasswordForm, EmailForm, EndOthers, NameForm } from '@/components/people/profile-forms';
import { roleInWords } from '@/components/people/words';
import { Place, PlaceHeading } from '@/components/shell/place';
import { db } from '@/db/client';
import { getLab } from '@/db/queries/lab/get-lab';
import { getProfile } from '@/db/queries/person/get-person';
import { showLogins } from '../people/show-logins';
import {
  changeEmailAction,
  changeNameAction,
  changePasswordAction,
  endLoginAction,
  endOtherLoginsAction,
} from './actions';

export const metadata = { title: 'Your profile' };

export default async function ProfilePage() {
  const actor = await getCurrentActor();
  const { email, logins } = await getProfile(db(), actor);
  const { timeZone } = await getLab(db());
  return (
    <Place>
      <PlaceHeading
        title="Your profile"
        note={`Login name ${actor.login}, ${roleInWords(actor)}. The login name never changes.`}
      />
      <div className="mt-8 max-w-xl space-y-12">
        <Part title="Name">
          <NameForm name={actor.name} change={changeNameAction} />
        </Part>
        <Part title="E-mail">
          <EmailForm email={email} change={changeEmailAction} />
        </Part>
        <Part title="Password">
          <ChangePasswordForm change={changePasswordAction} />
        </Part>
        <Part title="Where you are signed in">
          <LoginList logins={showLogins(logins, timeZone)} end={endLoginAction} />
          {logins.length > 1 ? <EndOthers end={endOtherLoginsAction} /> : null}
        </Part>
      </div>
    </Place>
  );
}

function Part({ title, children }: { title: string; children: React.ReactNode }) {
  return (
    <section aria-label={title}>
      <h2 className="mb-4 text-heading">{title}</h2>
      {children}
    </section>
  );
}
