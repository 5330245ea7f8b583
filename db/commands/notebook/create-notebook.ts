import type { Database } from '../../client';
import { AppError } from '../../errors';
import type { CreateNotebookInput } from '../../inputs/notebook';
import { may, type Actor } from '../../policies/may';
import { audit, notebook, notebookMember } from '../../schema/index';

/**
 * Makes a notebook, owned by whoever makes it.
 * @throws AppError forbidden - neither PI nor admin; bad-input - the code is taken.
 */
export async function createNotebook(
  db: Database,
  actor: Actor,
  input: CreateNotebookInput,
): Promise<{ notebookId: string }> {
  if (!may(actor, 'notebook.create', null)) {
    throw new AppError('forbidden', { sentence: 'Notebooks are made by the PI or an administrator.' });
  }
  return db.transaction(async (tx) => {
    const [made] = await tx
      .insert(notebook)
      .values({ ...input, createdBy: actor.personId })
      .onConflictDoNothing({ target: notebook.code })
      .returning({ id: notebook.id });
    if (!made) {
      throw new AppError('bad-input', {
        fields: { code: `Another notebook has the code ${input.code}. Choose a different one.` },
      });
    }
    await tx.insert(notebookMember).values({ notebookId: made.id, personId: actor.personId, role: 'owner' });
    await tx.insert(audit).values({
      kind: 'notebook.create',
      personId: actor.personId,
      loginId: actor.loginId,
      notebookId: made.id,
      after: { code: input.code, title: input.title },
    });
    return { notebookId: made.id };
  });
}
