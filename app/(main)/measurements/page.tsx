import { notFound } from 'next/navigation';
import { getCurrentActor } from '@/app/_server/actor';
import { Measurements } from '@/components/measurements/measurements';
import { QueryProvider } from '@/components/query-provider';
import { Place } from '@/components/shell/place';
import { db } from '@/db/client';
import { may } from '@/db/policies/may';
import { listNotebookChoices } from '@/db/queries/measurement/list-notebook-choices';
import { MeasurementsHeading } from './_parts/heading';

export const metadata = { title: 'Measurements' };

export default async function MeasurementsPage() {
  const actor = await getCurrentActor();
  if (!may(actor, 'measurements.read', null)) notFound();
  const notebooks = await listNotebookChoices(db(), actor);
  return (
    <Place>
      <MeasurementsHeading />
      <div className="mt-8">
        <QueryProvider>
          <Measurements notebooks={notebooks} mayWrite={actor.role !== 'guest'} />
        </QueryProvider>
      </div>
    </Place>
  );
}
