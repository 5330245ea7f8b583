'use server';

import { revalidatePath } from 'next/cache';
import { action } from '@/app/_server/action';
import { db } from '@/db/client';
import { endOtherLogin } from '@/db/commands/login/end-other-login';
import { invitePerson } from '@/db/commands/person/invite-person';
import { changeRole, deactivatePerson, handOver, reactivatePerson } from '@/db/commands/person/manage-person';
import { sendLink } from '@/db/commands/person/send-link';
import {
  changeRoleInput,
  deactivateInput,
  handOverInput,
  inviteInput,
  loginIdInput,
  personIdInput,
} from '@/db/inputs/person';

export const inviteAction = action('invite', inviteInput, async (actor, input) => {
  const made = await invitePerson(db(), actor, input);
  revalidatePath('/people');
  return made;
});

export const sendLinkAction = action('send-link', personIdInput, (actor, input) =>
  sendLink(db(), actor, input.personId),
);

export const changeRoleAction = action('change-role', changeRoleInput, async (actor, input) => {
  await changeRole(db(), actor, input);
  revalidatePath('/people', 'layout');
});

export const deactivateAction = action('deactivate', deactivateInput, async (actor, input) => {
  await deactivatePerson(db(), actor, input);
  revalidatePath('/people', 'layout');
});

export const reactivateAction = action('reactivate', personIdInput, async (actor, input) => {
  await reactivatePerson(db(), actor, input.personId);
  revalidatePath('/people', 'layout');
});

export const handOverAction = action('hand-over', handOverInput, async (actor, input) => {
  const handed = await handOver(db(), actor, input);
  revalidatePath('/people', 'layout');
  return handed;
});

export const endPersonsLoginAction = action('end-login', loginIdInput, async (actor, input) => {
  await endOtherLogin(db(), actor, input.loginId);
  revalidatePath('/people', 'layout');
});
