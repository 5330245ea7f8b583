'use server';

import { revalidatePath } from 'next/cache';
import { action } from '@/app/_server/action';
import { db } from '@/db/client';
import { addMember, changeMember } from '@/db/commands/notebook/change-members';
import { addMemberInput, changeMemberInput } from '@/db/inputs/notebook';

export const addMemberAction = action('add-member', addMemberInput, async (actor, input) => {
  await addMember(db(), actor, input);
  revalidatePath(`/notebooks/${input.notebookId}`);
});

export const changeMemberAction = action('change-member', changeMemberInput, async (actor, input) => {
  await changeMember(db(), actor, input);
  revalidatePath(`/notebooks/${input.notebookId}`);
});
