import { getCurrentActor } from '@/app/_server/actor';
import { Planner } from '@/components/planner/planner';
import { Place, PlaceHeading } from '@/components/shell/place';

export const metadata = { title: 'Planner' };

export default async function PlannerPage() {
  // For everybody who is signed in; nothing on it belongs to a notebook.
  await getCurrentActor();
  return (
    <Place>
      <PlaceHeading title="Planner" note="How much to measure before the microscope is booked." />
      <Planner />
    </Place>
  );
}
