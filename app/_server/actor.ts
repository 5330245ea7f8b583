import 'server-only';
import { getServerSession } from 'next-auth';
import { headers } from 'next/headers';
import { redirect } from 'next/navigation';
import { cache } from 'react';
import { PATH_HEADER } from '@/app/_security/path-header';
import { HOME, safeReturnPath } from '@/app/_security/return-path';
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

/** As `findCurrentActor`, for pages: without a login it leads to the sign-in page, and from there back to this address. */
export async function getCurrentActor(): Promise<Actor> {
  const actor = await findCurrentActor();
  if (actor) return actor;
  const path = safeReturnPath((await headers()).get(PATH_HEADER));
  redirect(path === HOME ? '/sign-in' : `/sign-in?callbackUrl=${encodeURIComponent(path)}`);
}
