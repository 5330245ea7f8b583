import { getCurrentActor } from '@/app/_server/actor';
import { NotebookList } from '@/components/notebook/notebook-list';
import { CreateNotebook } from '@/components/notebook/create-notebook';
import { Place, PlaceHeading } from '@/components/shell/place';
import { EmptyPlace } from '@/components/ui/empty-place';
import { db } from '@/db/client';
import { may } from '@/db/policies/may';
import { listNotebooks } from '@/db/queries/notebook/list-notebooks';
import { createNotebookAction } from './actions';

export const metadata = { title: 'Notebooks' };

export default async function NotebooksPage({
  searchParams,
}: {
  searchParams: Promise<Record<string, string | string[] | undefined>>;
}) {
  const actor = await getCurrentActor();
  const notebooks = await listNotebooks(db(), actor);
  const mayCreate = may(actor, 'notebook.create', null);
  return (
    <Place>
      <PlaceHeading title="Notebooks" note="Those that you own, write in or read.">
        {mayCreate ? (
          <CreateNotebook create={createNotebookAction} startOpen={'new' in (await searchParams)} />
        ) : null}
      </PlaceHeading>
      <div className="mt-8">
        {notebooks.length > 0 ? (
          <NotebookList notebooks={notebooks} />
        ) : (
          <EmptyPlace>
            {mayCreate
              ? 'A notebook gathers the entries of one piece of work, and the people who write, read or witness them. There is none yet that you belong to.'
              : 'You belong to no notebook yet. The PI or an owner of a notebook can add you; it then appears here.'}
          </EmptyPlace>
        )}
      </div>
    </Place>
  );
}
