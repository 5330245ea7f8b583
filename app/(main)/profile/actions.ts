'use server';

import { revalidatePath } from 'next/cache';
import { action } from '@/app/_server/action';
import { db } from '@/db/client';
import { endOtherLogin, endOtherLogins } from '@/db/commands/login/end-other-login';
import { changeEmail, changeName, changePassword } from '@/db/commands/person/change-own';
import { changeEmailInput, changeNameInput, changePasswordInput, loginIdInput } from '@/db/inputs/person';
import { z } from 'zod';

export const changeNameAction = action('change-name', changeNameInput, async (actor, input) => {
  await changeName(db(), actor, input.name);
  revalidatePath('/', 'layout');
});

export const changeEmailAction = action('change-email', changeEmailInput, async (actor, input) => {
  await changeEmail(db(), actor, input);
  revalidatePath('/profile');
});

export const changePasswordAction = action('change-password', changePasswordInput, async (actor, input) => {
  await changePassword(db(), actor, input);
  revalidatePath('/profile');
});

export const endLoginAction = action('end-own-login', loginIdInput, async (actor, input) => {
  await endOtherLogin(db(), actor, input.loginId);
  revalidatePath('/profile');
});

export const endOtherLoginsAction = action('end-other-logins', z.strictObject({}), async (actor) => {
  const ended = await endOtherLogins(db(), actor);
  revalidatePath('/profile');
  return ended;
});
