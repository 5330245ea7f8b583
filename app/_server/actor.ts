import 'server-only';
import { getServerSession } from 'next-auth';
import { redirect } from 'next/navigation';
import { cache } from 'react';
import { db } from '@/db/client';
import { touchLogin } from '@/db/commands/login/touch-login';
import type { Actor } from '@/db/policies/may';
import { findActor } from '@/db/queries/login/find-actor';
import { authOptions } from './auth';

/** Who makes this request, by the database's word; null when nobody is signed in. Asked once a request. */
export const findCurrentActor = cache(async (): Promise<Actor | null> => {
  const session = await getServerSession(authOptions());
  if (!session?.loginId) return null;
  const actor = await findActor(db(), session.loginId);
  if (actor) await touchLogin(db(), actor.loginId);
  return actor;
});

/** As `findCurrentActor`, for pages: without a login it leads to the sign-in page. */
export async function getCurrentActor(): Promise<Actor> {
  const actor = await findCurrentActor();
  if (!actor) redirect('/sign-in');
  return actor;
}
