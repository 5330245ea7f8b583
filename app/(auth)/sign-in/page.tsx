import { redirect } from 'next/navigation';
import { findCurrentActor } from '@/app/_server/actor';
import { safeReturnPath } from '@/app/_security/return-path';
import { ProductMark } from '@/components/ui/walk-mark';
import { db } from '@/db/client';
import { env } from '@/db/env';
import { findLab } from '@/db/queries/lab/find-lab';
import { hasPerson } from '@/db/queries/lab/has-person';
import { DEMO_PASSWORD, demoPeople } from '@/db/setup/demo-accounts';
import { SignInForm } from './_parts/sign-in-form';

export const metadata = { title: 'Sign in' };

export default async function SignInPage({
  searchParams,
}: {
  searchParams: Promise<Record<string, string | string[] | undefined>>;
}) {
  const { callbackUrl } = await searchParams;
  const returnPath = safeReturnPath(callbackUrl);
  if (await findCurrentActor()) redirect(returnPath);
  const lab = await findLab(db());
  return (
    <main className="mx-auto grid min-h-dvh max-w-5xl content-center gap-x-20 gap-y-12 px-6 py-12 wide:grid-cols-[1fr_22rem]">
      <header className="self-center">
        <ProductMark size={56} className="-ml-2.5 text-malachite" />
        <h1 className="mt-6 text-headline">Motebook</h1>
        <p className="mt-3 max-w-[34ch] text-lead text-muted">
          {lab
            ? `The laboratory notebook of the ${lab.name}.`
            : 'A laboratory notebook for people who measure how small particles move.'}
        </p>
      </header>
      <SignInForm returnPath={returnPath} demo={(await isDemo()) ? demoAccounts : null} />
    </main>
  );
}

const demoAccounts = {
  password: DEMO_PASSWORD,
  people: demoPeople.map(({ login, name, role, admin, about }) => ({
    login,
    name,
    role: admin ? 'administrator' : role === 'pi' ? 'PI' : role,
    about,
  })),
};

/** The demo's accounts are offered only by a demo that has them; on any other server they would be a riddle. */
async function isDemo(): Promise<boolean> {
  const [first] = demoPeople;
  return env().MOTEBOOK_MODE === 'demo' && first !== undefined && (await hasPerson(db(), first.login));
}
