'use server';

import { action } from '@/app/_server/action';
import { db } from '@/db/client';
import { createNotebook } from '@/db/commands/notebook/create-notebook';
import { createNotebookInput } from '@/db/inputs/notebook';

export const createNotebookAction = action('create-notebook', createNotebookInput, (actor, input) =>
  createNotebook(db(), actor, input),
);
